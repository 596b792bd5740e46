"""The engine over one SQLite file: pragmas, and transactions that we begin ourselves.

Write transactions begin IMMEDIATE: a deferred one that reads and then writes fails at once when another writer was
faster, whatever the busy timeout. Read transactions begin deferred and see one state throughout.
"""

from __future__ import annotations

import sqlite3
from collections.abc import Sequence
from pathlib import Path
from typing import Any

from sqlalchemy import Connection, Engine, create_engine, event
from sqlalchemy.pool import QueuePool

BUSY_SECONDS = 30.0
_PRAGMAS = (
    "PRAGMA foreign_keys=ON",
    "PRAGMA recursive_triggers=ON",
    "PRAGMA synchronous=FULL",
    "PRAGMA cache_size=-32000",
    "PRAGMA wal_autocheckpoint=4000",
    "PRAGMA temp_store=MEMORY",
)


def connect(path: Path, *, read_only: bool = False) -> sqlite3.Connection:
    """A raw connection with the record's pragmas, in autocommit (isolation_level None: BEGIN is ours).

    Raises sqlite3.Error.
    """
    if read_only:
        raw = sqlite3.connect(
            f"{path.absolute().as_uri()}?mode=ro", uri=True, timeout=BUSY_SECONDS, isolation_level=None
        )
    else:
        raw = sqlite3.connect(path, timeout=BUSY_SECONDS, isolation_level=None, check_same_thread=False)
        raw.execute("PRAGMA journal_mode=WAL")
    for pragma in _PRAGMAS:
        raw.execute(pragma)
    return raw


def engine(path: Path) -> Engine:
    """A SQLAlchemy engine whose connections come from `connect` and whose transactions begin as asked."""
    made = create_engine("sqlite://", creator=lambda: connect(path), poolclass=QueuePool, pool_size=4, max_overflow=8)

    @event.listens_for(made, "begin")
    def _begin(connection: Connection) -> None:
        driver(connection).execute("BEGIN IMMEDIATE" if connection.info.get("writing") else "BEGIN")

    return made


def driver(connection: Connection) -> sqlite3.Connection:
    """The sqlite3 connection under a SQLAlchemy one, for the hot path and for statements run by the million."""
    raw: sqlite3.Connection = connection.connection.driver_connection  # type: ignore[assignment]
    return raw


def rows(connection: Connection, sql: str, values: Sequence[Any] = ()) -> list[Any]:
    """What a statement gives, without the toll of a SQLAlchemy result: a tuple a row."""
    return driver(connection).execute(sql, values).fetchall()
