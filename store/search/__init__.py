"""Finding a note again: over job notes, complaints, findings and remarks, whichever side made the slip.

`find` is the question; `rebuild` and `differences` look after the index, a cache beside the record (see `index`).
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from store.errors import Refused
from store.rules import queries
from store.rules.queries import Query

if TYPE_CHECKING:
    from store.records import Record
    from store.search.index import Index, Tell

MOST_HITS = 1_000


@dataclass(frozen=True, slots=True)
class Hit:
    """One text found. `where` is note, complaint, finding, reading or part; `row` its number there.

    `tag` and `model` are empty for a text of no job; `marks` are the places in `text` (start, end) of what was found.
    """

    tag: str
    model: str
    at: str
    by: str
    where: str
    row: int
    text: str
    marks: tuple[tuple[int, int], ...]


@dataclass(frozen=True, slots=True)
class Answer:
    """What a search found, the best first.

    `corrected` gives for a typed word what it was corrected to, the likeliest first; it is refused by asking again with
    that word in `as_typed`, or in quotes. `said` is one line where the text could not be used as it was, else empty.
    """

    asked: str
    corrected: dict[str, tuple[str, ...]] = field(default_factory=dict)
    hits: tuple[Hit, ...] = ()
    said: str = ""


def find(
    record: Record, text: str, *, filters: Mapping[str, str] | None = None, as_typed: frozenset[str] | bool = frozenset(),
    most: int = 50, typing: bool = False,
) -> Answer:  # fmt: skip
    """Search every text. `filters` are those of `queries.FILTERS`, over those typed in the text.

    `as_typed` are words not to be corrected (True: none is); `typing`: the last word may still go on.
    Raises Refused (a filter's value that cannot be), NotFound (a model), RecordUnusable.
    """
    query = queries.parse(text, typing=typing)
    if query.is_empty:
        return Answer(text, said=queries.NO_WORD)
    if not 1 <= most <= MOST_HITS:
        raise Refused(f"between 1 and {MOST_HITS:,} hits can be asked for")
    from store.search import asking

    return asking.answer(record, text, _with(query, filters or {}), as_typed, most)


def _with(query: Query, filters: Mapping[str, str]) -> Query:
    return replace(query, filters={**query.filters, **filters})


def rebuild(record: Record, tell: Tell | None = None) -> int:
    """Make the index anew from the rows; returns how many texts it holds."""
    from store.search import index, snapshot, sources

    with record.read() as conn:
        made = index.build(conn, tell)
        record.cache["search"] = made
        if len(made.shelf) >= index.WORTH_A_FILE:
            snapshot.save(made, index.file_of(record), sources.head(conn))
        made.unsaved = 0
    return len(made.shelf)


def differences(record: Record) -> list[str]:
    """What the index says otherwise than the rows, in words; empty where they agree. Costs as much as `rebuild`."""
    from store.search import index

    with record.read() as conn:
        present: Index = index.of(record, conn)
        return index.differences(present, index.build(conn))


def mend(record: Record) -> list[str]:
    """Compare the index kept beside the record with the rows, where there is one, and make it anew where they differ.

    Returns what differed, empty where nothing did.
    """
    from store.search import index

    if not index.file_of(record).exists():
        return []
    found = differences(record)
    if found:
        rebuild(record)
    return found
