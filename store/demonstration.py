"""The demo record: an invented shop, loaded from demo_data through the same loaders that a user's files go through."""

from __future__ import annotations

from collections.abc import Callable
from pathlib import Path

import store
from store import files, records
from store.errors import RecordUnusable


def folder() -> Path:
    """Where the demo data lies: beside the packages, in a checkout and in an installed wheel alike."""
    return Path(store.__file__).resolve().parent.parent / "demo_data"


def make(path: Path, progress: Callable[[str, int], None] | None = None) -> bool:
    """Make the demo record at `path` unless it is there; whole or not at all. Returns whether it was made.

    Raises RecordUnusable, FileRefused.
    """
    if path.exists():
        records.open(path).close()
        return False
    half = path.with_name(f"{path.name}.part")
    for left in (half, Path(f"{half}-wal"), Path(f"{half}-shm")):
        left.unlink(missing_ok=True)
    record = records.open(half, create=True)
    try:
        files.load(record, sorted(folder().glob("*.csv")), progress=progress)
    finally:
        record.close()
    try:
        half.replace(path)
    except OSError as fault:
        raise RecordUnusable(f"{path} cannot be written: {(fault.strerror or str(fault)).lower()}") from None
    return True
