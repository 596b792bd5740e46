"""The two themes, graphite and paper: ink on a ground, one accent (brass) for where the keys go, one loud colour for `out`.

Every colour of text has at least 4.5 : 1 against the grounds that it stands on (WCAG 2.1, 1.4.3); a test computes it.
"""

from __future__ import annotations

from rich.segment import Segment
from rich.style import Style
from textual.color import Color
from textual.filter import LineFilter
from textual.theme import Theme

GRAPHITE = Theme(
    name="graphite",
    dark=True,
    primary="#d9b45b",
    secondary="#9aa3ab",
    accent="#d9b45b",
    foreground="#e4e2dc",
    background="#16191c",
    surface="#16191c",
    panel="#1e2226",
    error="#ff8a73",
    warning="#e9c46a",
    success="#9aa3ab",
    variables={
        "quiet": "#9aa3ab",
        "hairline": "#3c444b",
        "brass": "#d9b45b",
        "brass-ink": "#16191c",
        "loud": "#ff8a73",
        "doubt": "#e9c46a",
        "cell": "#23282d",
        "footer-background": "#1e2226",
        "footer-key-foreground": "#d9b45b",
    },
)
PAPER = Theme(
    name="paper",
    dark=False,
    primary="#7a5a10",
    secondary="#5b6168",
    accent="#7a5a10",
    foreground="#1b1e21",
    background="#f7f5ee",
    surface="#f7f5ee",
    panel="#ebe8dd",
    error="#a11d0a",
    warning="#7a4e00",
    success="#5b6168",
    variables={
        "quiet": "#595f66",
        "hairline": "#c9c4b4",
        "brass": "#7a5a10",
        "brass-ink": "#f7f5ee",
        "loud": "#a11d0a",
        "doubt": "#7a4e00",
        "cell": "#ebe8dd",
        "footer-background": "#ebe8dd",
        "footer-key-foreground": "#7a5a10",
    },
)
THEMES = {"graphite": GRAPHITE, "paper": PAPER}


class Uncoloured(LineFilter):
    """No colour at all, as NO_COLOR asks: what stands on brass is reversed, what is quiet is faint, the rest as it is."""

    def __init__(self) -> None:
        super().__init__()
        themes = THEMES.values()
        self.brass = {Color.parse(theme.variables["brass"]).rich_color.triplet for theme in themes}
        self.faint = {
            Color.parse(theme.variables[tone]).rich_color.triplet for theme in themes for tone in ("quiet", "hairline")
        }
        self.known: dict[Style, Style] = {}

    def apply(self, segments: list[Segment], background: Color) -> list[Segment]:
        """The same text in no colour."""
        return [Segment(text, style and self._plain(style), control) for text, style, control in segments]

    def _plain(self, style: Style) -> Style:
        plain = self.known.get(style)
        if plain is None:
            is_here = style.bgcolor is not None and style.bgcolor.triplet in self.brass
            is_faint = style.color is not None and style.color.triplet in self.faint and not style.bold
            plain = Style(
                bold=style.bold, italic=style.italic, underline=style.underline, reverse=is_here or style.reverse,
                dim=is_faint and not is_here, meta=style.meta,
            )  # fmt: skip
            self.known[style] = plain
        return plain


def contrast(one: str, other: str) -> float:
    """The contrast ratio of two colours `#rrggbb`, 1 to 21 (WCAG 2.1, relative luminance)."""
    a, b = sorted((_luminance(one), _luminance(other)), reverse=True)
    return (a + 0.05) / (b + 0.05)


def _luminance(colour: str) -> float:
    def linear(part: str) -> float:
        value = int(part, 16) / 255
        return value / 12.92 if value <= 0.04045 else ((value + 0.055) / 1.055) ** 2.4

    red, green, blue = (linear(colour[n : n + 2]) for n in (1, 3, 5))
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue
