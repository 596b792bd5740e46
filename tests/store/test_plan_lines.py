"""The lines of a plan: bushings from the lists, shafts first, what each thing that is out asks for, and how long brushes last."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest

from store import files, plans, readings
from store.errors import Refused
from store.readings import Entry
from store.records import Record
from store.rules.statistic import Statistic
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


def test_a_bushing_for_another_place_is_not_proposed(record: Record, tag: str, tmp_path: Path) -> None:
    """BU-2 is listed for the commutator end, BU-3 for the drive end: only that one."""
    (tmp_path / "fits.csv").write_text(
        "number,maker,model,position\nBU-5,Alder,KS-100,commutator end\nBU-6,Alder,KS-100,Drive-end bushing\n"
    )
    (tmp_path / "numbers.csv").write_text("number,maker,kind\nBU-5,Alder,bushing\nBU-6,Alder,bushing\n")
    (tmp_path / "sizes.csv").write_text(
        "number,maker,name,value,unit\n"
        + "".join(f"BU-{n},Alder,id,14.045,mm\nBU-{n},Alder,od,18.05,mm\n" for n in (5, 6))
    )
    files.load(record, [tmp_path / name for name in ("numbers.csv", "fits.csv", "sizes.csv")])
    said = proposed(record, tag).because
    assert "BU-6 Alder would restore it" in said
    assert "BU-5" not in said


OUT = """model,characteristic,stage,unit,new,low,high,count,source
{model},shaft-runout,both,mm,,,0.08,,own
{model},{name},both,{unit},,{low},{high},,own
"""


def out(
    record: Record, folder: Path, model: str, name: str, text: str, unit: str = "", low: str = "", high: str = ""
) -> str:
    """A core of which one thing is out, and nothing else is measured."""
    small.fill(record, folder)
    (folder / "out.csv").write_text(OUT.format(model=model, name=name, unit=unit, low=low, high=high))
    files.load(record, [folder / "out.csv"])
    tag = small.core(record, "77", model).tag
    readings.add(record, tag, "as-found", name, text)
    return tag


@pytest.mark.parametrize(
    ("model", "name", "text", "unit", "low", "high", "line"),
    [
        ("KS-100", "undercut-depth", "0.2", "mm", "0.3", "", "commutator: re-undercut"),
        ("KS-100", "undercut-width", "fail fin left", "", "", "", "commutator: re-undercut"),
        ("KS-100", "bar-height", "0.2", "mm", "", "0.05", "commutator: secure-and-measure-again"),
        ("KS-100", "armature-body-runout", "0.5", "mm", "", "0.1", "armature: straighten-or-replace"),
        ("KS-100", "bushing-housing-bore", "20.1", "mm", "20.0", "20.021", "bearings: replace"),
        ("KA-300", "bearing-journal", "16.9", "mm", "16.99", "", "bearings: replace"),
        ("KS-100", "no-load-current", "150", "A", "", "90", "running tests: find-the-cause"),
        ("KS-100", "stall-voltage", "9", "V", "6", "7", "running tests: test-again"),
        ("KS-100", "insulation-resistance", "0.2", "Mohm", "1", "", "insulation: clean-dry-and-test-again"),
        ("KS-100", "winding-temperature", "90", "degC", "10", "40", "insulation: test-again"),
        ("KA-300", "stator-resistance", "900", "mohm", "", "100", "stator: rewind-or-replace"),
        ("KS-100", "brush-spring-force", "4", "N", "8", "", "brushes: replace"),
    ],
)  # fmt: skip
def test_what_is_out_asks_for_what_mends_it(
    record: Record, tmp_path: Path, model: str, name: str, text: str, unit: str, low: str, high: str, line: str
) -> None:
    """One line each, and never to replace what a test is named after; nothing that is out is passed over."""
    tag = out(record, tmp_path, model, name, text, unit, low, high)
    assert [f"{one.component}: {one.action}" for one in plans.compute(record, tag).lines] == [line]


@pytest.mark.parametrize("model", ["KS-100", "KA-300"])
def test_a_bent_shaft_comes_first_whatever_else_is_measured(record: Record, tmp_path: Path, model: str) -> None:
    """No diameter, starter or alternator: straighten or replace it."""
    tag = out(
        record, tmp_path, model, "armature-body-runout" if model == "KS-100" else "rotor-runout", "0.01", "mm", "", "1"
    )
    readings.add(record, tag, "as-found", "shaft-runout", "0.2")
    (line,) = plans.compute(record, tag).lines
    assert line.action == "straighten-shaft-first"
    assert "0.2 over 0.08 mm" in line.because


def test_a_rotor_out_of_true_is_not_turned_on(record: Record, tmp_path: Path) -> None:
    """On an alternator the rotor's runout decides, and the shaft's where that is the one out."""
    tag = out(record, tmp_path, "KA-300", "rotor-runout", "0.02", "mm", "", "0.05")
    readings.add_all(record, tag, [Entry("slip-ring-diameter", "0.9 in")] * 2)
    readings.add(record, tag, "as-found", "shaft-runout", "0.3")
    assert [line.action for line in plans.compute(record, tag).lines] == ["straighten-shaft-first"]


def test_slip_rings_are_cut_below_a_defect_of_known_depth_only(record: Record, tmp_path: Path) -> None:
    """Grooved rings: measured first, then turned below it; no word of a commutator."""
    tag = out(record, tmp_path, "KA-300", "slip-ring-surface", "fail grooved")
    readings.add_all(record, tag, [Entry("slip-ring-diameter", "0.9 in")] * 2)
    plan = plans.compute(record, tag)
    (line,) = plan.lines
    assert (line.component, line.action, line.predicted) == ("slip rings", "polish", ())
    assert any("the depth of the surface defect is not measured" in one for one in plan.remarks)
    readings.add(record, tag, "as-found", "slip-ring-defect-depth", "0.002 in")
    readings.add_all(record, tag, [Entry("slip-ring-runout", "0.001 in")] * 2)
    (line,) = plans.compute(record, tag).lines
    assert (line.action, [(p.name, p.value) for p in line.predicted]) == (
        "turn", [("slip-ring-diameter", Fraction("0.9") - Fraction("0.001") - 2 * Fraction("0.002") - Fraction("0.000788"))]
    )  # fmt: skip
    assert "commutator" not in line.because + line.formula


def test_sizes_on_an_inch_sheet_end_and_promise_no_more(record: Record, tmp_path: Path) -> None:
    """0.02 mm of polish are 0.000788 in, rounded up; every figure of the formula ends."""
    from store import shop

    shop.put(record, "polish", "0.02 mm")
    tag = out(record, tmp_path, "KA-300", "slip-ring-runout", "0.004", "in", "", "0.002")
    readings.add(record, tag, "as-found", "slip-ring-runout", "0.003")
    readings.add_all(record, tag, [Entry("slip-ring-diameter", "0.9")] * 2)
    (line,) = plans.compute(record, tag).lines
    assert line.formula == "D - r - 2g - p = 0.9 - 0.004 - 2 x 0 - 0.000788 = 0.895212 in"


def life(record: Record, folder: Path, **later: str) -> str:
    """A core back after 1,000 h and 4,000 starts, its brushes down from 14 to 12 mm; what is said of them."""
    from store import jobs

    small.fill(record, folder)
    (folder / "jobs.csv").write_text(
        "tag,model,serial,hours,starts,taken_in,outcome,ended\nE1,KS-100,L1,500,1000,2026-01-05,released,2026-01-09\n"
    )
    (folder / "readings.csv").write_text(
        "tag,stage,characteristic,position,value\n" + "".join(f"E1,as-left,brush-length,{n},14\n" for n in range(1, 5))
    )
    files.load(record, [folder / "jobs.csv", folder / "readings.csv"])
    tag = jobs.take_in(record, model="KS-100", serial="L1", **later).tag
    readings.add_all(record, tag, [Entry("brush-length", "12")] * 4)
    (line,) = [one for one in plans.compute(record, tag).lines if one.component == "brushes"]
    return line.because


def test_brushes_last_so_many_hours_and_starts(record: Record, tmp_path: Path) -> None:
    """2 mm in 1,000 h and 4,000 starts leave 1,250 h and 5,000 starts to 9.5 mm, as a prediction."""
    said = life(record, tmp_path, hours="1500", starts="5000")
    assert "at the rate of 2 mm in 1000 h since E1 the limit is 1250 h away, predicted, not measured" in said
    assert "at the rate of 2 mm in 4000 starts since E1 the limit is 5000 starts away" in said


def test_no_life_where_none_can_be_reckoned(record: Record, tmp_path: Path) -> None:
    """A counter that went back is said in one line; a count that is not known says nothing."""
    said = life(record, tmp_path, hours="400")
    assert "no life can be reckoned by hours: the later reading has no more hours or starts" in said
    assert "starts away" not in said


def test_a_dead_winding_comes_before_any_turning(record: Record, tmp_path: Path) -> None:
    """Nothing is turned on an armature that is to be rewound or replaced: that line stands first."""
    tag = out(record, tmp_path, "KS-100", "armature-ground", "fail")
    readings.add_all(record, tag, [Entry("commutator-diameter", "44")] * 4)
    readings.add(record, tag, "as-found", "commutator-runout", "0.12")
    assert [line.action for line in plans.compute(record, tag).lines] == ["rewind-or-replace", "turn"]


def test_an_alternator_is_never_offered_a_commutators_work(record: Record, tmp_path: Path) -> None:
    """Every test that it has fails, its rings run out and its shaft is bent or not: no undercut, growler or commutator."""
    from store.catalogue import catalogue

    small.fill(record, tmp_path)
    tag = small.core(record, "9", "KA-300").tag
    own = [c for c in catalogue(record).of("alternator") if not c.derive and "as-found" in c.stages]
    tests = [Entry(c.name, "fail") for c in own if c.statistic is Statistic.attribute]
    readings.add_all(record, tag, tests)
    for name in ("slip-ring-diameter", "slip-ring-runout", "rotor-runout", "shaft-runout", "slip-ring-defect-depth"):
        readings.add(record, tag, "as-found", name, "20" if name == "slip-ring-diameter" else "0.1")
    plan = plans.compute(record, tag)
    said = " ".join([*(f"{p.component} {p.action} {p.because} {p.formula}" for p in plan.lines), *plan.remarks])
    assert len(plan.lines) > len(tests) / 2
    for word in ("commutator", "undercut", "growler"):
        assert word not in said
    for name in ("undercut-depth", "growler-short", "commutator-diameter"):
        with pytest.raises(Refused, match=f"{name} is not measured on an alternator"):
            readings.add(record, tag, "as-found", name, "1" if name != "growler-short" else "pass")
