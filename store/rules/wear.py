"""The wear rule as geometry: where on a drawn scale the new size, the limits, the guard band and the readings stand.

Both the widget on the screen and the drawing in the report are made from this. Places run from 0 (left) to 1 (right); a
reading may lie off the scale. A one-sided rule runs from the new size at the left to the limit, with room beyond it; a
two-sided one has its low end at the left and its high end at the right.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import sqrt

from store.rules.limits import Limit, Rule

NEW_AT, LIMIT_AT = Fraction(1, 20), Fraction(4, 5)
LOW_AT, HIGH_AT = Fraction(9, 50), Fraction(41, 50)
_WIDTH = {Rule.simple: 0.0, Rule.guarded_165u: 1.65, Rule.guarded_u: 2.0}


@dataclass(frozen=True, slots=True)
class WearRule:
    """The geometry. `inside` is the stretch that conforms; `guards` where the gauge cannot tell; None where there is none.

    ends      the limits, each with its size, left to right
    ticks     the readings; `judged` the one that governs, `faint` those of the other stage
    """

    inside: tuple[float, float]
    ends: tuple[tuple[float, Fraction], ...]
    new: tuple[float, Fraction] | None
    guards: tuple[tuple[float, float], ...]
    ticks: tuple[float, ...]
    faint: tuple[float, ...]
    judged: float | None


def wear_rule(
    limit: Limit,
    values: Sequence[Fraction],
    judged: Fraction | None = None,
    variance: Fraction | None = None,
    faint: Sequence[Fraction] = (),
) -> WearRule | None:
    """The rule of one characteristic, all sizes in the limit's unit; None for a limit without an end.

    `variance` is u squared of the judged value; without it, or under simple acceptance, there is no guard band.
    """
    low, high = limit.low, limit.high
    if low is not None and high is not None:
        zero, one = _line(low, LOW_AT, high, HIGH_AT) if low != high else (low - 1, high + 1)
    elif low is not None:
        zero, one = _one_sided(low, limit.new, max(values, default=None), falls=True)
    elif high is not None:
        start = limit.new if limit.new is not None or high <= 0 else Fraction(0)
        zero, one = _one_sided(high, start, min(values, default=None), falls=False)
    else:
        return None

    whole = one - zero

    def at(value: Fraction) -> float:
        return float((value - zero) / whole)

    width = _WIDTH[limit.rule] * sqrt(float(variance)) / abs(float(whole)) if variance is not None else 0.0
    ends = sorted((at(end), end) for end in (low, high) if end is not None)
    two = len(ends) == 2
    inside = (ends[0][0], ends[1][0]) if two else (0.0, ends[0][0])
    return WearRule(
        inside=inside,
        ends=tuple(ends),
        new=None if limit.new is None else (at(limit.new), limit.new),
        guards=tuple((place - width, place + width) for place, _ in ends) if width else (),
        ticks=tuple(map(at, values)),
        faint=tuple(map(at, faint)),
        judged=None if judged is None else at(judged),
    )


def _one_sided(
    limit: Fraction, new: Fraction | None, best: Fraction | None, *, falls: bool
) -> tuple[Fraction, Fraction]:
    """The sizes at 0 and 1. Without a new size on the good side the best reading stands for it, else a tenth of the limit."""
    good = [v for v in (new, best) if v is not None and (v > limit if falls else v < limit)]
    start = new if new in good else good[0] if good else None
    if start is None:
        tenth = abs(limit) / 10 or Fraction(1)
        start = limit + tenth if falls else limit - tenth
    return _line(start, NEW_AT, limit, LIMIT_AT)


def _line(first: Fraction, at_first: Fraction, second: Fraction, at_second: Fraction) -> tuple[Fraction, Fraction]:
    """The sizes at 0 and 1 of the scale on which two sizes stand at two places."""
    per_place = (second - first) / (at_second - at_first)
    zero = first - at_first * per_place
    return zero, zero + per_place
