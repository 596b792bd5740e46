"""The review of what comes back, by the length of the history: 100,000 jobs in 2 s, foretelling in 5, under 1 GiB."""

from __future__ import annotations

import os
import resource
import sqlite3
import time
from pathlib import Path

import pytest
import scipy.stats

from store import comebacks, foretelling, records
from tests.benchmarks.big_record import MORE, make
from tests.benchmarks.measure import note_held, pace

FULL = os.environ.get("WEARLINE_FULL") == "1"
COUNTS = (1_000, 10_000, 100_000) if FULL else (1_000, 3_000)


@pytest.mark.parametrize("jobs", COUNTS)
def test_review_and_foretell(tmp_path: Path, jobs: int) -> None:
    """After imports; every fifth release came back, in forty groups of lots."""
    path = tmp_path / "big.wearline"
    make(path, jobs, tmp_path, MORE)
    raw = sqlite3.connect(path)
    raw.execute(
        "UPDATE job SET earlier_id = id - 1, taken_in = date(ended, '+' || (id % 300 + 1) || ' days') WHERE id % 5 = 0 AND id > 1"
    )
    columns = "job_id,number,key,maker,lot,supplier,position,quantity,by,at,checked,why"
    raw.execute(
        f"INSERT INTO fitted({columns}) SELECT id,'BS','BS','','L'||(id % 40),'W','',1,'','2026-01-02','','' FROM job"
    )
    raw.commit()
    raw.close()
    record = records.open(path)
    comebacks.review(record, by="model", until="2027-06-01")
    assert scipy.stats is not None  # imported before the clock starts
    slow = pace()
    begun = time.perf_counter()
    found = comebacks.review(record, by="lot", until="2027-06-01")
    review = time.perf_counter() - begun
    begun = time.perf_counter()
    foretelling.foretell(record, until="2027-06-01")
    foretell = time.perf_counter() - begun
    record.close()
    memory = resource.getrusage(resource.RUSAGE_SELF).ru_maxrss / 1024
    said = f"{jobs:,} jobs, {found.comebacks:,} comebacks, {len(found.groups)} groups"
    note_held(f"review, {said}", review, 2, slow, "2 s at 100,000 jobs")
    said = f"{jobs:,} jobs, {jobs * 30:,} readings ({memory:.0f} MiB)"
    note_held(f"foretell, {said}", foretell, 5, slow, "5 s at 100,000 jobs")
    assert review <= 2 * max(0.25, jobs / 100_000) * slow
    assert foretell <= 5 * max(0.25, jobs / 100_000) * slow
    assert memory < 1024
