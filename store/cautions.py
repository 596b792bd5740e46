"""The caution that comes before the first value of a test under power on a job; the screen and the command show it first."""

from __future__ import annotations

from collections.abc import Iterable

from store import jobs
from store.catalogue import Characteristic, catalogue
from store.records import Record
from store.sheets import SheetRow
from store.sqlite.engine import rows

UNDER_POWER = frozenset({"running tests", "solenoid", "insulation"})
"""Components whose tests turn, heat or shock whoever stands too near."""


def before(one: Characteristic) -> str:
    """The caution that must be seen before a characteristic is first measured on a job; "" where none must."""
    return one.caution if one.component in UNDER_POWER else ""


def first(record: Record, tag: str, characteristic: str) -> str:
    """The caution to be shown before a value goes in; "" where this job has a reading under the same one. Raises NotFound."""
    with record.read() as conn:
        job, known = jobs.find(record, tag, conn), catalogue(record, conn)
        caution = before(known.find(characteristic))
        if not caution:
            return ""
        taken = rows(conn, "SELECT DISTINCT characteristic_id FROM reading WHERE job_id = ?", (job.id,))
        return "" if any(known.by_id[one_id].caution == caution for (one_id,) in taken) else caution


def seen(taken: Iterable[SheetRow]) -> frozenset[str]:
    """The cautions under which a job has readings, at either stage."""
    return frozenset(row.characteristic.caution for row in taken if row.other or any(row.readings))
