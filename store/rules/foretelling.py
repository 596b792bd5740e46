"""Which as-left readings went with comebacks: rank test, area under the curve, and what a tighter limit would have caught."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import sqrt
from typing import Any

Z95 = 1.959963984540054


@dataclass(frozen=True, slots=True)
class Separation:
    """How readings of units that came back differ from those that did not.

    `area` is the probability that a unit which came back read higher (0.5: no difference), with 95 per cent limits
    (Hanley and McNeil 1982); `p` is Mann-Whitney's, two-sided.
    """

    returned: int
    stayed: int
    area: float
    low: float
    high: float
    p: float


def separate(returned: Sequence[float] | Any, stayed: Sequence[float] | Any) -> Separation | None:
    """None where either side has no reading."""
    import numpy as np
    from scipy.stats import mannwhitneyu

    ours, others = np.asarray(returned, float), np.asarray(stayed, float)
    n, m = len(ours), len(others)
    if not n or not m:
        return None
    found = mannwhitneyu(ours, others, alternative="two-sided", method="asymptotic")
    area = float(found.statistic) / (n * m)
    q1, q2 = area / (2 - area), 2 * area * area / (1 + area)
    variance = (area * (1 - area) + (n - 1) * (q1 - area * area) + (m - 1) * (q2 - area * area)) / (n * m)
    spread = Z95 * sqrt(max(0.0, variance))
    p = 1.0 if np.isnan(found.pvalue) else float(found.pvalue)
    return Separation(n, m, area, max(0.0, area - spread), min(1.0, area + spread), p)


def tighter(
    returned: Sequence[float] | Any, stayed: Sequence[float] | Any, limit: float, *, keep_below: bool
) -> tuple[int, int]:
    """How many of the units that came back a limit would have caught, and how many of the others it would have refused."""
    import numpy as np

    ours, others = np.asarray(returned, float), np.asarray(stayed, float)
    caught, refused = (ours > limit, others > limit) if keep_below else (ours < limit, others < limit)
    return int(caught.sum()), int(refused.sum())
