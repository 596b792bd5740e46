"""Findings of a job: what was found wrong, offered from what a note says, taken when somebody agrees."""

from __future__ import annotations

from dataclasses import dataclass

from sqlalchemy import Connection

from store import jobs, people, shorthand
from store.errors import Refused
from store.records import Record
from store.rules.findings import Finding, offered
from store.sqlite.engine import rows
from store.tables.notes import FindingRow

MOST_TEXT = 10_000
_OWN = """
SELECT component, mode, mechanism, cause, count(*) FROM finding GROUP BY component, mode, mechanism, cause
ORDER BY count(*) DESC, component, mode, mechanism, cause LIMIT 500
"""


@dataclass(frozen=True, slots=True)
class Found:
    """One finding of a job."""

    id: int
    component: str
    mode: str
    mechanism: str
    cause: str
    note: str
    at: str
    by: str


def add(
    record: Record, tag: str, component: str, mode: str, *, mechanism: str = "", cause: str = "", note: str = ""
) -> Found:
    """Add a finding to a job. Raises NotFound (job, person), Refused (no component or mode, a text too long)."""
    values = {"component": component, "mode": mode, "mechanism": mechanism, "cause": cause, "note": note}
    values = {name: text.strip() for name, text in values.items()}
    for name in ("component", "mode"):
        if not values[name]:
            raise Refused(f"a finding needs its {name}")
    for name, text in values.items():
        if len(text) > MOST_TEXT:
            raise Refused(f"{name} has at most {MOST_TEXT:,} characters")
    job = jobs.find(record, tag)
    with record.change("finding added", job.tag) as change:
        people.require_known(record, change.conn)
        made = change.insert(FindingRow, job_id=job.id, at=change.at, by=change.by, **values)
    return Found(made, *values.values(), at=change.at, by=change.by)  # type: ignore[misc]


def of_job(record: Record, tag: str) -> tuple[Found, ...]:
    """The findings of a job, oldest first. Raises NotFound."""
    job = jobs.find(record, tag)
    sql = "SELECT id, component, mode, mechanism, cause, note, at, by FROM finding WHERE job_id = ? ORDER BY at, id"
    with record.read() as conn:
        return tuple(Found(*row) for row in rows(conn, sql, (job.id,)))


def offers(record: Record, text: str) -> tuple[Finding, ...]:
    """The findings that a note seems to speak of, the likeliest first, with the shop's usual mechanism and cause."""
    with record.read() as conn:
        own = record.kept(conn, "own findings", "SELECT max(id), count(*) FROM finding", _own)
    return offered(text, own, shorthand.lines(record))


def _own(conn: Connection) -> tuple[Finding, ...]:
    return tuple(Finding(*row[:4]) for row in rows(conn, _OWN))
