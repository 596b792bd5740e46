"""What the lathe may take, against geometry: no published example was found, so sampled profiles are turned about their axis."""

from __future__ import annotations

from fractions import Fraction
from math import cos, pi

import numpy as np
import pytest

from store.errors import Refused
from store.rules import commutator
from store.rules.quantities import Quantity
from store.rules.readings import parse
from store.rules.turning import Action, Found, advise

F = Fraction
POINTS = 3600
ANGLES = np.arange(POINTS) * 2 * pi / POINTS


def profile(draw: np.random.Generator) -> np.ndarray:
    """Radii from the turning axis: a circle off its centre, an oval, a lobed one, or all of it mixed."""
    radius = draw.uniform(10, 40)
    rho = np.full(POINTS, radius)
    kind = draw.integers(4)
    if kind in (0, 3):
        e, phase = draw.uniform(0, 0.3), draw.uniform(0, 2 * pi)
        rho = e * np.cos(ANGLES - phase) + np.sqrt(radius**2 - (e * np.sin(ANGLES - phase)) ** 2)
    if kind in (1, 3):
        rho = rho + draw.uniform(0, 0.15) * np.cos(2 * (ANGLES - draw.uniform(0, 2 * pi)))
    if kind in (2, 3):
        lobes = draw.integers(3, 7)
        rho = rho + draw.uniform(0, 0.4 / lobes**2) * np.cos(lobes * (ANGLES - draw.uniform(0, 2 * pi)))
    return rho


