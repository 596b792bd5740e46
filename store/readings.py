"""Readings: added as typed, corrected by another reading, never erased.

The way of a reading: typed text -> store.rules.readings.parse -> one IMMEDIATE transaction that holds the reading,
the refreshed judgements and the audit entry -> the verdicts back.
"""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from fractions import Fraction
from typing import Any

from sqlalchemy import Connection

from store import gauges, judgements, limit_sheets, people
from store.catalogue import Characteristic, catalogue
from store.changes import Change
from store.errors import NotFound, ReadingRefused, Refused, brief
from store.gauges import Gauge
from store.judgements import Judged
from store.limit_sheets import SheetLimit
from store.records import Record
from store.rules import quantities
from store.rules.numbers import comparing_key
from store.rules.readings import Mark, Typed, parse
from store.sqlite.engine import rows
from store.tables.readings import ReadingRow

STAGES = ("as-found", "as-left")
MOST_POSITIONS = 400
MOST_NOTE = 10_000
_NUMBERED = re.compile(r"[1-9][0-9]{0,2}\Z")
_STATIONED = re.compile(r"[A-Z][0-9]{1,3}\Z")


@dataclass(frozen=True, slots=True)
class Entry:
    """A reading to be added. `position` None: the next one without a reading; `why` makes it a correction."""

    characteristic: str
    text: str
    stage: str = "as-found"
    position: str | None = None
    unit: str | None = None
    gauge: str | None = None
    note: str = ""
    why: str = ""


@dataclass(frozen=True, slots=True)
class Reading:
    """A reading as it stands. `typed` says what was read, exactly; `corrects` is the key of the one it replaced."""

    id: int
    characteristic: str
    stage: str
    position: str
    typed: Typed
    gauge: str | None
    at: str
    by: str
    note: str
    corrects: int | None
    why: str


@dataclass(frozen=True, slots=True)
class Accepted:
    """A reading that is on disk, with every judgement that it moved (its own first)."""

    reading: Reading
    judged: tuple[Judged, ...]


@dataclass(frozen=True, slots=True)
class JobAtHand:
    """What of a job decides whether and how it is measured."""

    id: int
    tag: str
    kind: str
    revision_id: int | None
    outcome: str
    bars: int | None


_FIND = (
    "SELECT j.id, j.tag, m.kind, j.revision_id, j.outcome, m.bars FROM job j JOIN unit u ON u.id = j.unit_id "
    "JOIN model m ON m.id = u.model_id WHERE "
)
_AT = (
    "SELECT r.id, r.position FROM reading r WHERE r.job_id = ? AND r.stage = ? AND r.characteristic_id = ? "
    "AND NOT EXISTS (SELECT 1 FROM reading c WHERE c.corrects_id = r.id)"
)
_READINGS = (
    "SELECT r.id, r.characteristic_id, r.stage, r.position, r.typed, r.mark, r.value, r.unit, r.places, r.detail, g.name, "
    "r.at, r.by, r.note, r.corrects_id, r.why FROM reading r LEFT JOIN gauge g ON g.id = r.gauge_id WHERE r.job_id = ?"
)


def add(
    record: Record, tag: str, stage: str, characteristic: str, text: str, *, position: str | None = None,
    unit: str | None = None, gauge: str | None = None, note: str = "", why: str = "",
) -> Accepted:  # fmt: skip
    """Add one reading, durable when this returns. `why` corrects the reading that stands at the position.

    Raises ReadingRefused and Refused (text, unit, position, stage, job ended, already measured), NotFound.
    """
    entry = Entry(characteristic, text, stage, position, unit, gauge, note, why)
    (accepted,) = add_all(record, tag, (entry,))
    return accepted


def add_all(record: Record, tag: str, entries: Sequence[Entry]) -> tuple[Accepted, ...]:
    """Add several readings, all or none. Raises like `add`, at the first that is refused."""
    return tuple(a for a in _add(record, tag, entries, whole=True) if isinstance(a, Accepted))


def add_many(record: Record, tag: str, entries: Sequence[Entry]) -> tuple[Accepted | Refused, ...]:
    """Add what has queued up in one transaction, in order; a refused entry is answered by its refusal, the others stand.

    The judgements are refreshed once, after the last; each Accepted carries those of its own characteristic.
    """
    return _add(record, tag, entries, whole=False)


