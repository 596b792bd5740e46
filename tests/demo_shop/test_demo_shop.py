"""The demo data is what its generator makes, and loads through the ordinary loaders."""

from __future__ import annotations

import csv
import io
from collections import Counter
from decimal import Decimal
from pathlib import Path

import pytest

from store import comebacks, jobs, plans, sheets
from store.records import Record
from store.sqlite.engine import rows
from tests.demo_shop.sheets import STEPS
from tests.demo_shop.write import files

FOLDER = Path(__file__).resolve().parents[2] / "demo_data"


def test_the_generator_makes_the_committed_files() -> None:
    """Byte for byte, so that nobody edits one without the other."""
    for name, text in files().items():
        assert (FOLDER / name).read_bytes() == text.encode(), name


def test_the_demo_is_a_shop_of_two_years(demo: Record) -> None:
    """Enough jobs, open ones at every standing, comebacks, models without limits."""
    lines = jobs.listing(demo, outcome=None, most=10_000)
    assert len(lines) >= 300
    stands = Counter(line.stands for line in lines)
    assert {"taken in", "stripped", "on rework", "to inspect", "released", "scrapped"} <= set(stands)
    assert sum(line.earlier is not None for line in lines) >= 25


@pytest.mark.parametrize(
    ("note", "characteristic", "verdict"),
    [
        ("bushing and shaft each just in, the fit is not", "drive-end-clearance", "out"),
        ("one brush right at the limit", "brush-length", "in doubt"),
        ("one pair of bars reads low", "bar-to-bar", "out"),
        ("one pair of bars reads high", "bar-to-bar", "out"),
    ],
)
def test_the_teaching_cases_stand(demo: Record, note: str, characteristic: str, verdict: str) -> None:
    """A fit out though both parts are in; a brush that the caliper cannot tell."""
    tag = _told(demo, note)
    sheet = sheets.sheet(demo, tag, "as-found")
    assert sheet.row(characteristic).verdict.value == verdict
    if characteristic.endswith("clearance"):
        parts = [sheet.row(f"drive-end-{part}").verdict.value for part in ("bore", "journal")]
        assert parts == ["in", "in"]


@pytest.mark.parametrize(
    ("note", "action"), [("comm just over the minimum", "turn-last-cut"), ("comm would be under", "replace")]
)
def test_the_lathe_cases_stand(demo: Record, note: str, action: str) -> None:
    """The last cut, and the armature that is called undersize before any cut and ends scrapped."""
    tag = _told(demo, note)
    assert action in {line.action for line in plans.compute(demo, tag).lines if line.component == "commutator"}
    assert jobs.find(demo, tag).outcome == ("released" if action == "turn-last-cut" else "scrapped")


def test_what_was_released_is_in_limits_as_left(demo: Record) -> None:
    """Nothing out, nothing in doubt; a test that was left out is conceded in a note."""
    sql = """SELECT DISTINCT g.verdict FROM judgement g JOIN job j ON j.id = g.job_id
             WHERE j.outcome = 'released' AND g.stage = 'as-left'"""
    with demo.read() as conn:
        assert {verdict for (verdict,) in rows(conn, sql)} == {"in", "no limit"}
    untested = jobs.find(demo, _told(demo, "running test not done"))
    assert untested.outcome == "released"


@pytest.mark.parametrize("by", ["model", "part", "supplier", "lot", "assembler", "finding"])
def test_only_the_planted_lot_stands_out(demo: Record, by: str) -> None:
    """The bad lot is named; the small supplier with early comebacks and everything else is not."""
    named = [g.name for g in comebacks.review(demo, by=by, until="2026-11-27").groups if g.named]
    assert named == (["CS-4417"] if by == "lot" else [])


def test_readings_are_what_the_gauge_can_show() -> None:
    """Each is a whole number of the gauge's steps; no file is over 1.5 MB."""
    made = files()
    assert max(len(text.encode()) for text in made.values()) < 1_500_000
    for line in csv.DictReader(io.StringIO(made["readings.csv"])):
        if line["gauge"]:
            assert (Decimal(line["value"]) % Decimal(str(STEPS[line["gauge"]]))) == 0, line


def _told(demo: Record, note: str) -> str:
    """Tag of the first job with a note that begins so."""
    sql = "SELECT j.tag FROM note n JOIN job j ON j.id = n.job_id WHERE n.text LIKE ? ORDER BY j.tag LIMIT 1"
    with demo.read() as conn:
        ((tag,),) = rows(conn, sql, (note + "%",))
    return str(tag)
