"""The invented shop exported and loaded into an empty record: the same reports for every job."""

from __future__ import annotations

import os
from pathlib import Path

from store import exports, files, jobs, records, verify
from store.records import Record
from store.reports import gather, pdf
from store.reports.canonical import to_json

FULL = os.environ.get("WEARLINE_FULL") == "1"
DRAWN_EVERY = 1 if FULL else 40


def test_every_job_of_the_invented_shop_gives_the_same_report_bytes(demo: Record, tmp_path: Path) -> None:
    """The contents of all jobs' reports are equal to the byte, and so are the drawn ones (all of them under WEARLINE_FULL)."""
    exports.export(demo, tmp_path / "out")
    other = records.open(tmp_path / "other.wearline", create=True)
    files.load(other, sorted((tmp_path / "out").glob("*.csv")))
    tags = [line.tag for line in jobs.listing(demo, outcome=None, most=100_000)]
    assert len(tags) >= 300
    for n, tag in enumerate(tags):
        ours, theirs = gather.draft(demo, tag), gather.draft(other, tag)
        assert to_json(ours) == to_json(theirs)
        if n % DRAWN_EVERY == 0:
            assert pdf.draw(ours) == pdf.draw(theirs), tag
    assert verify.verify(other).wrong is None
    other.close()
