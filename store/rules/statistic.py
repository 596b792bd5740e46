"""Which of several readings is judged, and with what variance: the smallest, the largest, the mean, the spread, the worst."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from enum import StrEnum
from fractions import Fraction

from store.rules import certainty

Sized = tuple[Fraction, str, Fraction | None]
"""A value, where it was read, and its variance."""


class Statistic(StrEnum):
    """What of several readings is judged."""

    each = "each"
    smallest = "smallest"
    largest = "largest"
    mean = "mean"
    spread = "spread"
    deviation = "deviation"
    attribute = "attribute"


def governing(
    sized: Sequence[Sized], statistic: Statistic, margin: Callable[[Fraction], Fraction] | None = None
) -> Sized:
    """The judged value, where it was read, and its variance; of equals the first.

    `margin` says how far inside its limit a value lies, by which the worst of `each` is found; without one the smallest is.
    """
    if statistic is Statistic.smallest:
        return min(sized, key=_value)
    if statistic is Statistic.largest:
        return max(sized, key=_value)
    if statistic is Statistic.mean:
        total = certainty.combine(one[2] for one in sized)
        n = len(sized)
        return sum((one[0] for one in sized), Fraction(0)) / n, "", None if total is None else total / n**2
    if statistic is Statistic.spread:
        low, high = min(sized, key=_value), max(sized, key=_value)
        at = f"{low[1]} to {high[1]}" if low[1] != high[1] else ""
        return high[0] - low[0], at, certainty.combine((low[2], high[2])) if len(sized) > 1 else low[2]
    if statistic is Statistic.deviation:
        return _deviation(sized)
    if margin is None:
        return min(sized, key=_value)
    return min(sized, key=lambda one: margin(one[0]))


def _deviation(sized: Sequence[Sized]) -> Sized:
    """The largest deviation from the median to either side, in per cent of it. A median of zero has none: 0."""
    middle = median([one[0] for one in sized])
    if middle == 0:
        return Fraction(0), sized[0][1], None
    worst = max(sized, key=lambda one: abs(one[0] - middle))
    by = Fraction(100) / middle
    return abs((worst[0] - middle) * by), worst[1], None if worst[2] is None else worst[2] * by * by


def median(values: Sequence[Fraction]) -> Fraction:
    """The middle value, or the mean of the two in the middle. At least one value."""
    ordered = sorted(values)
    half = len(ordered) // 2
    return ordered[half] if len(ordered) % 2 else (ordered[half - 1] + ordered[half]) / 2


def _value(one: Sized) -> Fraction:
    return one[0]
