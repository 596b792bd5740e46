"""The strip chart of bar-to-bar readings in a report: drawn, and in figures for the text.

Made from the readings of the report itself. Only a result that says something of its bars has one, so that a report
issued before there were strip charts prints as it was.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from store.reports.contents import Result
from store.rules import bars, quantities
from store.rules.statistic import median

FEWEST, LEVELS = 3, 9
WIDTH_MM, HEIGHT_MM = 142.0, 9.6
_MIDDLE, _REACH, _THICKEST = 5.0, 4.2, 2.2
_INK, _FAINT, _LOUD = "#1a1a1a", "#9e9e9e", "#a4161a"


@dataclass(frozen=True, slots=True)
class Strip:
    """Deviations from the median in per cent by bar, from bar `first` to `last`; `limit` in per cent, None without one."""

    first: int
    last: int
    deviations: dict[int, Fraction]
    limit: Fraction | None


def of(result: Result) -> Strip | None:
    """The strip chart of a result, None where it has none."""
    if result.statistic != "deviation" or not result.remarks:
        return None
    taken = [r for r in result.readings if r.value is not None and r.position.isdigit()]
    if len(taken) < FEWEST:
        return None
    sizes = {int(r.position): quantities.convert(Fraction(r.value or 0), r.unit, taken[0].unit) for r in taken}
    numbers = sorted(sizes)
    middle = median(list(sizes.values()))
    if middle <= 0:
        return None
    deviations = {n: (sizes[n] - middle) / middle * 100 for n in numbers}
    high = result.limit.high if result.limit else None
    return Strip(numbers[0], numbers[-1], deviations, None if high is None else Fraction(high))


def figures(strip: Strip) -> str:
    """A figure a bar in tens: 4 even, 0 and 8 the furthest low and high; `.` was not read."""
    heights = dict(zip(strip.deviations, bars.heights(list(strip.deviations.values()), LEVELS), strict=True))
    line = "".join(str(heights[n]) if n in heights else "." for n in range(strip.first, strip.last + 1))
    return " ".join(line[n : n + 10] for n in range(0, len(line), 10))


def svg(strip: Strip) -> str:
    """A stroke a bar up or down from the median; those beyond the limit in the loud ink, the limit dashed."""
    count = strip.last - strip.first + 1
    step = WIDTH_MM / count
    most = max((abs(d) for d in strip.deviations.values()), default=Fraction(0))
    scale = _REACH / float(max(most, strip.limit or 0, Fraction(1, 1000)))
    parts = [f'<path d="M0 {_MIDDLE}H{WIDTH_MM}" stroke="{_INK}" stroke-width="0.14"/>']
    if strip.limit is not None:
        away = float(strip.limit) * scale
        parts += [
            f'<path d="M0 {at:.2f}H{WIDTH_MM}" stroke="{_FAINT}" stroke-width="0.14" stroke-dasharray="0.8 0.8"/>'
            for at in (_MIDDLE - away, _MIDDLE + away)
        ]
    wide = min(_THICKEST, step * 0.7)
    for n, deviation in strip.deviations.items():
        x, high = (n - strip.first + 0.5) * step, float(deviation) * scale
        is_far = strip.limit is not None and abs(deviation) > strip.limit
        ink = _LOUD if is_far else _INK
        high = high if abs(high) > 0.12 else 0.12
        parts.append(f'<path d="M{x:.2f} {_MIDDLE}V{_MIDDLE - high:.2f}" stroke="{ink}" stroke-width="{wide:.2f}"/>')
    size = f'width="{WIDTH_MM}mm" height="{HEIGHT_MM}mm" viewBox="0 0 {WIDTH_MM} {HEIGHT_MM}"'
    return f'<svg xmlns="http://www.w3.org/2000/svg" {size}>{"".join(parts)}</svg>'


def words(strip: Strip, stage: str) -> str:
    """What stands beside the drawing."""
    limit = "" if strip.limit is None else f", dashed the limit of {quantities.plain(strip.limit)} %"
    return f"{stage}, bars {strip.first} to {strip.last} from left to right, deviation from the median{limit}"
