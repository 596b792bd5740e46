"""Which readings went with comebacks, and what a tighter limit would have done."""

from __future__ import annotations

import pytest
from scipy.stats import mannwhitneyu

from store.rules import survival
from store.rules.foretelling import separate, tighter


def test_a_full_separation_has_an_area_of_one() -> None:
    """Every unit that came back read higher than every other."""
    found = separate([5, 6, 7], [1, 2, 3, 4])
    assert found is not None
    assert (found.area, found.low, found.high) == (1.0, 1.0, 1.0)
    assert (found.returned, found.stayed) == (3, 4)


def test_the_area_is_the_share_of_pairs_with_ties_by_half() -> None:
    """2 against 1, 2, 3: one pair above, one tie, one below."""
    found = separate([2], [1, 2, 3])
    assert found is not None
    assert found.area == 0.5


def test_area_and_p_by_scipy() -> None:
    """Mann-Whitney as scipy gives it; the interval is Hanley and McNeil's (Radiology 143, 1982), by hand for this table."""
    back, stayed = [3.1, 2.8, 3.6, 3.3, 2.9], [2.1, 2.9, 2.4, 3.0, 2.2, 2.6, 2.7, 3.2]
    found = separate(back, stayed)
    assert found is not None
    scipy = mannwhitneyu(back, stayed, alternative="two-sided", method="asymptotic")
    assert found.p == scipy.pvalue
    area = scipy.statistic / 40
    q1, q2 = area / (2 - area), 2 * area**2 / (1 + area)
    variance = (area * (1 - area) + 4 * (q1 - area**2) + 7 * (q2 - area**2)) / 40
    assert found.area == area
    assert found.high - found.low == pytest.approx(
        min(1, area + 1.96 * variance**0.5) - area + 1.96 * variance**0.5, rel=1e-3
    )


def test_one_side_without_readings_says_nothing() -> None:
    """None, not a figure."""
    assert separate([], [1, 2]) is None
    assert separate([1], []) is None


@pytest.mark.parametrize(("keep_below", "expected"), [(True, (2, 1)), (False, (1, 2))])
def test_a_tighter_limit_catches_what_is_beyond_it(keep_below: bool, expected: tuple[int, int]) -> None:
    """What lies on the limit is kept."""
    assert tighter([1, 2, 3, 4], [0, 1, 2, 5], 2.0, keep_below=keep_below) == expected


def test_those_at_risk_are_followed_as_long_or_longer() -> None:
    """A unit followed for just so long still counts."""
    assert survival.at_risk([10, 20, 20, 30], (0, 20, 21, 31)) == ((0, 4), (20, 3), (21, 1), (31, 0))


@pytest.mark.parametrize(
    ("longest", "expected"),
    [(0, (0,)), (5.5, (0, 1, 2, 3, 4, 5)), (211, (0, 45, 90, 135, 180)), (800, (0, 180, 360, 540, 720))],
)
def test_marks_are_round_days(longest: float, expected: tuple[int, ...]) -> None:
    """No more than seven."""
    assert survival.marks(longest) == expected
