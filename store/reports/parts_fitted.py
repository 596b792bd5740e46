"""The parts fitted on a job as a report carries them: with lot, supplier, and the reason where the cross-check spoke against."""

from __future__ import annotations

from sqlalchemy import Connection

from store.errors import NotFound, Refused
from store.jobs import Job
from store.parts import fitting, numbers
from store.parts.fitting import Fitted
from store.records import Record
from store.reports import contents


def parts_fitted(record: Record, conn: Connection, job: Job) -> tuple[contents.Fitted, ...]:
    """Every part fitted, in the order of fitting, described by the lists where they know it."""
    return tuple(
        contents.Fitted(
            one.number, one.maker, _described(record, conn, one), one.lot, one.supplier, one.position, str(one.quantity), one.by, one.at
        )
        for one in fitting.of_job(record, job.tag, conn)
    )  # fmt: skip


def _described(record: Record, conn: Connection, one: Fitted) -> str:
    try:
        known = numbers.find(record, one.number, one.maker, conn)
    except (NotFound, Refused):
        said = ""
    else:
        said = ", ".join(text for text in (known.kind, known.description) if text)
    if one.why:
        said += f"{'; ' if said else ''}{one.checked}; fitted all the same: {one.why}"
    return said
