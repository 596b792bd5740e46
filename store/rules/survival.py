"""How long released units stay away: the curve of returns, and whether two groups differ.

Kaplan-Meier with log-log limits (Greenwood's variance), young releases right-censored; the log-rank test.
Sources: Kaplan and Meier 1958; NIST/SEMATECH e-Handbook 8.2.1.5; checked against lifelines. numpy is imported when asked.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

Z95 = 1.959963984540054


@dataclass(frozen=True, slots=True)
class Step:
    """The curve at a time: share still out `stays` with its 95 per cent limits, how many were at risk, how many returned."""

    days: float
    stays: float
    low: float
    high: float
    at_risk: int
    returned: int


def curve(days: Sequence[float] | Any, returned: Sequence[bool] | Any) -> tuple[Step, ...]:
    """A step for every time at which something returned, in order; empty where nothing did.

    `days` since release until the return, or until last known to be out; none is negative.
    """
    import numpy as np

    times, events = np.asarray(days, float), np.asarray(returned, bool)
    if not len(times):
        return ()
    at, count = np.unique(times[events], return_counts=True)
    risk = len(times) - np.searchsorted(np.sort(times), at, side="left")
    stays = np.cumprod(1 - count / risk)
    with np.errstate(divide="ignore", invalid="ignore"):
        greenwood = np.cumsum(count / (risk * (risk - count)))
        spread = Z95 * np.sqrt(greenwood) / np.abs(np.log(stays))
        low, high = stays ** np.exp(spread), stays ** np.exp(-spread)
    ended = stays <= 0
    low, high = np.where(ended, 0.0, low), np.where(ended, 0.0, high)
    rows = zip(at, stays, low, high, risk, count, strict=True)
    return tuple(Step(float(t), float(s), float(lo), float(hi), int(n), int(d)) for t, s, lo, hi, n, d in rows)


def fraction_at(steps: Sequence[Step], day: float, longest: float) -> tuple[float, float, float] | None:
    """The share returned by a day with its limits, from the curve; None where no unit was followed so long: too young."""
    if longest < day:
        return None
    before = [step for step in steps if step.days <= day]
    if not before:
        return 0.0, 0.0, 0.0
    return 1 - before[-1].stays, 1 - before[-1].high, 1 - before[-1].low


MARKS = (1, 2, 5, 10, 15, 30, 45, 90, 180, 365, 730, 1825, 3650)


def marks(longest: float, most: int = 6) -> tuple[int, ...]:
    """Round days from 0 to at most `longest`, no more than `most` + 1; those of quarters and years where they are of use."""
    step = next((step for step in MARKS if longest / step <= most), int(longest / most) + 1)
    return tuple(range(0, int(longest) + 1, step))


def at_risk(days: Sequence[float] | Any, when: Sequence[int]) -> tuple[tuple[int, int], ...]:
    """How many units were followed as long as each of these days, or longer."""
    import numpy as np

    followed = np.sort(np.asarray(days, float))
    return tuple((day, len(followed) - int(np.searchsorted(followed, day, side="left"))) for day in when)


@dataclass(frozen=True, slots=True)
class LogRank:
    """Observed and expected returns of the group, the statistic (chi-square, one degree of freedom) and its p.

    `cautious` is the larger of p and the mid-p of so many returns where a Poisson count of the expected is due: with few
    returns the chi-square's tail is too thin, and groups by the hundred would be named by chance more often than said.
    """

    observed: float
    expected: float
    statistic: float
    p: float
    cautious: float


class Pooled:
    """All releases together, against which any group of them is tested; sorted once for many groups."""

    def __init__(self, days: Sequence[float] | Any, returned: Sequence[bool] | Any) -> None:
        import numpy as np

        self.days, self.returned = np.asarray(days, float), np.asarray(returned, bool)
        self.at, self.count = np.unique(self.days[self.returned], return_counts=True)
        self.risk = len(self.days) - np.searchsorted(np.sort(self.days), self.at, side="left")

    def log_rank(self, members: Any) -> LogRank:
        """The group (an index or mask) against all others. Without any return, or without others, p is 1."""
        import numpy as np
        from scipy.special import chdtrc

        times, events = self.days[members], self.returned[members]
        observed = float(events.sum())
        if not len(self.at) or not len(times) or len(times) == len(self.days):
            return LogRank(observed, observed, 0.0, 1.0, 1.0)
        ours = len(times) - np.searchsorted(np.sort(times), self.at, side="left")
        share = ours / self.risk
        expected = float((self.count * share).sum())
        variance = float(
            (self.count * share * (1 - share) * (self.risk - self.count) / np.maximum(self.risk - 1, 1)).sum()
        )
        statistic = 0.0 if variance <= 0 else (observed - expected) ** 2 / variance
        p = float(chdtrc(1, statistic))
        return LogRank(observed, expected, statistic, p, max(p, _mid_p(observed, expected)))


def _mid_p(observed: float, expected: float) -> float:
    """Two-sided mid-p of a Poisson count (Lancaster 1961); 1 where nothing was expected."""
    from scipy.special import pdtr

    if expected <= 0:
        return 1.0
    below, upto = (float(pdtr(observed - 1, expected)) if observed >= 1 else 0.0), float(pdtr(observed, expected))
    lower = (below + upto) / 2
    return min(1.0, 2 * min(lower, 1 - lower))


def rejected(p: Sequence[float], rate: float) -> tuple[tuple[float, ...], tuple[bool, ...]]:
    """Adjusted p and which are named at a false-discovery rate (Benjamini and Hochberg 1995), in the order given."""
    order = sorted(range(len(p)), key=lambda n: p[n])
    adjusted = [1.0] * len(p)
    least = 1.0
    for rank in range(len(p), 0, -1):
        index = order[rank - 1]
        least = min(least, p[index] * len(p) / rank)
        adjusted[index] = least
    return tuple(adjusted), tuple(a <= rate for a in adjusted)
