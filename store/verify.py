"""Verifying the record: the file, the chain, every row against the chain, judgements against readings, frozen reports.

The first thing that is wrong is named. What is audited is held against the chain to the last column: a row that was
written singly against its newest entry, a row that was loaded against the digest of its run.
"""

from __future__ import annotations

import hashlib
import json
import sqlite3
from collections.abc import Callable, Iterator, Sequence
from concurrent.futures import Future, ProcessPoolExecutor
from dataclasses import dataclass, field
from multiprocessing import get_context
from pathlib import Path
from typing import Any

from store import audit
from store.errors import Refused
from store.records import APPLICATION_ID, HEAD, Record
from store.sqlite.connections import connect

Progress = Callable[[str, int], None]
DERIVED = frozenset({"judgement", "text_change"})
"""Tables that are derived and verified by other means, or only say what is to be indexed anew."""
CHUNK = 5000
SHORTEST = 16


@dataclass(frozen=True, slots=True)
class Wrong:
    """One thing that is wrong: where, and what."""

    where: str
    what: str

    def __str__(self) -> str:
        return f"{self.where}: {self.what}"


@dataclass(frozen=True, slots=True)
class Verified:
    """What verifying found. `wrong` is the first thing that is wrong, None where nothing is."""

    head: str
    entries: int
    rows: int
    judgements: int
    reports: int
    wrong: Wrong | None


@dataclass
class _Chain:
    """What the chain says of the rows: the newest state of singly written ones, runs of loaded ones, and what of those
    has been changed since (their state as loaded)."""

    head: str = audit.GENESIS
    entries: int = 0
    single: dict[tuple[str, Any], bytes | None] = field(default_factory=dict)
    loads: dict[str, list[tuple[int, int, int, list[str]]]] = field(default_factory=dict)
    as_loaded: dict[tuple[str, Any], list[Any]] = field(default_factory=dict)


class _Found(Exception):
    """Carries the first thing that is wrong out of the checks."""

    def __init__(self, where: str, what: str) -> None:
        self.wrong = Wrong(where, what)
        super().__init__(what)


def verify(record: Record, progress: Progress = lambda what, done: None) -> Verified:
    """Verify a whole record. Nothing is written."""
    return verify_file(record.path, progress)


def verify_file(path: Path, progress: Progress = lambda what, done: None) -> Verified:
    """Verify a record by its path, without opening it for writing."""
    raw = connect(path, read_only=True)
    chain, rows, judgements, reports, wrong = _Chain(), 0, 0, 0, None
    try:
        raw.execute("BEGIN")
        _file(raw, progress)
        _schema(raw)
        _read_chain(raw, chain, progress)
        with _Judging(path, raw) as judging:  # on the other cores, while the rows pass by here
            rows = _rows(raw, chain, progress)
            reports = _reports(raw, chain, progress)
            judgements = judging.count(progress)
    except _Found as found:
        wrong = found.wrong
    except sqlite3.DatabaseError as fault:
        wrong = Wrong("file", str(fault))
    finally:
        raw.close()
    return Verified(chain.head, chain.entries, rows, judgements, reports, wrong)


def knows(record: Record, head: str) -> tuple[int, str] | None:
    """The entry whose hash a printed head is, and when it was made; None where the chain never had it.

    The foot of a page prints the first SHORTEST figures; that many or more are enough. Raises Refused for fewer.
    """
    asked = head.strip().lower()
    if len(asked) < SHORTEST or not set(asked) <= set("0123456789abcdef"):
        raise Refused(f"a head is {SHORTEST} to 64 figures and letters a to f, as printed at the foot of a report")
    with record.read() as conn:
        sql = "SELECT id, at FROM audit WHERE hash >= ? AND hash < ? ORDER BY id LIMIT 1"
        found = conn.exec_driver_sql(sql, (asked, f"{asked}g")).first()
    return None if found is None else (int(found[0]), str(found[1]))


def _file(raw: sqlite3.Connection, progress: Progress) -> None:
    progress("integrity of the file", 0)
    for (said,) in raw.execute("PRAGMA integrity_check(1)"):
        if said != "ok":
            raise _Found("file", said)
    for table, row, parent, _ in raw.execute("PRAGMA foreign_key_check"):
        raise _Found(f"{table} {row}", f"points to a {parent} that is not there")


