"""The reading sheet: one focusable widget that draws every row by the line and owns every key typed into it.

It knows nothing of the record: it is shown rows and faces, says what was submitted, and is told what came of it. Only
the lines that changed are repainted.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import ClassVar

from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.geometry import Region, Size
from textual.message import Message
from textual.scroll_view import ScrollView
from textual.strip import Strip

from store.rules.wear import WearRule
from tui.widgets import wear_rule
from tui.widgets.keying import KEYS, Asking, Cell, Keying, Row, State, Submitted

NAME, LIMIT, CELL, VERDICT = 22, 12, 8, 14
RULE_FROM, RULE = 110, 28
WIDE_NAME, WIDE_LIMIT = 34, 20
VERDICT_WORDS = {"out": "OUT", "in doubt": "in doubt ?", "not comparable": "not comparable"}
TONES = {"out": "loud", "in doubt": "doubt", "not comparable": "doubt"}


@dataclass(frozen=True, slots=True)
class Face:
    """What a row says beside its cells. `group` opens a new component above it; `derived` stands for its cells.

    `short_limit` is shown where `limit` finds no room; `asked` are positions whose reading may be a slip.
    """

    label: str
    limit: str
    verdict: str
    short_limit: str = ""
    group: str = ""
    derived: str = ""
    worst: str = ""
    rule: WearRule | None = None
    asked: frozenset[str] = frozenset()


class ReadingSheet(ScrollView, can_focus=True):
    """The sheet. Posts Typed for every value that is to be written and Moved when the cursor or its text changes."""

    DEFAULT_CSS = "ReadingSheet { height: 1fr; scrollbar-size: 1 1; }"
    COMPONENT_CLASSES: ClassVar[set[str]] = set()

    class Typed(Message):
        """Values for the writer, in the order in which they were typed."""

        def __init__(self, submitted: Sequence[Submitted]) -> None:
            self.submitted = tuple(submitted)
            super().__init__()

    class Moved(Message):
        """The cursor stands elsewhere, or what is being typed has changed."""

    def __init__(self, *, id: str | None = None, turning: frozenset[str] = frozenset()) -> None:  # noqa: A002
        """`turning`: keys that will bring another sheet; from such a key on the others wait for it."""
        super().__init__(id=id)
        self.turning = turning
        self.keying = Keying([])
        self.faces: list[Face] = []
        self.lines: list[tuple[str, int]] = []
        self.line_of: list[int] = []
        self.painted = 0
        self.is_held, self.is_turning = True, False
        self.early: list[Callable[[], list[Submitted]]] = []

    def show(
        self,
        rows: list[Row],
        faces: Sequence[Face],
        where: tuple[str, str] | None = None,
        *,
        is_through: bool = False,
    ) -> None:
        """Show a whole sheet; the cursor goes to the cell named by `where` or to the first asked one without a reading.

        `is_through`: it had come to the end, and stays there unless something is empty again. Of a sheet with the same
        lines as before only what differs is painted again.
        """
        before, faced, lined = self.keying, self.faces, self.lines
        self.keying = Keying(rows)
        if where is not None:
            self.keying.stand(where)
        if is_through and not self.keying.is_wanting:
            self.keying.at = None
        self.faces = list(faces)
        self.lines, self.line_of = [], []
        for n, face in enumerate(faces):
            if face.group:
                self.lines.append((face.group, -1))
            self.line_of.append(len(self.lines))
            self.lines.append(("", n))
        if self.lines == lined:
            self._repaint(self._differing(before, faced))
        else:
            self.virtual_size = Size(0, len(self.lines))
            self.refresh()
        early, self.early, self.is_held = self.early, [], False
        self._settle([given for key in early for given in key()])

    def _differing(self, before: Keying, faced: Sequence[Face]) -> set[int]:
        """The rows that are not as they were, and those of the cursor then and now."""
        pairs = zip(before.rows, self.keying.rows, faced, self.faces, strict=True)
        differing = {n for n, (was, now, old, new) in enumerate(pairs) if was != now or old != new}
        return differing | {at[0] for at in (before.at, self.keying.at) if at is not None}

    def hold(self) -> None:
        """Another sheet is on its way: what is being typed is closed, and keys wait for that sheet."""
        self.close_buffer()
        if self.keying.held:
            self.keying.aside.append(self.keying.held)
        self.is_held, self.is_turning = True, False

    @property
    def is_busy(self) -> bool:
        """Whether something is being typed or asked, or a key is on its way that will bring another sheet: not to be changed."""
        return self.is_turning or (
            not self.is_held and (bool(self.keying.buffer) or self.keying.asking is not Asking.value)
        )

    def set_face(self, row: int, face: Face) -> None:
        """Show what a row says now; repaints its line."""
        if self.faces[row] != face:
            self.faces[row] = face
            self._repaint({row})

    def answered(self, row: int, column: int, state: State, text: str, why: str = "") -> None:
        """Pass on what the writer said of a cell."""
        self.keying.answered(row, column, state, text, why)
        self._settle(())

    def ask_not_measured(self) -> None:
        """Ask for the reason why the focused cell is not measured."""
        self.keying.ask_not_measured()
        self._settle(())

    def undo(self) -> None:
        """Go back to the last reading."""
        self.keying.undo()
        self._settle(())

    def stand(self, row: int, column: int = 0) -> None:
        """Stand on a cell; what is being typed is closed first."""
        self._settle(self.keying.go(row, column))

    def close_buffer(self) -> None:
        """Submit what is being typed, as before leaving the screen."""
        if self.keying.buffer and self.keying.at is not None:
            at = self.keying.at
            self._settle(self.keying.go(*at))

    def on_key(self, event: events.Key) -> None:
        """Every printable key and every terminator is taken here, in order, and goes no further."""
        if event.key in KEYS:
            if event.key == "escape" and not self.keying.buffer and self.keying.asking is Asking.value:
                return
            self._take(lambda: self.keying.press(event.key))
        elif event.character is not None and event.is_printable:
            character = event.character
            self._take(lambda: self.keying.type(character))
        else:
            if event.key in self.turning:
                self.hold()
                self.is_turning = True
            return
        event.stop()
        event.prevent_default()

    def on_paste(self, event: events.Paste) -> None:
        """A paste is typed, every line of it."""
        event.stop()
        event.prevent_default()
        self._take(lambda: self.keying.paste(event.text))

    def _take(self, key: Callable[[], list[Submitted]]) -> None:
        """Take a key now, or in its turn as soon as there is a sheet."""
        if not self.is_held:
            self._settle(key())
        else:
            self.early.append(key)

    def on_click(self, event: events.Click) -> None:
        """A click puts the cursor into a cell."""
        offset = event.get_content_offset(self)
        if offset is None:
            return
        line = offset.y + self.scroll_offset.y
        if not 0 <= line < len(self.lines) or self.lines[line][1] < 0:
            return
        row = self.lines[line][1]
        column = max(0, (offset.x - sum(self.left)) // CELL) + self._window(row)[0]
        self._settle(self.keying.go(row, column))

    def _settle(self, made: Sequence[Submitted]) -> None:
        """After any key: repaint the lines that changed, follow the cursor, say what happened."""
        if made:
            self.post_message(self.Typed(made))
        dirty, self.keying.dirty = self.keying.dirty, set()
        self._repaint(dirty)
        self._follow()
        self.post_message(self.Moved())

    def _repaint(self, rows: set[int]) -> None:
        top, width = self.scroll_offset.y, self.size.width
        for row in rows:
            line = self.line_of[row] - top
            if 0 <= line < self.size.height:
                self.refresh(Region(0, line, width, 1))

    def _follow(self) -> None:
        """Keep the cursor's line in sight, with the heading of its component where there is room."""
        at = self.keying.at
        if at is None or not self.size.height:
            return
        line, top, height = self.line_of[at[0]], self.scroll_offset.y, self.size.height
        if line - 1 < top:
            self.scroll_to(y=max(0, line - 1), animate=False, immediate=True, force=True)
        elif line >= top + height:
            self.scroll_to(y=line - height + 1, animate=False, immediate=True, force=True)

    def on_resize(self) -> None:
        """The cursor stays in sight when the terminal changes."""
        self._follow()

    @property
    def left(self) -> tuple[int, int]:
        """The widths of name and limit: wider where the wear rule stands beside the rows and there is room yet."""
        spare = self.size.width - NAME - LIMIT - 4 * CELL - VERDICT - RULE - 2
        if spare <= 0:
            return NAME, LIMIT
        limit = min(WIDE_LIMIT - LIMIT, spare // 2)
        return NAME + min(WIDE_NAME - NAME, spare - limit), LIMIT + limit

    def cells_shown(self) -> int:
        """How many readings stand side by side at this width."""
        width = self.size.width
        spare = width - sum(self.left) - VERDICT - (RULE + 2 if width >= RULE_FROM else 0)
        return max(1, spare // CELL)

    def _window(self, row: int) -> tuple[int, int]:
        """The first and past-the-last cell of a row that are in sight: those around the cursor."""
        count, shown = len(self.keying.rows[row].cells), self.cells_shown()
        begin = 0
        if self.keying.at is not None and self.keying.at[0] == row:
            begin = max(0, min(self.keying.at[1] - shown + 1, count - shown))
        return begin, min(count, begin + shown)

    def render_line(self, y: int) -> Strip:
        """One line of the sheet."""
        self.painted += 1
        line = y + self.scroll_offset.y
        width = self.size.width
        tones = self.app.theme_variables
        ground = Style(color=tones["foreground"], bgcolor=tones["background"])
        if line >= len(self.lines):
            return Strip.blank(width, ground)
        heading, row = self.lines[line]
        if row < 0:
            text = f" {heading} "
            rest = "─" * max(0, width - len(text))
            return Strip(
                [Segment(text, ground + Style(bold=True)), Segment(rest, ground + Style(color=tones["hairline"]))]
            )
        return self._row(row, width, ground, tones)

    def _row(self, row: int, width: int, ground: Style, tones: dict[str, str]) -> Strip:
        face, keys = self.faces[row], self.keying.rows[row]
        quiet = ground + Style(color=tones["quiet"])
        is_here = self.keying.at is not None and self.keying.at[0] == row
        name = ground + Style(color=tones["brass"], bold=True) if is_here else ground if keys.is_asked else quiet
        wide, limit = self.left
        said = face.limit if len(face.limit) < limit else face.short_limit or face.limit
        segments = [Segment(f" {_fit(face.label, wide - 2)} ", name), Segment(_fit(said, limit - 1) + " ", quiet)]
        begin, end = self._window(row)
        decimals = max((_decimals(c.text) for c in keys.cells), default=0)
        for column in range(begin, end):
            segments += self._cell(keys.cells[column], row, column, decimals, ground, tones)
        if face.derived:
            segments.append(Segment(_fit(f" {face.derived}", CELL * 2), ground))
        used = (end - begin) * CELL + (CELL * 2 if face.derived else 0)
        gap = self.cells_shown() * CELL - used
        segments.append(Segment(" " * max(0, gap), ground))
        more = "›" if end < len(keys.cells) else " "
        verdict = VERDICT_WORDS.get(face.verdict, face.verdict)
        tone = ground + Style(color=tones[TONES[face.verdict]], bold=True) if face.verdict in TONES else quiet
        segments.append(Segment(more, quiet))
        segments.append(Segment(_fit(verdict, VERDICT - 1), tone))
        if width >= RULE_FROM:
            drawn = wear_rule.draw(face.rule, RULE) if face.rule else " " * RULE
            segments.append(Segment(f" {drawn} ", tone if face.verdict in TONES else quiet))
        return Strip(segments).adjust_cell_length(width, ground)

    def _cell(
        self, cell: Cell, row: int, column: int, decimals: int, ground: Style, tones: dict[str, str]
    ) -> list[Segment]:
        is_here = self.keying.at == (row, column)
        text, mark = cell.text, {State.pending: "·", State.refused: "!"}.get(cell.state, " ")
        if is_here and (self.keying.buffer or self.keying.asking is Asking.correction):
            text = self.keying.buffer if self.keying.asking is Asking.value else self.keying.held
            return self._here(_tail(text, CELL - 2) + "▏", tones)
        if (
            cell.state is State.accepted
            and cell.position == self.faces[row].worst
            and len(self.keying.rows[row].cells) > 1
        ):
            mark = "◂"
        if cell.state is State.accepted and cell.position in self.faces[row].asked:
            mark = "?"
        shown = _aligned(text, decimals, CELL - 2) if text else "·" if self.keying.rows[row].is_asked else " "
        if is_here:
            return self._here(shown + mark, tones)
        style = ground
        if cell.state is State.refused:
            style = ground + Style(color=tones["loud"], bold=True)
        elif cell.state is not State.accepted:
            style = ground + Style(color=tones["quiet"])
        return [Segment(shown.rjust(CELL - 2)[: CELL - 2] + mark + " ", style)]

    def _here(self, text: str, tones: dict[str, str]) -> list[Segment]:
        style = Style(color=tones["brass-ink"], bgcolor=tones["brass"], bold=True)
        if not self.has_focus:
            style = Style(color=tones["brass"], bgcolor=tones["cell"])
        return [Segment(text.rjust(CELL - 1)[-(CELL - 1) :], style), Segment(" ", Style(bgcolor=tones["background"]))]


def _fit(text: str, width: int) -> str:
    """Text in just so many columns, by terminal cells, cut with an ellipsis."""
    from rich.cells import cell_len, set_cell_size

    flat = "".join(c if c.isprintable() else " " for c in text)
    return set_cell_size(flat, width) if cell_len(flat) <= width else set_cell_size(flat, width - 1) + "…"


def _tail(text: str, width: int) -> str:
    return _fit(text, width).rstrip() if len(text) <= width else "…" + text[-(width - 1) :]


def _decimals(text: str) -> int:
    whole, mark, rest = text.replace(",", ".").partition(".")
    digits = len(rest) - len(rest.lstrip("0123456789"))
    return digits if mark and whole.lstrip("+-").isdigit() | (not whole) else 0


def _aligned(text: str, decimals: int, width: int) -> str:
    """A figure with its decimal mark where the row's other figures have theirs; words as they are."""
    flat = "".join(c if c.isprintable() else " " for c in text)
    if flat[:1].isdigit() or flat[:1] in "+-.,":
        flat += " " * (decimals - _decimals(flat) + (1 if decimals and not _decimals(flat) else 0))
        if len(flat) > width:
            flat = flat.rstrip()
    return flat if len(flat) <= width else flat[: width - 1] + "…"
