"""Ending a job: release, scrapping, return; concessions; amendments. What is issued is frozen and numbered.

A report is gathered, numbered and frozen in the transaction that ends the job, so it is there whole or not at all. It
carries the head of the audit chain as it stood before: whoever holds the print can show that the record then existed.
"""

from __future__ import annotations

import hashlib
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import Any

from sqlalchemy import Connection

from store import audit, jobs, obstacles, people, pins, readings
from store.catalogue import catalogue
from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.jobs import Job
from store.obstacles import Obstacle
from store.records import Record
from store.reports import canonical, contents, differences, gather
from store.sqlite.engine import rows
from store.tables.jobs import JobRow
from store.tables.releases import ConcessionRow, ReleaseRow

ENDINGS = {"released": "job released", "scrapped": "core scrapped", "returned": "returned unrepaired"}
AMENDABLE = ("customer", "application", "hours", "starts", "complaint", "assembled_by")


class NotReleased(Refused):
    """Something stands in the way; `obstacles` says what, line by line."""

    def __init__(self, tag: str, found: Sequence[Obstacle]) -> None:
        self.obstacles = tuple(found)
        first = found[0].says
        more = f" (and {len(found) - 1} more)" if len(found) > 1 else ""
        super().__init__(f"{tag} is not released: {first}{more}")


@dataclass(frozen=True, slots=True)
class Issued:
    """An issued report: its number, when and by whom, the report that it amends, and the digest of its contents."""

    id: int
    tag: str
    number: str
    outcome: str
    at: str
    by: str
    why: str
    amends: str | None
    head: str
    digest: str


_ISSUED = (
    "SELECT r.id, j.tag, r.number, r.outcome, r.at, r.by, r.why, e.number, r.head, r.digest FROM release r "
    "JOIN job j ON j.id = r.job_id LEFT JOIN release e ON e.id = r.amends_id "
)


def of_job(record: Record, tag: str) -> tuple[Issued, ...]:
    """The reports issued for a job, oldest first. Raises NotFound."""
    job = jobs.find(record, tag)
    with record.read() as conn:
        return tuple(Issued(*r) for r in rows(conn, _ISSUED + "WHERE r.job_id = ? ORDER BY r.id", (job.id,)))


def on_day(record: Record, day: str) -> tuple[Issued, ...]:
    """The reports issued on a day (UTC, 2026-12-01), oldest first."""
    with record.read() as conn:
        return tuple(Issued(*r) for r in rows(conn, _ISSUED + "WHERE substr(r.at, 1, 10) = ? ORDER BY r.id", (day,)))


def frozen(record: Record, number: str) -> tuple[contents.Report, str]:
    """An issued report and the canonical text that it was frozen as. Raises NotFound, Refused where it was tampered with."""
    with record.read() as conn:
        found = rows(conn, "SELECT report, digest FROM release WHERE number = ?", (number,))
    if not found:
        raise NotFound("report", number)
    text, digest = found[0]
    if hashlib.sha256(text.encode()).hexdigest() != digest:
        raise Refused(f"the report {number} is not as it was issued; run: wearline verify")
    return canonical.from_json(text), text


def standing(record: Record, tag: str) -> tuple[contents.Report, str | None]:
    """The report that stands for a job: the newest issued one with its frozen text, else a draft and None. Raises NotFound."""
    issued = of_job(record, tag)
    if not issued:
        return gather.draft(record, tag), None
    return frozen(record, issued[-1].number)


def concede(record: Record, tag: str, characteristic: str, because: str) -> None:
    """Accept a stated departure, by name and with a reason. Raises NotFound, Refused (nothing to concede, no reason)."""
    if not because.strip():
        raise Refused("a concession has a reason")
    if len(because) > readings.MOST_NOTE:
        raise Refused(f"a reason has at most {readings.MOST_NOTE:,} characters")
    with record.change("concession given", tag) as change:
        job = _open(record, change.conn, tag)
        change.subject = job.tag
        _may(record, change.conn, "inspect")
        one = catalogue(record, change.conn).find(characteristic)
        found = [
            o
            for o in obstacles.standing(record, job.tag, change.conn)
            if o.characteristic == one.name and o.may_concede
        ]
        if not found:
            raise Refused(f"nothing about {one.label} stands in the way of {job.tag}")
        departure = "; ".join(o.says for o in found)
        change.insert(
            ConcessionRow, job_id=job.id, characteristic_id=one.id, departure=departure, because=because.strip(), by=change.by, at=change.at,
        )  # fmt: skip


def release(record: Record, tag: str, *, note: str = "", pin: str | None = None) -> Issued:
    """Release a job: nothing may stand in the way. Raises NotReleased, Refused (ended, PIN), NotFound."""
    pins.check(record, pin)
    with record.change(ENDINGS["released"], tag) as change:
        job = _open(record, change.conn, tag)
        found = obstacles.standing(record, job.tag, change.conn)
        if found:
            raise NotReleased(job.tag, found)
        return _end(record, change, job, "released", note)


def scrap(record: Record, tag: str, why: str, *, pin: str | None = None) -> Issued:
    """Scrap a core; the report says why. Raises Refused (no reason, ended, not an inspector), NotFound."""
    return _give_up(record, tag, "scrapped", why, pin)


