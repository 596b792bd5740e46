"""Decision rules against JCGM 106, ISO 14253-1, ILAC-G8, the GUM and published examples."""

from __future__ import annotations

import random
from fractions import Fraction
from math import sqrt

import pytest

from store.rules import certainty
from store.rules.certainty import Certainty, conformance, phi
from store.rules.limits import Limit, Measured, Rule, Verdict, judge
from store.rules.readings import Mark, Typed
from store.rules.statistic import Statistic

F = Fraction


def reading(value: str, u: str) -> Measured:
    """A reading in mm with a standard uncertainty."""
    return Measured("1", Typed(value, Mark.number, F(value), "mm", 3, ""), F(u) ** 2, F(u) * 2)


@pytest.mark.parametrize(("pc", "z"), [(0.80, 0.84), (0.90, 1.28), (0.95, 1.64), (0.99, 2.33), (0.999, 3.09)])
def test_z_of_jcgm_106_table_1(pc: float, z: float) -> None:
    """JCGM 106:2012 7.3.3 Table 1, from memory, to two decimals."""
    assert phi(z) == pytest.approx(pc, abs=0.0006)


def test_zener_example_of_jcgm_106() -> None:
    """JCGM 106:2012 Example 1, from memory: y -5.47 V, u 0.05 V, upper limit -5.40 V: z 1.40, pc 0.92."""
    assert round(conformance(F("-5.47"), None, F("-5.40"), F("0.05") ** 2), 2) == 0.92


@pytest.mark.parametrize(
    ("d", "pc"),
    [("-1", 0.158655), ("0", 0.5), ("1", 0.841345), ("1.65", 0.950529), ("2", 0.977250), ("3", 0.998650)],
)
def test_one_sided_probability(d: str, pc: float) -> None:
    """The standard normal distribution at d standard uncertainties inside the limit; mirrored on the other side."""
    assert conformance(F(10) + F(d), F(10), None, F(1)) == pytest.approx(pc, abs=5e-7)
    assert conformance(-F(10) - F(d), None, F(-10), F(1)) == pytest.approx(pc, abs=5e-7)


@pytest.mark.parametrize(
    ("d", "verdict"),
    [
        ("-1.651", "out"),
        ("-1.65", "out"),
        ("-1.649", "in doubt"),
        ("0", "in doubt"),
        ("1.649", "in doubt"),
        ("1.65", "in"),
        ("3", "in"),
    ],
)
def test_guarded_by_165_u(d: str, verdict: str) -> None:
    """ISO 14253-1:2017, default w = 1.65 u (secondary text): out only outside by w, in only inside by w."""
    limit = Limit("mm", None, F(10), None, rule=Rule.guarded_165u)
    assert judge([reading(str(float(F(10) + F(d) / 10)), "0.1")], Statistic.smallest, limit).verdict == verdict


@pytest.mark.parametrize(
    ("value", "verdict"), [("0.002", "in"), ("0.0017", "in"), ("0.0025", "in doubt"), ("0.0041", "out")]
)
def test_micrometer_guarded_by_u(value: str, verdict: str) -> None:
    """A public laboratory page (secondary): permitted error +-0.003 mm, U 0.0010: accept up to 0.002 (ILAC-G8, w = U)."""
    limit = Limit("mm", None, F("-0.003"), F("0.003"), rule=Rule.guarded_u)
    assert judge([reading(value, "0.0005")], Statistic.each, limit).verdict == verdict


def test_a_narrow_two_sided_limit_is_not_called_95_per_cent() -> None:
    """A limit 4 u wide with the result 1.65 u inside one end conforms with 0.941, so the fixed guard does not hold there."""
    limit = Limit("mm", None, F(0), F(4), rule=Rule.guarded_165u)
    judged = judge([reading("1.65", "1")], Statistic.each, limit)
    assert judged.probability == pytest.approx(0.941, abs=5e-4)
    assert judged.verdict is Verdict.in_doubt


def test_resolution_of_the_gum() -> None:
    """JCGM 100:2008: resolution d gives u = d/sqrt(12); 0.01 mm: 0.0028868 mm."""
    found = certainty.variance(Certainty(resolution=F("0.01"), expanded=F(0), k=F(2)))
    assert found is not None
    assert sqrt(found) == pytest.approx(0.0028868, abs=5e-8)


def test_end_gauge_of_the_gum() -> None:
    """JCGM 100:2008 H.1 (secondary): components 25, 5.8, 3.9, 6.7, 2.9, 16.6 nm combine to 32 nm (31.67)."""
    total = certainty.combine([F(part) ** 2 for part in ("25", "5.8", "3.9", "6.7", "2.9", "16.6")])
    assert total is not None
    assert sqrt(total) == pytest.approx(31.67, abs=0.005)


def test_false_accept_and_reject_of_a_published_test() -> None:
    """Sandia suncal's published test (secondary): process N(0,1), limits +-2, test sd 1/4: false accept 0.008, reject 0.015.

    By simple acceptance on 200,000 drawn units; the tolerance is four standard errors of the draw.
    """
    draw = random.Random(106)
    accepted_bad = rejected_good = 0
    count = 200_000
    for _ in range(count):
        true = draw.gauss(0, 1)
        shown = true + draw.gauss(0, 0.25)
        accepted_bad += abs(shown) <= 2 < abs(true)
        rejected_good += abs(true) <= 2 < abs(shown)
    assert accepted_bad / count == pytest.approx(0.008, abs=0.0008 + 0.0005)
    assert rejected_good / count == pytest.approx(0.015, abs=0.0011 + 0.0005)
