"""How far a count of cases may be trusted: a proportion with its interval."""

from __future__ import annotations

from math import sqrt

Z_95 = 1.959963984540054


def wilson(cases: int, of: int, z: float = Z_95) -> tuple[float, float]:
    """The Wilson score interval of cases / of, both ends between 0 and 1; (0, 1) where nothing was seen.

    Source: Wilson (1927); Newcombe, Statistics in Medicine 17 (1998) 857-872, method 3.
    """
    if of <= 0:
        return 0.0, 1.0
    share, square = cases / of, z * z
    centre = share + square / (2 * of)
    reach = z * sqrt(share * (1 - share) / of + square / (4 * of * of))
    scale = 1 + square / of
    low, high = (centre - reach) / scale, (centre + reach) / scale
    return (0.0 if cases == 0 else max(0.0, low)), (1.0 if cases == of else min(1.0, high))