def _add(record: Record, tag: str, entries: Sequence[Entry], *, whole: bool) -> tuple[Accepted | Refused, ...]:
    answers: list[Reading | Refused] = []
    touched: dict[str, dict[str, None]] = {}
    moved: dict[tuple[str, str], list[Judged]] = {}
    with record.change(_action(entries), tag) as change:
        people.require_known(record, change.conn)
        job = job_at_hand(change.conn, tag)
        change.subject = job.tag
        for entry in entries:
            try:
                reading, one = _insert(record, change, job, entry)
            except Refused as fault:
                if whole:
                    raise
                answers.append(fault)
                continue
            answers.append(reading)
            touched.setdefault(entry.stage, {})[one.name] = None
        for stage, names in touched.items():
            for judged in judgements.refresh(record, change.conn, job, stage, names):
                for name in judgements.read_for(judged.characteristic):
                    moved.setdefault((stage, name), []).append(judged)
    return tuple(
        a if isinstance(a, Refused) else Accepted(a, tuple(moved.get((a.stage, a.characteristic), ()))) for a in answers
    )


def _action(entries: Sequence[Entry]) -> str:
    return f"reading{'s' if len(entries) > 1 else ''} {'corrected' if all(e.why for e in entries) else 'added'}"


def correct_in(record: Record, change: Change, tag: str, entries: Sequence[Entry]) -> None:
    """Correct readings of a job that has ended, inside the change that amends its report. Raises like `add`."""
    job = replace(job_at_hand(change.conn, tag), outcome="open")
    for entry in entries:
        if not entry.why:
            raise Refused("a correction has a reason")
        _, one = _insert(record, change, job, entry)
        judgements.refresh(record, change.conn, job, entry.stage, (one.name,))


def of_job(record: Record, tag: str, stage: str | None = None, *, corrected: bool = False) -> tuple[Reading, ...]:
    """The readings of a job in the order in which they were added; with `corrected` those that were replaced too.

    Raises NotFound.
    """
    with record.read() as conn:
        return of_job_in(record, conn, job_at_hand(conn, tag).id, stage, corrected=corrected)


def of_job_in(
    record: Record, conn: Connection, job_id: int, stage: str | None = None, *, corrected: bool = False
) -> tuple[Reading, ...]:
    """`of_job` inside a running transaction, by the job's key."""
    sql, values = _READINGS, [job_id]
    if stage is not None:
        sql, values = sql + " AND r.stage = ?", [job_id, stage]  # type: ignore[list-item]
    if not corrected:
        sql += " AND NOT EXISTS (SELECT 1 FROM reading c WHERE c.corrects_id = r.id)"
    known = catalogue(record, conn)
    found = rows(conn, sql + " ORDER BY r.id", tuple(values))
    return tuple(_reading(r, known.by_id[r[1]].name) for r in found)


def positions(one: Characteristic, limit: SheetLimit | None, bars: int | None = None) -> tuple[str, ...]:
    """Where a characteristic is read: its own list, a bar each for bars, or as many as the limit expects."""
    if one.noun == "bar" and bars:
        return tuple(str(n) for n in range(1, bars + 1))
    wanted = (limit.count if limit else None) or one.count or len(one.positions)
    if wanted == len(one.positions):
        return one.positions
    if all(_NUMBERED.match(p) for p in one.positions):
        return tuple(str(n) for n in range(1, wanted + 1))
    return one.positions[:wanted]


def _insert(record: Record, change: Change, job: JobAtHand, entry: Entry) -> tuple[Reading, Characteristic]:
    one = catalogue(record, change.conn).find(entry.characteristic)
    limit = limit_of(record, change.conn, job, one, entry.stage)
    if job.outcome != "open":
        raise Refused(f"{job.tag} was {job.outcome}; its readings stay as they are")
    check_measurable(job, one, entry.stage)
    if len(entry.note) > MOST_NOTE or len(entry.why) > MOST_NOTE:
        raise Refused(f"a note on a reading has at most {MOST_NOTE:,} characters")
    gauge = gauges.find(record, entry.gauge, change.conn) if entry.gauge else None
    typed = parse(entry.text, one.quantity, default_unit(entry, one, limit, gauge))
    if typed.mark is Mark.not_measured and not typed.detail and not entry.note:
        raise ReadingRefused("say why it was not measured: not measured REASON")
    taken = standing(change.conn, job.id, entry.stage, one.id)
    position, corrects = place_of(job, one, limit, entry.position or "", entry.why, taken)
    made = change.insert(
        ReadingRow, job_id=job.id, stage=entry.stage, characteristic_id=one.id, position=position, typed=typed.text,
        mark=typed.mark.value, value=None if typed.value is None else str(typed.value), unit=typed.unit,
        places=typed.places, detail=typed.detail, gauge_id=gauge.id if gauge else None, at=change.at, by=change.by,
        note=entry.note, corrects_id=corrects, why=entry.why,
    )  # fmt: skip
    name = gauge.name if gauge else None
    reading = Reading(
        made, one.name, entry.stage, position, typed, name, change.at, change.by, entry.note, corrects, entry.why
    )
    return reading, one


