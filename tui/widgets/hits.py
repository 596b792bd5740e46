"""What a search found: two lines a hit, where it stands and its text with the found words lit; drawn by the line."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from rich.cells import cell_len
from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.geometry import Size
from textual.message import Message
from textual.scroll_view import ScrollView
from textual.strip import Strip

from tui.widgets.listing import fitted, flat

LINES = 2
BEFORE_FIRST = 24


@dataclass(frozen=True, slots=True)
class HitLine:
    """One hit as it is drawn: `where` its head, `text` with `marks` (start, end) of what was found, `value` what it opens."""

    where: str
    text: str
    marks: tuple[tuple[int, int], ...]
    value: Any = None


class Hits(ScrollView, can_focus=False):
    """The list of hits; the keys stay with the line that is searched from. Posts Chosen on a second click or by `choose`."""

    DEFAULT_CSS = "Hits { height: 1fr; scrollbar-size: 1 1; }"

    class Chosen(Message):
        """A hit was chosen."""

        def __init__(self, hit: HitLine) -> None:
            self.hit = hit
            super().__init__()

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.hits: tuple[HitLine, ...] = ()
        self.at = 0
        self.empty = ""

    def show(self, hits: Sequence[HitLine], empty: str) -> None:
        """Show these hits, the cursor on the first; `empty` is said where there are none."""
        self.hits, self.empty, self.at = tuple(hits), empty, 0
        self.virtual_size = Size(0, LINES * len(self.hits))
        self.scroll_to(y=0, animate=False, immediate=True)
        self.refresh()

    def press(self, key: str) -> bool:
        """Take a moving key; returns whether it was one."""
        page = max(1, self.size.height // LINES - 1)
        by = {"up": -1, "down": 1, "pageup": -page, "pagedown": page}.get(key)
        if by is None:
            return False
        self.at = max(0, min(len(self.hits) - 1, self.at + by))
        top, room = self.scroll_offset.y, self.size.height
        if LINES * self.at < top:
            self.scroll_to(y=LINES * self.at, animate=False, immediate=True)
        elif LINES * (self.at + 1) > top + room:
            self.scroll_to(y=LINES * (self.at + 1) - room, animate=False, immediate=True)
        self.refresh()
        return True

    def choose(self) -> None:
        """Choose the hit under the cursor."""
        if self.hits:
            self.post_message(self.Chosen(self.hits[self.at]))

    def on_click(self, event: events.Click) -> None:
        """The first click on a hit moves there, one on the hit under the cursor chooses it."""
        offset = event.get_content_offset(self)
        if offset is None:
            return
        hit = (offset.y + self.scroll_offset.y) // LINES
        if hit < len(self.hits):
            if hit == self.at:
                self.choose()
            self.at = hit
            self.refresh()

    def render_line(self, y: int) -> Strip:
        """The head or the text of the hit that lies at this line."""
        tones, width = self.app.theme_variables, self.size.width
        ground = Style(color=tones["foreground"], bgcolor=tones["background"])
        quiet = ground + Style(color=tones["quiet"])
        line = y + self.scroll_offset.y
        if not self.hits:
            return Strip([Segment(f" {self.empty}" if y == 1 else "", quiet)]).adjust_cell_length(width, ground)
        if line >= LINES * len(self.hits):
            return Strip.blank(width, ground)
        hit, is_here = self.hits[line // LINES], line // LINES == self.at
        here = Style(color=tones["brass-ink"], bgcolor=tones["brass"], bold=True)
        if line % LINES == 0:
            head = (">" if is_here else " ") + hit.where
            return Strip([Segment(fitted(head, width), here if is_here else quiet)])
        lit = ground + Style(color=tones["brass"], bold=True, underline=True)
        parts = [(" ", ground), *((text, lit if is_lit else ground) for text, is_lit in _parts(hit, width - 2))]
        return Strip([Segment(text, style) for text, style in parts]).adjust_cell_length(width, ground)


def _parts(hit: HitLine, width: int) -> list[tuple[str, bool]]:
    """The text on one line, lit where it was found; begun later where the first find would lie beyond the width."""
    start = 0
    if hit.marks and cell_len(hit.text[: hit.marks[0][1]]) > width - 2:
        start = max(0, hit.marks[0][0] - BEFORE_FIRST)
    made: list[tuple[str, bool]] = [("…", False)] if start else []
    at = start
    for first, last in hit.marks:
        made += [(flat(hit.text[at:first]), False), (flat(hit.text[first:last]), True)]
        at = last
    made.append((flat(hit.text[at:]), False))
    return made
