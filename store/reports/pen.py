"""How text is made ready to be set: printable, able to break, and broken into lines where its width is known."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

from store.reports.characters import breakable, one_line
from store.reports.line_breaks import broken

PT_MM = 25.4 / 72
LEADING_MM = 1.7 * PT_MM
"""Space between two lines; a line itself is as high as its size. The template says the same."""

MOST = 1_000
"""Names, figures and remarks are printed up to this many characters; all of them stand in the attached JSON."""

Seen = Callable[[str], str]


@dataclass(frozen=True, slots=True)
class Block:
    """Text as it is set, and its height; None where only the typesetter can tell."""

    text: str
    height_mm: float | None


@dataclass(frozen=True, slots=True)
class Pen:
    """Writes the texts of one report. `seen` makes text printable."""

    seen: Seen

    def block(self, text: str, mm: float, size_pt: float, *, bold: bool = False) -> Block:
        """Text in a place `mm` wide."""
        shown = self.seen(shortened(text))
        lines = broken(shown, mm, size_pt, bold=bold)
        if lines is None:
            return Block(loosened(shown, mm), None)
        return Block(lines, tall(lines.count("\n") + 1, size_pt))

    def whole(self, text: str, mm: float) -> str:
        """Text of any length in a place `mm` wide; the typesetter breaks it."""
        return loosened(self.seen(text), mm)

    def line(self, text: str, mm: float) -> str:
        """Text on one line as wide as the page, as far as that goes."""
        return self.whole(one_line(text), mm)


def shortened(text: str) -> str:
    """Text of at most MOST characters; what is left out is counted."""
    if len(text) <= MOST:
        return text
    return f"{text[:MOST]} ... ({len(text) - MOST:,} more characters in the attached JSON)"


def loosened(text: str, mm: float) -> str:
    """Text that can break inside of words which may be wider than `mm`."""
    return breakable(text, max(4, int(mm / 2.0)))


def tall(lines: int, size_pt: float) -> float:
    """The height of so many lines, in millimeters."""
    return lines * size_pt * PT_MM + max(0, lines - 1) * LEADING_MM


def stacked(*heights: float | None) -> float | None:
    """The height of paragraphs' lines one under the other; nothing (0) takes no leading."""
    total = 0.0
    for height in heights:
        if height is None:
            return None
        if height:
            total += height + (LEADING_MM if total else 0.0)
    return total


def highest(*heights: float | None) -> float | None:
    """The height of a row of cells."""
    known = [height for height in heights if height is not None]
    return max(known, default=0.0) if len(known) == len(heights) else None
