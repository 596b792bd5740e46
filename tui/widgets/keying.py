"""Keying readings into a sheet: buffer, cell cursor and terminators, as a machine of its own without any screen.

One owner for all three is what keeps a gauge's burst whole: a key is taken in the order in which it came, a terminator
closes the cell that the cursor stood on, and the next key belongs to the next cell. Nothing typed is lost: what is
refused stays in its cell with the reason, what finds no place is kept aside and said.
"""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass, field
from enum import Enum

ENTER, TAB, BACK_TAB, BACKSPACE, ESCAPE = "enter", "tab", "shift+tab", "backspace", "escape"
ARROWS = {"up": (-1, 0), "down": (1, 0), "left": (0, -1), "right": (0, 1)}
PAGES = {"pageup": -10, "pagedown": 10, "home": -100_000, "end": 100_000}
LINE_FEED = "ctrl+j"
KEYS = frozenset({ENTER, LINE_FEED, TAB, BACK_TAB, BACKSPACE, ESCAPE, *ARROWS, *PAGES})
QUICK = {"p": "pass", "f": "fail ", "c": "cannot judge "}
LONGEST = 12_000
Move = Callable[[], "tuple[int, int] | None"]


class State(Enum):
    """Where a cell stands: `pending` is with the writer, `accepted` is on disk."""

    empty = "empty"
    pending = "pending"
    accepted = "accepted"
    refused = "refused"


class Asking(Enum):
    """What the keys are taken for."""

    value = "value"
    correction = "why the reading is corrected"
    not_measured = "why it was not measured"


@dataclass(slots=True)
class Cell:
    """One reading's place on the sheet. `why` is the reason of a refusal."""

    position: str
    text: str = ""
    state: State = State.empty
    why: str = ""


@dataclass(slots=True)
class Row:
    """One characteristic on the sheet. `is_asked` rows are where Enter goes; derived rows have no cells."""

    name: str
    cells: list[Cell]
    is_test: bool = False
    is_asked: bool = True


@dataclass(frozen=True, slots=True)
class Submitted:
    """A value that goes to the writer; `why` makes it a correction."""

    row: int
    column: int
    text: str
    why: str = ""


