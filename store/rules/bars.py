"""Bar-to-bar readings round a commutator: deviations from the median, and the pattern that they make.

The median, not the mean: one dead coil drags a mean. The limit in per cent is the shop's own.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from store.errors import Refused
from store.rules.statistic import median


@dataclass(frozen=True, slots=True)
class Chart:
    """Deviations in per cent of the median, a bar each from bar 1; `far` the bars beyond the limit, `pattern` in words."""

    middle: Fraction
    deviations: tuple[Fraction, ...]
    far: tuple[int, ...]
    pattern: str


def chart(values: Sequence[Fraction], limit: Fraction, bars: int | None = None, poles: int | None = None) -> Chart:
    """The chart of readings in the order of the bars. `limit` in per cent of the median, above zero.

    Raises Refused: more readings than the model has bars, fewer than three, a median of zero, a negative reading.
    """
    if bars is not None and len(values) > bars:
        raise Refused(f"{len(values)} readings, and this model's commutator has {bars} bars")
    if len(values) < 3:
        raise Refused("three bars at least make a pattern")
    if any(value < 0 for value in values):
        raise Refused("a drop or a resistance is not below zero")
    if limit <= 0:
        raise Refused("the limit in per cent is above zero")
    middle = median(values)
    if middle == 0:
        raise Refused("the middle reading is zero; is the supply on and the meter in its range?")
    deviations = tuple((value - middle) / middle * 100 for value in values)
    far = tuple(n for n, deviation in enumerate(deviations, start=1) if abs(deviation) > limit)
    return Chart(middle, deviations, far, _pattern(deviations, far, limit, bars, poles))


def _pattern(
    deviations: Sequence[Fraction], far: Sequence[int], limit: Fraction, bars: int | None, poles: int | None
) -> str:
    if not far:
        return "even all round"
    count = len(deviations)
    period = _period(deviations, bars, poles, limit)
    if period:
        return f"repeats every {period} bars: equalised winding, compare like with like"
    low = [n for n in far if deviations[n - 1] < 0]
    high = [n for n in far if deviations[n - 1] > 0]
    if len(low) == 1 and not high:
        return f"one low at {low[0]}: a short is suspected there"
    if len(high) == 1:
        n = high[0]
        beside = [deviations[(n - 2) % count], deviations[n % count]]
        if all(d < 0 for d in beside):
            return f"one high at {n} with its neighbours low: an open coil (lap winding)"
    if len(high) == 2 and not low and (high[1] - high[0] == 1 or {high[0], high[1]} == {1, count}):
        return f"a pair high at {high[0]} and {high[1]}: a riser joint"
    parts = []
    if low:
        parts.append(f"low at {_listed(low)}")
    if high:
        parts.append(f"high at {_listed(high)}")
    return f"{' and '.join(parts)}: no pattern that is known"


def _period(deviations: Sequence[Fraction], bars: int | None, poles: int | None, limit: Fraction) -> int | None:
    """Bars over pole pairs, where the readings repeat so within a fifth of the limit and are not even."""
    if not bars or not poles or poles < 4 or len(deviations) != bars or bars % (poles // 2):
        return None
    step = bars // (poles // 2)
    if step < 2 or all(abs(d) <= limit for d in deviations):
        return None
    repeats = all(abs(deviations[n] - deviations[(n + step) % bars]) <= limit / 5 for n in range(bars))
    return step if repeats else None


def _listed(numbers: Sequence[int]) -> str:
    shown = ", ".join(map(str, numbers[:8]))
    return shown + (f" and {len(numbers) - 8} more" if len(numbers) > 8 else "")
