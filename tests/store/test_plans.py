"""The rework plan of a job: called before any cut, accepted, done, and held against what was left."""

from __future__ import annotations

import json
from fractions import Fraction
from io import BytesIO
from pathlib import Path

import pypdf
import pytest
from click.testing import CliRunner

from store import files, jobs, plans, readings, sheets, shop
from store.errors import Refused
from store.readings import Entry
from store.records import Record
from store.reports import gather, pdf
from tests import shop as small

LIMITS = """model,characteristic,stage,unit,new,low,high,count,source
KS-100,undercut-depth,both,mm,0.7,0.3,,4,"Sheet 12, rev B"
KS-100,shaft-runout,both,mm,,,0.08,,"Sheet 12, rev B"
KA-300,slip-ring-runout,both,mm,,,0.05,2,"Sheet 30"
KS-100,drive-end-journal,both,mm,,13.93,,1,"Sheet 12, rev B"
KS-100,drive-end-bore,both,mm,,,14.15,1,"Sheet 12, rev B"
KS-100,drive-end-clearance,both,mm,,0.02,0.2,,"Sheet 12, rev B"
"""


def core(record: Record, folder: Path, diameter: str, **others: str) -> str:
    """A starter with a commutator of this diameter that runs out 0.12."""
    small.fill(record, folder)
    (folder / "more.csv").write_text(LIMITS)
    files.load(record, [folder / "more.csv"])
    shop.put(record, "polish", "0.02 mm")
    tag = small.core(record).tag
    values = {
        "commutator-diameter": diameter,
        "commutator-runout": "0.12",
        "shaft-runout": "0.02",
        "undercut-depth": "0.6",
        **others,
    }
    for name, text in values.items():
        count = 4 if name in {"commutator-diameter", "undercut-depth"} else 1
        readings.add_all(record, tag, [Entry(name, text)] * count)
    return tag


def actions(record: Record, tag: str) -> list[tuple[str, str]]:
    """Component and action of every line."""
    return [(line.component, line.action) for line in plans.compute(record, tag).lines]


@pytest.mark.parametrize(
    ("diameter", "action", "size", "said"),
    [
        ("42.62", "replace", "42.48", "under the limit of 42.5: do not turn it"),
        ("42.64", "turn-last-cut", "42.5", "another cut of this size would pass the limit of 42.5"),
    ],
)
def test_undersize_is_called_before_any_cut_and_002_larger_is_the_last(
    record: Record, tmp_path: Path, diameter: str, action: str, size: str, said: str
) -> None:
    """Cleaned up it would be 42.48, under 42.5: replace. 0.02 larger: turn, last cut. On the command, in JSON and the PDF."""
    tag = core(record, tmp_path, diameter)
    assert actions(record, tag) == [("commutator", action)]
    from tui.commands import cli

    done = CliRunner().invoke(cli, ["plan", tag, "--json", "--record", str(record.path)], catch_exceptions=False)
    (line,) = json.loads(done.output)["lines"]
    assert (line["action"], line["predicted"]["commutator-diameter"]) == (action, {"value": size, "unit": "mm"})
    told = CliRunner().invoke(cli, ["plan", tag, "--record", str(record.path)], catch_exceptions=False).output
    assert f"commutator: {action}." in told
    assert f"predicted, not measured: commutator-diameter {size} mm" in told
    pages = pypdf.PdfReader(BytesIO(pdf.draw(gather.draft(record, tag)))).pages
    text = " ".join("".join(p.extract_text() for p in pages).split())
    assert said in text
    assert f"predicted: commutator-diameter {size} mm" in text
    (kept,) = gather.draft(record, tag).plan
    assert (kept.action, kept.outcome, kept.note) == (action, "open", "proposed, not accepted")


