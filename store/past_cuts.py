"""What this shop has taken off commutators and rings of a model before: as found less as left, job by job."""

from __future__ import annotations

from fractions import Fraction

from sqlalchemy import Connection

from store.sqlite.engine import rows

MOST = 200
_CUTS = """
SELECT f.size - l.size FROM judgement f
JOIN judgement l ON l.job_id = f.job_id AND l.characteristic_id = f.characteristic_id AND l.stage = 'as-left'
JOIN job j ON j.id = f.job_id JOIN unit u ON u.id = j.unit_id JOIN characteristic c ON c.id = f.characteristic_id
WHERE f.stage = 'as-found' AND c.name = ? AND u.model_id = ? AND j.id <> ? AND f.size > l.size
ORDER BY j.id DESC LIMIT ?
"""


def of_model(conn: Connection, model_id: int, characteristic: str, but: int) -> tuple[Fraction, ...]:
    """The cuts of a model's jobs, the newest first, in the characteristic's own unit (mm); `but` is the job at hand.

    Sizes to a tenth of a micrometre: they are kept for charts, and a cut is only a rate here.
    """
    found = rows(conn, _CUTS, (characteristic, model_id, but, MOST))
    return tuple(cut for (size,) in found if (cut := Fraction(round(size * 10_000), 10_000)) > 0)