def widths(rho: np.ndarray) -> np.ndarray:
    """What a micrometer's flat anvils read in every direction: the distance of the two parallel tangents."""
    reach = 90
    support = np.max([np.roll(rho, k) * cos(k * 2 * pi / POINTS) for k in range(-reach, reach + 1)], axis=0)
    both: np.ndarray = support + np.roll(support, POINTS // 2)
    return both


@pytest.mark.parametrize("anvils", ["narrow", "flat"])
def test_never_promises_more_than_is_there(anvils: str) -> None:
    """2,000 random profiles (200 with flat anvils): D' is never above the true clean-up, the slot never deeper than the true worst."""
    draw = np.random.default_rng(17)
    for _ in range(2000 if anvils == "narrow" else 200):
        rho = profile(draw)
        across = rho + np.roll(rho, POINTS // 2) if anvils == "narrow" else widths(rho)
        diameter, runout = F(float(across.min())), F(float(rho.max() - rho.min()))
        undercut = F(float(draw.uniform(0.2, 1.0)))
        if runout == 0:
            continue
        turned = commutator.clean_up(diameter, runout)
        true_clean_up = 2 * float(rho.min())
        assert float(turned) <= true_clean_up + 1e-9
        true_slot = float(undercut) - (rho.max() - float(turned) / 2)
        assert float(commutator.worst_slot(undercut, diameter, turned, runout)) <= true_slot + 1e-9


@pytest.mark.parametrize("e", [0.01, 0.05, 0.2])
def test_exact_for_pure_eccentricity(e: float) -> None:
    """A circle of diameter 30.00 off its centre by e: TIR 2 e, clean-up 30 - 2 e, to 1e-9; the eccentric slot likewise."""
    rho = e * np.cos(ANGLES) + np.sqrt(15.0**2 - (e * np.sin(ANGLES)) ** 2)
    turned = commutator.clean_up(F(30), F(float(rho.max() - rho.min())))
    assert float(turned) == pytest.approx(2 * rho.min(), abs=1e-9)
    slot = commutator.worst_slot_eccentric(F("0.5"), F(30), turned, F(2 * e))
    assert float(slot) == pytest.approx(0.5 - (rho.max() - rho.min()), abs=1e-9)


def test_worked_figures() -> None:
    """Geometry: 30.00 off by 0.05: 29.90. An ellipse 30.00 x 29.90 on its centre: true 29.90, said 29.85. D 44.10, r 0.12, u 0.45."""
    assert commutator.clean_up(F("30.00"), F("0.10")) == F("29.90")
    assert commutator.clean_up(F("29.90"), F("0.05")) == F("29.85")
    turned = commutator.clean_up(F("44.10"), F("0.12"))
    assert turned == F("43.98")
    assert commutator.worst_slot(F("0.45"), F("44.10"), turned, F("0.12")) == F("0.27")
    assert commutator.worst_slot_eccentric(F("0.45"), F("44.10"), turned, F("0.12")) == F("0.33")


@pytest.mark.parametrize(("readings", "share"), [(4, 0.71), (6, 0.87), (8, 0.92), (12, 0.97)])
def test_dial_readings_under_read(readings: int, share: float) -> None:
    """N readings round the circle see at least cos(pi/N) of a once-a-turn runout: geometry, by a turned sine too."""
    assert commutator.read_share(readings) == pytest.approx(share, abs=0.005)
    phases = np.linspace(0, 2 * pi, 721)[:, None]
    seen = np.cos(phases + np.arange(readings) * 2 * pi / readings)
    assert (seen.max(axis=1) - seen.min(axis=1)).min() / 2 == pytest.approx(commutator.read_share(readings), abs=1e-4)


BASE = Found(
    "mm", F("42.70"), F("0.12"), F("0.6"), F(0), F("0.02"), F("42.50"), True, F("0.05"), F("0.3"), F("0.02"), F("0.08")
)  # fmt: skip


def first(**changes: object) -> Action:
    """The first action for the base case changed so."""
    from dataclasses import replace

    return advise(replace(BASE, **changes))[0].action  # type: ignore[arg-type]


def test_the_ladder_of_decisions() -> None:
    """Each rung from both sides."""
    assert first(diameter=F("45")) is Action.turn
    assert first() is Action.turn_last_cut
    assert first(diameter=F("42.64")) is Action.turn_last_cut
    assert first(diameter=F("42.63")) is Action.replace
    assert first(diameter=F("42.64"), lowest_passes=False) is Action.replace
    assert first(diameter=F("42.49")) is Action.replace
    assert first(runout=F("0.05")) is Action.leave
    assert first(runout=F("0.05"), surface_failed=True) is Action.polish
    assert first(runout=F("0.05"), defect=F("0.01")) is Action.turn
    assert first(runout=F("0.05"), defect=F("0.02")) is Action.turn_last_cut
    assert first(may_turn=False) is Action.not_to_be_turned
    assert first(shaft_runout=F("0.09")) is Action.straighten_shaft_first
    assert first(shaft_runout=F("0.08")) is Action.turn_last_cut


def test_undersize_is_called_before_any_cut_and_002_larger_is_the_last() -> None:
    """A core whose armature would be undersize after turning is called; the same 0.02 mm larger gets `turn, last cut`."""
    assert first(diameter=F("42.62")) is Action.replace
    assert first(diameter=F("42.64")) is Action.turn_last_cut


def test_re_undercut_when_the_worst_slot_falls_under_its_limit() -> None:
    """The any-shape bound is used and named; a model that must not be undercut says so."""
    from dataclasses import replace

    lines = advise(replace(BASE, diameter=F("45"), undercut=F("0.45")))
    assert [line.action for line in lines] == [Action.turn, Action.re_undercut]
    assert "the bound for any shape" in lines[1].formula
    (line,) = advise(replace(BASE, diameter=F("45"), undercut=F("0.45"), may_undercut=False))
    assert (line.action, line.predicted) == (Action.not_to_be_turned, ())
    assert "must not be undercut" in line.because
    assert [line.action for line in advise(replace(BASE, diameter=F("45"), undercut=F("0.6")))] == [Action.turn]


def test_bad_input_is_one_clear_line() -> None:
    """A TIR larger than the diameter, below zero, nothing left."""
    for diameter, runout, defect in (("30", "31", "0"), ("30", "-1", "0"), ("0", "0", "0"), ("30", "1", "20")):
        with pytest.raises(Refused) as caught:
            commutator.clean_up(F(diameter), F(runout), F(defect))
        assert "\n" not in str(caught.value)


def test_stations_that_miss_the_smallest_diameter_promise_too_much() -> None:
    """Geometry: four lobes of 0.05, read at two crests 90 degrees apart, lose 0.05 more than is said; so the line says it.

    With the smallest diameter among the readings the bound holds.
    """
    rho = 15 + 0.025 * np.cos(4 * ANGLES)
    across = rho + np.roll(rho, POINTS // 2)
    runout = F(float(rho.max() - rho.min()))
    missed = min(F(float(across[n])) for n in (0, POINTS // 4))
    assert float(commutator.clean_up(missed, runout)) == pytest.approx(2 * rho.min() + 0.05, abs=1e-9)
    assert float(commutator.clean_up(F(float(across.min())), runout)) <= 2 * rho.min() + 1e-9
    (line,) = advise(Found("mm", missed, runout, most_runout=F("0.01"), stations=2))
    assert "if the smallest diameter there is was among the 2 read" in line.because


def test_an_undercut_as_printed() -> None:
    """1/32 in is asked for, 0.025 to 0.032 in is printed as its bounds (several TMs, read): deep enough, and a slot less is not."""
    slot = parse("1/32", Quantity.length, "in").value
    assert slot == F("0.03125")
    found = Found("in", F("1.7"), F("0"), undercut=slot, most_runout=F("0.002"), least_undercut=F("0.025"))
    assert [line.action for line in advise(found)] == [Action.leave]
    from dataclasses import replace

    assert advise(replace(found, undercut=F("0.0249")))[1].action is Action.re_undercut
