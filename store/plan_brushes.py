"""The line of a rework plan for the brushes, how long they last at the rate at which they wore, and what their springs hold."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from sqlalchemy import Connection

from store import jobs, sheets
from store.errors import Refused
from store.jobs import Job
from store.plan_line import PlanLine
from store.records import Record
from store.rules import brushes, limits
from store.rules.quantities import convert, plain, rounded
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


def springs(sheet: Sheet) -> Iterator[str]:
    """The force of each spring at the stated position, from where it was read; a prediction, which no verdict takes up.

    The stated position, where the manual's force holds, is that of the limit of `brush-spring-position` (new size, else the
    middle of its ends); the position where it was read and the force lost a millimetre are readings.
    """
    position, force = sheet.find("brush-spring-position"), sheet.find("brush-spring-force")
    lost = sheet.size("brush-spring-loss", "N")
    if position is None or force is None or lost is None:
        return
    exact, read_at = position.limit.limit if position.limit else None, position.sizes("mm")
    where_stated = limits.stated(exact) if exact else None
    if exact is None or where_stated is None:
        yield "no position is stated at which the springs' force holds: enter a limit of brush-spring-position with it"
        return
    stated = convert(where_stated, exact.unit, "mm")
    least, most = force.end("low", "N"), force.end("high", "N")
    for at, newton in force.sizes("N").items():
        where = read_at.get(at, next(iter(read_at.values())) if len(read_at) == 1 else None)
        if where is None:
            continue
        try:
            made = brushes.force_at(newton, where, stated, lost)
        except Refused as fault:
            yield f"spring {at} at {plain(stated)} mm: {fault}"
            continue
        against = (
            f", {plain(least)} N at least"
            if least is not None
            else f", {plain(most)} N at most"
            if most is not None
            else ""
        )
        yield (
            f"spring {at} at the stated {plain(stated)} mm, predicted, not measured: F - (L - L') x s = {plain(newton)} - "
            f"({plain(where)} - {plain(stated)}) x {plain(lost)} = {rounded(made, 2)} N{against}"
        )
