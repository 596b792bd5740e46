"""Bar-to-bar readings round a commutator: deviations from the median, and the pattern that they make.

The median, not the mean: one dead coil drags a mean. The limit in per cent is the shop's own.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from store.errors import Refused
from store.rules.statistic import median


@dataclass(frozen=True, slots=True)
class Chart:
    """Deviations in per cent of the median, one a reading; `numbers` are the bars read, `far` those beyond the limit.

    `pattern` is in words; without a limit there is none, and nothing is far.
    """

    middle: Fraction
    numbers: tuple[int, ...]
    deviations: tuple[Fraction, ...]
    far: tuple[int, ...]
    pattern: str


def chart(
    values: Sequence[Fraction], limit: Fraction | None, bars: int | None = None, poles: int | None = None,
    numbers: Sequence[int] | None = None,
) -> Chart:  # fmt: skip
    """The chart of readings in the order of the bars, which are `numbers` (from bar 1 where none are said).

    `limit` in per cent of the median, above zero. Raises Refused: more readings than the model has bars or a bar past
    them, fewer than three, a median of zero, a negative reading.
    """
    read = tuple(range(1, len(values) + 1) if numbers is None else numbers)
    if bars is not None and len(values) > bars:
        raise Refused(f"{len(values)} readings, and this model's commutator has {bars} bars")
    if bars is not None and read and max(read) > bars:
        raise Refused(f"bar {max(read)}: this model's commutator has {bars} bars")
    if len(values) < 3:
        raise Refused("three bars at least make a pattern")
    if any(value < 0 for value in values):
        raise Refused("a drop or a resistance is not below zero")
    if limit is not None and limit <= 0:
        raise Refused("the limit in per cent is above zero")
    middle = median(values)
    if middle == 0:
        raise Refused("the middle reading is zero; is the supply on and the meter in its range?")
    deviations = tuple((value - middle) / middle * 100 for value in values)
    if limit is None:
        return Chart(middle, read, deviations, (), "no limit is entered, so no pattern is named")
    by_bar = dict(zip(read, deviations, strict=True))
    far = tuple(n for n in read if abs(by_bar[n]) > limit)
    return Chart(middle, read, deviations, far, _pattern(by_bar, far, limit, bars, poles))


def _pattern(
    by_bar: Mapping[int, Fraction], far: Sequence[int], limit: Fraction, bars: int | None, poles: int | None
) -> str:
    if not far:
        return "even all round" if bars is None or len(by_bar) == bars else f"even, {len(by_bar)} of {bars} bars read"
    period = _period(by_bar, bars, poles, limit)
    if period:
        return f"repeats every {period} bars: equalised winding, compare like with like"
    last = len(by_bar) if bars is None else bars
    low = [n for n in far if by_bar[n] < 0]
    high = [n for n in far if by_bar[n] > 0]
    if len(low) == 1 and not high:
        return f"one low at {low[0]}: a short is suspected there"
    if len(high) == 1 and len(low) == 2 and set(low) == {_beside(high[0], -1, last), _beside(high[0], 1, last)}:
        return f"one high at {high[0]} with its neighbours low: an open coil (lap winding)"
    pairs = [] if low else _pairs(high, last)
    if pairs:
        named = ", ".join(f"{one} and {other}" for one, other in pairs)
        return f"a pair high at {named}: a riser joint" if len(pairs) == 1 else f"pairs high at {named}: riser joints"
    parts = []
    if low:
        parts.append(f"low at {_listed(low)}")
    if high:
        parts.append(f"high at {_listed(high)}")
    return f"{' and '.join(parts)}: no pattern that is known"


def _beside(bar: int, step: int, last: int) -> int:
    """The bar beside another one, round the commutator."""
    return (bar - 1 + step) % last + 1


def _pairs(high: Sequence[int], last: int) -> list[tuple[int, int]]:
    """The bars as pairs of neighbours, each pair on its own; empty where they are not."""
    left, made = set(high), []
    for n in high:
        beside = [b for b in (_beside(n, -1, last), _beside(n, 1, last)) if b in set(high)]
        if len(beside) != 1:
            return []
        if n in left:
            left -= {n, beside[0]}
            made.append((min(n, beside[0]), max(n, beside[0])))
    return made


def _period(by_bar: Mapping[int, Fraction], bars: int | None, poles: int | None, limit: Fraction) -> int | None:
    """Bars over pole pairs, where the readings repeat so within a fifth of the limit and are not even."""
    if not bars or not poles or poles < 4 or len(by_bar) != bars or bars % (poles // 2):
        return None
    step = bars // (poles // 2)
    if step < 2 or all(abs(d) <= limit for d in by_bar.values()):
        return None
    repeats = all(abs(d - by_bar[_beside(n, step, bars)]) <= limit / 5 for n, d in by_bar.items())
    return step if repeats else None


def _listed(numbers: Sequence[int]) -> str:
    shown = ", ".join(map(str, numbers[:8]))
    return shown + (f" and {len(numbers) - 8} more" if len(numbers) > 8 else "")


def heights(deviations: Sequence[Fraction], levels: int = 8) -> tuple[int, ...]:
    """A strip chart as a height a bar from 0 to `levels` - 1: the furthest to either side spans it, even is the middle."""
    most = max((abs(d) for d in deviations), default=Fraction(0))
    if most == 0:
        return ((levels - 1) // 2,) * len(deviations)
    return tuple(min(levels - 1, int((d / most + 1) * levels / 2)) for d in deviations)
