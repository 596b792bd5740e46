"""Second looks at a reading that is on disk: is it an inch for a millimetre, a slipped decimal, the same sent twice?

A question, never a block. What is plausible comes from the limit, the other readings of the unit and the shop's own
earlier readings of this model.
"""

from __future__ import annotations

from fractions import Fraction

from store import jobs, limit_sheets
from store.catalogue import catalogue
from store.readings import Reading
from store.records import Record
from store.rules import quantities
from store.rules.readings import Expected, Mark, slips

_OTHERS = """
SELECT r.value, r.unit FROM reading r WHERE r.job_id = ? AND r.characteristic_id = ? AND r.id <> ? AND r.mark = 'number'
AND NOT EXISTS (SELECT 1 FROM reading c WHERE c.corrects_id = r.id)
"""
_EARLIER = """
SELECT r.value, r.unit FROM reading r JOIN job j ON j.id = r.job_id JOIN unit u ON u.id = j.unit_id
WHERE u.model_id = ? AND r.job_id <> ? AND r.characteristic_id = ? AND r.stage = ? AND r.mark = 'number'
ORDER BY r.id DESC LIMIT 40
"""


def questions(record: Record, tag: str, reading: Reading) -> tuple[str, ...]:
    """What to ask about a reading, one sentence each, the likeliest slip first; empty where nothing is odd."""
    if reading.typed.mark is not Mark.number or reading.typed.value is None:
        return ()
    with record.read() as conn:
        job = jobs.find(record, tag, conn)
        one = catalogue(record, conn).find(reading.characteristic)
        sheet = limit_sheets.by_revision(record, conn, job.revision_id) if job.revision_id else None
        limit = sheet.at(one.name, reading.stage) if sheet else None
        others = conn.exec_driver_sql(_OTHERS, (job.id, one.id, reading.id)).all()
        earlier = conn.exec_driver_sql(_EARLIER, (job.model_id, job.id, one.id, reading.stage)).all()

    def here(rows: object) -> tuple[Fraction, ...]:
        return tuple(quantities.convert(Fraction(v), unit, reading.typed.unit) for v, unit in rows)  # type: ignore[attr-defined]

    def size(value: Fraction | None) -> Fraction | None:
        if value is None or limit is None or limit.unit == "%":
            return None
        return quantities.convert(value, limit.unit, reading.typed.unit)

    exact = limit.limit if limit else None
    expected = Expected(
        new=size(exact.new) if exact else None,
        low=size(exact.low) if exact else None,
        high=size(exact.high) if exact else None,
        others=here(others),
        earlier=here(earlier),
    )
    return tuple(slip.question for slip in slips(reading.typed, expected))
