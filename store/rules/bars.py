"""The bar-to-bar test: every bar against the median, the pattern named, and a strip chart round the commutator.

The median is taken because one dead coil drags a mean. A limit in per cent is the shop's own; none is shipped.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction
from math import floor

from store.errors import Refused
from store.rules.limits import median


class Pattern(StrEnum):
    """What the readings round the commutator look like."""

    even = "even"
    short = "short suspected"
    open_ = "open suspected"
    riser = "riser joint suspected"
    period = "equalised winding"
    uneven = "uneven"


@dataclass(frozen=True, slots=True)
class Bars:
    """The readings round the commutator, bar 1 first. `deviations` in per cent of the median; `beyond` are bar numbers."""

    median: Fraction
    deviations: tuple[Fraction, ...]
    beyond: tuple[int, ...]
    pattern: Pattern
    says: str
    period: int | None = None

    def strip(self, rows: int = 5) -> tuple[tuple[int, ...], Fraction]:
        """The strip chart: for each bar its row from `rows` at the top to -rows at the bottom, and the per cent of a row.

        The scale is taken from the greatest deviation; all at nought where there is none.
        """
        most = max((abs(d) for d in self.deviations), default=Fraction(0))
        if most == 0:
            return tuple(0 for _ in self.deviations), Fraction(0)
        return tuple(_nearest(d * rows / most) for d in self.deviations), most / rows


def analyse(
    readings: Sequence[Fraction], *, limit_per_cent: Fraction | None, bars: int | None = None, poles: int | None = None
) -> Bars:
    """Look at one reading a bar pair, in order round the commutator. Raises Refused: none, too many, all zero, below zero.

    `limit_per_cent` None: nothing is beyond, and the pattern is `even`.
    """
    if not readings:
        raise Refused("no bar is read")
    if bars is not None and len(readings) > bars:
        raise Refused(f"{len(readings)} bars are read; this model's commutator has {bars}")
    if any(r < 0 for r in readings):
        raise Refused("a bar-to-bar reading is not below zero; turn the leads")
    middle = median(readings)
    if middle == 0:
        raise Refused("half the bars read zero: no current flows, or the leads are off")
    deviations = tuple((r - middle) * 100 / middle for r in readings)
    if limit_per_cent is None:
        return Bars(middle, deviations, (), Pattern.even, "no limit in per cent is entered; nothing is judged")
    beyond = tuple(n for n, d in enumerate(deviations, 1) if abs(d) > limit_per_cent)
    if not beyond:
        return Bars(
            middle,
            deviations,
            (),
            Pattern.even,
            f"all {len(readings)} within {float(limit_per_cent):g} % of the median",
        )
    is_whole = bars is None or len(readings) == bars
    step = _period(readings, poles, limit_per_cent) if is_whole else None
    if step is not None:
        says = f"repeats every {step} bars (bars over pole pairs): an equalised winding; compare like with like"
        return Bars(middle, deviations, beyond, Pattern.period, says, step)
    pattern, says = _named(deviations, beyond, limit_per_cent)
    return Bars(middle, deviations, beyond, pattern, f"{says} ({_listed(beyond)})")


def _named(deviations: Sequence[Fraction], beyond: Sequence[int], limit: Fraction) -> tuple[Pattern, str]:
    """Low: a short. High with its neighbours low: an open coil of a lap winding. Pairs a little high: a riser joint."""
    n = len(deviations)
    low = [b for b in beyond if deviations[b - 1] < 0]
    high = [b for b in beyond if deviations[b - 1] > 0]
    for b in high:
        neighbours = (deviations[(b - 2) % n], deviations[b % n])
        if n > 2 and all(d < 0 for d in neighbours) and min(neighbours) < -limit / 4:
            return Pattern.open_, "one high, its neighbours low: an open coil suspected there (lap winding)"
    if low and not high:
        where = "one bar is low" if len(low) == 1 else f"{len(low)} bars are low"
        return Pattern.short, f"{where}: a short suspected there"
    pairs = {b for b in high if b % n + 1 in high or (b - 2) % n + 1 in high}
    if high and not low and pairs == set(high):
        return Pattern.riser, "neighbouring bars high in pairs: the riser joint between them suspected"
    return Pattern.uneven, "no single pattern"


def _period(readings: Sequence[Fraction], poles: int | None, limit: Fraction) -> int | None:
    """Bars over pole pairs, where every bar is within the limit of the mean of its like and the likes differ by more."""
    if not poles or poles < 4 or len(readings) % (poles // 2):
        return None
    step = len(readings) // (poles // 2)
    if step < 2:
        return None
    likes = [readings[k::step] for k in range(step)]
    middles = [median(like) for like in likes]
    close = all(abs(r - m) * 100 <= limit * m for like, m in zip(likes, middles, strict=True) for r in like)
    return step if close and (max(middles) - min(middles)) * 100 > limit * min(middles) else None


def _listed(bars: Sequence[int]) -> str:
    return f"bar{'s' if len(bars) > 1 else ''} " + ", ".join(map(str, bars))


def _nearest(value: Fraction) -> int:
    return floor(value + Fraction(1, 2)) if value >= 0 else -floor(-value + Fraction(1, 2))
