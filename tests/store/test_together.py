"""Several programs on one record: no lost write, no word of a lock."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

from store import readings, records
from store.records import Record
from tests import shop

WRITER = """
import sys
from store import readings, records
path, tag, stage, count = sys.argv[1:5]
record = records.open(path)
for n in range(int(count)):
    readings.add(record, tag, stage, "brush-spring-force", f"{12 + n % 9}.{n % 10}", position=str(n % 400 + 1), why="again" if n >= 400 else "")
record.close()
"""


def test_two_programs_write_two_thousand_readings_in_turn(record: Record, tmp_path: Path) -> None:
    """1,000 readings from each of two processes, interleaved as they come: all there, none refused for a lock."""
    shop.fill(record, tmp_path)
    tag = shop.core(record).tag
    record.close()
    running = [
        subprocess.Popen(
            [sys.executable, "-c", WRITER, str(record.path), tag, stage, "1000"], stderr=subprocess.PIPE, text=True
        )
        for stage in ("as-found", "as-left")
    ]
    said = [process.communicate()[1] for process in running]
    assert said == ["", ""]
    again = records.open(record.path)
    kept = readings.of_job(again, tag, corrected=True)
    assert [sum(r.stage == stage for r in kept) for stage in ("as-found", "as-left")] == [1000, 1000]
    with again.read() as conn:
        assert conn.exec_driver_sql("PRAGMA integrity_check").scalar() == "ok"
    again.close()
