"""The audit chain: every change is in it, row by row, and each entry names the one before."""

from __future__ import annotations

import json
from pathlib import Path

from store import audit, readings
from store.records import Record
from store.sqlite.engine import rows
from tests import shop


def test_each_entry_is_hashed_over_the_one_before(record: Record, tmp_path: Path) -> None:
    """The chain recomputes from its first entry to its head."""
    shop.fill(record, tmp_path)
    tag = shop.core(record).tag
    readings.add(record, tag, "as-found", "growler-short", "pass")
    previous = audit.GENESIS
    with record.read() as conn:
        chain = rows(conn, "SELECT at, by, action, subject, changes, previous, hash FROM audit ORDER BY id")
        for *said, before, own in chain:
            assert before == previous
            assert own == audit.entry_hash(previous, *said)
            previous = own
        assert audit.head(conn) == previous
    assert len(chain) >= 4


def test_a_change_is_kept_from_what_to_what(record: Record) -> None:
    """A setting that is set twice leaves both values in the chain."""
    from store import shop as shop_settings

    shop_settings.put(record, "warranty_days", "180")
    shop_settings.put(record, "warranty_days", "365")
    with record.read() as conn:
        (last, first) = audit.entries(conn, "warranty_days")
    assert first.changes == [{"table": "setting", "before": None, "after": ["warranty_days", "180"]}]
    assert last.changes == [{"table": "setting", "before": ["warranty_days", "180"], "after": ["warranty_days", "365"]}]


def test_a_load_is_kept_by_digests_of_its_rows(record: Record, tmp_path: Path) -> None:
    """A bulk load's entry holds a digest over each run of rows, which the rows still give."""
    shop.fill(record, tmp_path)
    path = tmp_path / "jobs.csv"
    path.write_text("tag,model,serial,taken_in\n1,KS-100,5,2026-01-02\n2,KS-100,6,2026-01-03\n", encoding="utf-8")
    from store import files

    files.load(record, [path])
    with record.read() as conn:
        changes = json.loads(rows(conn, "SELECT changes FROM audit ORDER BY id DESC LIMIT 1")[0][0])
        jobs = next(c for c in changes if c["table"] == "job")
        kept = rows(conn, "SELECT * FROM job WHERE id BETWEEN ? AND ? ORDER BY id", (jobs["first"], jobs["last"]))
    assert jobs["digests"] == [audit.digest(kept)]


def test_nothing_changed_leaves_no_entry(record: Record) -> None:
    """A change that writes nothing is no entry."""
    with record.read() as conn:
        before = audit.head(conn)
    with record.change("nothing"):
        pass
    with record.read() as conn:
        assert audit.head(conn) == before
