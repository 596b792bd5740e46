"""Parts fitted in the report of a job."""

from __future__ import annotations

from pathlib import Path

from store import jobs
from store.parts import fitting
from store.records import Record
from store.reports import gather
from tests import part_lists


def test_a_report_names_every_part_with_its_lot_and_why(record: Record, tmp_path: Path) -> None:
    """As printed on the part, described by the lists; against the cross-check only with the reason beside it."""
    part_lists.fill(record, tmp_path)
    tag = jobs.take_in(record, model="KS-100", serial="5").tag
    fitting.fit(record, tag, "br 100", lot="L7", supplier="Northgate", position="brushes")
    fitting.fit(record, tag, "DR-90L", why="by order")
    fitting.fit(record, tag, "ZZ-9")
    report = gather.draft(record, tag)
    assert [(p.number, p.lot, p.supplier, p.position) for p in report.fitted] == [
        ("br 100", "L7", "Northgate", "brushes"), ("DR-90L", "", "", ""), ("ZZ-9", "", "", ""),
    ]  # fmt: skip
    assert report.fitted[0].description == "brush set, four brushes"
    assert report.fitted[1].description.startswith("drive, other rotation; does not fit: rotation is ccw")
    assert report.fitted[1].description.endswith("fitted all the same: by order")
    assert report.fitted[2].description == ""
