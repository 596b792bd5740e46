"""Saving one reading durably, beside a bare insert and commit of the same row into the same table."""

from __future__ import annotations

import shutil
from pathlib import Path

from store import jobs, readings, records
from store.records import Record
from store.sqlite.engine import connect
from tests import shop
from tests.benchmarks.measure import in_turn, note

INSERT = (
    "INSERT INTO reading(job_id,stage,characteristic_id,position,typed,mark,value,unit,places,detail,gauge_id,at,by,note,why) "
    "VALUES(?,'as-found',?,?,?,'number',?,'mm',1,'',1,'2026-11-02T08:00:00Z','shop','','')"
)


def test_saving_a_reading(record: Record, tmp_path: Path) -> None:
    """Parse, judge, audit, commit with synchronous=FULL: at most 4 times the bare insert, same pragmas, same disk."""
    shop.fill(record, tmp_path)
    tags = [jobs.take_in(record, model="KS-100", serial=str(n)).tag for n in range(75)]
    record.close()
    bare_path = tmp_path / "bare.wearline"
    shutil.copyfile(record.path, bare_path)
    ours, bare = records.open(record.path), connect(bare_path)
    texts = ("11.4", "11.2", "11.5", "9.52")
    characteristic = bare.execute("SELECT id FROM characteristic WHERE name = 'brush-length'").fetchone()[0]

    def save(n: int) -> None:
        readings.add(ours, tags[n // 4], "as-found", "brush-length", texts[n % 4], gauge="CAL-1")

    def insert(n: int) -> None:
        bare.execute("BEGIN IMMEDIATE")
        bare.execute(INSERT, (n // 4 + 1, characteristic, str(n % 4 + 1), texts[n % 4], texts[n % 4]))
        bare.execute("COMMIT")

    a, b, ratio = in_turn(save, insert, 300)
    bare.close()
    ours.close()
    note("save one reading, durable", a, "bare insert and commit", b, ratio, "at most 4")
    assert ratio <= 4
