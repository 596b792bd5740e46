"""Faults of the database driver, in the words of the shop."""

from __future__ import annotations

import sqlite3
from pathlib import Path

from store.errors import RecordUnusable


def unusable(path: Path, fault: BaseException) -> RecordUnusable:
    """The RecordUnusable that says in one line what is wrong with the record and what to do."""
    driver = getattr(fault, "orig", None) or fault
    code = getattr(driver, "sqlite_errorcode", None)
    primary = code & 0xFF if isinstance(code, int) else None
    text = str(driver)
    where = str(path)
    if primary == sqlite3.SQLITE_FULL:
        return RecordUnusable(f"no room left on the disk of {where}; nothing was written, make room and try again")
    if primary == sqlite3.SQLITE_READONLY:
        return RecordUnusable(f"{where} is read-only; nothing was written")
    if primary == sqlite3.SQLITE_NOTADB:
        return RecordUnusable(f"{where} is not a record of Wearline")
    if primary == sqlite3.SQLITE_CORRUPT:
        return RecordUnusable(f"{where} is damaged; restore the last backup into a new file")
    if primary in {sqlite3.SQLITE_BUSY, sqlite3.SQLITE_LOCKED}:
        return RecordUnusable(f"another program has held {where} for too long; nothing was written, try again")
    if primary == sqlite3.SQLITE_CANTOPEN:
        return RecordUnusable(f"{where} cannot be opened; look whether the folder is there and may be written")
    if primary == sqlite3.SQLITE_IOERR:
        return RecordUnusable(f"the disk of {where} did not answer ({text}); nothing was written")
    return RecordUnusable(f"{where}: {text}")
