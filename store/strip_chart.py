"""The strip chart of bar-to-bar readings: from a row of a sheet, as a line of characters and as a sentence."""

from __future__ import annotations

from fractions import Fraction

from store.errors import Refused
from store.rules import bars, quantities
from store.rules.bars import Chart
from store.sheets import SheetRow

CHARACTERISTICS = ("bar-to-bar", "bar-to-bar-resistance", "bar-to-bar-growler-current")
_BLOCKS = "▁▂▃▄▅▆▇█"
_TENS = 10


def of_row(row: SheetRow, model_bars: int | None, poles: int | None) -> Chart | None:
    """The chart of a row; None where it is none of bars or too few are read. Raises Refused for readings that make none."""
    if row.characteristic.name not in CHARACTERISTICS:
        return None
    read = sorted((int(at), size) for at, size in row.sizes(row.characteristic.unit).items() if at.isdigit())
    if len(read) < 3:
        return None
    limit = None if row.limit is None else row.limit.limit.high
    return bars.chart([size for _, size in read], limit, model_bars, poles, [n for n, _ in read])


def said(row: SheetRow, model_bars: int | None, poles: int | None) -> str:
    """Pattern, median and the furthest bar in a sentence; what is wrong with the readings where they make no chart; or ""."""
    try:
        chart = of_row(row, model_bars, poles)
    except Refused as fault:
        return f"{row.characteristic.label}: {fault}"
    return "" if chart is None else sentence(chart, row.characteristic.unit)


def sentence(chart: Chart, unit: str) -> str:
    """Pattern, median and the furthest bar."""
    most, at = max((abs(d), -n) for n, d in zip(chart.numbers, chart.deviations, strict=True))
    middle = quantities.plain(Fraction(quantities.rounded(chart.middle, 4)))
    return f"{chart.pattern}; median {middle} {unit}, furthest bar {-at}, {quantities.rounded(most, 1)} %"


def strip(chart: Chart) -> str:
    """The chart in one line, a mark a bar from the first read to the last, in tens; a bar that was not read is a gap."""
    marks = dict(zip(chart.numbers, bars.heights(chart.deviations), strict=True))
    first, last = chart.numbers[0], chart.numbers[-1]
    line = [_BLOCKS[marks[n]] if n in marks else "·" for n in range(first, last + 1)]
    return " ".join("".join(line[n : n + _TENS]) for n in range(0, len(line), _TENS))
