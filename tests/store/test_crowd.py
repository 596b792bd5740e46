"""Eight programs writing and one backing up: nothing lost, everything verifies."""

from __future__ import annotations

import os
import subprocess
import sys
import time
from pathlib import Path

from store import backups, readings, records, verify
from store.records import Record
from tests import shop

FULL = os.environ.get("WEARLINE_FULL") == "1"
SECONDS = 60 if FULL else 6
WRITERS = 8
WRITER = """
import sys, time
from store import jobs, readings, records
path, serial, seconds = sys.argv[1:4]
record = records.open(path)
end, count = time.monotonic() + float(seconds), 0
tag = jobs.take_in(record, model="KS-100", serial=serial).tag
while time.monotonic() < end:
    n = count % 400
    readings.add(record, tag, "as-found", "brush-spring-force", f"{12 + n % 9}.{n % 10}", position=str(n + 1), why="again" if count >= 400 else "")
    count += 1
record.close()
print(tag, count)
"""


def test_eight_write_and_one_backs_up(record: Record, tmp_path: Path) -> None:
    """Every reading that a writer counted is in the record; the record and every backup verify."""
    shop.fill(record, tmp_path)
    running = [
        subprocess.Popen(
            [sys.executable, "-c", WRITER, str(record.path), f"S{n}", str(SECONDS)],
            stdout=subprocess.PIPE,
            stderr=subprocess.PIPE,
            text=True,
        )
        for n in range(WRITERS)
    ]
    copies: list[Path] = []
    end = time.monotonic() + SECONDS
    while time.monotonic() < end:
        copies.append(backups.backup(record, tmp_path / f"copy-{len(copies)}.wearline"))
    said = [process.communicate() for process in running]
    assert [error for _, error in said] == [""] * WRITERS
    for answer, _ in said:
        tag, count = answer.split()
        assert len(readings.of_job(record, tag, corrected=True)) == int(count)
    assert verify.verify(record).wrong is None
    assert len(copies) > 1
    for copy in copies[:: max(1, len(copies) // 8)]:
        found = verify.verify_file(copy)
        assert found.wrong is None
    last = records.open(copies[-1])
    last.close()
