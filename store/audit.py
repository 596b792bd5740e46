"""The audit chain: entries hashed over a canonical form, each naming the hash before it.

An entry says who did what, when and to what, and holds every changed row from what to what. A row is written as the
list of its column values in the order of its table; a bulk load is written as digests over runs of rows, so that a
million loaded lines cost no million entries and are still covered to the last column.

The canonical form of a value is JSON without spaces, in UTF-8, unsorted lists only; the hash is SHA-256 in hex.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from sqlalchemy import Connection

from store.sqlite.engine import driver, rows

GENESIS = "0" * 64
RUN = 1000
Row = tuple[Any, ...]

_encode = json.JSONEncoder(ensure_ascii=False, separators=(",", ":"), allow_nan=False).encode
_LAST = "SELECT hash FROM audit ORDER BY id DESC LIMIT 1"
_ADD = "INSERT INTO audit(at,by,action,subject,changes,previous,hash) VALUES(?,?,?,?,?,?,?)"


@dataclass(frozen=True, slots=True)
class Entry:
    """One entry of the chain as the history shows it; `changes` is the decoded list."""

    id: int
    at: str
    by: str
    action: str
    subject: str
    changes: list[dict[str, Any]]
    hash: str


def canonical(value: Any) -> str:
    """The canonical JSON text of lists, strings, whole numbers, booleans and None."""
    return _encode(value)


def digest(rows: Sequence[Sequence[Any]]) -> str:
    """SHA-256 over the canonical text of the rows in the order given, a list a row."""
    return hashlib.sha256(_encode(rows if isinstance(rows, list) else list(rows)).encode()).hexdigest()


def entry_hash(previous: str, at: str, by: str, action: str, subject: str, changes: str) -> str:
    """The hash of an entry: over the hash before it and everything that it says."""
    said = f"{_encode([previous, at, by, action, subject])}\n{changes}"
    return hashlib.sha256(said.encode()).hexdigest()


def append(conn: Connection, at: str, by: str, action: str, subject: str, changes: list[dict[str, Any]]) -> str:
    """Append one entry inside the running write transaction; returns its hash, the new head."""
    previous = head(conn)
    text = _encode(changes)
    own = entry_hash(previous, at, by, action, subject, text)
    driver(conn).execute(_ADD, (at, by, action, subject, text, previous, own))
    return own


def head(conn: Connection) -> str:
    """The hash of the newest entry; GENESIS for an empty chain."""
    last = driver(conn).execute(_LAST).fetchone()
    return str(last[0]) if last else GENESIS


def entries(conn: Connection, subject: str | None = None, most: int = 200) -> tuple[Entry, ...]:
    """The newest entries first, of one subject (a tag, say) or of the whole record."""
    where, values = ("WHERE subject = ?", (subject,)) if subject is not None else ("", ())
    sql = f"SELECT id,at,by,action,subject,changes,hash FROM audit {where} ORDER BY id DESC LIMIT ?"  # noqa: S608
    found = rows(conn, sql, (*values, most))
    return tuple(Entry(r[0], r[1], r[2], r[3], r[4], json.loads(r[5]), r[6]) for r in found)
