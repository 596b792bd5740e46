"""Units that come back again and again: the mean cumulative number of comebacks a unit (Nelson's MCF).

The variance is the robust one of Lawless and Nadeau (1995), by units. Checked on Nelson's valve seats.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import sqrt
from typing import Any

Z95 = 1.959963984540054
VARIANCE = "robust, by units (Lawless and Nadeau 1995)"


@dataclass(frozen=True, slots=True)
class Mean:
    """The mean number of comebacks a unit by a time, with its 95 per cent limits and standard deviation."""

    days: float
    mean: float
    low: float
    high: float
    deviation: float


def mean_cumulative(
    ends: Sequence[float] | Any, unit: Sequence[int] | Any, days: Sequence[float] | Any
) -> tuple[Mean, ...]:
    """The function at every time at which a unit came back. `ends[i]` is how long unit i was followed.

    `unit` and `days` say which unit came back when; a time past its unit's end is counted at the end.
    """
    import numpy as np

    last, who, when = np.asarray(ends, float), np.asarray(unit, int), np.asarray(days, float)
    if not len(when):
        return ()
    when = np.minimum(when, last[who])
    at, place, count = np.unique(when, return_inverse=True, return_counts=True)
    risk = len(last) - np.searchsorted(np.sort(last), at, side="left")
    jump = count / risk
    mean = np.cumsum(jump)
    # each unit's part at a time: its own comebacks less the mean jump while it was at risk, over those at risk
    drift = np.cumsum(jump / risk)
    until = np.searchsorted(at, last, side="right")
    made = []
    own: Any = np.zeros(len(last))
    steps: dict[int, list[int]] = {}
    for index, k in zip(who, place, strict=True):
        steps.setdefault(int(k), []).append(int(index))
    for k in range(len(at)):
        for index in steps.get(k, ()):
            own[index] += 1 / risk[k]
        seen = np.where(until > k, drift[k], np.where(until > 0, drift[np.maximum(until - 1, 0)], 0.0))
        deviation = sqrt(float(((own - seen) ** 2).sum()))
        made.append(
            Mean(
                float(at[k]),
                float(mean[k]),
                max(0.0, float(mean[k]) - Z95 * deviation),
                float(mean[k]) + Z95 * deviation,
                deviation,
            )
        )
    return tuple(made)
