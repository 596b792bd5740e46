"""A list of lines under column heads, drawn by the line: flat in cost however long it is, numbers to the right."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from rich.cells import cell_len, set_cell_size
from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.geometry import Size
from textual.message import Message
from textual.scroll_view import ScrollView
from textual.strip import Strip


@dataclass(frozen=True, slots=True)
class Column:
    """A column: its head, its width (0: what is left), whether it stands to the right or is quiet.

    `from_width`: shown only where the list is at least so wide.
    """

    head: str
    width: int
    right: bool = False
    quiet: bool = False
    from_width: int = 0


@dataclass(frozen=True, slots=True)
class Item:
    """A line: its cells, a tone for the whole line (loud, doubt, quiet or none), and what it stands for."""

    cells: tuple[str, ...]
    value: Any = None
    tone: str = ""
    heading: bool = False


class Listing(ScrollView, can_focus=True):
    """The list. Posts Chosen on Enter or a second click, Moved when the cursor stands elsewhere."""

    DEFAULT_CSS = "Listing { height: 1fr; scrollbar-size: 1 1; }"

    class Chosen(Message):
        """A line was chosen."""

        def __init__(self, listing: Listing, item: Item) -> None:
            self.listing, self.item = listing, item
            super().__init__()

        @property
        def control(self) -> Listing:
            """The list that it came from."""
            return self.listing

    class Moved(Message):
        """The cursor stands on another line."""

        def __init__(self, listing: Listing, item: Item) -> None:
            self.listing, self.item = listing, item
            super().__init__()

        @property
        def control(self) -> Listing:
            """The list that it came from."""
            return self.listing

    def __init__(
        self,
        columns: Sequence[Column],
        *,
        empty: str = "",
        id: str | None = None,  # noqa: A002
        led: bool = False,
    ) -> None:
        """`led`: the keys stay with a line to type on, which passes moving keys here; the list takes no focus."""
        super().__init__(id=id)
        self.columns, self.empty, self.is_led = tuple(columns), empty, led
        self.can_focus = not led
        self.items: list[Item] = []
        self.at = 0
        self.waiting = False

    def show(self, items: Sequence[Item]) -> None:
        """Show these lines; the cursor stays with what it stood on, where that is still there."""
        before = self.item.value if self.item else None
        self.items = list(items)
        values = [item.value for item in self.items]
        self.at = values.index(before) if before is not None and before in values else 0
        self.waiting = False
        self._skip_headings(1)
        self.virtual_size = Size(0, len(self.items) + 1)
        self._follow()
        self.refresh()
        if self.item:
            self.post_message(self.Moved(self, self.item))

    @property
    def item(self) -> Item | None:
        """The line under the cursor."""
        return self.items[self.at] if 0 <= self.at < len(self.items) and not self.items[self.at].heading else None

    def move(self, by: int) -> None:
        """Move the cursor by so many lines."""
        if not self.items:
            return
        self.at = max(0, min(len(self.items) - 1, self.at + by))
        self._skip_headings(1 if by >= 0 else -1)
        self._follow()
        self.refresh()
        if self.item:
            self.post_message(self.Moved(self, self.item))

    def choose(self) -> None:
        """Choose the line under the cursor."""
        if self.item:
            self.post_message(self.Chosen(self, self.item))

    def press(self, key: str) -> bool:
        """Take a moving key or Enter; returns whether it was one."""
        page = max(1, self.size.height - 2)
        by = {
            "up": -1,
            "down": 1,
            "pageup": -page,
            "pagedown": page,
            "home": -len(self.items),
            "end": len(self.items),
        }.get(key)
        if by is not None:
            self.move(by)
        elif key == "enter":
            self.choose()
        return by is not None or key == "enter"

    def on_key(self, event: events.Key) -> None:
        """Arrows, pages and Enter."""
        if self.press(event.key):
            event.stop()
            event.prevent_default()

    def on_click(self, event: events.Click) -> None:
        """The first click on a line moves there, one on the line under the cursor chooses it."""
        offset = event.get_content_offset(self)
        if offset is None or offset.y == 0:
            return
        line = offset.y - 1 + self.scroll_offset.y
        if 0 <= line < len(self.items):
            if line == self.at:
                self.choose()
            else:
                self.move(line - self.at)

    def _skip_headings(self, step: int) -> None:
        while 0 <= self.at < len(self.items) and self.items[self.at].heading:
            self.at += step
        if not 0 <= self.at < len(self.items):
            self.at = max(0, min(len(self.items) - 1, self.at))

    def _follow(self) -> None:
        room = self.size.height - 1
        if room <= 0:
            return
        top = self.scroll_offset.y
        if self.at < top:
            self.scroll_to(
                y=max(0, self.at - (1 if self.at and self.items[self.at - 1].heading else 0)),
                animate=False,
                immediate=True,
            )
        elif self.at >= top + room:
            self.scroll_to(y=self.at - room + 1, animate=False, immediate=True)

    def widths(self) -> list[int]:
        """The columns' widths at this size: one of width 0 shares what is left, one that has no room yet has none."""
        shown = [c for c in self.columns if self.size.width >= c.from_width]
        fixed = sum(c.width + 1 for c in shown if c.width)
        flexible = sum(not c.width for c in shown)
        left = max(4, (self.size.width - fixed) // max(1, flexible) - 1)
        return [(c.width or left) if c in shown else 0 for c in self.columns]

    def render_line(self, y: int) -> Strip:
        """The heads on the first line, then the lines from where the list is scrolled to."""
        tones, width = self.app.theme_variables, self.size.width
        ground = Style(color=tones["foreground"], bgcolor=tones["background"])
        quiet = ground + Style(color=tones["quiet"])
        if y == 0:
            return self._line([c.head for c in self.columns], [quiet] * len(self.columns), width, ground)
        line = y - 1 + self.scroll_offset.y
        if not self.items and y == 2 and not self.waiting:
            return Strip([Segment(f" {self.empty}", quiet)]).adjust_cell_length(width, ground)
        if line >= len(self.items):
            return Strip.blank(width, ground)
        item = self.items[line]
        if item.heading:
            text = f"{flat(item.cells[0])} "
            rest = Segment("─" * max(0, width - cell_len(text)), ground + Style(color=tones["hairline"]))
            return Strip([Segment(text, ground + Style(bold=True)), rest]).adjust_cell_length(width, ground)
        if line == self.at:
            here = Style(color=tones["brass-ink"], bgcolor=tones["brass"], bold=True)
            if not self.has_focus and not self.is_led:
                here = ground + Style(color=tones["brass"], bold=True)
            return self._line(item.cells, [here] * len(self.columns), width, here)
        tone = ground + Style(color=tones[item.tone], bold=item.tone == "loud") if item.tone else ground
        styles = [quiet if column.quiet and not item.tone else tone for column in self.columns]
        return self._line(item.cells, styles, width, ground)

    def _line(self, cells: Sequence[str], styles: Sequence[Style], width: int, ground: Style) -> Strip:
        segments = []
        for text, column, room, style in zip(cells, self.columns, self.widths(), styles, strict=False):
            if not room:
                continue
            segments.append(Segment(fitted(text, room, right=column.right) + " ", style))
        return Strip(segments).adjust_cell_length(width, ground)


def flat(text: str) -> str:
    """Text on one line without control characters."""
    return "".join(c if c.isprintable() else " " for c in text)


def fitted(text: str, width: int, *, right: bool = False) -> str:
    """Text in just so many columns of the terminal, cut with an ellipsis."""
    shown = flat(text)
    length = cell_len(shown)
    if length > width:
        return set_cell_size(shown, width - 1) + "…" if width > 1 else set_cell_size(shown, width)
    return " " * (width - length) + shown if right else shown + " " * (width - length)
