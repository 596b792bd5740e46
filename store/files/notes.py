"""Files of notes and of findings."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store import times
from store.errors import Refused, brief
from store.files.kinds import Kind, Loading, Numbered
from store.records import Record
from store.rules.numbers import comparing_key
from store.tables.notes import FindingRow, NoteRow

MOST_TEXT = 10_000


def _lines(
    loading: Loading, lines: Iterator[Numbered], long: Sequence[str], *, dated: bool
) -> Iterator[tuple[int, Any, str, str]]:
    """Job, line, moment and person of every line that is good so far.

    A note without a moment was written now; a finding has none in its file, and is as old as the end of its job.
    """
    conn = loading.change.conn
    jobs = {r[0]: (r[1], r[2]) for r in conn.exec_driver_sql("SELECT key, id, coalesce(ended, taken_in) FROM job")}
    people = {r[0] for r in conn.exec_driver_sql("SELECT initials FROM person UNION ALL SELECT 'shop' FROM person")}
    for number, line in lines:
        job = jobs.get(comparing_key(line["tag"]))
        if job is None:
            loading.refuse(number, "tag", f"no job with the tag {brief(line['tag'])!r}")
            continue
        by = line.get("by", "")
        if by and people and by not in people:
            loading.refuse(number, "by", f"no person with the initials {brief(by)!r}")
            continue
        over = next((column for column in long if len(line.get(column, "")) > MOST_TEXT), None)
        if over:
            loading.refuse(number, over, f"longer than {MOST_TEXT:,} characters")
            continue
        try:
            at = times.moment(line["at"]) if line.get("at") else loading.change.at if dated else job[1]
        except Refused as fault:
            loading.refuse(number, "at", fault)
            continue
        yield job[0], line, at, by or loading.change.by


def _take_notes(loading: Loading, lines: Iterator[Numbered]) -> int:
    return loading.change.load(
        NoteRow,
        ((None, job, at, by, line["text"]) for job, line, at, by in _lines(loading, lines, ["text"], dated=True)),
    )


def _give_notes(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = "SELECT j.tag, n.text, n.at, n.by FROM note n JOIN job j ON j.id = n.job_id ORDER BY n.id"
    yield from map(tuple, conn.exec_driver_sql(sql))


def _take_findings(loading: Loading, lines: Iterator[Numbered]) -> int:
    columns = ("component", "mode", "mechanism", "cause", "note")
    return loading.change.load(
        FindingRow,
        (
            (None, job, *(line.get(c, "") for c in columns), at, by)
            for job, line, at, by in _lines(loading, lines, columns, dated=False)
        ),
    )


def _give_findings(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT j.tag, f.component, f.mode, f.mechanism, f.cause, f.note FROM finding f "
        "JOIN job j ON j.id = f.job_id ORDER BY f.id"
    )
    yield from map(tuple, conn.exec_driver_sql(sql))


KINDS = (
    Kind("notes", ("tag", "text"), ("at", "by"), _take_notes, _give_notes),
    Kind("findings", ("tag", "component", "mode"), ("mechanism", "cause", "note"), _take_findings, _give_findings),
)
