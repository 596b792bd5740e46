"""Wear rules as manuals word them: equal to the limit, half length, pressure, and printed slips."""

from __future__ import annotations

from fractions import Fraction

import pytest

from store.rules import derived, quantities
from store.rules.limits import Limit, Measured, Rule, Verdict, judge, wear_used
from store.rules.quantities import Quantity
from store.rules.readings import Expected, parse, slips, two_units_agree
from store.rules.statistic import Statistic

F = Fraction


def measured(text: str, quantity: Quantity = Quantity.length, unit: str = "in") -> list[Measured]:
    """One reading."""
    return [Measured("1", parse(text, quantity, unit))]


def test_or_less_and_less_than_differ_at_the_limit() -> None:
    """TM 9-4940-549-14&P: replace if 5/16 in or less; TM 5-6115-593-34: replace if less than 0.656 in (both read)."""
    or_less = Limit("in", None, F(5, 16), None, equal_passes=False, rule=Rule.simple)
    less_than = Limit("in", None, F("0.656"), None, equal_passes=True, rule=Rule.simple)
    assert judge(measured("5/16"), Statistic.smallest, or_less).verdict is Verdict.out
    assert judge(measured("0.656"), Statistic.smallest, less_than).verdict is Verdict.in_


def test_half_length_is_all_the_wear() -> None:
    """TM 5-6115-545-34 (read): brush new 0.7500, half-length limit 0.3750 in."""
    limit = Limit("in", F("0.7500"), F("0.3750"), None)
    assert wear_used(F("0.3750"), limit) == 1.0
    assert wear_used(F("0.5625"), limit) == 0.5


@pytest.mark.parametrize(
    ("force", "width", "thickness", "psi"),
    [
        # NAVEDTRA 14120 (read): traction brushes and their pressures
        ("7 7/8", "5/8", "1 3/4", "7.2"),
        ("8 1/2", "5/8", "1 3/4", "7.8"),
        ("7", "3/4", "1 1/2", "6.2"),
        ("9", "3/4", "1 1/2", "8.0"),
    ],
)
def test_brush_pressure(force: str, width: str, thickness: str, psi: str) -> None:
    """Force over section, to one decimal as printed."""
    area = F(1)
    for side in (width, thickness):
        value = parse(side, Quantity.length, "in").value
        assert value is not None
        area *= value
    sides = {
        "f": measured(force, Quantity.force, "lbf"),
        "a": measured(quantities.plain(area), Quantity.area, "in2"),
    }
    found = derived.judge("pressure f a", sides, Limit("psi", None, F("1.5"), F(8), rule=Rule.simple))
    assert found.value is not None
    assert abs(found.value - F(psi)) <= F("0.05")


@pytest.mark.parametrize(
    ("one", "other", "agree"),
    [
        # printed slips (all read): TM 9-2815-255-24, TM 10-3930-653-14&P, TM 55-2210-224-12
        ("0.00197 in", "0.5 mm", False),
        ("0.00197 in", "0.05 mm", True),
        ("0.031 in", "0.8 mm", True),
        ("0 31 in", "0.8 mm", None),
        ("1 1/4 in", "38.1 mm", False),
        ("1 1/4 in", "31.75 mm", True),
    ],
)
def test_a_limit_printed_in_two_units_must_agree(one: str, other: str, agree: bool | None) -> None:
    """Printed manuals convert wrongly; the two must agree within the last digit of either, or cannot be read at all."""
    if agree is None:
        with pytest.raises(ValueError, match="two numbers"):
            parse(one, Quantity.length, "in")
        return
    assert two_units_agree(parse(one, Quantity.length, "in"), parse(other, Quantity.length, "mm")) is agree


@pytest.mark.parametrize(
    ("typed", "unit", "expected", "instead"),
    [
        ("0.448", "mm", Expected(new=F(14), low=F("9.5")), "inches typed as millimetres"),
        ("1.12", "mm", Expected(new=F(14), low=F("9.5")), "a slipped decimal point"),
        ("0.5", "mm", Expected(high=F("0.05")), "a slipped decimal point"),
        ("30", "N", Expected(low=F("7"), new=F("9")), "ounces typed as newtons"),
    ],
)
def test_slips_are_asked_about(typed: str, unit: str, expected: Expected, instead: str) -> None:
    """The slips of the printed limits, made at the bench: each is asked about, none is blocked."""
    quantity = quantities.unit(unit).quantity
    assert any(instead in slip.question for slip in slips(parse(typed, quantity, unit), expected))


def test_nothing_is_asked_of_a_plausible_reading() -> None:
    """A reading between new size and limit raises no question."""
    assert slips(parse("11.4", Quantity.length, "mm"), Expected(new=F(14), low=F("9.5"))) == ()
