"""Files of jobs: a shop's history, or its open work. A released job loaded so counts as released, from history."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from typing import Any

from sqlalchemy import Connection

from store import jobs, limit_sheets, models, times
from store.errors import NotFound, Refused, brief
from store.files.kinds import Kind, Line, Loading, Numbered
from store.records import Record
from store.rules.numbers import comparing_key
from store.tables.jobs import JobRow
from store.tables.models import UnitRow

_OPTIONAL = (
    "customer", "application", "hours", "starts", "complaint", "by", "assembled_by", "outcome", "ended", "ended_by",
    "earlier_tag", "comeback_outcome", "revision",
)  # fmt: skip
_NEEDED = ("tag", "model", "serial", "taken_in")


class _Cell(Refused):
    def __init__(self, column: str, why: object) -> None:
        self.column = column
        super().__init__(str(why))


@dataclass
class _Known:
    """What the lines of one load are checked against, read once."""

    tags: dict[str, int]
    people: set[str]
    models: dict[str, models.Model | NotFound]
    revisions: dict[tuple[int, str], int | None]
    units: dict[tuple[int, str], int]
    next_unit: int
    next_job: int


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    conn = loading.change.conn
    known = _Known(
        tags={r[0]: r[1] for r in conn.exec_driver_sql("SELECT key, id FROM job")},
        people={r[0] for r in conn.exec_driver_sql("SELECT initials FROM person UNION ALL SELECT 'shop' FROM person")},
        models={},
        revisions={},
        units={(r[0], r[1]): r[2] for r in conn.exec_driver_sql("SELECT model_id, key, id FROM unit")},
        next_unit=conn.exec_driver_sql("SELECT coalesce(max(id),0)+1 FROM unit").scalar() or 1,
        next_job=conn.exec_driver_sql("SELECT coalesce(max(id),0)+1 FROM job").scalar() or 1,
    )
    rows: list[list[Any]] = []
    units: list[tuple[Any, ...]] = []
    earlier: list[tuple[int, int, str]] = []
    for number, line in lines:
        try:
            row = _row(loading, known, line, units)
        except _Cell as fault:
            loading.refuse(number, fault.column, fault)
            continue
        if line.get("earlier_tag"):
            earlier.append((number, len(rows), line["earlier_tag"]))
        rows.append(row)
    _link_named(loading, known, rows, earlier)
    _link_found(loading, rows, {index for _, index, _ in earlier})
    if loading.bad:
        return len(rows)
    loading.change.load(UnitRow, units)
    return loading.change.load(JobRow, rows)


def _row(loading: Loading, known: _Known, line: Line, units: list[tuple[Any, ...]]) -> list[Any]:
    tag = line["tag"]
    try:
        jobs.check_tag(tag)
    except Refused as fault:
        raise _Cell("tag", fault) from None
    key = comparing_key(tag)
    if key in known.tags:
        raise _Cell("tag", f"the tag {tag} is taken")
    model = _model(loading, known, line["model"])
    outcome = line.get("outcome") or "open"
    if outcome not in jobs.OUTCOMES:
        raise _Cell("outcome", f"{brief(outcome)!r} is no outcome; one of {', '.join(jobs.OUTCOMES)}")
    came_back = line.get("comeback_outcome", "")
    if came_back and came_back not in jobs.COMEBACK_OUTCOMES:
        raise _Cell("comeback_outcome", f"{brief(came_back)!r} is none of {', '.join(jobs.COMEBACK_OUTCOMES)}")
    taken_in, ended = _moment(line, "taken_in"), _moment(line, "ended")
    if outcome != "open" and not ended:
        raise _Cell("ended", f"a job that was {outcome} has a date of it")
    if outcome == "open" and ended:
        raise _Cell("ended", "an open job has not ended")
    for column in ("by", "assembled_by", "ended_by"):
        if (who := line.get(column, "")) and known.people and who not in known.people:
            raise _Cell(column, f"no person with the initials {brief(who)!r}")
    for column in ("customer", "application", "complaint"):
        if len(line.get(column, "")) > jobs.MOST_TEXT:
            raise _Cell(column, f"longer than {jobs.MOST_TEXT:,} characters")
    made = loading.change.row(
        JobRow,
        {
            "tag": tag, "key": key, "unit_id": _unit(known, model.id, line["serial"], units),
            "revision_id": _revision(loading, known, model.id, line.get("revision", "")),
            "customer": line.get("customer", ""), "application": line.get("application", ""),
            "hours": _count(line, "hours"), "starts": _count(line, "starts"), "complaint": line.get("complaint", ""),
            "taken_in": taken_in, "by": line.get("by", ""), "assembled_by": line.get("assembled_by", ""),
            "outcome": outcome, "ended": ended or None, "ended_by": line.get("ended_by", ""),
            "comeback_outcome": came_back, "from_history": outcome != "open",
        },
    )  # fmt: skip
    known.tags[key] = known.next_job
    made[0] = known.next_job
    known.next_job += 1
    return made


def _model(loading: Loading, known: _Known, number: str) -> models.Model:
    if number not in known.models:
        try:
            known.models[number] = models.find(loading.record, number, loading.change.conn)
        except NotFound as fault:
            known.models[number] = fault
    found = known.models[number]
    if isinstance(found, NotFound):
        raise _Cell("model", found)
    return found


def _unit(known: _Known, model_id: int, serial: str, units: list[tuple[Any, ...]]) -> int:
    key = comparing_key(serial)
    if not key or len(serial) > 60:
        raise _Cell("serial", "a serial or mark is one to sixty letters and figures")
    if (model_id, key) not in known.units:
        known.units[(model_id, key)] = known.next_unit
        units.append((known.next_unit, model_id, " ".join(serial.split()), key))
        known.next_unit += 1
    return known.units[(model_id, key)]


def _revision(loading: Loading, known: _Known, model_id: int, text: str) -> int | None:
    if (model_id, text) not in known.revisions:
        conn = loading.change.conn
        found = limit_sheets.newest(conn, model_id)
        if text:
            sql = "SELECT id FROM revision WHERE model_id = ? AND number = ?"
            found = conn.exec_driver_sql(sql, (model_id, text)).scalar()
            if found is None:
                raise _Cell("revision", f"the model has no limit revision {brief(text)}")
        known.revisions[(model_id, text)] = found
    return known.revisions[(model_id, text)]


def _moment(line: Line, column: str) -> str:
    text = line.get(column, "")
    if not text:
        return ""
    try:
        return times.read(text)
    except Refused as fault:
        raise _Cell(column, fault) from None


def _count(line: Line, column: str) -> str | None:
    try:
        return jobs.count(column, line.get(column))
    except Refused as fault:
        raise _Cell(column, fault) from None


def _link_named(loading: Loading, known: _Known, rows: list[list[Any]], earlier: list[tuple[int, int, str]]) -> None:
    """Links by earlier_tag: to a job of this file or of the record."""
    place = loading.change.row(JobRow, {"earlier_id": 1}).index(1)
    for number, index, tag in earlier:
        found = known.tags.get(comparing_key(tag))
        if found is None:
            loading.refuse(number, "earlier_tag", f"no job with the tag {brief(tag)!r}")
        elif found == rows[index][0]:
            loading.refuse(number, "earlier_tag", "a job cannot come back from itself")
        else:
            rows[index][place] = found


def _link_found(loading: Loading, rows: list[list[Any]], named: set[int]) -> None:
    """Links jobs without an earlier_tag to the last release of their unit before they came in."""
    names = list(JobRow.model_fields)
    unit, outcome, ended, taken, earlier = (
        names.index(n) for n in ("unit_id", "outcome", "ended", "taken_in", "earlier_id")
    )
    releases: dict[int, list[tuple[str, int]]] = {}
    sql = "SELECT unit_id, ended, id FROM job WHERE outcome = 'released'"
    for unit_id, when, job in loading.change.conn.exec_driver_sql(sql):
        releases.setdefault(unit_id, []).append((when[:10], job))
    for row in rows:
        if row[outcome] == "released":
            releases.setdefault(row[unit], []).append((row[ended][:10], row[0]))
    for index, row in enumerate(rows):
        if index in named:
            continue
        before = [r for r in releases.get(row[unit], ()) if r[0] <= row[taken][:10] and r[1] != row[0]]
        if before:
            row[earlier] = max(before)[1]


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT j.tag, m.number, u.serial, j.taken_in, j.customer, j.application, j.hours, j.starts, j.complaint, j.by, "
        "j.assembled_by, j.outcome, j.ended, j.ended_by, e.tag, j.comeback_outcome, r.number FROM job j "
        "JOIN unit u ON u.id = j.unit_id JOIN model m ON m.id = u.model_id LEFT JOIN job e ON e.id = j.earlier_id "
        "LEFT JOIN revision r ON r.id = j.revision_id ORDER BY j.id"
    )
    for row in conn.exec_driver_sql(sql):
        yield tuple("" if cell is None else str(cell) for cell in row)


KINDS = (Kind("jobs", _NEEDED, _OPTIONAL, _take, _give),)