def give_back(record: Record, tag: str, why: str, *, pin: str | None = None) -> Issued:
    """Return a core unrepaired; the report says why. Raises like `scrap`."""
    return _give_up(record, tag, "returned", why, pin)


def _give_up(record: Record, tag: str, outcome: str, why: str, pin: str | None) -> Issued:
    if not why.strip():
        raise Refused(f"say why the core is {outcome}")
    pins.check(record, pin)
    with record.change(ENDINGS[outcome], tag) as change:
        job = _open(record, change.conn, tag)
        _may(record, change.conn, "inspect")
        return _end(record, change, job, outcome, why)


def amend(
    record: Record, tag: str, why: str, *, fields: Mapping[str, str] | None = None,
    corrections: Sequence[readings.Entry] = (), pin: str | None = None,
) -> Issued:  # fmt: skip
    """Issue a new report in the place of the newest: with changed fields (AMENDABLE) or corrected readings, and what changed.

    Raises Refused (never issued, no reason, nothing changed, not an inspector), NotFound.
    """
    if not why.strip():
        raise Refused("say why the report is amended")
    pins.check(record, pin)
    with record.change("report amended", tag) as change:
        job = jobs.find(record, tag, change.conn)
        change.subject = job.tag
        _may(record, change.conn, "inspect")
        earlier = rows(
            change.conn, "SELECT id, number, report FROM release WHERE job_id = ? ORDER BY id DESC LIMIT 1", (job.id,)
        )
        if not earlier:
            raise Refused(f"no report was issued for {job.tag}; there is none to amend")
        _apply(record, change, job, fields or {}, corrections)
        before_id, number, text = earlier[0]
        before = canonical.from_json(text)
        report = _numbered(record, change, job.tag, before.outcome)
        report = replace(report, signature=_signature(record, change, job, why), amends=None)
        changed = differences.between(before, report)
        if not changed:
            raise Refused(f"nothing that {number} says has changed")
        report = replace(report, amends=contents.Amendment(number, changed, why, _named(change.conn, change.by)))
        return _issue(change, job, report, why, before_id)


def _apply(
    record: Record, change: Change, job: Job, fields: Mapping[str, str], corrections: Sequence[readings.Entry]
) -> None:
    values: dict[str, Any] = {}
    for name, value in fields.items():
        if name not in AMENDABLE:
            raise Refused(f"{brief(name)!r} cannot be amended; one of {', '.join(AMENDABLE)}")
        if len(value) > jobs.MOST_TEXT:
            raise Refused(f"{name} is longer than {jobs.MOST_TEXT:,} characters")
        values[name] = jobs.count(name, value) if name in {"hours", "starts"} else value
    if values:
        change.update(JobRow, job.id, **values)
    readings.correct_in(record, change, job.tag, corrections)


def _end(record: Record, change: Change, job: Job, outcome: str, why: str) -> Issued:
    change.subject = job.tag
    change.update(JobRow, job.id, outcome=outcome, ended=change.at, ended_by=change.by)
    report = _numbered(record, change, job.tag, outcome)
    report = replace(report, signature=_signature(record, change, job, why))
    return _issue(change, job, report, why, None)


def _numbered(record: Record, change: Change, tag: str, outcome: str) -> contents.Report:
    """The report as gathered now, with the next number and the head of the chain before it."""
    report = gather.gather(record, change.conn, tag)
    ((count,),) = rows(change.conn, "SELECT coalesce(max(id),0) + 1 FROM release")
    return replace(
        report, number=f"WL-{count:06d}", issued=change.at, outcome=outcome, draft=False, from_history=False,
        audit_head=audit.head(change.conn),
    )  # fmt: skip


def _signature(record: Record, change: Change, job: Job, note: str) -> contents.Signature:
    own = rows(
        change.conn,
        "SELECT 1 FROM reading WHERE job_id = ? AND stage = 'as-left' AND by = ? LIMIT 1",
        (job.id, change.by),
    )
    return contents.Signature(_named(change.conn, change.by), change.at, bool(own), note)


def _issue(change: Change, job: Job, report: contents.Report, why: str, amends_id: int | None) -> Issued:
    text = canonical.to_json(report).strip()
    digest = hashlib.sha256(text.encode()).hexdigest()
    made = change.insert(
        ReleaseRow, job_id=job.id, number=report.number, outcome=report.outcome, at=change.at, by=change.by, why=why,
        amends_id=amends_id, head=report.audit_head, digest=digest, report=text,
    )  # fmt: skip
    amends = report.amends.number if report.amends else None
    return Issued(
        made, job.tag, report.number, report.outcome, change.at, change.by, why, amends, report.audit_head, digest
    )


def _open(record: Record, conn: Connection, tag: str) -> Job:
    job = jobs.find(record, tag, conn)
    if not job.is_open:
        raise Refused(f"{job.tag} was {job.outcome} {(job.ended or '')[:10]}; what is wrong in its report is amended")
    return job


def _may(record: Record, conn: Connection, right: str) -> None:
    people.require_known(record, conn)
    found = rows(conn, "SELECT may FROM person WHERE initials = ?", (record.by,))
    if found and right not in people.rights(found[0][0]):
        raise Refused(f"{record.by} may not do this; somebody who may {right} may")


def _named(conn: Connection, initials: str) -> contents.Person:
    found = rows(conn, "SELECT name FROM person WHERE initials = ?", (initials,))
    return contents.Person(initials, found[0][0] if found else "")