@dataclass
class Keying:
    """The machine. `at` is (row, column), None when every asked cell has its reading; `dirty` are rows to repaint."""

    rows: list[Row]
    at: tuple[int, int] | None = None
    buffer: str = ""
    asking: Asking = Asking.value
    held: str = ""
    aside: list[str] = field(default_factory=list)
    dirty: set[int] = field(default_factory=set)
    last: list[tuple[int, int]] = field(default_factory=list)

    def __post_init__(self) -> None:
        if self.at is None:
            self.at = self._first_empty((0, -1)) or self._any()

    @property
    def cell(self) -> Cell | None:
        """The cell under the cursor."""
        return None if self.at is None else self.rows[self.at[0]].cells[self.at[1]]

    def type(self, character: str) -> list[Submitted]:
        """Take one printable character."""
        self._touch()
        if self.asking is Asking.value and not self.buffer and self.at is not None:
            row = self.rows[self.at[0]]
            quick = QUICK.get(character.lower()) if row.is_test else None
            if quick is not None:
                self.buffer = quick
                return self._close(self._next) if quick == "pass" else []
        if len(self.buffer) < LONGEST:
            self.buffer += character
        return []

    def paste(self, text: str) -> list[Submitted]:
        """Take pasted text as if it were typed: line ends and tabs are terminators."""
        made: list[Submitted] = []
        for character in text.replace("\r\n", "\n"):
            if character in "\r\n":
                made += self.press(ENTER)
            elif character == "\t":
                made += self.press(TAB)
            elif character.isprintable():
                made += self.type(character)
        return made

    def press(self, key: str) -> list[Submitted]:
        """Take a terminator or a moving key, one of KEYS."""
        if key == LINE_FEED:
            # Some gauges end a value so; after the CR of a CRLF there is nothing left to close.
            return self.press(ENTER) if self.buffer else []
        self._touch()
        if key == BACKSPACE:
            self.buffer = self.buffer[:-1]
            return []
        if key == ESCAPE:
            self.buffer, self.held, self.asking = "", "", Asking.value
            return []
        if self.at is None and key not in {ENTER, TAB}:
            made = self._submitted()  # kept aside
            self.at = self._any()
            return made
        if key == ENTER:
            return self._close(self._next)
        if key == TAB:
            return self._close(lambda: self._beside(1))
        if key == BACK_TAB:
            return self._close(lambda: self._beside(-1))
        if key in ARROWS:
            down, right = ARROWS[key]
            return self._close(lambda: self._by(down, right))
        return self._close(lambda: self._by(PAGES[key], 0))

    @property
    def where(self) -> tuple[str, str] | None:
        """The names of row and position under the cursor, which hold when the sheet is read anew."""
        return (
            None if self.at is None else (self.rows[self.at[0]].name, self.rows[self.at[0]].cells[self.at[1]].position)
        )

    @property
    def is_wanting(self) -> bool:
        """Whether an asked cell has no reading yet."""
        return self._first_empty((0, -1)) is not None

    def stand(self, where: tuple[str, str]) -> None:
        """Stand on the cell of these names, where there is one."""
        for n, row in enumerate(self.rows):
            for column, cell in enumerate(row.cells):
                if (row.name, cell.position) == where:
                    self.at = (n, column)
                    return

    def refused(self) -> dict[tuple[str, str], Cell]:
        """The cells that hold what was typed and not taken, by the names of row and position."""
        return {
            (row.name, cell.position): cell for row in self.rows for cell in row.cells if cell.state is State.refused
        }

    def ask_not_measured(self) -> None:
        """Ask why the cell under the cursor is not measured; the next line typed is the reason."""
        if self.at is not None:
            self._touch()
            self.buffer, self.asking = "", Asking.not_measured

    def undo(self) -> None:
        """Go back to the last reading that was given, to correct it."""
        if self.last:
            self.go(*self.last[-1])

    def go(self, row: int, column: int) -> list[Submitted]:
        """Move the cursor to a cell, as by the mouse; what is in the buffer is closed first."""
        self._touch()
        if not self.rows[row].cells:
            return []
        place, was_through = (row, min(column, len(self.rows[row].cells) - 1)), self.at is None
        made = self._close(lambda: place)
        if was_through:
            self.at = place
        return made

    def answered(self, row: int, column: int, state: State, text: str, why: str = "") -> None:
        """What the writer said of a cell. A cell that was typed over since keeps the newer text."""
        cell = self.rows[row].cells[column]
        cell.state, cell.text, cell.why = state, text, why
        if state is State.accepted:
            self.last.append((row, column))
        self.dirty.add(row)

    def _close(self, move: Move) -> list[Submitted]:
        """Close the buffer, then move. While a reason is wanted the cursor stays until there is one."""
        made = self._submitted()
        if self.asking is Asking.value:
            self.at = move() if self.at is not None else self._first_empty((0, -1))
            self._touch()
        return made

    def _submitted(self) -> list[Submitted]:
        text, self.buffer = self.buffer.strip(), ""
        if self.asking is not Asking.value:
            return self._reason(text)
        if not text:
            return []
        if self.at is None:
            self.aside.append(text)
            return []
        cell = self.rows[self.at[0]].cells[self.at[1]]
        if cell.state in {State.accepted, State.pending}:
            self.held, self.asking = text, Asking.correction
            return []
        cell.text, cell.state, cell.why = text, State.pending, ""
        return [Submitted(*self.at, text)]

    def _reason(self, text: str) -> list[Submitted]:
        """A reason is words: a bare figure is a gauge that went on sending, and is kept aside."""
        if not any(c.isalpha() for c in text):
            if text:
                self.aside.append(text)
            return []
        assert self.at is not None
        asked, self.asking = self.asking, Asking.value
        held, self.held = self.held, ""
        cell = self.rows[self.at[0]].cells[self.at[1]]
        is_correction = cell.state in {State.accepted, State.pending}
        if asked is Asking.not_measured:
            value, why = f"not measured {text}", text if is_correction else ""
        else:
            value, why = held, text
        cell.text, cell.state, cell.why = value, State.pending, ""
        return [Submitted(*self.at, value, why)]

    def _next(self) -> tuple[int, int] | None:
        assert self.at is not None
        return self._first_empty(self.at) or self._first_empty((0, -1))

    def _first_empty(self, after: tuple[int, int]) -> tuple[int, int] | None:
        for row in range(after[0], len(self.rows)):
            if not self.rows[row].is_asked:
                continue
            cells = self.rows[row].cells
            for column in range(after[1] + 1 if row == after[0] else 0, len(cells)):
                if cells[column].state is State.empty:
                    return row, column
        return None

    def _beside(self, step: int) -> tuple[int, int] | None:
        """The next or previous cell in the order of the sheet, whatever is in it; the last one stays."""
        assert self.at is not None
        row, column = self.at[0], self.at[1] + step
        if 0 <= column < len(self.rows[row].cells):
            return row, column
        found = self._row_with_cells(row, step)
        if found == row:
            return self.at
        return found, 0 if step > 0 else len(self.rows[found].cells) - 1

    def _by(self, down: int, right: int) -> tuple[int, int] | None:
        assert self.at is not None
        row, column = self.at
        for _ in range(min(abs(down), len(self.rows))):
            row = self._row_with_cells(row, 1 if down > 0 else -1)
        return row, max(0, min(column + right, len(self.rows[row].cells) - 1))

    def _row_with_cells(self, row: int, step: int) -> int:
        for found in _from(row, step, len(self.rows)):
            if self.rows[found].cells:
                return found
        return row

    def _any(self) -> tuple[int, int] | None:
        return next(((n, 0) for n, row in enumerate(self.rows) if row.cells), None)

    def _touch(self) -> None:
        if self.at is not None:
            self.dirty.add(self.at[0])


def _from(row: int, step: int, rows: int) -> Iterator[int]:
    row += step
    while 0 <= row < rows:
        yield row
        row += step
