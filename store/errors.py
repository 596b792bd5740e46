"""What can go wrong, named for what the caller can do about it.

    WearlineError
    ├── Refused (ValueError)          against a rule or wrong as given; nothing was written; mend the input
    │   ├── ReadingRefused            a typed reading that cannot be taken
    │   ├── NotFound (LookupError)    no such tag, person, model, characteristic ...; the nearest names are said
    │   └── FileRefused               a file with bad lines; `lines` names each of them
    └── RecordUnusable (OSError)      the record itself: not one, newer, read-only, on a share, no room

A message is one line in the words of the trade. Driver errors are turned into these at the edge of `store.sqlite`.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass


class WearlineError(Exception):
    """Root of every error this program raises on purpose."""


class Refused(WearlineError, ValueError):
    """What was asked is against a rule; nothing was written."""


class ReadingRefused(Refused):
    """A typed reading that cannot be taken; the message says how to write it."""


class NotFound(Refused, LookupError):
    """Something was named that the record does not hold."""

    def __init__(self, what: str, name: str, nearest: Sequence[str] = ()) -> None:
        self.what, self.name, self.nearest = what, name, tuple(nearest)
        near = f"; did you mean {', '.join(self.nearest)}?" if self.nearest else ""
        super().__init__(f"no {what} {brief(name)!r}{near}")


@dataclass(frozen=True, slots=True)
class BadLine:
    """One line of a file that cannot be taken; `line` counts from 1, the header being line 1."""

    file: str
    line: int
    column: str
    why: str

    def __str__(self) -> str:
        where = f"{self.file}:{self.line}" + (f" {self.column}" if self.column else "")
        return f"{where}: {self.why}"


class FileRefused(Refused):
    """One or more files that cannot be loaded; nothing of them was written."""

    def __init__(self, lines: Sequence[BadLine]) -> None:
        self.lines = tuple(lines)
        first = str(self.lines[0]) if self.lines else "nothing to load"
        more = f" (and {len(self.lines) - 1} more bad lines)" if len(self.lines) > 1 else ""
        super().__init__(first + more)


class RecordUnusable(WearlineError, OSError):
    """The record file cannot be opened or written as it is."""


def brief(text: str, most: int = 60) -> str:
    """`text` cut to `most` characters with an ellipsis, so that a refusal stays one line."""
    flat = " ".join(text.split())
    return flat if len(flat) <= most else flat[: most - 1] + "…"
