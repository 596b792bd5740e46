"""Derived characteristics: made of their parts' readings and judged like measured ones."""

from __future__ import annotations

from fractions import Fraction

import pytest

from store.errors import Refused
from store.rules import derived
from store.rules.limits import Limit, Measured, Rule, Verdict
from store.rules.quantities import Quantity
from store.rules.readings import parse

F = Fraction


def at(
    places: dict[str, str], u: str | None = None, quantity: Quantity = Quantity.length, unit: str = "mm"
) -> list[Measured]:
    """Readings by position."""
    return [
        Measured(place, parse(text, quantity, unit), None if u is None else F(u) ** 2) for place, text in places.items()
    ]


BORES = {"A0": "16.05", "A90": "16.08", "B0": "16.04", "B90": "16.05"}
JOURNALS = {"A0": "15.97", "A90": "15.96", "B0": "15.98", "B90": "15.97"}


@pytest.mark.parametrize(
    ("low", "high", "value", "verdict"),
    [
        (None, "0.12", "0.12", "in"),
        (None, "0.11", "0.12", "out"),
        ("0.06", None, "0.06", "in"),
        ("0.07", None, "0.06", "out"),
        ("0.03", "0.13", "0.12", "in"),
    ],
)
def test_clearance_is_judged_at_both_ends(low: str | None, high: str | None, value: str, verdict: str) -> None:
    """Largest bore less smallest journal against the high limit, smallest bore less largest journal against the low one."""
    limit = Limit("mm", None, None if low is None else F(low), None if high is None else F(high), rule=Rule.simple)
    judged = derived.judge("clearance b j", {"b": at(BORES), "j": at(JOURNALS)}, limit)
    assert (judged.value, judged.verdict) == (F(value), verdict)


def test_uncertainties_of_the_parts_combine() -> None:
    """u of a clearance is the root of the sum of squares (GUM 5.1.2)."""
    judged = derived.judge("clearance b j", {"b": at(BORES, "0.003"), "j": at(JOURNALS, "0.004")}, None)
    assert judged.variance == F("0.005") ** 2


def test_ovality_and_taper_keep_stations_apart() -> None:
    """Ovality is within one station, taper between the means of stations."""
    sizes = {"x": at({"A0": "30.00", "A90": "29.95", "B0": "29.90", "B90": "29.93"})}
    assert derived.judge("ovality x", sizes, None).value == F("0.05")
    assert derived.judge("ovality x", sizes, None).worst_at == "A"
    assert derived.judge("taper x", sizes, None).value == F("29.975") - F("29.915")


def test_wear_is_new_less_now_of_the_shortest() -> None:
    """The new size of the limit on wear is the new length."""
    limit = Limit("mm", F(14), None, F(4), rule=Rule.simple)
    judged = derived.judge("wear b", {"b": at({"1": "11", "2": "9.5"})}, limit)
    assert (judged.value, judged.worst_at, judged.verdict) == (F("4.5"), "2", Verdict.out)


def test_missing_parts_are_not_measured() -> None:
    """A clearance without a journal, an ovality of one reading."""
    limit = Limit("mm", None, None, F(1))
    assert derived.judge("clearance b j", {"b": at(BORES)}, limit).verdict is Verdict.not_measured
    assert derived.judge("ovality x", {"x": at({"A0": "30"})}, limit).verdict is Verdict.not_measured


@pytest.mark.parametrize("spec", ["clearance a", "sum a b", "", "ovality a b"])
def test_specs_that_say_nothing(spec: str) -> None:
    """Refused in one line."""
    with pytest.raises((Refused, ValueError)):
        derived.sources(spec)
