"""The rows whose texts can be found: job notes, complaints, findings, remarks of parts and of readings.

Each source is one SELECT of (row, job, seconds, by, text); the index reads what lies past the last row it knows, and the
rows that the log of changed texts names.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from functools import lru_cache
from typing import Any

from sqlalchemy import Connection

from store.sqlite.engine import driver, rows


@dataclass(frozen=True, slots=True)
class Source:
    """Where texts come from: its word for a person, the table, and the columns as SQL over alias `t`."""

    where: str
    table: str
    job: str
    at: str
    by: str
    text: str
    only: str = "1"

    def select(self, which: str) -> str:
        """The SELECT of the rows that `which` (SQL over `t`) names."""
        return (
            f"SELECT t.id, {self.job}, coalesce(unixepoch({self.at}), 0), {self.by}, {self.text} "  # noqa: S608
            f"FROM {self.table} t WHERE {which} AND {self.only}"
        )


_FINDING = (
    "t.component || ': ' || t.mode || iif(t.mechanism <> '', ', ' || t.mechanism, '') "
    "|| iif(t.cause <> '', ', ' || t.cause, '') || iif(t.note <> '', ' - ' || t.note, '')"
)

_FITTED = (
    "t.number || iif(t.maker <> '', ' ' || t.maker, '') || iif(t.position <> '', ', ' || t.position, '') "
    "|| iif(t.lot <> '', ', lot ' || t.lot, '') || iif(t.supplier <> '', ', ' || t.supplier, '') "
    "|| iif(t.why <> '', ' - ' || t.why, '')"
)
_CAVEAT = (
    "(SELECT number FROM part_number WHERE id = t.from_id) || ' ' || t.relation "
    "|| coalesce(' ' || (SELECT number FROM part_number WHERE id = t.to_id), '') || ': ' || t.caveat"
)

SOURCES = (
    Source("note", "note", "t.job_id", "t.at", "t.by", "t.text"),
    Source("complaint", "job", "t.id", "t.taken_in", "t.by", "t.complaint", "t.complaint <> ''"),
    Source("finding", "finding", "t.job_id", "t.at", "t.by", _FINDING),
    Source("reading", "reading", "t.job_id", "t.at", "t.by", "t.note", "t.note <> ''"),
    Source("part", "fitted", "t.job_id", "t.at", "t.by", _FITTED),
    Source("part", "relation", "NULL", "t.dated", "''", _CAVEAT, "t.caveat <> ''"),
)
"""In the order of their numbers in the index; a new one goes to the end."""

Text = tuple[int, int, int, str, str]


def past(conn: Connection, source: Source, last: int) -> Iterator[Text]:
    """The texts past row `last`, in the order of their rows."""
    yield from driver(conn).execute(source.select("t.id > ?") + " ORDER BY t.id", (last,))


def some(conn: Connection, source: Source, which: list[int]) -> list[Text]:
    """The texts of these rows, as many as there are."""
    marks = ",".join("?" * len(which))
    return [tuple(row) for row in rows(conn, source.select(f"t.id IN ({marks})"), which)]


def newest(conn: Connection) -> list[int]:
    """The highest row of each source, then the newest line of the log of changed texts: one statement."""
    return [int(n or 0) for n in rows(conn, _newest())[0]]


@lru_cache(maxsize=1)
def _newest() -> str:
    parts = [f"(SELECT max(id) FROM {source.table})" for source in SOURCES]  # noqa: S608
    return f"SELECT {', '.join(parts)}, (SELECT max(id) FROM text_change)"  # noqa: S608


def changed(conn: Connection, last: int) -> list[tuple[int, int]]:
    """Source number and row of every text changed or deleted since line `last` of the log, each once."""
    numbers = {source.table: n for n, source in enumerate(SOURCES)}
    found = rows(conn, "SELECT DISTINCT origin, row FROM text_change WHERE id > ? ORDER BY id", (last,))
    return [(numbers[table], int(row)) for table, row in found if table in numbers]


def head(conn: Connection) -> tuple[int, str]:
    """Number and hash of the newest entry of the audit chain: what tells one state of a record from another."""
    found: list[Any] = rows(conn, "SELECT id, hash FROM audit ORDER BY id DESC LIMIT 1")
    return (int(found[0][0]), str(found[0][1])) if found else (0, "")
