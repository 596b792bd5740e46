"""The record: the shop's database file, opened for one person acting."""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field, replace
from datetime import datetime
from pathlib import Path
from typing import Any, TypeVar

from sqlalchemy import Connection, Engine
from sqlalchemy.exc import DBAPIError, IntegrityError

from store import times
from store.changes import Change
from store.errors import RecordUnusable
from store.sqlite.engine import BUSY_SECONDS, engine, rows
from store.sqlite.faults import unusable
from store.sqlite.places import share

APPLICATION_ID = 0x574C494E
HEAD = "0006"
SHOP = "shop"
Now = Callable[[], datetime]
Kept = TypeVar("Kept")


@dataclass(frozen=True)
class Record:
    """An open record. `by` acts: initials of a known person, or `shop` until the first person is entered."""

    path: Path
    engine: Engine
    by: str
    clock: Now
    cache: dict[Any, Any] = field(default_factory=dict, repr=False, compare=False)
    idle: list[Connection] = field(default_factory=list, repr=False, compare=False)

    def now(self) -> str:
        """The present moment as the record keeps it."""
        return times.stored(self.clock())

    def acting(self, by: str) -> Record:
        """The same record with another person at the bench. Raises NotFound for someone unknown."""
        from store import people

        return replace(self, by=people.acting(self, by))

    @contextmanager
    def read(self) -> Iterator[Connection]:
        """One view of the record: every statement inside sees the same state. Raises RecordUnusable."""
        with self._transaction(writing=False) as conn:
            yield conn

    @contextmanager
    def write(self) -> Iterator[Connection]:
        """A write transaction without an audit entry, for derived data only (judgements, indexes)."""
        with self._transaction(writing=True) as conn:
            yield conn

    @contextmanager
    def change(self, action: str, subject: str = "") -> Iterator[Change]:
        """A write transaction that ends in one audit entry. All or nothing. Raises RecordUnusable."""
        with self._transaction(writing=True) as conn:
            change = Change(conn, self.now(), self.by, action, subject)
            yield change
            change.close()

    def kept(self, conn: Connection, name: str, stamp: str, read: Callable[[Connection], Kept]) -> Kept:
        """What is read once and kept in memory until `stamp` (a statement) gives another answer.

        The stamp is asked for once in a transaction, in which the answer cannot change but by this transaction itself;
        who changes what is kept calls `forget`.
        """
        seen = conn.info.setdefault("seen", {})
        if name in seen:
            found: Kept = seen[name]
            return found
        now = rows(conn, stamp)
        kept = self.cache.get(name)
        if kept is None or kept[0] != now:
            kept = (now, read(conn))
            self.cache[name] = kept
        seen[name] = kept[1]
        made: Kept = kept[1]
        return made

    def forget(self, conn: Connection, name: str) -> None:
        """Have `kept` look again: called inside the transaction that changes what is kept."""
        self.cache.pop(name, None)
        conn.info.setdefault("seen", {}).pop(name, None)

    @contextmanager
    def _transaction(self, *, writing: bool) -> Iterator[Connection]:
        """A transaction on a connection that is kept for the next one: making one anew costs as much as the insert."""
        try:
            conn = self.idle.pop() if self.idle else self.engine.connect()
            conn.info.update(writing=writing, seen={})
            try:
                with conn.begin():
                    yield conn
            finally:
                self.idle.append(conn)
        except (IntegrityError, sqlite3.IntegrityError):
            raise
        except (DBAPIError, sqlite3.DatabaseError) as fault:
            raise unusable(self.path, fault) from fault

    def close(self) -> None:
        """Let go of the file; the last one out folds the write-ahead log into it."""
        while self.idle:
            self.idle.pop().close()
        self.engine.dispose()


def open(  # noqa: A001
    path: Path | str, *, by: str | None = None, now: Now = times.now, create: bool = False
) -> Record:
    """Open the record at `path`; `create` makes a new one where there is none. An older one is migrated first.

    Raises RecordUnusable (missing, not a record, newer, read-only, on a network share), NotFound (`by` unknown).
    """
    path = Path(path)
    _look_at_place(path, create)
    try:
        version = _version(path)
    except sqlite3.Error as fault:
        raise unusable(path, fault) from fault
    if version != HEAD:
        _bring_up(path, version, now)
    record = Record(path, engine(path), SHOP, now)
    from store import people

    return replace(record, by=people.acting(record, by))


def look(path: Path, now: Now = times.now) -> Record:
    """A record to be read only: nothing about the file is changed. Raises RecordUnusable where it is of another schema."""
    version = _version(path)
    if version != HEAD:
        raise RecordUnusable(f"{path} is of schema {version}; this program reads {HEAD}")
    return Record(path, engine(path, read_only=True), SHOP, now)


def _look_at_place(path: Path, create: bool) -> None:
    kind = share(path)
    if kind:
        raise RecordUnusable(f"{path} lies on a network share ({kind}); a record must lie on a disk of this machine")
    if path.is_dir():
        raise RecordUnusable(f"{path} is a folder, not a record")
    if not path.exists():
        if not create:
            raise RecordUnusable(f"there is no record at {path}")
        if not path.absolute().parent.is_dir():
            raise RecordUnusable(f"there is no folder {path.absolute().parent} to put a record in")
        return
    if not os.access(path, os.R_OK):
        raise RecordUnusable(f"{path} may not be read")
    if not os.access(path, os.W_OK) or not os.access(path.absolute().parent, os.W_OK):
        raise RecordUnusable(f"{path} is read-only; nothing can be written to it")


def _version(path: Path) -> str | None:
    """The schema version of the record at `path`, None for one that is not there or empty. Raises RecordUnusable."""
    if not path.exists() or path.stat().st_size == 0:
        return None
    raw = sqlite3.connect(path, timeout=BUSY_SECONDS)
    try:
        mark = raw.execute("PRAGMA application_id").fetchone()[0]
        tables = raw.execute("SELECT count(*) FROM sqlite_master").fetchone()[0]
        if mark != APPLICATION_ID:
            if tables == 0 and mark == 0:
                return None
            raise RecordUnusable(f"{path} is not a record of Wearline")
        found = raw.execute("SELECT version_num FROM alembic_version").fetchone()
    finally:
        raw.close()
    version = None if found is None else str(found[0])
    if version is not None and version > HEAD:
        raise RecordUnusable(f"{path} was written by a newer Wearline (schema {version}); this one knows {HEAD}")
    return version


def _bring_up(path: Path, version: str | None, now: Now) -> None:
    from store import migrations

    try:
        migrations.bring_up(path, version, times.stored(now()))
    except (DBAPIError, sqlite3.DatabaseError) as fault:
        raise unusable(path, fault) from fault
