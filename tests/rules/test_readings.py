"""Typed readings: every way in which the bench and gauges write a size, and every way that is refused."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.errors import ReadingRefused
from store.rules.quantities import Quantity
from store.rules.readings import Expected, Mark, parse, slips

L = Quantity.length


@pytest.mark.parametrize(
    ("text", "value", "unit", "places"),
    [
        ("11.4", "11.4", "mm", 1), ("11,4", "11.4", "mm", 1), (".448", "0.448", "mm", 3), ("+0.02", "0.02", "mm", 2),
        ("7/16", "7/16", "mm", 4), ("1 3/16", "19/16", "mm", 4), ("11.4 mm", "11.4", "mm", 1), ("0.448in", "0.448", "in", 3),
        ('0.448"', "0.448", "in", 3), ("  000011.40  ", "11.4", "mm", 2), ("11.", "11", "mm", 0), ("0,448", "0.448", "mm", 3),
        ("12,34", "12.34", "mm", 2), ("1234", "1234", "mm", 0), ("1e-2", "0.01", "mm", 2), ("7/16 in", "7/16", "in", 4),
    ],
)  # fmt: skip
def test_what_is_taken(text: str, value: str, unit: str, places: int) -> None:
    """Exact value, unit, and how many decimals were typed."""
    typed = parse(text, L, "mm")
    assert (typed.value, typed.unit, typed.places, typed.mark) == (Fraction(value), unit, places, Mark.number)


@pytest.mark.parametrize(
    ("text", "why"),
    [
        ("1,234", "may be 1.234 or 1234"), ("1.234,5", "more than one decimal mark"), ("1,234.5", "more than one decimal mark"),
        ("nan", "is no number"), ("-inf", "is no number"), ("1e40", "out of reach"), ("1 2", "two numbers"), ("1/0", "divided by zero"),
        ("5 N", "not a unit of length"), ("5 parsec", "no unit"), ("-1", "not below zero"), ("", "nothing is typed"), ("mm", "is no reading"),
        ("x" * 10_000, "characters"), ("٣.٤x", "no"), ("11.4mm 3", "two numbers"),
    ],
)  # fmt: skip
def test_what_is_refused(text: str, why: str) -> None:
    """One short line that says how to write it."""
    with pytest.raises(ReadingRefused, match=why) as caught:
        parse(text, L, "mm")
    assert len(str(caught.value)) < 150
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize(
    ("text", "mark", "detail"),
    [
        ("pass", Mark.passed, ""), ("P", Mark.passed, ""), ("fail bars 4-5", Mark.failed, "bars 4-5"), ("f", Mark.failed, ""),
        ("cannot judge buzzes all round", Mark.cannot_judge, "buzzes all round"), ("not measured no growler", Mark.not_measured, "no growler"),
    ],
)  # fmt: skip
def test_tests_pass_or_fail(text: str, mark: Mark, detail: str) -> None:
    """The mark, and what was said after it."""
    typed = parse(text, Quantity.attribute, "")
    assert (typed.mark, typed.detail) == (mark, detail)


@given(st.text(max_size=60))
def test_any_text_is_a_reading_or_a_refusal(text: str) -> None:
    """Whatever is typed: never a fault of the program, and a number only where the value is finite and not negative."""
    for quantity, unit in ((L, "mm"), (Quantity.attribute, ""), (Quantity.count, "")):
        try:
            typed = parse(text, quantity, unit)
        except ReadingRefused as refused:
            said = str(refused)
        else:
            said = ""
            assert typed.value is None or typed.value >= 0
        assert "\n" not in said


@given(st.decimals(min_value=0, max_value=999, places=3), st.sampled_from(["", "0", "00"]), st.sampled_from([" ", ""]))
def test_gauges_send_zeros_and_spaces(value: object, zeros: str, space: str) -> None:
    """Leading zeros and spaces change nothing."""
    assert parse(f"{space}{zeros}{value}{space}", L, "mm").value == Fraction(str(value))


@given(st.decimals(min_value="9.5", max_value="14", places=2))
def test_a_plausible_reading_raises_no_question(value: object) -> None:
    """Between limit and new size there is nothing to ask."""
    assert slips(parse(str(value), L, "mm"), Expected(new=Fraction(14), low=Fraction("9.5"))) == ()
