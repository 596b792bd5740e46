"""Limits proposed from the shop's own as-left readings: median and spread, marked as the shop's own, never entered alone."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from store import models
from store.catalogue import catalogue
from store.errors import Refused
from store.records import Record
from store.rules import quantities
from store.rules.statistic import Statistic, median
from store.sqlite.engine import rows

FEWEST = 8
_SIZES = """
SELECT g.size FROM judgement g JOIN job j ON j.id = g.job_id JOIN unit u ON u.id = j.unit_id
WHERE u.model_id = ? AND g.characteristic_id = ? AND g.stage = 'as-left' AND g.size IS NOT NULL AND j.outcome = 'released'
ORDER BY g.size
"""


@dataclass(frozen=True, slots=True)
class Proposal:
    """A limit as it may be entered; `low` and `high` are the shop's 2.5 and 97.5 per cent points, as text."""

    unit: str
    new: str | None
    low: str | None
    high: str | None
    at_limit: str
    stage: str
    count: int | None
    source: str
    note: str


def propose(record: Record, model: str, characteristic: str) -> Proposal:
    """What released units of this model measured as left. Raises NotFound, Refused under FEWEST units."""
    found = models.find(record, model)
    with record.read() as conn:
        one = catalogue(record, conn).find(characteristic)
        sizes = [Fraction(str(r[0])) for r in rows(conn, _SIZES, (found.id, one.id))]
    if one.statistic is Statistic.attribute:
        raise Refused(f"{one.label} passes or fails; there is no size to propose")
    if len(sizes) < FEWEST:
        raise Refused(
            f"{len(sizes)} released units of {found.number} have this measured as left; {FEWEST} are needed to propose from"
        )
    low, high = (sizes[round((len(sizes) - 1) * share)] for share in (0.025, 0.975))
    middle = median(sizes)
    places = 4 if one.unit == "in" else 3

    def text(size: Fraction) -> str:
        return quantities.plain(Fraction(quantities.rounded(size, places)))

    return Proposal(
        unit=one.unit,
        new=None,
        low=text(low) if one.direction in {"smaller-worse", "band", ""} else None,
        high=text(high) if one.direction in {"bigger-worse", "band", ""} else None,
        at_limit="pass",
        stage="as-left",
        count=one.count,
        source=f"the shop's own: {len(sizes)} released units, median {text(middle)} {one.unit}, {text(low)} to {text(high)}",
        note="proposed from own as-left readings",
    )
