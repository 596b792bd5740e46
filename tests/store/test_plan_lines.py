"""The bushing that a plan proposes: from the listed sizes, the journal and the housing as measured."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest

from store import files, plans, readings
from store.readings import Entry
from store.records import Record
from tests import shop as small

FILES = {
    "more.csv": """model,characteristic,stage,unit,new,low,high,count,source
KS-100,drive-end-journal,both,mm,,13.90,,4,"Sheet 12, rev B"
KS-100,drive-end-bore,both,mm,,,14.15,1,"Sheet 12, rev B"
KS-100,drive-end-clearance,both,mm,,0.02,0.15,,"Sheet 12, rev B"
KS-100,bushing-housing-bore,both,mm,,17.9,18.1,1,"Sheet 12, rev B"
""",
    "numbers.csv": "number,maker,kind\nBU-1,Alder,bushing\nBU-2,Alder,bushing\nBU-3,Alder,bushing\nBU-4,Alder,bushing\n",
    "fits.csv": "number,maker,model\nBU-1,Alder,KS-100\nBU-2,Alder,KS-100\nBU-3,Alder,KS-100\n",
    "sizes.csv": "number,maker,name,value,unit\n"
    + "".join(
        f"BU-{n},Alder,id,{bore},mm\nBU-{n},Alder,od,{outside},mm\n"
        for n, bore, outside in (
            (1, "14.00", "18.05"),
            (2, "14.06", "18.05"),
            (3, "14.06", "18.01"),
            (4, "14.06", "18.05"),
        )
    ),
}


@pytest.fixture
def tag(record: Record, tmp_path: Path) -> str:
    """A core with a worn fit at the drive end: an uneven journal, each part in its own limits."""
    small.fill(record, tmp_path)
    for name, text in FILES.items():
        (tmp_path / name).write_text(text)
    files.load(record, [tmp_path / name for name in FILES])
    tag = small.core(record).tag
    readings.add_all(record, tag, [Entry("drive-end-journal", text) for text in ("13.95", "13.97", "13.99", "13.96")])
    readings.add(record, tag, "as-found", "drive-end-bore", "14.14")
    return tag


def proposed(record: Record, tag: str) -> plans.PlanLine:
    """The line for the bearings."""
    (line,) = [one for one in plans.compute(record, tag).lines if one.component == "bearings"]
    return line


def test_only_a_bushing_listed_for_the_model_that_restores_the_fit(record: Record, tag: str) -> None:
    """BU-1 is too tight on the largest of the journal (0.01 under 0.02), BU-4 is not listed for the model."""
    line = proposed(record, tag)
    assert line.action == "replace-bushing"
    assert "BU-2 Alder would restore it (also BU-3); its press fit is not checked" in line.because
    assert line.formula == "clearance = bore - journal = 14.06 - 13.95 = 0.11 mm at the loosest"
    assert [(p.name, p.value, p.unit) for p in line.predicted] == [("drive-end-clearance", Fraction("0.11"), "mm")]


def test_the_housing_decides_where_it_is_measured(record: Record, tag: str) -> None:
    """A housing of 18.03 holds 18.05 and not 18.01; one of 18.06 holds none of them."""
    readings.add(record, tag, "as-found", "bushing-housing-bore", "18.03")
    assert "BU-2 Alder would restore it; it is tight in the housing" in proposed(record, tag).because
    readings.add(record, tag, "as-found", "bushing-housing-bore", "18.06", position="A0", why="read again")
    line = proposed(record, tag)
    assert "no bushing in the lists for this model restores it" in line.because
    assert line.predicted == ()
