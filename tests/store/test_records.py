"""The record as a file: what is opened, what is refused and in which words; the schema and its migrations."""

from __future__ import annotations

import os
import sqlite3
from pathlib import Path

import pytest
from sqlalchemy import MetaData
from sqlmodel import SQLModel

import store.tables
from store import records
from store.errors import RecordUnusable
from store.records import Record
from store.sqlite.places import share


def test_what_is_no_record_is_refused_in_words(tmp_path: Path) -> None:
    """A missing file, a text file, a folder, a stranger's database: one line each, and the file is left as it was."""
    with pytest.raises(RecordUnusable, match="there is no record at"):
        records.open(tmp_path / "none.wearline")
    text = tmp_path / "text.wearline"
    text.write_text("not a database " * 100)
    with pytest.raises(RecordUnusable, match="is not a record of Wearline"):
        records.open(text)
    with pytest.raises(RecordUnusable, match="is a folder"):
        records.open(tmp_path)
    other = tmp_path / "other.db"
    raw = sqlite3.connect(other)
    raw.execute("CREATE TABLE t(a)")
    raw.commit()
    raw.close()
    before = other.read_bytes()
    with pytest.raises(RecordUnusable, match="is not a record of Wearline"):
        records.open(other, create=True)
    assert other.read_bytes() == before


def test_a_newer_record_is_refused(record: Record) -> None:
    """A record of a newer program is left alone."""
    record.close()
    raw = sqlite3.connect(record.path)
    raw.execute("UPDATE alembic_version SET version_num = '9999'")
    raw.commit()
    raw.close()
    with pytest.raises(RecordUnusable, match="newer Wearline"):
        records.open(record.path)


@pytest.mark.skipif(os.geteuid() == 0, reason="root may write everywhere")
def test_a_read_only_record_is_refused(record: Record) -> None:
    """A record that may not be written is refused before anything is typed."""
    record.close()
    record.path.chmod(0o444)
    with pytest.raises(RecordUnusable, match="is read-only"):
        records.open(record.path)


def test_a_full_disk_is_said_and_nothing_is_written(record: Record) -> None:
    """SQLite's page limit stands in for a full disk: the same error code, the same words."""
    from store import shop

    with record.write() as conn:
        conn.exec_driver_sql("PRAGMA max_page_count=1")
        pages = conn.exec_driver_sql("PRAGMA page_count").scalar()
        conn.exec_driver_sql(f"PRAGMA max_page_count={pages}")

    def fill() -> None:
        for n in range(2000):
            shop.put(record, "address", f"{n} " + "long " * 500)

    with pytest.raises(RecordUnusable, match="no room left on the disk"):
        fill()
    with record.read() as conn:
        assert conn.exec_driver_sql("PRAGMA integrity_check").scalar() == "ok"


@pytest.mark.parametrize(
    ("mounts", "kind"),
    [
        ("/dev/sda1 / ext4 rw 0 0\nserver:/x /home nfs4 rw 0 0", "nfs4"),
        ("/dev/sda1 / ext4 rw 0 0\n//server/x /home cifs rw 0 0", "cifs"),
        ("server:/ / nfs rw 0 0\n/dev/sda1 /home ext4 rw 0 0", None),
        ("/dev/sda1 / ext4 rw 0 0", None),
    ],
)
def test_a_network_share_is_known_by_its_mount(mounts: str, kind: str | None) -> None:
    """The deepest mount above the file decides."""
    assert share(Path("/home/shop/shop.wearline"), mounts) == kind


def test_a_record_on_a_share_is_refused(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Write-ahead logging on a share loses data; the refusal says what to do."""
    monkeypatch.setattr(records, "share", lambda path: "nfs4")
    with pytest.raises(RecordUnusable, match=r"network share .nfs4.; a record must lie on a disk of this machine"):
        records.open(tmp_path / "shop.wearline", create=True)


def test_the_migrated_schema_is_that_of_the_tables(record: Record) -> None:
    """Columns, types, nullability, keys and indexes of the file are those that the SQLModel tables declare."""
    assert store.tables.__all__
    found = MetaData()
    with record.read() as conn:
        found.reflect(conn)
        declared = SQLModel.metadata
        assert set(found.tables) - {"alembic_version"} >= set(declared.tables)
        for name, table in declared.tables.items():
            kept = found.tables[name]
            assert [(c.name, str(c.type), c.nullable) for c in kept.columns] == [
                (c.name, str(c.type), c.nullable) for c in table.columns
            ], name
            assert {c.name for c in kept.primary_key} == {c.name for c in table.primary_key}, name
            assert {str(f.target_fullname) for f in kept.foreign_keys} == {
                f.target_fullname for f in table.foreign_keys
            }, name
            assert {i.name for i in kept.indexes} == {i.name for i in table.indexes}, name


def test_pragmas_hold_on_every_connection(record: Record) -> None:
    """Durable, with foreign keys, write-ahead logging and a busy timeout."""
    with record.read() as conn:
        asked = {
            name: conn.exec_driver_sql(f"PRAGMA {name}").scalar()
            for name in ("foreign_keys", "synchronous", "journal_mode", "busy_timeout")
        }
    assert asked == {"foreign_keys": 1, "synchronous": 2, "journal_mode": "wal", "busy_timeout": 30_000}


def test_statements_of_one_reading_are_counted(record: Record, tmp_path: Path) -> None:
    """The hot path stays as lean as it was measured: no statement creeps in."""
    from store import readings
    from store.sqlite.engine import driver
    from tests import shop

    shop.fill(record, tmp_path)
    tag = shop.core(record).tag
    readings.add(record, tag, "as-found", "brush-length", "11.4", gauge="CAL-1")
    seen: list[str] = []
    with record.read() as conn:
        raw = driver(conn)
    raw.set_trace_callback(seen.append)
    readings.add(record, tag, "as-found", "brush-length", "11.2", gauge="CAL-1")
    raw.set_trace_callback(None)
    assert len(seen) == 12, seen