def _schema(raw: sqlite3.Connection) -> None:
    """Version, tables, indexes and triggers are those that this program makes."""
    if raw.execute("PRAGMA application_id").fetchone()[0] != APPLICATION_ID:
        raise _Found("file", "is not marked as a record of Wearline")
    versions = [r[0] for r in raw.execute("SELECT version_num FROM alembic_version")]
    if versions != [HEAD]:
        raise _Found("alembic_version", f"says {versions}, and this program knows {HEAD}")
    from store import migrations

    wanted = migrations.schema()
    kept = {(r[0], r[1]): r[2] for r in raw.execute("SELECT type, name, sql FROM sqlite_master WHERE sql IS NOT NULL")}
    for key in sorted(wanted.keys() | kept.keys()):
        if wanted.get(key) != kept.get(key):
            raise _Found(f"{key[0]} {key[1]}", "is missing" if key not in kept else "is not as this program makes it")


def _read_chain(raw: sqlite3.Connection, chain: _Chain, progress: Progress) -> None:
    previous, last_id = audit.GENESIS, 0
    sql = "SELECT id, at, by, action, subject, changes, previous, hash FROM audit ORDER BY id"
    for number, at, by, action, subject, changes, before, own in raw.execute(sql):
        where = f"audit {number}"
        if number != last_id + 1:
            raise _Found(where, f"an entry is missing before it: {last_id + 1}")
        if before != previous:
            raise _Found(where, "does not follow the entry before it")
        if own != audit.entry_hash(previous, at, by, action, subject, changes):
            raise _Found(where, "is not as it was written: its hash differs")
        for change in json.loads(changes):
            _take(chain, change, number)
        previous, last_id = own, number
        if number % 5000 == 0:
            progress("audit chain", number)
    chain.head, chain.entries = previous, last_id


def _take(chain: _Chain, change: dict[str, Any], entry: int) -> None:
    table = change["table"]
    if "digests" in change:
        chain.loads.setdefault(table, []).append((change["first"], change["last"], change["run"], change["digests"]))
        return
    before, after = change["before"], change["after"]
    key = (table, (before or after)[0])
    if before is not None:
        known = chain.single.get(key)
        if known is None and key not in chain.single:
            chain.as_loaded[key] = before
        elif known != _digest(before):
            raise _Found(f"audit {entry}", f"changes {table} {key[1]} from what it was not")
    chain.single[key] = None if after is None else _digest(after)


def _digest(row: Sequence[Any]) -> bytes:
    return hashlib.sha256(audit.canonical(list(row)).encode()).digest()


def _rows(raw: sqlite3.Connection, chain: _Chain, progress: Progress) -> int:
    """Every row of every audited table against the chain."""
    total = 0
    for table in _audited(raw):
        key_column = next(r[1] for r in raw.execute(f"PRAGMA table_info({table})") if r[5])
        expected = {key for (name, key), state in chain.single.items() if name == table and state is not None}
        runs = _Runs(table, chain)
        for row in raw.execute(f'SELECT * FROM "{table}" ORDER BY "{key_column}"'):  # noqa: S608
            key = row[0]
            state = chain.single.get((table, key))
            if state is not None:
                expected.discard(key)
                if state != _digest(row):
                    raise _Found(f"{table} {key}", "is not as it was written")
            elif (table, key) in chain.single:
                raise _Found(f"{table} {key}", "is there though it was deleted")
            runs.pass_by(key, row)
            total += 1
            if total % 20_000 == 0:
                progress("rows", total)
        runs.finish()
        if expected:
            raise _Found(f"{table} {min(expected)}", "is gone")
    return total


