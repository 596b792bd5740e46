"""Quantities: exact both ways, and shown without contradicting what they are compared with."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.errors import Refused
from store.rules import quantities
from store.rules.quantities import Quantity, convert, kept, plain, rounded, shown, unit, units_of

SIZES = st.fractions(min_value=-10_000, max_value=10_000, max_denominator=100_000)
PAIRS = [(a.symbol, b.symbol) for q in Quantity for a in units_of(q) for b in units_of(q)]


@given(SIZES, st.sampled_from(PAIRS))
def test_there_and_back_is_exact(value: Fraction, pair: tuple[str, str]) -> None:
    """Converting to another unit and back gives the very same number."""
    assert convert(convert(value, *pair), *reversed(pair)) == value


@given(st.decimals(min_value=-9999, max_value=9999, places=5))
def test_plain_text_is_exact(value: object) -> None:
    """A decimal comes out as text that reads back as itself."""
    exact = Fraction(str(value))
    assert Fraction(plain(exact)) == exact


@given(SIZES)
def test_kept_text_reads_back(value: Fraction) -> None:
    """What is stored as text is the number that was stored."""
    assert kept(str(value)) == value


@given(SIZES, st.lists(SIZES, max_size=3), st.integers(0, 4))
def test_a_shown_figure_stands_on_its_side(value: Fraction, others: list[Fraction], places: int) -> None:
    """A value under a limit is never shown at or over it, one at it never beside it (twelve decimals tell)."""
    text = shown(value, places, others)
    for other in others:
        if abs(value - other) > Fraction(1, 10**11) or value == other:
            side = (value > other) - (value < other)
            if value != other or quantities.terminates(value):
                assert (Fraction(text) > other) - (Fraction(text) < other) == side


@pytest.mark.parametrize(
    ("value", "places", "text"),
    [
        ("1.25", 1, "1.2"),
        ("1.35", 1, "1.4"),
        ("-0.04", 1, "0.0"),
        ("2.5", 0, "2"),
        ("0.005", 3, "0.005"),
        ("12", 2, "12.00"),
    ],
)
def test_rounding_is_half_to_even(value: str, places: int, text: str) -> None:
    """Ties go to the even digit; there is no minus zero."""
    assert rounded(Fraction(value), places) == text


@pytest.mark.parametrize(
    ("typed", "symbol"),
    [('"', "in"), ("inch", "in"), ("MM", "mm"), ("µm", "um"), ("Nm", "N.m"), ("kg", "kgf"), ("°C", "degC")],
)
def test_usual_spellings_are_taken(typed: str, symbol: str) -> None:
    """What stands on gauges and tickets is understood."""
    assert unit(typed).symbol == symbol


@pytest.mark.parametrize("typed", ["furlong", "", "MOHM!", "mm2m"])
def test_unknown_units_are_refused(typed: str) -> None:
    """One line, and no guess."""
    if typed == "":
        assert unit(typed).quantity is Quantity.attribute
        return
    with pytest.raises(Refused, match="is no unit"):
        unit(typed)


def test_milliohm_and_megohm_are_told_apart() -> None:
    """Case decides where it must; what is ambiguous without it is refused."""
    assert (unit("mohm").factor, unit("Mohm").factor) == (Fraction(1, 1000), Fraction(10**6))
    with pytest.raises(Refused):
        unit("MOHM")


def test_units_of_other_quantities_do_not_convert() -> None:
    """A force is no length."""
    with pytest.raises(Refused, match="unit of force"):
        convert(Fraction(1), "N", "mm")
