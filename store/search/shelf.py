"""What the index knows of each text beside its words: from which row it is, of which job, when and by whom it was written."""

from __future__ import annotations

import zlib
from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray

LINE = np.dtype(
    [("row", "<i8"), ("job", "<i4"), ("at", "<u4"), ("check", "<u4"), ("by", "<u2"), ("source", "u1"), ("off", "?")]
)
SOURCE_SHIFT = 56


class Shelf:
    """Texts by number, from 0. `off` is set for a text whose row was changed or deleted since."""

    def __init__(self, lines: NDArray[np.void] | None = None, people: Iterable[str] = ()) -> None:
        self._lines = np.zeros(0, LINE) if lines is None else lines
        self._count = len(self._lines)
        self._off = set(np.flatnonzero(self._lines["off"]).tolist())
        self.people = list(people)
        self._people = {who: n for n, who in enumerate(self.people)}

    def __len__(self) -> int:
        return self._count

    @property
    def lines(self) -> NDArray[np.void]:
        """Every text's line, by number: a view, not to be written to."""
        return self._lines[: self._count]

    def add(self, source: int, row: int, job: int, at: int, by: str, text: str) -> int:
        """Put a text on the shelf; returns its number. `job` is 0 for a text of no job."""
        if self._count == len(self._lines):
            self._lines = np.concatenate([self._lines, np.zeros(max(1024, self._count // 4), LINE)])
        who = self._people.get(by)
        if who is None:
            who = self._people[by] = min(len(self.people), 65_535)
            self.people.append(by)
        self._lines[self._count] = (row, job, max(at, 0), check(text), who, source, False)
        self._count += 1
        return self._count - 1

    def number(self, source: int, row: int) -> int | None:
        """The number of the text of this row, None where it is not on the shelf."""
        lines = self.lines
        at = np.flatnonzero((lines["row"] == row) & (lines["source"] == source) & ~lines["off"])
        return int(at[0]) if len(at) else None

    def take_off(self, number: int) -> None:
        """The text is no longer to be found."""
        self._lines["off"][number] = True
        self._off.add(number)

    def person(self, initials: str) -> int | None:
        """The number by which `by` of the lines means this person, None for one who wrote nothing."""
        return self._people.get(initials)

    def standing(self) -> NDArray[np.bool_]:
        """For each text whether it can be found; the caller may write to it."""
        made = np.ones(self._count, np.bool_)
        made[list(self._off)] = False
        return made

    def ties(self, texts: NDArray[np.int64]) -> NDArray[np.int64]:
        """A number for each of these texts that no two share and that depends on its row alone: later rows higher."""
        lines = self.lines[texts]
        made: NDArray[np.int64] = (lines["source"].astype(np.int64) << SOURCE_SHIFT) | lines["row"]
        return made


def check(text: str) -> int:
    """A checksum of a text, to see whether the row still holds what was indexed."""
    return zlib.crc32(text.encode("utf-8", "surrogatepass"))
