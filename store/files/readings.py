"""Files of readings. A second line for the same place is a correction when its note begins `corrects: WHY`."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from typing import Any

from sqlalchemy import Connection

from store import gauges, judgements, readings, times
from store.catalogue import Characteristic, catalogue
from store.errors import Refused, brief
from store.files.kinds import Kind, Line, Loading, Numbered
from store.gauges import Gauge
from store.limit_sheets import SheetLimit
from store.readings import STAGES, Entry
from store.records import Record
from store.rules.numbers import comparing_key
from store.rules.readings import Mark, Typed, parse
from store.tables.readings import ReadingRow

CORRECTS = "corrects: "


class _Cell(Refused):
    def __init__(self, column: str, why: object) -> None:
        self.column = column
        super().__init__(str(why))


@dataclass
class _Known:
    """What the lines of one load are checked against, read once."""

    jobs: dict[str, readings.JobAtHand]
    people: set[str]
    gauges: dict[str, Gauge]
    next_id: int
    places: dict[tuple[int, str, int], dict[str, int]] = field(default_factory=dict)
    touched: dict[tuple[int, str], dict[int, None]] = field(default_factory=dict)


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    conn = loading.change.conn
    known = _Known(
        jobs={comparing_key(job.tag): job for job in readings.jobs_at_hand(conn)},
        people={r[0] for r in conn.exec_driver_sql("SELECT initials FROM person UNION ALL SELECT 'shop' FROM person")},
        gauges={g.name.casefold(): g for g in gauges.by_id(loading.record, conn).values()},
        next_id=conn.exec_driver_sql("SELECT coalesce(max(id),0)+1 FROM reading").scalar() or 1,
    )
    taken = loading.change.load(ReadingRow, _rows(loading, known, lines))
    if not loading.bad:
        _judge(loading, known)
    return taken


def _rows(loading: Loading, known: _Known, lines: Iterator[Numbered]) -> Iterator[Sequence[Any]]:
    for number, line in lines:
        try:
            row = _row(loading, known, line)
        except _Cell as fault:
            loading.refuse(number, fault.column, fault)
            continue
        if not loading.bad:
            yield row


def _row(loading: Loading, known: _Known, line: Line) -> Sequence[Any]:
    conn = loading.change.conn
    job = known.jobs.get(comparing_key(line["tag"]))
    if job is None:
        raise _Cell("tag", f"no job with the tag {brief(line['tag'])!r}")
    stage = line["stage"]
    if stage not in STAGES:
        raise _Cell("stage", f"{brief(stage)!r} is no stage; as-found or as-left")
    try:
        one = catalogue(loading.record, conn).find(line["characteristic"])
        readings.check_measurable(job, one, stage)
    except Refused as fault:
        raise _Cell("characteristic", fault) from None
    gauge = _gauge(known, line)
    limit = readings.limit_of(loading.record, conn, job, one, stage)
    typed = _typed(line, one, limit, gauge)
    if (by := line.get("by", "")) and known.people and by not in known.people:
        raise _Cell("by", f"no person with the initials {brief(by)!r}")
    position, corrects, note, why = _place(known, conn, job, one, limit, line)
    made = loading.change.row(
        ReadingRow,
        {
            "id": known.next_id, "job_id": job.id, "stage": stage, "characteristic_id": one.id, "position": position,
            "typed": typed.text, "mark": typed.mark.value, "value": None if typed.value is None else str(typed.value),
            "unit": typed.unit, "places": typed.places, "detail": typed.detail, "gauge_id": gauge.id if gauge else None,
            "at": _at(loading, line), "by": by or loading.change.by, "note": note, "corrects_id": corrects, "why": why,
        },
    )  # fmt: skip
    known.places[(job.id, stage, one.id)][position] = known.next_id
    known.touched.setdefault((job.id, stage), {})[one.id] = None
    known.next_id += 1
    return made


def _typed(line: Line, one: Characteristic, limit: SheetLimit | None, gauge: Gauge | None) -> Typed:
    entry = Entry(one.name, line["value"], unit=line.get("unit") or None)
    try:
        typed = parse(line["value"], one.quantity, readings.default_unit(entry, one, limit, gauge))
    except Refused as fault:
        raise _Cell("unit" if "is not a unit of" in str(fault) else "value", fault) from None
    if typed.mark is Mark.not_measured and not typed.detail and not line.get("note"):
        raise _Cell("note", "say why it was not measured")
    return typed


def _gauge(known: _Known, line: Line) -> Gauge | None:
    name = line.get("gauge", "")
    if not name:
        return None
    found = known.gauges.get(name.casefold())
    if found is None:
        raise _Cell("gauge", f"no gauge {brief(name)!r}")
    return found


def _at(loading: Loading, line: Line) -> str:
    try:
        return times.moment(line["at"]) if line.get("at") else loading.change.at
    except Refused as fault:
        raise _Cell("at", fault) from None


def _place(
    known: _Known, conn: Connection, job: readings.JobAtHand, one: Characteristic, limit: SheetLimit | None, line: Line
) -> tuple[str, int | None, str, str]:
    """Position, the reading that is corrected, note, and why."""
    which = (job.id, line["stage"], one.id)
    standing = known.places.get(which)
    if standing is None:
        standing = known.places[which] = readings.standing(conn, *which)
    note, why = line.get("note", ""), ""
    if note.startswith(CORRECTS):
        why, _, note = note[len(CORRECTS) :].partition(" | ")
    try:
        position, corrects = readings.place_of(job, one, limit, line.get("position", ""), why, standing)
    except Refused as fault:
        raise _Cell("position", fault) from None
    return position, corrects, note, why


def _judge(loading: Loading, known: _Known) -> None:
    """Judge what was read, job by job; progress goes on while it lasts."""
    conn = loading.change.conn
    names = {one.id: one.name for one in catalogue(loading.record, conn).all}
    at_hand = {job.id: job for job in known.jobs.values()}
    for count, ((job_id, stage), touched) in enumerate(known.touched.items(), start=1):
        judgements.refresh(loading.record, conn, at_hand[job_id], stage, [names[i] for i in touched])
        if count % 500 == 0:
            loading.progress("judging", count)


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT j.tag, r.stage, c.name, r.typed, r.position, r.unit, g.name, r.by, r.at, r.note, r.corrects_id, r.why "
        "FROM reading r JOIN job j ON j.id = r.job_id JOIN characteristic c ON c.id = r.characteristic_id "
        "LEFT JOIN gauge g ON g.id = r.gauge_id ORDER BY r.id"
    )
    for r in conn.exec_driver_sql(sql):
        note = r[9]
        if r[10] is not None:
            note = f"{CORRECTS}{r[11]}" + (f" | {note}" if note else "")
        yield (r[0], r[1], r[2], r[3], r[4], r[5], r[6] or "", r[7], r[8], note)


KINDS = (
    Kind(
        "readings",
        ("tag", "stage", "characteristic", "value"),
        ("position", "unit", "gauge", "by", "at", "note"),
        _take,
        _give,
    ),
)
