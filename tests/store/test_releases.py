"""Release, concession, amendment: what stands in the way, what is frozen, and that it stays."""

from __future__ import annotations

from pathlib import Path

import pytest

from store import audit, jobs, obstacles, people, pins, readings, releases, shop, verify
from store.errors import Refused
from store.readings import Entry
from store.records import Record
from store.reports import canonical, pdf
from tests import shop as small
from tests.conftest import Clock

GOOD = {
    "brush-length": ["13.9", "13.8", "13.9", "13.8"],
    "commutator-diameter": ["44.1", "44.1", "44.1", "44.1"],
    "commutator-runout": ["0.01"],
    "growler-short": ["pass"],
    "end-play": ["0.2"],
}


def measure(record: Record, tag: str, values: dict[str, list[str]], gauge: str | None = None) -> None:
    """As-left readings."""
    for name, texts in values.items():
        readings.add_all(
            record,
            tag,
            [Entry(name, text, "as-left", gauge=gauge if name != "growler-short" else None) for text in texts],
        )


@pytest.fixture
def tag(record: Record, tmp_path: Path) -> str:
    """A core with good as-left readings by AB, and an inspector MW."""
    small.fill(record, tmp_path)
    people.add(record, "AB", "Ada Birch")
    people.add(record.acting("AB"), "MW", "Mara Wend", "inspect")
    people.add(record.acting("AB"), "OV", "Otto Vale", "bench;inspect;own")
    bench = record.acting("AB")
    made = small.core(bench).tag
    measure(bench, made, GOOD)
    return made


def test_a_release_freezes_a_numbered_report(record: Record, tag: str, clock: Clock) -> None:
    """The report carries number, signature and the head of the chain; it prints the same bytes a month later."""
    inspector = record.acting("MW")
    with record.read() as conn:
        head = audit.head(conn)
    issued = releases.release(inspector, tag, note="ran well")
    report, text = releases.standing(record, tag)
    assert (report.number, report.audit_head, report.draft) == ("WL-000001", head, False)
    assert report.signature is not None
    assert (report.signature.by.name, report.signature.note) == ("Mara Wend", "ran well")
    assert jobs.find(record, tag).outcome == "released"
    first = pdf.draw(report, text)
    clock.move(days=31)
    again, same = releases.standing(record, tag)
    assert (canonical.to_json(again).strip(), same) == (text, text)
    assert pdf.draw(again, same) == first
    assert verify.knows(record, head) is not None
    assert verify.verify(record).wrong is None
    assert releases.of_job(record, tag) == (issued,)


def test_every_obstacle_is_said(record: Record, tmp_path: Path) -> None:
    """Not measured, out, in doubt, an overdue gauge, own work: line by line, each with where it is mended."""
    small.fill(record, tmp_path)
    people.add(record, "ET", "Etta Thorn", "bench;inspect")
    both = record.acting("ET")
    made = small.core(both).tag
    measure(both, made, {"brush-length": ["13.9", "13.8", "13.9", "9.51"]}, "CAL-1")
    measure(both, made, {"commutator-runout": ["0.3"]}, "MIC-1")
    found = {(o.kind, o.characteristic) for o in obstacles.standing(both, made)}
    assert found == {
        ("in doubt", "brush-length"), ("out", "commutator-runout"), ("gauge overdue", "commutator-runout"),
        ("not measured as left", "commutator-diameter"), ("not measured as left", "growler-short"),
        ("not measured as left", "end-play"), ("own work", ""),
    }  # fmt: skip
    with pytest.raises(releases.NotReleased, match="is not released"):
        releases.release(both, made)
    assert jobs.find(record, made).is_open


def test_a_concession_is_named_and_reasoned(record: Record, tag: str) -> None:
    """A departure accepted by an inspector with a reason no longer stands in the way, and the report says so."""
    bench, inspector = record.acting("AB"), record.acting("MW")
    readings.add(bench, tag, "as-left", "end-play", "0.35", why="read again", position="1")
    with pytest.raises(Refused, match="a concession has a reason"):
        releases.concede(inspector, tag, "end-play", " ")
    with pytest.raises(Refused, match="may not do this"):
        releases.concede(bench, tag, "end-play", "fine")
    with pytest.raises(Refused, match="nothing about commutator diameter stands in the way"):
        releases.concede(inspector, tag, "commutator-diameter", "fine")
    releases.concede(inspector, tag, "end-play", "thrust washer on order, owner agrees")
    releases.release(inspector, tag)
    report, _ = releases.standing(record, tag)
    (concession,) = report.concessions
    assert (concession.by.name, concession.because) == ("Mara Wend", "thrust washer on order, owner agrees")
    assert "0.35" in concession.departure


def test_who_measured_may_not_release_unless_the_owner_allowed_it(record: Record, tag: str) -> None:
    """The owner's permission is a setting whose change is in the chain; the report says that it was own work."""
    owner = record.acting("OV")
    readings.add(owner, tag, "as-left", "end-play", "0.21", why="checked", position="1")
    with pytest.raises(releases.NotReleased, match="measured this job"):
        releases.release(owner, tag)
    shop.put(owner, "own_release", "yes")
    releases.release(owner, tag)
    report, _ = releases.standing(record, tag)
    assert report.signature is not None
    assert report.signature.own_work


def test_an_amendment_is_a_new_report_that_names_the_old(record: Record, tag: str) -> None:
    """Both stay; the new one says what changed; nothing changes silently."""
    inspector = record.acting("MW")
    releases.release(inspector, tag)
    with pytest.raises(Refused, match="nothing that WL-000001 says has changed"):
        releases.amend(inspector, tag, "look again")
    correction = Entry("end-play", "0.22", "as-left", "1", why="misread")
    issued = releases.amend(
        inspector,
        tag,
        "misread, and the customer's name",
        fields={"customer": "Tolland Quarry"},
        corrections=[correction],
    )
    assert (issued.number, issued.amends) == ("WL-000002", "WL-000001")
    report, _ = releases.standing(record, tag)
    assert report.amends is not None
    assert report.amends.changed == (
        "customer: nothing became Tolland Quarry",
        "measured by: AB became AB, MW",
        "armature end play 1, as left: 0.2 became 0.22",
    )
    old, _ = releases.frozen(record, "WL-000001")
    assert old.customer == ""
    assert verify.verify(record).wrong is None


def test_scrapped_and_returned_cores_have_their_report(record: Record, tag: str) -> None:
    """Both end the job with a reason and a number."""
    inspector = record.acting("MW")
    with pytest.raises(Refused, match="say why"):
        releases.scrap(inspector, tag, "")
    issued = releases.scrap(inspector, tag, "armature undersize after turning")
    assert (issued.outcome, issued.number) == ("scrapped", "WL-000001")
    with pytest.raises(Refused, match="was scrapped"):
        releases.release(inspector, tag)


def test_a_pin_is_asked_for_and_kept_slow(record: Record, tag: str) -> None:
    """With a PIN set, nobody signs without it; what is kept is an Argon2id hash."""
    inspector = record.acting("MW")
    pins.put(inspector, "MW", "4711")
    with pytest.raises(Refused, match="signs with a PIN"):
        releases.release(inspector, tag)
    with pytest.raises(Refused, match="that is not the PIN"):
        releases.release(inspector, tag, pin="4712")
    assert releases.release(inspector, tag, pin="4711").number == "WL-000001"
    with record.read() as conn:
        kept = conn.exec_driver_sql("SELECT pin FROM person WHERE initials = 'MW'").scalar()
    assert str(kept).startswith("$argon2id$")
