"""Second looks at a reading that is on disk: is it an inch for a millimetre, a slipped decimal, the same sent twice?

A question, never a block. What is plausible comes from the limit, the other readings of the unit and the shop's own
earlier readings of this model. A reading that corrects another one has been looked at, and is not asked about again.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from fractions import Fraction

from sqlalchemy import Connection

from store import limit_sheets, readings, times
from store.catalogue import Characteristic, catalogue
from store.limit_sheets import SheetLimit
from store.readings import JobAtHand, Reading
from store.records import Record
from store.rules import quantities
from store.rules.readings import Expected, Mark, slips

TWICE_SECONDS = 1
# The newest jobs of the model that were read at that stage: enough to know what is usual, however many there are.
_EARLIER = """
SELECT r.value, r.unit FROM (SELECT j.id FROM job j JOIN unit u ON u.id = j.unit_id WHERE u.model_id =
 (SELECT v.model_id FROM job k JOIN unit v ON v.id = k.unit_id WHERE k.id = :job) AND j.id <> :job
 ORDER BY j.id DESC LIMIT 40) AS earlier
CROSS JOIN reading r ON r.job_id = earlier.id AND r.stage = :stage AND r.characteristic_id = :characteristic
WHERE r.mark = 'number' LIMIT 200
"""


def questions(record: Record, tag: str, reading: Reading) -> tuple[str, ...]:
    """What to ask about one reading, a sentence each, the likeliest slip first; empty where nothing is odd."""
    asked = of_stage(record, tag, reading.stage, (reading.characteristic,))
    return asked.get((reading.characteristic, reading.position), ())


def of_stage(
    record: Record, tag: str, stage: str, characteristics: Iterable[str] | None = None, *, just_read: bool = False
) -> dict[tuple[str, str], tuple[str, ...]]:
    """The questions about a job's readings at a stage, by characteristic and position; all characteristics unless named.

    `just_read`: they come from the keys or a gauge, and an exact repeat may have been sent twice. Raises NotFound.
    """
    with record.read() as conn:
        job = readings.job_at_hand(conn, tag)
        taken: dict[str, list[Reading]] = {}
        for reading in readings.of_job_in(record, conn, job.id):
            taken.setdefault(reading.characteristic, []).append(reading)
        asked = {}
        for name in taken if characteristics is None else dict.fromkeys(characteristics):
            one = catalogue(record, conn).find(name)
            limit = limit_sheets.by_revision(record, conn, job.revision_id).at(name, stage) if job.revision_id else None
            numbers = [r for r in taken.get(name, ()) if r.typed.mark is Mark.number]
            earlier = _earlier(conn, job, one, stage) if numbers else ()
            for reading, said in _of_row(numbers, stage, limit, earlier, just_read=just_read):
                asked[name, reading.position] = said
    return asked


def _earlier(conn: Connection, job: JobAtHand, one: Characteristic, stage: str) -> Sequence[tuple[Fraction, str]]:
    found = conn.exec_driver_sql(_EARLIER, {"job": job.id, "stage": stage, "characteristic": one.id})
    return [(Fraction(value), unit) for value, unit in found]


def _of_row(
    numbers: Sequence[Reading],
    stage: str,
    limit: SheetLimit | None,
    earlier: Sequence[tuple[Fraction, str]],
    *,
    just_read: bool,
) -> Iterable[tuple[Reading, tuple[str, ...]]]:
    """Each odd reading of one characteristic at the stage, with what to ask. `numbers` are those of both stages."""
    if not numbers:
        return
    unit = numbers[0].typed.unit
    known = _known(unit, limit) + [quantities.convert(value, u, unit) for value, u in earlier]
    sizes = sorted(quantities.convert(r.typed.value or Fraction(0), r.typed.unit, unit) for r in numbers)
    before: Reading | None = None
    for reading in (r for r in numbers if r.stage == stage):
        said = []
        if just_read and before is not None and _is_sent_twice(before, reading):
            said.append(f"{reading.typed.text} came twice within a second: sent twice?")
        before = reading
        if reading.why:
            continue
        ends = [
            *_ends(known),
            *_ends_without(sizes, quantities.convert(reading.typed.value or Fraction(0), reading.typed.unit, unit)),
        ]
        expected = Expected(others=tuple(quantities.convert(end, unit, reading.typed.unit) for end in ends))
        said += [slip.question for slip in slips(reading.typed, expected)]
        if said:
            yield reading, tuple(said)


def _known(unit: str, limit: SheetLimit | None) -> list[Fraction]:
    """New size and limits in a unit; a limit in per cent says nothing of sizes."""
    if limit is None or limit.unit == "%":
        return []
    exact = limit.limit
    return [
        quantities.convert(v, limit.unit, unit) for v in (exact.new, exact.low, exact.high) if v is not None and v > 0
    ]


def _ends(sizes: Sequence[Fraction]) -> tuple[Fraction, ...]:
    """The smallest and the largest: between them everything is usual."""
    good = [v for v in sizes if v > 0]
    return (min(good), max(good)) if good else ()


def _ends_without(ordered: Sequence[Fraction], own: Fraction) -> tuple[Fraction, ...]:
    """The ends of sizes in order when one of them, `own`, is left out."""
    if len(ordered) < 2:
        return ()
    low = ordered[1] if ordered[0] == own else ordered[0]
    high = ordered[-2] if ordered[-1] == own else ordered[-1]
    return low, high


def _is_sent_twice(before: Reading, reading: Reading) -> bool:
    if before.typed.text != reading.typed.text:
        return False
    return abs(times.days_between(before.at, reading.at)) * 86_400 <= TWICE_SECONDS
