"""Parts by size."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.errors import Refused
from store.rules import sizes
from store.rules.sizes import both_systems, differences, millionths, nominals, size, tolerance, window, worst


@pytest.mark.parametrize(
    ("text", "unit", "value", "kept_unit", "base"),
    [
        ("8", "mm", Fraction(8), "mm", 8_000_000),
        ("5/16", "in", Fraction(5, 16), "in", 7_937_500),
        ("0.3125 in", "mm", Fraction(5, 16), "in", 7_937_500),
        ('1 3/16"', "mm", Fraction(19, 16), "in", 30_162_500),
        ("30 ozf", "mm", Fraction(30), "ozf", 8_340_416),
    ],
)
def test_a_size_as_typed(text: str, unit: str, value: Fraction, kept_unit: str, base: int) -> None:
    """Exact in its own unit; the index holds whole nanometres (or millionths of the base unit)."""
    made = size("width", text, unit)
    assert (made.value, made.unit, millionths(made.value, made.unit)) == (value, kept_unit, base)


@pytest.mark.parametrize(("text", "why"), [("wide", "."), ("-3", "."), ("", "."), ("8 9", ".")])
def test_what_is_no_size_is_refused(text: str, why: str) -> None:
    """In one line."""
    with pytest.raises(Refused, match=why):
        size("width", text)


@pytest.mark.parametrize("text", ["0", "0 mm"])
def test_a_tolerance_is_above_nothing(text: str) -> None:
    """A tolerance of nothing finds nothing."""
    with pytest.raises(Refused, match="above nothing"):
        tolerance(text)
    assert tolerance(None).text == "0.1 mm"


def test_names_as_people_write_them() -> None:
    """Usual names are made one."""
    assert [sizes.size_name(n) for n in ("OD", "Outside diameter", "W", "Housing Bore", "shaft")] == [
        "od",
        "od",
        "width",
        "housing-bore",
        "journal",
    ]


def test_the_worst_share_of_the_tolerance_ranks() -> None:
    """The greatest of the single shares; beyond the tolerance or not listed is no match."""
    asked = [size("width", "8"), size("length", "20")]
    part = {"width": size("width", "8.05"), "length": size("length", "20.02")}
    assert worst(differences("brush", asked, part, tolerance("0.1"))) == pytest.approx(0.5)
    assert worst(differences("brush", asked, part, tolerance("0.04"))) is None
    assert worst(differences("brush", asked, {"width": part["width"]}, tolerance("0.1"))) is None


def test_an_inch_brush_in_a_metric_holder_is_marked() -> None:
    """5/16 in stands 0.062 mm under 8 mm; 12.7 against 12.5 mm stands over; the same system or the same size is not marked."""
    (found,) = differences("brush", [size("width", "8")], {"width": size("width", "5/16", "in")}, tolerance("0.1"))
    assert found.warning == "an inch brush in a metric holder may not fit: 0.062 mm under"
    (found,) = differences(
        "brush set", [size("width", "12.5")], {"width": size("width", "0.5", "in")}, tolerance("0.3")
    )
    assert found.warning == "an inch brush in a metric holder may not fit: 0.200 mm over"
    (found,) = differences("brush", [size("width", "0.5 in")], {"width": size("width", "12.7")}, tolerance("0.3"))
    assert found.warning == ""
    (found,) = differences("brush", [size("width", "8")], {"width": size("width", "8.05")}, tolerance("0.1"))
    assert found.warning == ""


def test_a_bushing_is_sought_by_its_seats() -> None:
    """Its outside against the housing bore, its bore against the journal, and whether each sits as it should."""
    asked = [size("housing-bore", "16.00"), size("journal", "12.50")]
    part = {"od": size("od", "16.05"), "id": size("id", "12.45")}
    housing, journal = differences("bushing", asked, part, tolerance("0.1"))
    assert housing.warning == "0.050 mm tight in the housing"
    assert journal.warning == "tight by 0.050 mm, where it should be running clearance on the journal"
    part = {"od": size("od", "16.00"), "id": size("id", "12.53")}
    housing, journal = differences("bushing", asked, part, tolerance("0.1"))
    assert housing.warning == "loose by 0.000 mm, where it should be tight in the housing"
    assert journal.warning == "0.030 mm running clearance on the journal"


def test_inches_and_millimetres_side_by_side() -> None:
    """The given one first; the nearest nominals of both systems."""
    assert both_systems(size("width", "0.5", "in")) == "0.5 in = 12.7 mm"
    assert both_systems(size("width", "12.5")) == "12.5 mm = 0.4921 in"
    assert nominals(size("width", "12.6")) == ("1/2 in (12.70 mm)", "12.5 mm (0.4921 in)")
    assert nominals(size("width", "30.1")) == ("1 3/16 in (30.16 mm)", "30 mm (1.1811 in)")


@given(
    st.decimals(min_value="0.01", max_value=500, places=4),
    st.decimals(min_value="0.001", max_value=5, places=3),
    st.decimals(min_value="0.01", max_value=500, places=4),
    st.sampled_from(["mm", "in"]),
)
def test_the_window_of_the_index_holds_every_match(asked: object, within: object, listed: object, unit: str) -> None:
    """A part within the tolerance is never outside the window that the index is searched by."""
    one, other = size("width", str(asked)), size("width", str(listed), unit)
    low, high = window(one, tolerance(str(within)))
    if worst(differences("brush", [one], {"width": other}, tolerance(str(within)))) is not None:
        assert low <= millionths(other.value, other.unit) <= high
