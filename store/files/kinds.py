"""What a kind of file is: its columns, its place in the order of loading, and how its lines are taken and given back."""

from __future__ import annotations

from collections.abc import Callable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field

from sqlalchemy import Connection

from store.changes import Change
from store.errors import BadLine, Refused
from store.records import Record

MOST_BAD_LINES = 1000
Line = Mapping[str, str]


@dataclass
class Loading:
    """A load under way. A module refuses lines as it finds them and goes on, so that all bad ones are named at once."""

    record: Record
    change: Change
    progress: Callable[[str, int], None] = lambda kind, lines: None
    bad: list[BadLine] = field(default_factory=list)
    file: str = ""

    def refuse(self, line: int, column: str, why: str | Exception) -> None:
        """Note a bad line; nothing of the load will be written. Past MOST_BAD_LINES the load is given up.

        Raises TooManyBadLines.
        """
        self.bad.append(BadLine(self.file, line, column, str(why)))
        if len(self.bad) >= MOST_BAD_LINES:
            raise TooManyBadLines


class TooManyBadLines(Refused):
    """So many bad lines that the rest is not worth reading."""


Numbered = tuple[int, Line]
Cells = tuple[int, tuple[str, ...]]


@dataclass(frozen=True)
class Kind:
    """One kind of CSV file.

    `take` gets the numbered lines of one file, checks them and writes them inside the load's change; `give` yields
    the lines that `take` would take to make the same rows again, in the order of `columns`. Where `either` names
    columns, a file has at least one of them. `take_cells` stands in for `take` in a kind made for a million lines: it
    gets the cells in the order of `columns` and looks itself whether needed ones are there.
    """

    name: str
    needed: tuple[str, ...]
    optional: tuple[str, ...]
    take: Callable[[Loading, Iterator[Numbered]], int] | None
    give: Callable[[Record, Connection], Iterator[Sequence[str]]]
    may_be_empty: frozenset[str] = frozenset()
    either: tuple[str, ...] = ()
    take_cells: Callable[[Loading, Iterator[Cells]], int] | None = None

    def is_of(self, columns: Sequence[str]) -> bool:
        """Whether a file with these columns is of this kind."""
        has_one = not self.either or any(column in columns for column in self.either)
        return has_one and set(self.needed) <= set(columns) <= set(self.columns)

    @property
    def columns(self) -> tuple[str, ...]:
        """All columns in the order in which the file is written; needed ones may lack a value only in `may_be_empty`."""
        return (*self.needed, *self.optional)
