"""Charts in characters, without colour: the curve of returns with its band, a Pareto, a dot on its interval."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Protocol

LINE, CURVE, BAND = "█", "━", "░"


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


def curve_chart(
    steps: Sequence[Point], at_risk: Sequence[tuple[int, int]], longest: float, width: int, height: int
) -> list[str]:
    """The share returned over the days since release, with its band, and the number at risk below; nothing without steps.

    The days run to `longest`, the marks below stand at the days of `at_risk`.
    """
    if not steps:
        return []
    wide, longest = max(20, width - 7), max(longest, 1.0)
    each = _row(max(1 - s.low for s in steps), height - 1)
    columns = [_at(steps, longest * (column + 0.5) / wide) for column in range(wide)]
    lines = []
    for row in range(height - 1, -1, -1):
        low, high = each * (row - 0.5), each * (row + 0.5)
        cells = [
            CURVE if low <= share < high else BAND if band_low < high and band_high >= low and band_high > 0 else " "
            for share, band_low, band_high in columns
        ]
        lines.append(f"{each * row:5.{0 if each >= 0.01 else 1}%} │{''.join(cells)}")
    lines.append(f"      └{'─' * wide}")
    marks = [(int(day * wide / longest), day, n) for day, n in at_risk if day * wide / longest <= wide - 4]
    lines.append(_marks("days", [(m, str(day)) for m, day, _ in marks], wide))
    lines.append(_marks("risk", [(m, str(n)) for m, _, n in marks], wide))
    return lines


def _row(top: float, height: int) -> float:
    """The share from one row to the next, a round one, so that the highest finds room; a row stands for what is nearest."""
    return next(
        (
            share
            for share in (0.005, 0.01, 0.02, 0.03, 0.04, 0.05, 0.1, 0.15, 0.2, 0.25, 0.5)
            if share * height >= min(1.0, top)
        ),
        1.0,
    )


def _at(steps: Sequence[Point], day: float) -> tuple[float, float, float]:
    """The share returned by a day, and its limits."""
    last = next((s for s in reversed(steps) if s.days <= day), None)
    return (0.0, 0.0, 0.0) if last is None else (1 - last.stays, 1 - last.high, 1 - last.low)


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