def test_two_hundredths_larger_is_the_last_cut(record: Record, tmp_path: Path) -> None:
    """The same core 0.02 mm larger gets `turn, last cut`; the prediction is no reading and enters no verdict."""
    tag = core(record, tmp_path, "42.64")
    assert actions(record, tag) == [("commutator", "turn-last-cut")]
    left = sheets.sheet(record, tag, "as-left")
    assert left.row("commutator-diameter").judged is None
    assert {r.stage for r in readings.of_job(record, tag)} == {"as-found"}


def test_an_alternator_gets_its_slip_rings_and_no_commutator(record: Record, tmp_path: Path) -> None:
    """No undercut, no growler, no turning of a commutator; its rings are turned by their own sizes."""
    core(record, tmp_path, "45")
    tag = small.core(record, "9", "KA-300").tag
    readings.add_all(record, tag, [Entry("slip-ring-diameter", "0.790 in"), Entry("slip-ring-diameter", "0.791 in")])
    readings.add_all(record, tag, [Entry("slip-ring-runout", "0.10"), Entry("slip-ring-runout", "0.04")])
    found = plans.compute(record, tag)
    assert [(line.component, line.action) for line in found.lines] == [("slip rings", "turn")]
    assert "undercut" not in found.lines[0].because
    assert [p.name for p in found.lines[0].predicted] == ["slip-ring-diameter"]


def test_a_worn_fit_asks_for_a_bushing_and_a_worn_shaft_for_more(record: Record, tmp_path: Path) -> None:
    """Both parts in and the fit out: a bushing; the journal itself out: a bushing alone does not restore it."""
    tag = core(record, tmp_path, "45", **{"drive-end-bore": "14.148", "drive-end-journal": "13.94"})
    assert ("bearings", "replace-bushing") in actions(record, tag)
    readings.add(record, tag, "as-found", "drive-end-journal", "13.90", why="read again", position="A0")
    assert ("bearings", "replace") in actions(record, tag)


def test_accepted_lines_are_done_and_held_against_what_was_left(record: Record, tmp_path: Path) -> None:
    """A difference beyond the gauge's uncertainty is marked; so it stands in the report."""
    tag = core(record, tmp_path, "44.10")
    (entry, *_) = plans.accept(record, tag)
    assert plans.accept(record, tag) == plans.listing(record, tag)
    plans.finish(record, tag, entry.id, note="by CN on the small lathe")
    held, *_ = plans.held(record, tag, entry.line)
    assert (held.left, held.beyond) == (None, False)
    readings.add_all(record, tag, [Entry("commutator-diameter", "43.96", "as-left", gauge="MIC-1")] * 4)
    held, *_ = plans.held(record, tag, entry.line)
    assert (held.beyond, "within the gauge's uncertainty" in held.says) == (False, True)
    for place in ("A0", "A90", "B0", "B90"):
        readings.add(
            record, tag, "as-left", "commutator-diameter", "43.90", position=place, gauge="MIC-1", why="cut again"
        )
    held, *_ = plans.held(record, tag, entry.line)
    assert held.beyond
    (line, *_) = gather.draft(record, tag).plan
    assert (line.outcome, "beyond the gauge's uncertainty" in line.note) == ("done", True)


def test_open_lines_stand_in_the_way_of_a_release(record: Record, tmp_path: Path) -> None:
    """What was accepted is done or declined with a reason before the unit leaves."""
    from store import obstacles

    tag = core(record, tmp_path, "44.10")
    (entry, *_) = plans.accept(record, tag)
    assert "rework not done" in {o.kind for o in obstacles.standing(record, tag)}
    with pytest.raises(Refused, match="say why"):
        plans.finish(record, tag, entry.id, outcome="declined")
    for line in plans.listing(record, tag):
        plans.finish(record, tag, line.id, outcome="declined", note="customer does not want it")
    assert "rework not done" not in {o.kind for o in obstacles.standing(record, tag)}


def test_sizes_that_cannot_be_are_one_clear_line(record: Record, tmp_path: Path) -> None:
    """A runout larger than the diameter."""
    tag = core(record, tmp_path, "44.10")
    readings.add(record, tag, "as-found", "commutator-runout", "60", why="typed so")
    with pytest.raises(Refused, match="is one of them a slip"):
        plans.compute(record, tag)


