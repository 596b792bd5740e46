"""The record at size: verify, opening, backup; beside an empty record and a plain copy of the file in the same run."""

from __future__ import annotations

import os
import shutil
import time
from pathlib import Path

import pytest

from store import backups, records, verify
from tests.benchmarks.big_record import make
from tests.benchmarks.measure import in_turn, note, note_held, pace

FULL = os.environ.get("WEARLINE_FULL") == "1"
JOBS = 100_000 if FULL else 3_000


@pytest.fixture(scope="module")
def big(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A record of JOBS jobs with 20 readings each."""
    folder = tmp_path_factory.mktemp("big")
    make(folder / "big.wearline", JOBS, folder)
    return folder / "big.wearline"


def test_verify(big: Path) -> None:
    """100,000 jobs in under 60 s, telling how far it is; smaller records in proportion."""
    told: list[str] = []
    slow = pace(processes=2)
    begun = time.perf_counter()
    found = verify.verify_file(big, lambda what, done: told.append(what))
    took = time.perf_counter() - begun
    note_held(f"verify, {JOBS:,} jobs, {found.rows:,} rows", took, 60 * JOBS / 100_000, slow, "60 s at 100,000 jobs")
    assert found.wrong is None
    assert len(set(told)) >= 3
    assert took < 60 * max(0.2, JOBS / 100_000) * slow


def test_opening(big: Path, empty_record: Path) -> None:
    """As fast as an empty one, within 20 per cent."""

    def opened(path: Path) -> object:
        record = records.open(path)
        with record.read() as conn:
            conn.exec_driver_sql("SELECT 1")
        record.close()
        return None

    opened(big)
    a, b, ratio = in_turn(lambda n: opened(big), lambda n: opened(empty_record), 41)
    note(f"open, {JOBS:,} jobs", a, "open an empty record", b, ratio, "at most 1.2")
    assert ratio <= 1.2


def test_backup(big: Path, tmp_path: Path) -> None:
    """No slower than twice copying the file, both synced to disk; a small record has the start of a backup against it."""
    record = records.open(big)

    def ours(n: int) -> object:
        path = backups.backup(record, tmp_path / f"ours-{n}.wearline")
        path.unlink()
        return path

    def theirs(n: int) -> object:
        path = Path(shutil.copyfile(big, tmp_path / f"theirs-{n}"))
        with path.open("rb+") as file:
            os.fsync(file.fileno())
        path.unlink()
        return path

    a, b, ratio = in_turn(ours, theirs, 5)
    record.close()
    note(f"backup, {big.stat().st_size / 1e6:.0f} MB", a, "copying and syncing the file", b, ratio, "at most 2")
    assert ratio <= (2 if FULL else 5)
