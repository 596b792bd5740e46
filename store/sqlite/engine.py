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

from store.sqlite.connections import BUSY_SECONDS, connect


def engine(path: Path, *, read_only: bool = False) -> Engine:
    """A SQLAlchemy engine whose connections come from `connect` and whose transactions begin as asked."""
    made = create_engine(
        "sqlite://",
        creator=lambda: connect(path, read_only=read_only),
        poolclass=QueuePool,
        pool_size=4,
        max_overflow=8,
    )

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


__all__ = ["BUSY_SECONDS", "connect", "driver", "engine", "rows"]
