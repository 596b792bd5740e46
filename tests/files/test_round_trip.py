"""load(save(x)) is x, for every kind."""

from __future__ import annotations

from pathlib import Path

import pytest

from store import files, readings, records
from store.records import Record
from tests import shop


@pytest.fixture(scope="module")
def saved(demo_record_path: Path, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """Every kind of the demo record, saved."""
    folder = tmp_path_factory.mktemp("saved")
    record = records.open(demo_record_path)
    for kind in files.kinds():
        files.save(record, kind.name, folder / f"{kind.name}.csv")
    record.close()
    return folder


@pytest.fixture(scope="module")
def again(saved: Path, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """What was saved, loaded into an empty record and saved anew."""
    folder = tmp_path_factory.mktemp("again")
    record = records.open(folder / "again.wearline", create=True)
    files.load(record, sorted(saved.glob("*.csv")))
    for kind in files.kinds():
        files.save(record, kind.name, folder / f"{kind.name}.csv")
    record.close()
    return folder


@pytest.mark.parametrize("kind", [kind.name for kind in files.kinds()])
def test_what_is_saved_loads_to_the_same(saved: Path, again: Path, kind: str) -> None:
    """Byte for byte."""
    assert (again / f"{kind}.csv").read_bytes() == (saved / f"{kind}.csv").read_bytes()


def test_a_correction_survives(record: Record, tmp_path: Path) -> None:
    """A corrected reading, its reason and its note come back as a correction."""
    shop.fill(record, tmp_path)
    tag = shop.core(record).tag
    readings.add(record, tag, "as-found", "commutator-runout", "0.5")
    readings.add(record, tag, "as-found", "commutator-runout", "0.05", why="decimal slipped", note="seen twice")
    for kind in ("models", "limits", "gauges", "jobs", "readings"):
        files.save(record, kind, tmp_path / f"{kind}.csv")
    other = records.open(tmp_path / "other.wearline", create=True)
    files.load(other, [tmp_path / f"{kind}.csv" for kind in ("models", "limits", "gauges", "jobs", "readings")])
    kept = [(r.typed.text, r.why, r.note) for r in readings.of_job(other, tag, corrected=True)]
    other.close()
    assert kept == [("0.5", "", ""), ("0.05", "decimal slipped", "seen twice")]
