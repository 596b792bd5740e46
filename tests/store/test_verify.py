"""Verify: every column of every table, every row gone or swapped, is named."""

from __future__ import annotations

import shutil
import sqlite3
from collections.abc import Callable
from pathlib import Path

import pytest

from store import backups, exports, files, jobs, people, readings, records, releases, verify
from store.errors import Refused
from store.records import Record
from store.reports import issue
from tests import shop
from tests.store.test_releases import GOOD, measure

PARTS = {
    "numbers.csv": "number,maker,kind,description\nBS-1,Wearwell,brush set,four\nBS-2,Wearwell,brush set,four\n",
    "relations.csv": "from_number,from_maker,relation,to_number,to_maker,source\nBS-1,Wearwell,superseded-by,BS-2,Wearwell,list 4\n",
    "sizes.csv": "number,maker,name,value,unit\nBS-1,Wearwell,length,14,mm\n",
    "fits.csv": "number,maker,model,source\nBS-1,Wearwell,KS-100,list 4\n",
    "attributes.csv": "number,maker,name,value\nBS-1,Wearwell,volts,12\n",
}


@pytest.fixture(scope="module")
def full(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A record with rows in every table, some loaded, some entered, some changed since they were loaded."""
    folder = tmp_path_factory.mktemp("full")
    path = folder / "shop.wearline"
    record = records.open(path, create=True)
    shop.fill(record, folder)
    for name, text in PARTS.items():
        (folder / name).write_text(text)
    files.load(record, [folder / name for name in PARTS])
    (folder / "jobs.csv").write_text("tag,model,serial,taken_in\n900,KS-100,5,2026-01-02\n901,KS-100,6,2026-01-03\n")
    (folder / "readings.csv").write_text(
        "tag,stage,characteristic,value,gauge\n900,as-found,brush-length,11.4,CAL-1\n900,as-found,commutator-runout,0.03,\n"
    )
    (folder / "notes.csv").write_text("tag,text\n900,comm burnt\n901,sol ok\n")
    (folder / "findings.csv").write_text("tag,component,mode\n900,commutator,burned bar\n")
    (folder / "fitted.csv").write_text("tag,number,maker\n900,BS-1,Wearwell\n")
    files.load(record, [folder / n for n in ("jobs.csv", "readings.csv", "notes.csv", "findings.csv", "fitted.csv")])
    people.add(record, "AB", "Ada Birch")
    bench = record.acting("AB")
    people.add(bench, "MW", "Mara Wend", "inspect")
    from store import shop as settings

    settings.put(bench, "shop", "Hollow Lane")
    for serial in ("77", "78"):
        tag = shop.core(bench, serial).tag
        measure(bench, tag, GOOD)
    readings.add(bench, tag, "as-left", "end-play", "0.5", why="again", position="1")
    releases.concede(record.acting("MW"), tag, "end-play", "accepted")
    releases.release(record.acting("MW"), tag)
    record.close()
    assert verify.verify_file(path).wrong is None
    return path


def tampered(full: Path, tmp_path: Path, alter: Callable[[sqlite3.Connection], object]) -> verify.Wrong | None:
    """What verify says of a copy that was altered by the shell, triggers dropped first and put back after."""
    path = tmp_path / "tampered.wearline"
    for ending in ("", "-wal", "-shm"):
        Path(f"{path}{ending}").unlink(missing_ok=True)
    shutil.copyfile(full, path)
    raw = sqlite3.connect(path)
    triggers = raw.execute("SELECT name, sql FROM sqlite_master WHERE type = 'trigger'").fetchall()
    for name, _ in triggers:
        raw.execute(f'DROP TRIGGER "{name}"')
    raw.execute("PRAGMA ignore_check_constraints=ON")
    alter(raw)
    for _, sql in triggers:
        raw.execute(sql)
    raw.commit()
    raw.close()
    return verify.verify_file(path).wrong


def tables(path: Path) -> list[tuple[str, list[str], int]]:
    """Name, columns and rows of every table that a shell could alter."""
    raw = sqlite3.connect(path)
    names = [
        r[0]
        for r in raw.execute(
            "SELECT name FROM sqlite_master WHERE type = 'table' AND name NOT LIKE 'sqlite_%' ORDER BY name"
        )
    ]
    found = [
        (
            n,
            [r[1] for r in raw.execute(f'PRAGMA table_info("{n}")')],
            raw.execute(f'SELECT count(*) FROM "{n}"').fetchone()[0],
        )
        for n in names
    ]
    raw.close()
    return found


def test_every_column_of_every_table(full: Path, tmp_path: Path) -> None:
    """Each column of the first row of each table is altered in turn: verify names it, none passes."""
    passed, tried, empty = [], 0, []
    for name, columns, count in tables(full):
        if not count:
            empty.append(name)
            continue
        for column in columns:

            def alter(raw: sqlite3.Connection, name: str = name, column: str = column) -> None:
                listed = [r[1] for r in raw.execute(f'PRAGMA table_info("{name}")')]
                keys = [r[1] for r in raw.execute(f'PRAGMA table_info("{name}")') if r[5]] or listed
                row = raw.execute(f'SELECT * FROM "{name}" LIMIT 1').fetchone()
                value = row[listed.index(column)]
                new = (
                    987_654
                    if value is None or isinstance(value, int)
                    else 9.87
                    if isinstance(value, float)
                    else f"{value}x"
                )
                where = " AND ".join(f'"{key}" IS ?' for key in keys)
                raw.execute(
                    f'UPDATE "{name}" SET "{column}" = ? WHERE {where}',
                    (new, *(row[listed.index(key)] for key in keys)),
                )

            tried += 1
            if tampered(full, tmp_path, alter) is None:
                passed.append(f"{name}.{column}")
    assert passed == []
    assert tried > 150
    assert set(empty) <= {"text_change", "shorthand", "rework_line", "text_word"}, empty


def test_rows_removed_and_swapped(full: Path, tmp_path: Path) -> None:
    """A row removed from any table, two rows with their contents swapped: named."""
    passed = []
    for name, columns, count in tables(full):
        if not count or name in {"judgement"}:
            continue

        def remove(raw: sqlite3.Connection, name: str = name) -> None:
            raw.execute(f'DELETE FROM "{name}" WHERE rowid = (SELECT max(rowid) FROM "{name}")')

        if tampered(full, tmp_path, remove) is None:
            passed.append(f"{name}: removed")
        if count > 1 and columns[0] == "id":

            def swap(raw: sqlite3.Connection, name: str = name) -> None:
                raw.execute(f'UPDATE "{name}" SET id = -1 WHERE id = 1')
                raw.execute(f'UPDATE "{name}" SET id = 1 WHERE id = 2')
                raw.execute(f'UPDATE "{name}" SET id = 2 WHERE id = -1')

            if tampered(full, tmp_path, swap) is None:
                passed.append(f"{name}: swapped")
    assert passed == []


def test_judgements_removed_or_invented(full: Path, tmp_path: Path) -> None:
    """A judgement that is gone, or that no reading made, is named with its job."""
    wrong = tampered(full, tmp_path, lambda raw: raw.execute("DELETE FROM judgement WHERE stage = 'as-found'") and None)
    assert wrong is not None
    assert "as-found" in wrong.where
    wrong = tampered(full, tmp_path, lambda raw: raw.execute("UPDATE judgement SET verdict = 'in'") and None)
    assert wrong is not None


def test_a_backup_verifies_and_restores(full: Path, tmp_path: Path) -> None:
    """A backup is a record that verifies; a damaged one is not restored."""
    record = records.open(full)
    copy = backups.backup(record, tmp_path / "copy.wearline")
    with pytest.raises(Refused, match="is there already"):
        backups.backup(record, copy)
    record.close()
    assert verify.verify_file(copy).wrong is None
    restored = backups.restore(copy, tmp_path / "new.wearline")
    assert verify.verify_file(restored).wrong is None
    raw = sqlite3.connect(copy)
    raw.execute("UPDATE job SET customer = 'somebody else' WHERE id = 1")
    raw.commit()
    raw.close()
    with pytest.raises(Refused, match="is not restored: job 1"):
        backups.restore(copy, tmp_path / "bad.wearline")
    assert not (tmp_path / "bad.wearline").exists()


def test_daily_backups_are_kept_for_days_and_months(record: Record, clock: object) -> None:
    """One a day; fourteen days and twelve months stay."""
    from tests.conftest import Clock

    assert isinstance(clock, Clock)
    for _ in range(500):
        backups.daily(record)
        clock.move(days=1)
    days = [b.day for b in backups.kept(record)]
    assert days[:14] == sorted(days, reverse=True)[:14]
    assert len(days) in range(24, 27)
    assert len({d[:7] for d in days}) == 12


def test_what_is_exported_loads_to_the_same_reports(full: Path, tmp_path: Path) -> None:
    """Export, load into an empty record: the same report bytes for every job, issued or not."""
    record = records.open(full)
    exports.export(record, tmp_path / "out")
    other = records.open(tmp_path / "other.wearline", create=True)
    files.load(other, sorted((tmp_path / "out").glob("*.csv")))
    for line in jobs.listing(record, outcome=None):
        for ending in ("pdf", "txt", "json"):
            ours = issue.save(record, line.tag, tmp_path / f"a.{ending}").read_bytes()
            theirs = issue.save(other, line.tag, tmp_path / f"b.{ending}").read_bytes()
            assert ours == theirs, (line.tag, ending)
    assert verify.verify(other).wrong is None
    other.close()
    record.close()
