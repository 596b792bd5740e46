"""What went before: the size of each characteristic at the last visit of this unit, and what the shop's own units of the model
measured.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from store import readings
from store.catalogue import catalogue
from store.records import Record
from store.rules import quantities
from store.rules.statistic import median
from store.sqlite.engine import rows

NEWEST = 100
FEWEST = 3
_LAST = """
SELECT g.characteristic_id, j.tag, g.stage, g.size FROM judgement g JOIN job j ON j.id = g.job_id
WHERE j.unit_id = (SELECT k.unit_id FROM job k WHERE k.id = ?) AND j.id < ? AND g.size IS NOT NULL
ORDER BY j.id, g.stage
"""
_OTHERS = """
SELECT g.characteristic_id, g.size FROM (SELECT j.id FROM job j JOIN unit u ON u.id = j.unit_id WHERE u.model_id =
 (SELECT v.model_id FROM job k JOIN unit v ON v.id = k.unit_id WHERE k.id = ?1) AND j.id <> ?1 ORDER BY j.id DESC LIMIT ?3)
 AS other CROSS JOIN judgement g ON g.job_id = other.id AND g.stage = ?2 WHERE g.size IS NOT NULL
"""


@dataclass(frozen=True, slots=True)
class Precedent:
    """What is known of one characteristic from before, as text with its unit; "" where nothing is.

    `last` the judged size at the last visit of this unit, with its tag and stage; `usual` smallest, median and largest of
    the newest units of the model at the same stage, and how many they are.
    """

    last: str
    usual: str


def of_job(record: Record, tag: str, stage: str) -> dict[str, Precedent]:
    """The precedents of a job's characteristics at a stage, by name; one without any is left out. Raises NotFound."""
    with record.read() as conn:
        job = readings.job_at_hand(conn, tag)
        known = catalogue(record, conn).by_id
        last = {row[0]: row[1:] for row in rows(conn, _LAST, (job.id, job.id))}
        sizes: dict[int, list[Fraction]] = {}
        for characteristic, size in rows(conn, _OTHERS, (job.id, stage, NEWEST)):
            sizes.setdefault(characteristic, []).append(Fraction(str(size)))
    found = {}
    for id_ in {*last, *sizes}:
        unit = known[id_].unit
        said = (
            f"{_text(Fraction(str(last[id_][2])))} {unit} {last[id_][1].replace('-', ' ')}, job {last[id_][0]}"
            if id_ in last
            else ""
        )
        found[known[id_].name] = Precedent(said, _usual(sizes.get(id_, []), unit))
    return found


def _usual(sizes: list[Fraction], unit: str) -> str:
    if len(sizes) < FEWEST:
        return ""
    low, middle, high = (_text(size) for size in (min(sizes), median(sizes), max(sizes)))
    return f"{low} to {high} {unit}, median {middle}, of {len(sizes)}"


def _text(size: Fraction) -> str:
    return quantities.plain(Fraction(quantities.rounded(size, 4)))
