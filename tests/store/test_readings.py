"""Readings: added, corrected, refused; durable, append-only, and judged in the same transaction."""

from __future__ import annotations

import sqlite3
from pathlib import Path

import pytest

from store import jobs, judgements, limit_sheets, people, readings, sheets
from store.errors import NotFound, ReadingRefused, Refused
from store.readings import Accepted, Entry
from store.records import Record
from tests import shop
from tests.conftest import Clock


@pytest.fixture
def tag(record: Record, tmp_path: Path) -> str:
    shop.fill(record, tmp_path)
    return shop.core(record).tag


def test_a_reading_is_kept_as_typed_and_judged(record: Record, tag: str) -> None:
    """What was typed stands beside its exact value; the verdict comes back with it."""
    accepted = readings.add(record, tag, "as-found", "commutator-runout", " .02 ")
    assert (accepted.reading.typed.text, str(accepted.reading.typed.value), accepted.reading.typed.unit) == (
        ".02",
        "1/50",
        "mm",
    )
    assert [(j.characteristic.name, j.judgement.verdict.value) for j in accepted.judged] == [
        ("commutator-runout", "in")
    ]


def test_readings_go_to_the_next_empty_position(record: Record, tag: str) -> None:
    """Without a position a reading goes to the first one that has none."""
    for text in ("11.4", "11.2", "11.5", "9.2"):
        last = readings.add(record, tag, "as-found", "brush-length", text)
    assert [r.position for r in readings.of_job(record, tag)] == ["1", "2", "3", "4"]
    assert last.judged[0].judgement.verdict.value == "out"
    assert (
        last.judged[0].because
        == "brush 4 is 9.2 mm, 0.3 under the 9.5 minimum; judged as read, the gauge's uncertainty is not known"
    )
    with pytest.raises(Refused, match="has all its 4 readings"):
        readings.add(record, tag, "as-found", "brush-length", "11")


def test_a_correction_adds_and_erases_nothing(record: Record, tag: str) -> None:
    """The corrected reading stays in the record, names its successor, and no longer counts."""
    readings.add(record, tag, "as-found", "commutator-runout", "0.5")
    fixed = readings.add(record, tag, "as-found", "commutator-runout", "0.05", why="decimal slipped")
    assert [r.typed.text for r in readings.of_job(record, tag)] == ["0.05"]
    both = readings.of_job(record, tag, corrected=True)
    assert [(r.typed.text, r.corrects, r.why) for r in both] == [
        ("0.5", None, ""),
        ("0.05", both[0].id, "decimal slipped"),
    ]
    assert fixed.judged[0].judgement.verdict.value == "in"


def test_a_second_reading_at_a_place_needs_a_reason(record: Record, tag: str) -> None:
    """Two benches that write the same place: the second is told, not merged."""
    readings.add(record, tag, "as-found", "brush-length", "11.4", position="1")
    with pytest.raises(Refused, match="was read already; correct it with a reason"):
        readings.add(record, tag, "as-found", "brush-length", "11.4", position="1")
    with pytest.raises(Refused, match="has no reading at 2 to correct"):
        readings.add(record, tag, "as-found", "brush-length", "11.4", position="2", why="wrong")


@pytest.mark.parametrize(
    "statement",
    ["UPDATE reading SET value = '99'", "DELETE FROM reading", "DELETE FROM audit", "UPDATE audit SET by = 'XX'"],
)
def test_the_shell_cannot_change_what_was_accepted(record: Record, tag: str, statement: str) -> None:
    """Triggers refuse UPDATE and DELETE even on a bare sqlite3 connection."""
    readings.add(record, tag, "as-found", "commutator-runout", "0.02")
    raw = sqlite3.connect(record.path)
    with pytest.raises(sqlite3.IntegrityError, match=r"never changed"):
        raw.execute(statement)
    raw.close()


@pytest.mark.parametrize(
    ("characteristic", "text", "why"),
    [
        ("brush-length", "", "nothing is typed"),
        ("brush-length", "1,234", "may be 1.234 or 1234"),
        ("brush-length", "NaN", "is no number"),
        ("brush-length", "inf", "is no number"),
        ("brush-length", "11.4 11.2", "two numbers"),
        ("brush-length", "5 N", "N is not a unit of length"),
        ("brush-length", "-3", "below zero"),
        ("brush-length", "1e99", "exponent"),
        ("brush-length", "9" * 10_000, "characters"),
        ("growler-short", "perhaps", "neither pass nor fail"),
        ("brush-length", "not measured", "say why"),
    ],
)
def test_refused_readings_write_nothing(record: Record, tag: str, characteristic: str, text: str, why: str) -> None:
    """Each refusal is one clear line, and the record is as it was."""
    with pytest.raises(ReadingRefused, match=why) as caught:
        readings.add(record, tag, "as-found", characteristic, text)
    assert "\n" not in str(caught.value)
    assert len(str(caught.value)) < 160
    assert readings.of_job(record, tag) == ()


def test_what_does_not_belong_on_the_machine_is_refused(record: Record, tag: str) -> None:
    """Undercut on an alternator, a derived size typed in, a stage or characteristic that there is not."""
    alternator = shop.core(record, "7", "KA-300").tag
    with pytest.raises(Refused, match="undercut-depth is not measured on an alternator"):
        readings.add(record, alternator, "as-found", "undercut-depth", "0.5")
    with pytest.raises(Refused, match="is computed from"):
        readings.add(record, tag, "as-found", "commutator-end-clearance", "0.05")
    with pytest.raises(Refused, match="is no stage"):
        readings.add(record, tag, "later", "brush-length", "11")
    with pytest.raises(NotFound, match="did you mean brush-length"):
        readings.add(record, tag, "as-found", "brush-lenght", "11")


