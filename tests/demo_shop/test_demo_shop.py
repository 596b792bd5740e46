"""The demo data is what its generator makes, and loads through the ordinary loaders."""

from __future__ import annotations

from collections import Counter
from pathlib import Path

import pytest

from store import jobs
from store.records import Record
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
    ],
)
def test_the_teaching_cases_stand(demo: Record, note: str, characteristic: str, verdict: str) -> None:
    """A fit out though both parts are in; a brush that the caliper cannot tell."""
    from store import sheets
    from store.sqlite.engine import rows

    with demo.read() as conn:
        ((tag,),) = rows(
            conn, "SELECT j.tag FROM note n JOIN job j ON j.id = n.job_id WHERE n.text LIKE ?", (note + "%",)
        )
    sheet = sheets.sheet(demo, tag, "as-found")
    assert sheet.row(characteristic).verdict.value == verdict
    if characteristic.endswith("clearance"):
        parts = [sheet.row(f"drive-end-{part}").verdict.value for part in ("bore", "journal")]
        assert parts == ["in", "in"]
