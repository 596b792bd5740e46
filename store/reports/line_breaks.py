"""Lines of plain text broken to a width before they are set, so that the height of a row is known without a trial setting.

Only printable ASCII is measured; other text is left to the typesetter, which measures what it must.
"""

from __future__ import annotations

from functools import lru_cache
from importlib import resources

_PT_MM = 25.4 / 72
_SURE = 1.01
"""Kerning may widen a line by a hair; one part in a hundred is kept free."""


def broken(text: str, mm: float, size_pt: float, *, bold: bool = False) -> str | None:
    """`text` with "\\n" wherever a line of `mm` is full; None where it holds characters whose width is not known here."""
    if not text.isascii() or not text.replace("\n", " ").isprintable():
        return None
    most = mm / (_PT_MM * size_pt * _SURE) * 1000
    widths = _advances()[bold]
    return "\n".join(_wrapped(line, most, widths) for line in text.split("\n"))


def width_mm(text: str, size_pt: float, *, bold: bool = False) -> float:
    """The width of a line of printable ASCII."""
    widths = _advances()[bold]
    return sum(widths[c] for c in text) / 1000 * size_pt * _PT_MM


def _wrapped(line: str, most: float, widths: dict[str, int]) -> str:
    if sum(widths[c] for c in line) <= most:
        return line
    space = widths[" "]
    made: list[str] = []
    full, used = "", 0.0
    for word in line.split(" "):
        wide = sum(widths[c] for c in word)
        if full and used + space + wide > most:
            made.append(full)
            full, used = "", 0.0
        if wide > most:
            *whole, full = _cut(f"{full} {word}" if full else word, most, widths)
            made += whole
            used = sum(widths[c] for c in full)
        else:
            used += wide + (space if full else 0)
            full = f"{full} {word}" if full else word
    return "\n".join([*made, full])


def _cut(word: str, most: float, widths: dict[str, int]) -> list[str]:
    """A word that is longer than a line, cut to lines."""
    made, full, used = [], "", 0.0
    for c in word:
        if full and used + widths[c] > most:
            made.append(full)
            full, used = "", 0.0
        full += c
        used += widths[c]
    return [*made, full]


@lru_cache(maxsize=1)
def _advances() -> tuple[dict[str, int], dict[str, int]]:
    """Width of each printable ASCII character in thousandths of the size: regular, then semibold."""
    text = resources.files("store.reports").joinpath("fonts", "advances.txt").read_text("ascii")
    regular, bold = (
        {chr(32 + n): int(wide) for n, wide in enumerate(line.split())} for line in text.splitlines()
    )  # fmt: skip
    return regular, bold