def check_measurable(job: JobAtHand, one: Characteristic, stage: str) -> None:
    """Raises Refused where a characteristic is not measured on such a machine, at that stage, or at all."""
    if stage not in STAGES:
        raise Refused(f"{brief(stage)!r} is no stage; as-found or as-left")
    if job.kind not in one.machines:
        article = "an" if job.kind == "alternator" else "a"
        raise Refused(f"{one.name} is not measured on {article} {job.kind}")
    if one.derive:
        raise Refused(f"{one.name} is computed from {' and '.join(one.sources)}; measure those")
    if stage not in one.stages:
        raise Refused(f"{one.name} is measured {' and '.join(one.stages).replace('-', ' ')} only")


def default_unit(entry: Entry, one: Characteristic, limit: SheetLimit | None, gauge: Gauge | None) -> str:
    """No unit typed: the one said for the entry, else the gauge's own, else the sheet's, else the catalogue's."""
    if entry.unit:
        return entry.unit
    if gauge and gauge.unit and quantities.unit(gauge.unit).quantity == one.quantity:
        return gauge.unit
    if limit and limit.unit and quantities.unit(limit.unit).quantity == one.quantity:
        return limit.unit
    return one.unit


def standing(conn: Connection, job_id: int, stage: str, characteristic_id: int) -> dict[str, int]:
    """The keys of the readings that stand, by position."""
    return {r[1]: r[0] for r in rows(conn, _AT, (job_id, stage, characteristic_id))}


def place_of(
    job: JobAtHand, one: Characteristic, limit: SheetLimit | None, position: str, why: str, taken: dict[str, int]
) -> tuple[str, int | None]:
    """Where a reading goes, and the key of the one that it corrects (`why` given). `taken` as from `standing`.

    Raises Refused: all positions have their reading, no such position, read already, nothing to correct.
    """
    listed = positions(one, limit, job.bars)
    place = position.strip()
    if not place:
        if why and len(taken) == 1:
            place = next(iter(taken))
        else:
            free = [p for p in listed if p not in taken]
            if not free:
                raise Refused(
                    f"{one.name} has all its {len(listed)} readings; correct one: --at POSITION --correct WHY"
                )
            place = free[0]
    elif place not in listed and place not in taken:
        place = _beyond(job, one, listed, place)
    known = taken.get(place)
    if known is not None and not why:
        raise Refused(f"{one.name} at {place} was read already; correct it with a reason")
    if known is None and why:
        raise Refused(f"{one.name} has no reading at {place} to correct")
    return place, known


def _beyond(job: JobAtHand, one: Characteristic, listed: Sequence[str], place: str) -> str:
    """A position past the usual ones, where there can be such a one: a fifth brush, a third station. Raises Refused."""
    upper = place.upper()
    if one.noun == "bar" and job.bars and _NUMBERED.match(place) and int(place) > job.bars:
        raise Refused(f"bar {place}: this model's commutator has {job.bars} bars")
    if all(_NUMBERED.match(p) for p in listed) and _NUMBERED.match(place) and int(place) <= MOST_POSITIONS:
        return place
    if any(_STATIONED.match(p) for p in listed) and _STATIONED.match(upper):
        return upper
    shown = ", ".join(listed[:8]) + (" ..." if len(listed) > 8 else "")
    raise Refused(f"{brief(place, 20)!r} is no position of {one.name}; {shown}")


def limit_of(record: Record, conn: Connection, job: JobAtHand, one: Characteristic, stage: str) -> SheetLimit | None:
    if job.revision_id is None:
        return None
    return limit_sheets.by_revision(record, conn, job.revision_id).at(one.name, stage)


def job_at_hand(conn: Connection, tag: str) -> JobAtHand:
    """A job by its tag. Raises NotFound."""
    found = rows(conn, _FIND + "j.tag = ?", (tag,))
    if not found and (key := comparing_key(tag)):
        found = rows(conn, _FIND + "j.key = ? LIMIT 2", (key,))
    if len(found) != 1:
        raise NotFound("job with the tag", tag)
    return JobAtHand(*found[0])


def jobs_at_hand(conn: Connection) -> Iterator[JobAtHand]:
    """Every job of the record, for loads."""
    for row in conn.exec_driver_sql(_FIND + "1"):
        yield JobAtHand(*row)


def _reading(r: Any, name: str) -> Reading:
    typed = Typed(r[4], Mark(r[5]), None if r[6] is None else Fraction(r[6]), r[7], r[8], r[9])
    return Reading(r[0], name, r[2], r[3], typed, r[10], r[11], r[12], r[13], r[14], r[15])
