"""Words as they are compared."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.words import LONGEST, forms, indexed, tokens, word_of

TEXTS = st.text(alphabet="aBz0é'’-./ 12ßİ\u0301_–", max_size=40) | st.text(max_size=60)


@given(TEXTS)
def test_two_readings_agree(text: str) -> None:
    """The fast reading for the index and the one with places in the text give the same words."""
    assert [(token.word, token.place) for token in tokens(text)] == indexed(text)


@given(TEXTS)
def test_places_in_the_text(text: str) -> None:
    """Each word stands where it says, words do not lie beyond the text, and none is empty or overlong."""
    for token in tokens(text):
        assert 0 <= token.start < token.end <= len(text)
        assert 0 < len(token.word) <= LONGEST


@given(st.integers(10, 10**9), st.integers(0, 3), st.sampled_from(["", "-", ".", "/", "–"]), st.booleans())
def test_part_numbers_by_comparing_key(number: int, zeros: int, separator: str, upper: bool) -> None:
    """Separators, case and leading zeros of a part number do not matter."""
    digits = str(number)
    written = f"{'0' * zeros}{digits[:1]}{separator}{digits[1:]}" + ("KM" if upper else "km")
    assert f"{digits}km" in {word for word, _ in indexed(f"put in {written} today")} or len(digits) + 2 < 4
    assert word_of(written) in {f"{digits}km", digits[1:] + "km"}


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("Won't CRANK", ["wont", "crank"]),
        ("Solenoïd", ["solenoid"]),
        ("123-45678", ["123", "12345678", "45678"]),
        ("comm/arm", ["comm", "arm"]),
        ('😀 * ( "', []),
        ("", []),
    ],
)
def test_words(text: str, words: list[str]) -> None:
    """Small letters, no accents, apostrophes closed up, numbers joined."""
    assert words == [word for word, _ in indexed(text)]


@pytest.mark.parametrize(
    ("word", "form"),
    [
        ("contact", "contacts"),
        ("brush", "brushes"),
        ("slipping", "slip"),
        ("assembly", "assemblies"),
        ("replaced", "replacing"),
    ],
)
def test_forms_both_ways(word: str, form: str) -> None:
    """Number and tense lead there and back."""
    assert form in forms(word)
    assert word in forms(form)


def test_forms_leave_the_word_out() -> None:
    """A word is no form of itself; short words and numbers have none."""
    assert "brush" not in forms("brush")
    assert forms("ok") == forms("km2210") == ()
