"""The line of a rework plan for the brushes: keep or replace, and how long they last at the rate at which they wore."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from sqlalchemy import Connection

from store import jobs, sheets
from store.errors import Refused
from store.jobs import Job
from store.plan_line import PlanLine
from store.records import Record
from store.rules import brushes
from store.rules.quantities import plain
from store.sheets import Sheet


def of_sheet(record: Record, conn: Connection, job: Job, found: Sheet) -> Iterator[PlanLine]:
    """One line where the brushes are measured and have a least length."""
    row = found.find("brush-length")
    if row is None or row.limit is None or row.limit.limit.low is None:
        return
    exact = row.limit.limit
    shortest = row.size(exact.unit)
    if shortest is None or exact.low is None:
        return
    action, because = brushes.advise(shortest, exact.low, exact.equal_passes, exact.unit)
    left = _life(record, conn, job, shortest, exact.low, exact.unit) if action == "keep" else ""
    yield PlanLine("brushes", action, because + left)


def _life(record: Record, conn: Connection, job: Job, now: Fraction, limit: Fraction, unit: str) -> str:
    """How long they last at the rate since the unit's last visit, in hours and in starts, where both visits have them."""
    if job.earlier is None:
        return ""
    before = jobs.find(record, job.earlier, conn)
    length = sheets.sheet(record, before.tag, "as-left", conn).size("brush-length", unit)
    if length is None:
        return ""
    said = []
    for noun, then, since in (("h", before.hours, job.hours), ("starts", before.starts, job.starts)):
        if then is None or since is None:
            continue
        earlier, later = brushes.Point(length, Fraction(then)), brushes.Point(now, Fraction(since))
        try:
            left = brushes.life_left(earlier, later, limit)
        except Refused as fault:
            said.append(f"no life can be reckoned by {'hours' if noun == 'h' else noun}: {fault}")
            continue
        rate = f"{plain(length - now)} {unit} in {plain(later.worked - earlier.worked)} {noun} since {before.tag}"
        said.append(f"at the rate of {rate} the limit is {int(left)} {noun} away, predicted, not measured")
    return "".join(f"; {one}" for one in said)
