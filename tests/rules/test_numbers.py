"""Part numbers for comparing: keys, look-alikes, slips, worn characters."""

from __future__ import annotations

import string

import pytest
from hypothesis import given
from hypothesis import strategies as st
from rapidfuzz.distance import OSA

from store.errors import Refused
from store.rules import numbers
from store.rules.numbers import FOLDED_ALPHABET, How, asked, comparing_key, folded_key, keyed, printed

TEXT = st.text(max_size=20)
PRINTED = st.text(string.ascii_letters + string.digits + " -./", min_size=1, max_size=14).filter(comparing_key)
RAW = st.text(string.ascii_uppercase + string.digits, min_size=1, max_size=9)


@pytest.mark.parametrize(
    ("typed", "key", "folded"),
    [
        ("ks-0100 a", "KS0100A", "K50100A"),
        ("00123-45", "12345", "12345"),
        ("O123", "O123", "123"),
        ("000", "0", "0"),
        ("12 345/B", "12345B", "123458"),
        ("ＫＳ１００", "KS100", "K5100"),
        ("--", "", ""),
    ],
)
def test_a_key_is_upper_case_without_separators_and_leading_zeros(typed: str, key: str, folded: str) -> None:
    """What is compared; look-alikes are one only in the folded key."""
    assert comparing_key(typed) == key
    assert folded_key(key) == folded


@given(TEXT)
def test_normalising_again_changes_nothing(text: str) -> None:
    """Both keys are idempotent, for any text at all."""
    key = comparing_key(text)
    assert comparing_key(key) == key
    folded = folded_key(key)
    assert folded_key(folded) == folded


@given(PRINTED, st.sampled_from(string.ascii_uppercase), st.sampled_from(string.ascii_uppercase))
def test_a_suffix_letter_is_never_lost(number: str, one: str, other: str) -> None:
    """Numbers that differ in a suffix letter have different keys, and one with a suffix is not one without."""
    assert (comparing_key(number + one) == comparing_key(number + other)) == (one == other)
    assert comparing_key(number + one) != comparing_key(number)


@given(PRINTED)
def test_separators_case_and_leading_zeros_do_not_tell_numbers_apart(number: str) -> None:
    """The same characters printed otherwise have the same key."""
    spaced = " ".join(number.lower())
    assert comparing_key(number) == comparing_key(spaced)
    assert comparing_key(number) == comparing_key(f"0{number}") or set(comparing_key(number)) == {"0"}


@given(RAW)
def test_keyed_says_what_the_single_functions_say(number: str) -> None:
    """The quick way of a load gives what the others give."""
    kept, key, folded = keyed(number)
    assert (kept, key, folded) == (printed(number), comparing_key(number), folded_key(comparing_key(number)))


@given(RAW)
def test_slips_are_all_that_lie_one_osa_step_away(raw: str) -> None:
    """Every folded key that is made is one slip from what was typed, up to leading zeros that a slip made or unmade."""
    whole = raw.translate(str.maketrans("OISBZ", "01582"))
    bare = whole.lstrip("0") or whole[:1]
    keys = numbers.slip_keys(raw)
    assert bare not in keys
    for key in keys:
        reached = (OSA.distance(source, "0" * zeros + key) for source in (whole, bare) for zeros in range(len(raw) + 2))
        assert min(reached) <= 1


@given(st.text(FOLDED_ALPHABET, min_size=2, max_size=7), st.text(FOLDED_ALPHABET, min_size=2, max_size=7))
def test_no_number_one_slip_away_is_missed(typed: str, listed: str) -> None:
    """Against the distance itself: what is one OSA step away is among the keys."""
    target = listed.lstrip("0") or "0"
    if OSA.distance(typed, target) == 1 and target != (typed.lstrip("0") or "0"):
        assert target in numbers.slip_keys(typed)


@given(st.text(FOLDED_ALPHABET, min_size=4, max_size=8), st.data())
def test_a_slip_of_a_number_finds_it_again(listed: str, data: st.DataObject) -> None:
    """One character lost, added, exchanged or swapped: the number is among what is looked up."""
    listed = listed.lstrip("0") or "7"
    at = data.draw(st.integers(0, len(listed) - 1))
    letter = data.draw(st.sampled_from(FOLDED_ALPHABET))
    slipped = [
        listed[:at] + letter + listed[at:],
        listed[:at] + letter + listed[at + 1 :],
        listed[:at] + listed[at + 1 :],
    ]
    if at + 1 < len(listed):
        slipped.append(listed[:at] + listed[at + 1] + listed[at] + listed[at + 2 :])
    for typed in slipped:
        if typed:
            assert listed in numbers.slip_keys(typed) or folded_key(typed) == listed


@given(st.text(FOLDED_ALPHABET, min_size=3, max_size=9), st.data())
def test_worn_characters_are_read_as_every_one_they_may_be(listed: str, data: st.DataObject) -> None:
    """With one or two characters worn off, the number is among the readings, a leading one too."""
    places = data.draw(st.sets(st.integers(0, len(listed) - 1), min_size=1, max_size=2))
    worn = "".join("?" if n in places else c for n, c in enumerate(listed))
    found = numbers.readable_keys(worn)
    assert folded_key(listed) in found
    assert len(found) <= 31 ** len(places)


@pytest.mark.parametrize(
    ("typed", "key", "how"),
    [
        ("KS-100", "KS100", How.exact),
        ("K5-1OO", "KS100", How.look_alike),
        ("KS-101", "KS100", How.one_slip),
        ("KS-1?0", "KS100", How.unreadable),
    ],
)
def test_how_a_number_answers(typed: str, key: str, how: How) -> None:
    """A candidate says how far it is from what was asked."""
    assert asked(typed).answered_by(key) is how


@pytest.mark.parametrize(
    ("typed", "why"),
    [
        ("", "type a number"),
        (" - ", "type a number"),
        ("??", "too little"),
        ("A????", "too little"),
        ("9" * 61, "longer than"),
    ],
)
def test_what_cannot_be_asked_is_refused(typed: str, why: str) -> None:
    """Too little or too much to look for."""
    with pytest.raises(Refused, match=why):
        asked(typed)


@pytest.mark.parametrize(
    ("typed", "why"),
    [("", "empty"), ("  ", "empty"), ("-/-", "no letter"), ("7" * 300, "300 characters"), ("A\x07B", "printed")],
)
def test_what_is_no_number_is_refused(typed: str, why: str) -> None:
    """An empty number, one of 300 characters, one that cannot be printed."""
    with pytest.raises(Refused, match=why):
        printed(typed)
    with pytest.raises(Refused, match=why):
        keyed(typed)


def test_a_number_is_kept_as_printed() -> None:
    """Separators, case and zeros stay; only runs of spaces become one."""
    assert printed("  00-ks  1.2/a ") == "00-ks 1.2/a"
