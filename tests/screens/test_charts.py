"""Charts in characters: round marks on both axes, a curve within its band, dots on their intervals."""

from __future__ import annotations

import itertools
import re

import pytest

from store.rules import survival
from tui.widgets import charts


def drawn(longest: float) -> tuple[tuple[survival.Step, ...], list[str]]:
    """The curve of forty units, every fourth of which came back, the last followed for `longest` days; and its chart."""
    days = [longest * n / 40 for n in range(1, 41)]
    steps = survival.curve(days, [n % 4 == 0 for n in range(1, 41)])
    at_risk = survival.at_risk(days, survival.marks(longest))
    return steps, charts.curve_chart(steps, at_risk, longest, 72, 12)


@pytest.mark.parametrize("longest", [3, 40, 211, 700, 5000])
def test_the_marks_are_round_and_find_room(longest: float) -> None:
    """Shares of one row are all alike, days are whole, at most seven, and nothing is wider than asked for."""
    _, lines = drawn(longest)
    shares = [float(line.split("%")[0]) for line in lines[:12]]
    assert len({round(a - b, 6) for a, b in itertools.pairwise(shares)}) == 1
    days = [int(n) for n in re.findall(r"\d+", lines[-2])]
    assert days[0] == 0
    assert len(days) <= 7
    assert len({b - a for a, b in itertools.pairwise(days)}) <= 1
    assert len(re.findall(r"\d+", lines[-1])) == len(days)
    assert max(map(len, lines)) <= 72


def test_the_curve_stands_in_its_band() -> None:
    """In each column there is one mark of the curve, and the band is on both sides of it."""
    rows = [line[7:].ljust(65) for line in drawn(200)[1][:12]]
    for column in range(65):
        marks = [row[column] for row in rows]
        assert marks.count(charts.CURVE) == 1
        kept = "".join(marks).strip()
        assert " " not in kept


def test_numbers_at_risk_stand_below_their_days() -> None:
    """Forty at day 0; a unit followed for just so long is still counted."""
    days, risks = ([int(n) for n in re.findall(r"\d+", line)] for line in drawn(200)[1][-2:])
    assert (days, risks) == ([0, 45, 90, 135, 180], [40, 32, 23, 14, 5])


def test_nothing_is_drawn_of_nothing() -> None:
    """No steps, no chart; no interval, no dot."""
    assert charts.curve_chart((), (), 0.0, 72, 12) == []
    assert charts.dot(None, None, None, 0.5, 10).strip() == ""


def test_a_dot_stands_on_its_interval() -> None:
    """From low to high on a scale from 0 to `top`."""
    assert charts.dot(0.5, 0.25, 0.75, 1.0, 9) == "  ──●──  "
