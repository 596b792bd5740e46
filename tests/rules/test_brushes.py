"""Brush life and pressure; the choice of a bushing."""

from __future__ import annotations

from fractions import Fraction

import pytest

from store.errors import Refused
from store.rules.brushes import Point, advise, force_at, life_left, pressure_kpa
from store.rules.bushings import Bushing, choose

F = Fraction


def test_life_from_two_points() -> None:
    """14 to 12 mm in 1,000 h leaves 1,250 h to 9.5 mm; at the limit nothing is left."""
    assert life_left(Point(F(14), F(0)), Point(F(12), F(1000)), F("9.5")) == 1250
    assert life_left(Point(F(14), F(0)), Point(F(9), F(1000)), F("9.5")) == 0


@pytest.mark.parametrize(
    ("earlier", "later", "why"),
    [
        ((14, 0), (14, 100), "nothing wore"),
        ((14, 0), (15, 100), "nothing wore"),
        ((14, 100), (12, 100), "no more hours"),
        ((14, -5), (12, 100), "below zero"),
    ],
)
def test_no_rate_without_wear_and_work(earlier: tuple[int, int], later: tuple[int, int], why: str) -> None:
    """Refused on one point, no wear, negative hours."""
    with pytest.raises(Refused, match=why):
        life_left(Point(F(earlier[0]), F(earlier[1])), Point(F(later[0]), F(later[1])), F(9))


@pytest.mark.parametrize(
    ("length", "passes", "action"),
    [("9.4", True, "replace"), ("9.5", True, "keep"), ("9.5", False, "replace"), ("9.6", False, "keep")],
)
def test_keep_or_replace(length: str, passes: bool, action: str) -> None:
    """Both sides of the limit, and the limit itself by its wording."""
    assert advise(F(length), F("9.5"), passes, "mm")[0] == action


def test_pressure_wants_a_section() -> None:
    """One clear line."""
    assert pressure_kpa(F(20), F(100)) == 200
    with pytest.raises(Refused, match="section is above zero"):
        pressure_kpa(F(20), F(0))


def test_the_bushing_that_restores_the_fit() -> None:
    """Within the clearance and tight in the housing; the middle of the limits first; none is an answer too."""
    at_hand = [
        Bushing(n, "", F(b), F(o))
        for n, b, o in (
            ("A", "14.03", "18.05"),
            ("B", "14.08", "18.05"),
            ("C", "14.25", "18.05"),
            ("D", "14.07", "17.9"),
        )
    ]
    found = choose(at_hand, F("13.98"), F("0.02"), F("0.20"), F("18.00"))
    assert [c.bushing.number for c in found] == ["B", "A"]
    assert found[0].clearance == F("0.10")
    assert choose(at_hand, F("13.98"), F("0.001"), F("0.002")) == ()


def test_an_uneven_journal_is_held_at_both_ends() -> None:
    """The low limit by the largest of the journal, the high one by the smallest; both sides of each."""
    one = [Bushing("A", "", F("14.10"), F("18.05"))]
    assert choose(one, F("13.90"), F("0.02"), F("0.20"), widest=F("14.08")) != ()
    assert choose(one, F("13.90"), F("0.02"), F("0.20"), widest=F("14.081")) == ()
    assert choose(one, F("13.899"), F("0.02"), F("0.20"), widest=F("14.08")) == ()
    assert choose(one, F("13.90"), None, F("0.20"), widest=F("14.10")) == ()


def test_spring_force_at_the_stated_position() -> None:
    """20 gf lost per mm of wear (TM 10-3930-653-14&P, read): 900 gf with a 14 mm brush is 810 gf at 9.5 mm."""
    assert force_at(F(900), F(14), F("9.5"), F(20)) == 810
    assert force_at(F(810), F("9.5"), F(14), F(20)) == 900
    with pytest.raises(Refused, match="would not reach"):
        force_at(F(80), F(14), F("9.5"), F(20))
    with pytest.raises(Refused, match="not below zero"):
        force_at(F(80), F(14), F("9.5"), F(-20))
