"""Notes of a job: timed, by whom."""

from __future__ import annotations

from dataclasses import dataclass

from store import jobs, people
from store.errors import Refused
from store.records import Record
from store.sqlite.engine import rows
from store.tables.notes import NoteRow

MOST_TEXT = 10_000


@dataclass(frozen=True, slots=True)
class Note:
    """One note."""

    id: int
    at: str
    by: str
    text: str


def add(record: Record, tag: str, text: str) -> Note:
    """Add a note to a job. Raises NotFound, Refused (empty, longer than MOST_TEXT)."""
    text = text.strip()
    if not text:
        raise Refused("the note is empty")
    if len(text) > MOST_TEXT:
        raise Refused(f"a note has at most {MOST_TEXT:,} characters")
    job = jobs.find(record, tag)
    with record.change("note added", job.tag) as change:
        people.require_known(record, change.conn)
        made = change.insert(NoteRow, job_id=job.id, at=change.at, by=change.by, text=text)
    return Note(made, change.at, change.by, text)


def of_job(record: Record, tag: str) -> tuple[Note, ...]:
    """The notes of a job, oldest first. Raises NotFound."""
    job = jobs.find(record, tag)
    with record.read() as conn:
        found = rows(conn, "SELECT id, at, by, text FROM note WHERE job_id = ? ORDER BY at, id", (job.id,))
    return tuple(Note(*row) for row in found)
