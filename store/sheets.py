"""The sheet of a job: every characteristic in bench order with its limit, readings and verdict at a stage.

The Job screen draws it, the report prints it, `wearline judge` writes it out; nobody judges a second time.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction

from sqlalchemy import Connection

from store import jobs, judgements, limit_sheets, models, readings
from store.catalogue import Characteristic, catalogue
from store.jobs import Job
from store.judgements import Judged
from store.limit_sheets import SheetLimit
from store.readings import Reading
from store.records import Record
from store.rules import quantities
from store.rules.limits import Verdict

Standing = dict[str, int]


@dataclass(frozen=True, slots=True)
class SheetRow:
    """One characteristic of a job at a stage. `readings` holds the standing reading of each position, None where none.

    `judged` is None until there is a reading; `other` are the readings at the other stage, by position.
    """

    characteristic: Characteristic
    limit: SheetLimit | None
    positions: tuple[str, ...]
    readings: tuple[Reading | None, ...]
    judged: Judged | None
    other: tuple[Reading, ...]

    @property
    def verdict(self) -> Verdict:
        """The verdict that stands: what has no reading is not measured, or has no limit."""
        if self.judged is not None:
            return self.judged.judgement.verdict
        return Verdict.not_measured

    @property
    def is_expected(self) -> bool:
        """Whether the limit sheet asks for this at this stage, or somebody has measured it (computed ones need a limit)."""
        return self.limit is not None or (self.judged is not None and not self.characteristic.derive)

    def size(self, unit: str) -> Fraction | None:
        """The judged value in a unit; None where there is none. Raises Refused for a unit of another quantity."""
        if self.judged is None or self.judged.judgement.value is None:
            return None
        return quantities.convert(self.judged.judgement.value, self.judged.judgement.unit, unit)

    def sizes(self, unit: str) -> dict[str, Fraction]:
        """The values read, by position, in a unit. Raises Refused for a unit of another quantity."""
        taken = [(r.position, r.typed) for r in self.readings if r is not None]
        return {at: quantities.convert(t.value, t.unit, unit) for at, t in taken if t.value is not None}

    def end(self, end: str, unit: str) -> Fraction | None:
        """The `low`, `high` or `new` of the limit in a unit; None where there is none. Raises Refused."""
        kept: Fraction | None = None if self.limit is None else getattr(self.limit.limit, end)
        return None if kept is None or self.limit is None else quantities.convert(kept, self.limit.limit.unit, unit)


@dataclass(frozen=True, slots=True)
class Sheet:
    """All rows of a job at one stage, in the order of the bench."""

    job: Job
    stage: str
    rows: tuple[SheetRow, ...]

    def row(self, characteristic: str) -> SheetRow:
        """The row of one characteristic. Raises KeyError."""
        for row in self.rows:
            if row.characteristic.name == characteristic:
                return row
        raise KeyError(characteristic)

    def find(self, characteristic: str) -> SheetRow | None:
        """The row of one characteristic, None where this machine has none."""
        return next((row for row in self.rows if row.characteristic.name == characteristic), None)

    def size(self, characteristic: str, unit: str) -> Fraction | None:
        """The judged value of a characteristic in a unit; None where there is none."""
        row = self.find(characteristic)
        return None if row is None else row.size(unit)

    @property
    def standing(self) -> Standing:
        """How many rows have which verdict; rows that nothing asks for are not counted."""
        found = Counter(row.verdict for row in self.rows if row.is_expected)
        return {verdict.value: found.get(verdict, 0) for verdict in Verdict}


def sheet(record: Record, tag: str, stage: str, conn: Connection | None = None) -> Sheet:
    """The sheet of a job at a stage. Raises NotFound."""
    if conn is None:
        with record.read() as own:
            return sheet(record, tag, stage, own)
    job = jobs.find(record, tag, conn)
    return of_job(record, conn, job, stage, readings.of_job_in(record, conn, job.id))


def of_job(record: Record, conn: Connection, job: Job, stage: str, taken: Iterable[Reading]) -> Sheet:
    """`sheet` inside a running transaction; `taken` are the readings of the job that stand, of both stages."""
    model = models.by_id(conn, job.model_id)
    limits = None if job.revision_id is None else limit_sheets.by_revision(record, conn, job.revision_id)
    standing: dict[str, dict[str, Reading]] = {}
    elsewhere: dict[str, list[Reading]] = {}
    for reading in taken:
        if reading.stage == stage:
            standing.setdefault(reading.characteristic, {})[reading.position] = reading
        else:
            elsewhere.setdefault(reading.characteristic, []).append(reading)
    verdicts = {j.characteristic.name: j for j in judgements.of_job(record, job, stage, conn)}
    unasked = [c for c in catalogue(record, conn).of(job.kind) if c.derive and c.name not in verdicts]
    verdicts |= {j.characteristic.name: j for j in judgements.unlimited(record, conn, job, stage, unasked)}
    rows = []
    for one in catalogue(record, conn).of(job.kind):
        if stage not in one.stages:
            continue
        limit = limits.at(one.name, stage) if limits else None
        by_place = standing.get(one.name, {})
        places = () if one.derive else readings.positions(one, limit, model.bars)
        places = (*places, *(p for p in by_place if p not in places))
        rows.append(
            SheetRow(
                one, limit, places, tuple(by_place.get(p) for p in places), verdicts.get(one.name),
                tuple(elsewhere.get(one.name, ())),
            )
        )  # fmt: skip
    return Sheet(job, stage, tuple(rows))
