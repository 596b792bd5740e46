"""One change to the record: rows written together, in one transaction, under one audit entry.

    with record.change("core taken in", tag) as change:
        unit = change.insert(UnitRow, model_id=7, serial="0042", key="42")
        change.insert(JobRow, ...)

The entry is appended just before the commit and holds each row from what to what, so nothing can be written past the
chain. `load` writes rows by the thousand under one entry with a digest for every run of them.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from functools import lru_cache
from itertools import islice
from typing import Any

from sqlalchemy import Connection
from sqlmodel import SQLModel

from store import audit
from store.sqlite.engine import driver

Table = type[SQLModel]


@lru_cache(maxsize=64)
def columns(table: Table) -> tuple[str, ...]:
    """The column names of a table in the order in which its rows are written and hashed."""
    return tuple(column.name for column in table.__table__.columns)  # type: ignore[attr-defined]


@lru_cache(maxsize=64)
def places(table: Table) -> dict[str, int]:
    """Where in a row each column stands."""
    return {column: place for place, column in enumerate(columns(table))}


@lru_cache(maxsize=64)
def name(table: Table) -> str:
    """The table's name in the database."""
    return str(table.__table__.name)  # type: ignore[attr-defined]


@lru_cache(maxsize=64)
def key(table: Table) -> str:
    """The name of the table's single key column."""
    (only,) = table.__table__.primary_key.columns  # type: ignore[attr-defined]
    return str(only.name)


@lru_cache(maxsize=64)
def insertion(table: Table) -> str:
    """The INSERT statement of a whole row."""
    names = columns(table)
    return f"INSERT INTO {name(table)}({','.join(names)}) VALUES({','.join('?' * len(names))})"


@lru_cache(maxsize=64)
def _defaults(table: Table) -> tuple[Any, ...]:
    fields = table.model_fields
    return tuple(_plain(None if fields[c].is_required() else fields[c].default) for c in columns(table))


def _plain(value: Any) -> Any:
    return int(value) if isinstance(value, bool) else value


class Change:
    """The rows of one transaction. Made by `Record.change`, never by hand."""

    def __init__(self, conn: Connection, at: str, by: str, action: str, subject: str) -> None:
        self.conn, self.at, self.by, self.action, self.subject = conn, at, by, action, subject
        self.raw = driver(conn)
        self.made: list[dict[str, Any]] = []

    def row(self, table: Table, values: dict[str, Any]) -> list[Any]:
        """A whole row in column order, defaults filled in. Raises KeyError for a column that the table lacks."""
        made = list(_defaults(table))
        place = places(table)
        for column, value in values.items():
            made[place[column]] = int(value) if value is True or value is False else value
        return made

    def insert(self, table: Table, **values: Any) -> int:
        """Insert one row; returns its whole-number key (0 for a table whose key is text)."""
        row = self.row(table, values)
        cursor = self.raw.execute(insertion(table), row)
        key_name = key(table)
        made = 0
        if key_name == "id":
            made = int(cursor.lastrowid or 0)
            row[places(table)["id"]] = made
        self.made.append({"table": name(table), "before": None, "after": row})
        return made

    def update(self, table: Table, which: int | str, **values: Any) -> bool:
        """Update one row by its key; returns whether anything differs. Raises LookupError where no such row is."""
        before = self._present(table, which)
        if before is None:
            raise LookupError(f"{name(table)} {which}")
        names = columns(table)
        after = list(before)
        for column, value in values.items():
            after[names.index(column)] = _plain(value)
        if after == before:
            return False
        sets = ",".join(f"{column}=?" for column in values)
        sql = f"UPDATE {name(table)} SET {sets} WHERE {key(table)}=?"  # noqa: S608
        self.raw.execute(sql, (*(_plain(v) for v in values.values()), which))
        self.made.append({"table": name(table), "before": before, "after": after})
        return True

    def delete(self, table: Table, which: int | str) -> bool:
        """Delete one row by its key; what it was stays in the chain. Returns whether there was one."""
        before = self._present(table, which)
        if before is None:
            return False
        self.raw.execute(f"DELETE FROM {name(table)} WHERE {key(table)}=?", (which,))  # noqa: S608
        self.made.append({"table": name(table), "before": before, "after": None})
        return True

    def load(self, table: Table, rows: Iterable[Sequence[Any]]) -> int:
        """Insert many whole rows (column order, without `id` or with None for it, which is then counted on).

        Rows are kept under digests of runs of audit.RUN rows in the order of their ids. Returns how many were written.
        """
        raw = self.raw
        sql, where = insertion(table), name(table)
        first = int(raw.execute(f"SELECT coalesce(max(id),0)+1 FROM {where}").fetchone()[0])  # noqa: S608
        total, runs, next_id = 0, [], first
        for run in _runs(rows, audit.RUN):
            whole = [(next_id + n, *row[1:]) for n, row in enumerate(run)]
            raw.executemany(sql, whole)
            runs.append(audit.digest(whole))
            next_id += len(whole)
            total += len(whole)
        if total:
            self.made.append({"table": where, "first": first, "last": next_id - 1, "run": audit.RUN, "digests": runs})
        return total

    def _present(self, table: Table, which: int | str) -> list[Any] | None:
        sql = f"SELECT {','.join(columns(table))} FROM {name(table)} WHERE {key(table)}=?"  # noqa: S608
        found = self.raw.execute(sql, (which,)).fetchone()
        return None if found is None else list(found)

    def close(self) -> None:
        """Append the audit entry; called by `Record.change` just before the commit. Nothing changed: no entry."""
        if self.made:
            audit.append(self.conn, self.at, self.by, self.action, self.subject, self.made)


def _runs(rows: Iterable[Sequence[Any]], size: int) -> Iterator[list[Sequence[Any]]]:
    source = iter(rows)
    while run := list(islice(source, size)):
        yield run