class _Runs:
    """The runs of loaded rows of one table, hashed as the rows pass by in the order of their keys."""

    def __init__(self, table: str, chain: _Chain) -> None:
        self.table, self.chain = table, chain
        self.runs: Iterator[tuple[int, int, str]] = iter(
            sorted(
                (first + n * size, min(first + (n + 1) * size - 1, last), digest)
                for first, last, size, digests in chain.loads.get(table, ())
                for n, digest in enumerate(digests)
            )
        )
        self.begin, self.end, self.wanted = 0, -1, ""
        self.next_key = 0
        self.seen: list[Sequence[Any]] = []
        self._next()

    def pass_by(self, key: Any, row: Sequence[Any]) -> None:
        """Take in a row; one that belongs to no run must have been written singly."""
        if not isinstance(key, int) or not self.wanted or key < self.begin:
            if (self.table, key) not in self.chain.single:
                raise _Found(f"{self.table} {key}", "is in no entry of the chain")
            return
        while self.wanted and key > self.end:
            self._fill(self.end + 1)
            self._close()
        if not self.wanted or key < self.begin:
            self.pass_by(key, row)
            return
        self._fill(key)
        loaded = self.chain.as_loaded.get((self.table, key))
        self.seen.append(loaded if loaded is not None else row)
        self.next_key = key + 1
        if key == self.end:
            self._close()

    def finish(self) -> None:
        """After the last row: what is missing at the end of a run."""
        while self.wanted:
            self._fill(self.end + 1)
            self._close()

    def _fill(self, until: int) -> None:
        """Rows between the last one and `until` that are not there: deleted by an entry, or gone."""
        for key in range(self.next_key, until):
            loaded = self.chain.as_loaded.get((self.table, key))
            if loaded is None:
                raise _Found(f"{self.table} {key}", "is gone")
            self.seen.append(loaded)
        self.next_key = max(self.next_key, until)

    def _close(self) -> None:
        if audit.digest(self.seen) != self.wanted:
            raise _Found(f"{self.table} {self.begin} to {self.end}", "one of these loaded rows is not as it was loaded")
        self._next()

    def _next(self) -> None:
        self.begin, self.end, self.wanted = next(self.runs, (0, -1, ""))
        self.next_key, self.seen = self.begin, []


def _audited(raw: sqlite3.Connection) -> list[str]:
    names = [
        r[0]
        for r in raw.execute("SELECT name FROM sqlite_master WHERE type = 'table' AND sql IS NOT NULL ORDER BY name")
    ]
    return [
        n for n in names if n not in DERIVED and n not in {"audit", "alembic_version"} and not n.startswith("sqlite_")
    ]


def _reports(raw: sqlite3.Connection, chain: _Chain, progress: Progress) -> int:
    """Frozen reports against their hash; the head that each was printed with is a hash of the chain.

    A report that came in by a file carries the head of the record that issued it.
    """
    count = 0
    for key, number, digest, report, head in raw.execute(
        "SELECT id, number, digest, report, head FROM release ORDER BY id"
    ):
        if hashlib.sha256(report.encode()).hexdigest() != digest:
            raise _Found(f"report {number}", "is not as it was issued")
        came_by_file = any(first <= key <= last for first, last, _, _ in chain.loads.get("release", ()))
        if (
            head != audit.GENESIS
            and not came_by_file
            and not raw.execute("SELECT 1 FROM audit WHERE hash = ?", (head,)).fetchone()
        ):
            raise _Found(f"report {number}", "was printed with a head that the chain never had")
        count += 1
        if count % 1000 == 0:
            progress("reports", count)
    return count


_Answer = tuple[int, tuple[str, str] | None]


class _Judging:
    """Every kept judgement held against what judging the readings anew gives; in other processes where there is much to do."""

    def __init__(self, path: Path, raw: sqlite3.Connection) -> None:
        self.path, self.raw = path, raw
        self.ids = [r[0] for r in raw.execute("SELECT id FROM job ORDER BY id")]
        self.chunks = [self.ids[n : n + CHUNK] for n in range(0, len(self.ids), CHUNK)]
        self.pool: ProcessPoolExecutor | None = None
        self.answers: list[Future[_Answer]] = []

    def __enter__(self) -> _Judging:
        if len(self.chunks) > 2:
            self.pool = ProcessPoolExecutor(mp_context=get_context("spawn"))
            self.answers = [self.pool.submit(_judge_chunk, str(self.path), chunk) for chunk in self.chunks]
        return self

    def __exit__(self, *fault: object) -> None:
        if self.pool is not None:
            self.pool.shutdown(cancel_futures=True)

    def count(self, progress: Progress) -> int:
        """How many judgements stand. Raises _Found for the first that does not."""
        orphan = self.raw.execute(
            "SELECT job_id FROM judgement WHERE job_id NOT IN (SELECT id FROM job) LIMIT 1"
        ).fetchone()
        if orphan:
            raise _Found(f"judgement of job {orphan[0]}", "belongs to no job")
        total = 0
        for n, chunk in enumerate(self.chunks):
            stand, wrong = self.answers[n].result() if self.answers else _judge_chunk(str(self.path), chunk)
            if wrong is not None:
                raise _Found(*wrong)
            total += stand
            progress("judgements, jobs", min((n + 1) * CHUNK, len(self.ids)))
        return total


def _judge_chunk(path: str, ids: list[int]) -> _Answer:
    """Judge these jobs anew and compare; returns how many judgements stand and the first that does not."""
    from store import judgements, records

    record = records.look(Path(path))
    try:
        return judgements.compare(record, ids)
    finally:
        record.close()