def test_no_line_that_there_is_not(record: Record, tmp_path: Path) -> None:
    """Line numbers outside the plan are refused, and an ended job's list stays."""
    tag = core(record, tmp_path, "44.10")
    with pytest.raises(Refused, match="has no line 9"):
        plans.accept(record, tag, [9])
    assert jobs.find(record, tag).is_open


def test_a_line_is_listed_once_however_often_it_is_accepted(record: Record, tmp_path: Path) -> None:
    """Twice in one go, and again."""
    tag = core(record, tmp_path, "44.10")
    assert len(plans.accept(record, tag, [1, 1])) == 1
    assert len(plans.accept(record, tag, [1])) == 1


def test_a_part_that_is_replaced_is_held_against_nothing(record: Record, tmp_path: Path) -> None:
    """Called before the cut and replaced: the new armature's diameter is not held against what the old one would have had."""
    tag = core(record, tmp_path, "42.62")
    (entry,) = plans.accept(record, tag)
    assert entry.line.action == "replace"
    readings.add_all(record, tag, [Entry("commutator-diameter", "45.0", "as-left")] * 4)
    assert plans.held(record, tag, entry.line) == ()


def test_without_a_known_uncertainty_it_is_said_so(record: Record, tmp_path: Path) -> None:
    """No gauge named: any difference is marked, and the words do not speak of a gauge's uncertainty that nobody knows."""
    tag = core(record, tmp_path, "44.10")
    (entry, *_) = plans.accept(record, tag)
    readings.add_all(record, tag, [Entry("commutator-diameter", "43.95", "as-left")] * 4)
    held, *_ = plans.held(record, tag, entry.line)
    assert held.beyond
    assert held.says == "predicted 43.96 mm, left 43.95: 0.01 apart, the gauge's uncertainty is not known"


def test_a_clearance_is_held_at_its_loosest(record: Record, tmp_path: Path) -> None:
    """Predicted at the loosest, so held against largest bore less smallest journal, whichever end governs the verdict."""
    tag = core(record, tmp_path, "45")
    readings.add(record, tag, "as-left", "drive-end-bore", "14.00")
    readings.add(record, tag, "as-left", "drive-end-journal", "13.975")
    line = plans.PlanLine(
        "bearings", "replace-bushing", "", "", (plans.Predicted("drive-end-clearance", Fraction("0.025"), "mm"),)
    )
    (held,) = plans.held(record, tag, line)
    assert (held.left, held.beyond) == (Fraction("0.025"), False)


def test_the_plan_follows_the_revision_of_the_job(record: Record, tmp_path: Path) -> None:
    """A limit that moves: the job is planned under the revision it stands on, and anew once it is brought to the new one."""
    tag = core(record, tmp_path, "42.64")
    assert actions(record, tag) == [("commutator", "turn-last-cut")]
    small_change = "model,characteristic,stage,unit,new,low,high,at_limit,count,source\n"
    (tmp_path / "moved.csv").write_text(
        small_change + 'KS-100,commutator-diameter,both,mm,45,42.6,,pass,4,"Sheet 12, rev C"\n'
    )
    files.load(record, [tmp_path / "moved.csv"])
    assert actions(record, tag) == [("commutator", "turn-last-cut")]
    jobs.move_to_revision(record, tag)
    assert actions(record, tag) == [("commutator", "replace")]


def test_an_ended_job_keeps_its_list_and_still_shows_its_plan(record: Record, tmp_path: Path) -> None:
    """What was planned can be read; nothing more is accepted or ended."""
    from store import releases

    tag = core(record, tmp_path, "44.10")
    (entry, *_) = plans.accept(record, tag, [1])
    releases.scrap(record, tag, "cracked")
    assert actions(record, tag)
    with pytest.raises(Refused, match="its rework list stays as it is"):
        plans.accept(record, tag)
    with pytest.raises(Refused, match="its rework list stays as it is"):
        plans.finish(record, tag, entry.id)
