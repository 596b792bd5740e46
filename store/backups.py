"""Backups of the record while others write, and restoring one into a new file that is verified before it is named.

A copy is made beside its place under another name, synced, and moved there: it is whole or not there.
"""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Callable
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path

from store.errors import RecordUnusable, Refused
from store.records import Record
from store.sqlite.faults import unusable

DAYS, MONTHS = 14, 12
PAGES = 10_000
MAPPED = 1 << 34
Progress = Callable[[str, int], None]


@dataclass(frozen=True, slots=True)
class Backup:
    """A backup that was kept by itself: its file, its day, its size in bytes."""

    path: Path
    day: str
    size: int


def backup(record: Record, path: Path, progress: Progress = lambda what, done: None) -> Path:
    """Copy the record to a new file by SQLite's own backup, while others write. Raises Refused, RecordUnusable."""
    if path.exists():
        raise Refused(f"{path} is there already; a backup goes into a new file")
    _copy(record.path, path, progress)
    return path


def folder(record: Record) -> Path:
    """Where the daily backups of a record are kept: beside it."""
    return record.path.absolute().parent / f"{record.path.stem}-backups"


def kept(record: Record) -> tuple[Backup, ...]:
    """The backups that were kept by themselves, newest first."""
    paths = folder(record).glob("????-??-??.wearline")
    found = [Backup(path, path.stem, path.stat().st_size) for path in paths]
    return tuple(sorted(found, key=lambda b: b.day, reverse=True))


def daily(record: Record) -> Path | None:
    """Make today's backup where there is none, and let go of old ones: 14 days and 12 months stay. Returns a new one.

    Raises RecordUnusable.
    """
    place = folder(record)
    path = place / f"{record.now()[:10]}.wearline"
    if path.exists():
        return None
    try:
        place.mkdir(exist_ok=True)
    except OSError as fault:
        raise RecordUnusable(f"{place} cannot be made: {(fault.strerror or str(fault)).lower()}") from None
    _copy(record.path, path, lambda what, done: None)
    for old in _past(kept(record)):
        with suppress(OSError):
            old.path.unlink()
    return path


def _past(backups: tuple[Backup, ...]) -> list[Backup]:
    """Those that neither the days nor the months keep; of each month the newest stays."""
    stay = {b.day for b in backups[:DAYS]}
    months: dict[str, str] = {}
    for b in backups:
        months.setdefault(b.day[:7], b.day)
    stay |= set(sorted(months.values(), reverse=True)[:MONTHS])
    return [b for b in backups if b.day not in stay]


def restore(source: Path, to: Path, progress: Progress = lambda what, done: None) -> Path:
    """Restore a backup into a new file: copied, brought up to this program, verified, and only then named.

    Raises Refused (the file is there, the backup does not verify), RecordUnusable.
    """
    from store import records, verify

    if to.exists():
        raise Refused(f"{to} is there already; a restored record goes into a new file")
    if not source.is_file():
        raise RecordUnusable(f"there is no backup at {source}")
    half = to.with_name(f".{to.name}.restoring")
    _remove(half)
    try:
        _copy(source, half, progress)
        records.open(half).close()
        found = verify.verify_file(half, progress)
        if found.wrong is not None:
            raise Refused(f"{source} is not restored: {found.wrong}")
        half.rename(to)
    finally:
        _remove(half)
        for left in to.parent.glob(f"{half.name}.before-*"):
            left.unlink()
    return to


def _copy(source: Path, target: Path, progress: Progress) -> None:
    half = target.with_name(f".{target.name}.part")
    _remove(half)
    try:
        here = sqlite3.connect(f"{source.absolute().as_uri()}?mode=ro", uri=True, timeout=30)
        try:
            here.execute(f"PRAGMA mmap_size={MAPPED}")
            there = sqlite3.connect(half)
            try:
                there.execute("PRAGMA synchronous=OFF")  # synced once below, before it gets its name
                there.execute("PRAGMA journal_mode=OFF")
                here.backup(
                    there, pages=PAGES, progress=lambda status, left, total: progress("pages", total - left), sleep=0
                )
                there.execute("PRAGMA journal_mode=DELETE")
            finally:
                there.close()
        finally:
            here.close()
        with half.open("rb+") as file:
            os.fsync(file.fileno())
        half.rename(target)
    except sqlite3.Error as fault:
        raise unusable(target if "disk" in str(fault) else source, fault) from fault
    except OSError as fault:
        raise RecordUnusable(f"{target} cannot be written: {(fault.strerror or str(fault)).lower()}") from None
    finally:
        _remove(half)


def _remove(path: Path) -> None:
    for name in (path, Path(f"{path}-wal"), Path(f"{path}-shm"), Path(f"{path}-journal")):
        with suppress(FileNotFoundError):
            name.unlink()
