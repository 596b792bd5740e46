"""Files of parts fitted on jobs."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store import times
from store.errors import Refused, brief
from store.files.kinds import Kind, Line, Loading, Numbered
from store.files.parts import quantity
from store.parts.numbers import MOST_MAKER, MOST_TEXT
from store.records import Record
from store.rules.numbers import comparing_key, printed
from store.tables.parts import FittedRow

_TEXTS = {"maker": MOST_MAKER, "lot": 80, "supplier": 80, "position": 80, "why": MOST_TEXT}


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    return loading.change.load(FittedRow, _rows(loading, lines))


def _rows(loading: Loading, lines: Iterator[Numbered]) -> Iterator[tuple[Any, ...]]:
    conn = loading.change.conn
    jobs = {r[0]: (r[1], r[2]) for r in conn.exec_driver_sql("SELECT key, id, coalesce(ended, taken_in) FROM job")}
    people = {r[0] for r in conn.exec_driver_sql("SELECT initials FROM person UNION ALL SELECT 'shop' FROM person")}
    for place, line in lines:
        job = jobs.get(comparing_key(line["tag"]))
        if job is None:
            loading.refuse(place, "tag", f"no job with the tag {brief(line['tag'])!r}")
            continue
        by = line.get("by", "")
        if by and people and by not in people:
            loading.refuse(place, "by", f"no person with the initials {brief(by)!r}")
            continue
        column, yielded = _row(line, job, by or loading.change.by)
        if column:
            loading.refuse(place, column, str(yielded))
        else:
            yield yielded


def _row(line: Line, job: tuple[int, str], by: str) -> tuple[str, Any]:
    """The column and the reason of a refusal, or no column and the row. Without a moment it is that of the job's end."""
    for name, most in _TEXTS.items():
        if len(line.get(name, "")) > most:
            return name, f"longer than {most:,} characters"
    column = "number"
    try:
        number = printed(line["number"])
        column = "quantity"
        pieces = quantity(line.get("quantity", "")) or 1
        column = "at"
        at = times.moment(line.get("at") or job[1])
    except Refused as fault:
        return column, fault
    get = line.get
    return "", (
        None, job[0], number, comparing_key(number), get("maker", ""), get("lot", ""), get("supplier", ""),
        get("position", ""), pieces, by, at, "", get("why", ""),
    )  # fmt: skip


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT j.tag, f.number, f.maker, f.lot, f.supplier, f.position, f.quantity, f.by, f.at, f.why "
        "FROM fitted f JOIN job j ON j.id = f.job_id ORDER BY f.id"
    )
    for r in conn.exec_driver_sql(sql):
        yield (*r[:6], str(r[6]), *r[7:])


KINDS = (
    Kind(
        "fitted",
        ("tag", "number"),
        ("maker", "lot", "supplier", "position", "quantity", "by", "at", "why"),
        _take,
        _give,
    ),
)
