"""Connections to one SQLite file, with the record's pragmas; nothing but the driver, so that a first look is quick."""

from __future__ import annotations

import sqlite3
from pathlib import Path

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