def test_a_bar_beyond_the_model_is_refused(record: Record, tag: str) -> None:
    """Bars are counted against the model's commutator."""
    with pytest.raises(Refused, match="this model's commutator has 27 bars"):
        readings.add(record, tag, "as-found", "bar-to-bar", "31", position="28")


def test_derived_characteristics_follow_their_parts(record: Record, tag: str) -> None:
    """A bore and a journal make a clearance, judged in the same transaction."""
    readings.add(record, tag, "as-found", "commutator-end-bore", "16.05 mm")
    readings.add(record, tag, "as-found", "commutator-end-journal", "15.95 mm")
    row = sheets.sheet(record, tag, "as-found").row("commutator-end-clearance")
    assert row.judged is not None
    assert (str(row.judged.judgement.value), row.verdict.value) == ("1/10", "no limit")
    limit = limit_sheets.LimitEntry("commutator-end-clearance", "own sheet", "mm", high="0.08")
    limit_sheets.enter(record, "KS-100", [limit])
    jobs.move_to_revision(record, tag)
    accepted = readings.add(record, tag, "as-found", "commutator-end-journal", "15.9 mm", why="read again")
    derived = {j.characteristic.name: j.judgement for j in accepted.judged}
    assert (str(derived["commutator-end-clearance"].value), derived["commutator-end-clearance"].verdict.value) == (
        "3/20",
        "out",
    )


def test_a_queue_is_written_whole_and_its_refusals_answered(record: Record, tag: str) -> None:
    """What queued up goes into one transaction; the refused one is answered by its reason, the others stand."""
    entries = [Entry("brush-length", text, position=str(n)) for n, text in enumerate(["11.4", "x", "9.2"], start=1)]
    first, second, third = readings.add_many(record, tag, entries)
    assert isinstance(first, Accepted)
    assert isinstance(second, ReadingRefused)
    assert isinstance(third, Accepted)
    assert [r.position for r in readings.of_job(record, tag)] == ["1", "3"]


def test_all_or_none_where_asked(record: Record, tag: str) -> None:
    """The command's many values are one change: a refused one refuses all."""
    with pytest.raises(ReadingRefused):
        readings.add_all(record, tag, [Entry("brush-length", "11.4"), Entry("brush-length", "x")])
    assert readings.of_job(record, tag) == ()


def test_judgements_are_those_of_the_readings(record: Record, tag: str) -> None:
    """Kept judgements are what judging anew gives."""
    for text in ("11.4", "11.2", "11.5", "9.52"):
        readings.add(record, tag, "as-found", "brush-length", text, gauge="CAL-1")
    readings.add(record, tag, "as-found", "growler-short", "fail bars 4-5")
    job = jobs.find(record, tag)
    before = judgements.of_job(record, job, "as-found")
    with record.write() as conn:
        judgements.rebuild(record, conn, job)
    assert judgements.of_job(record, job, "as-found") == before
    found = {j.characteristic.name: j.judgement.verdict.value for j in before}
    assert (found["growler-short"], found["brush-length"]) == ("out", "in doubt")


def test_the_standing_counts_what_the_sheet_asks_for(record: Record, tag: str) -> None:
    """Rows with a limit and without a reading are not measured; rows that nothing asks for are not counted."""
    readings.add(record, tag, "as-found", "growler-short", "pass")
    standing = sheets.sheet(record, tag, "as-found").standing
    assert standing == {"in": 1, "out": 0, "in doubt": 0, "not measured": 4, "no limit": 0, "not comparable": 0}


def test_who_acts_must_be_known(record: Record, tag: str) -> None:
    """From the first person on, a reading says who took it."""
    people.add(record, "JD", "Jo Dunmore")
    with pytest.raises(Refused, match="say who acts"):
        readings.add(record, tag, "as-found", "growler-short", "pass")
    accepted = readings.add(record.acting("jd"), tag, "as-found", "growler-short", "pass")
    assert accepted.reading.by == "JD"
    with pytest.raises(NotFound, match="no person"):
        record.acting("XX")


def test_an_ended_job_takes_no_reading(record: Record, tag: str) -> None:
    """The sheet of a job that has ended stays as it was."""
    with record.change("ended", tag) as change:
        from store.tables.jobs import JobRow

        change.update(JobRow, jobs.find(record, tag).id, outcome="scrapped", ended="2026-11-02")
    with pytest.raises(Refused, match="was scrapped"):
        readings.add(record, tag, "as-found", "growler-short", "pass")


def test_a_new_calibration_speaks_for_what_is_read_from_then_on(record: Record, tag: str, clock: Clock) -> None:
    """Readings are as sure as the calibration in force on their day; verify agrees before and after."""
    from store import calibrations, verify

    readings.add_all(
        record, tag, [Entry("brush-length", text, gauge="CAL-1") for text in ("11.4", "11.2", "11.5", "9.52")]
    )
    before = sheets.sheet(record, tag, "as-found").row("brush-length").verdict.value
    clock.move(days=30)
    calibrations.enter(record, "CAL-1", expanded_uncertainty="0.002", due="2027-12-01")
    assert sheets.sheet(record, tag, "as-found").row("brush-length").verdict.value == before == "in doubt"
    later = shop.core(record, "99").tag
    readings.add_all(
        record, later, [Entry("brush-length", text, gauge="CAL-1") for text in ("11.4", "11.2", "11.5", "9.52")]
    )
    assert sheets.sheet(record, later, "as-found").row("brush-length").verdict.value == "in"
    assert verify.verify(record).wrong is None
