"""Charts in characters, without colour: the curve of returns with its band, a Pareto, a dot on its interval."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Protocol

LINE, BAND = "█", "░"


class Point(Protocol):
    """A step of a curve of those that stay."""

    @property
    def days(self) -> float: ...
    @property
    def stays(self) -> float: ...
    @property
    def low(self) -> float: ...
    @property
    def high(self) -> float: ...
    @property
    def at_risk(self) -> int: ...


def curve_chart(steps: Sequence[Point], width: int, height: int) -> list[str]:
    """The share returned over the days since release, with its band, and the number at risk below; nothing without steps."""
    if not steps:
        return []
    wide, longest = max(20, width - 7), max(steps[-1].days, 1.0)
    top = min(1.0, max(0.05, 1.1 * max(1 - s.low for s in steps)))
    columns: list[tuple[float, float, float, int]] = []
    for column in range(wide):
        day = longest * (column + 0.5) / wide
        past = [s for s in steps if s.days <= day]
        last = past[-1] if past else None
        at_risk = next((s.at_risk for s in steps if s.days >= day), steps[-1].at_risk)
        columns.append((1 - last.stays, 1 - last.high, 1 - last.low, at_risk) if last else (0.0, 0.0, 0.0, at_risk))
    lines = []
    for row in range(height, 0, -1):
        low, high = top * (row - 1) / height, top * row / height
        cells = [
            LINE if low <= share < high else BAND if band_low < high and band_high >= low and band_high > 0 else " "
            for share, band_low, band_high, _ in columns
        ]
        lines.append(f"{high:5.0%} │{''.join(cells)}")
    lines.append(f"      └{'─' * wide}")
    marks = [0, wide // 3, 2 * wide // 3, wide - 6]
    lines.append(_marks("days", [(m, f"{longest * m / wide:.0f}") for m in marks], wide))
    lines.append(_marks("risk", [(m, str(columns[m][3])) for m in marks], wide))
    return lines


def _marks(head: str, marks: Sequence[tuple[int, str]], wide: int) -> str:
    line = [" "] * (wide + 7)
    line[: len(head)] = head
    for at, text in marks:
        line[7 + at : 7 + at + len(text)] = text
    return "".join(line).rstrip()


def bar(share: float, width: int) -> str:
    """A share of the width, for a Pareto."""
    return LINE * round(share * width)


def dot(at: float | None, low: float | None, high: float | None, top: float, width: int) -> str:
    """A dot on its interval between 0 and `top`; empty where there is none."""
    if at is None or low is None or high is None or top <= 0:
        return " " * width

    def column(value: float) -> int:
        return min(width - 1, max(0, round(value / top * (width - 1))))

    cells = [" "] * width
    for n in range(column(low), column(high) + 1):
        cells[n] = "─"
    cells[column(at)] = "●"
    return "".join(cells)
