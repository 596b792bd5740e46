"""What stands in the way of a release, line by line, each with the place where it is mended."""

from __future__ import annotations

from dataclasses import dataclass

from sqlalchemy import Connection

from store import gauges, jobs, people, sheets, shop
from store.jobs import Job
from store.records import Record
from store.rules.limits import Verdict
from store.sheets import Sheet
from store.sqlite.engine import rows

_SAYS = {
    Verdict.out: "out",
    Verdict.in_doubt: "in doubt",
    Verdict.not_measured: "not measured as left",
    Verdict.not_comparable: "not comparable",
}


@dataclass(frozen=True, slots=True)
class Obstacle:
    """One thing in the way. `characteristic` is "" where it concerns the whole job; `pane` is where it is mended.

    `may_concede`: whether a named person may accept it with a reason, per characteristic.
    """

    kind: str
    says: str
    characteristic: str
    pane: str
    may_concede: bool


def standing(record: Record, tag: str, conn: Connection | None = None) -> tuple[Obstacle, ...]:
    """What stands in the way of releasing a job now, concessions already given left out. Raises NotFound."""
    if conn is None:
        with record.read() as own:
            return standing(record, tag, own)
    job = jobs.find(record, tag, conn)
    conceded = {r[0] for r in rows(conn, _CONCEDED, (job.id,))}
    left = sheets.sheet(record, job.tag, "as-left", conn)
    found = [*_limits(left), *_verdicts(left), *_overdue(record, conn, job, left)]
    waiting = [o for o in found if not (o.may_concede and o.characteristic in conceded)]
    return (*waiting, *_plan(conn, job), *_parts(conn, job), *_person(record, conn, job))


_CONCEDED = "SELECT c.name FROM concession k JOIN characteristic c ON c.id = k.characteristic_id WHERE k.job_id = ?"


def _limits(left: Sheet) -> list[Obstacle]:
    """A job may be released without any limits, and its report says so; not without anything measured."""
    if any(row.limit or row.judged for row in left.rows):
        return []
    return [Obstacle("nothing measured", "nothing is measured as left", "", "sheet", False)]


def _verdicts(left: Sheet) -> list[Obstacle]:
    found = []
    for row in left.rows:
        if row.limit is None and not (row.judged and row.verdict in {Verdict.out, Verdict.not_comparable}):
            continue
        word = _SAYS.get(row.verdict)
        if word is None:
            continue
        because = f": {row.judged.because}" if row.judged else ""
        name = row.characteristic
        kind = "running test" if name.component == "running tests" and word == "not measured as left" else word
        found.append(Obstacle(kind, f"{name.label} {word}{because}", name.name, "sheet", True))
    return found


def _overdue(record: Record, conn: Connection, job: Job, left: Sheet) -> list[Obstacle]:
    known = {gauge.name: gauge for gauge in gauges.by_id(record, conn).values()}
    found = []
    for row in left.rows:
        late = set()
        for reading in row.readings:
            if reading is None or reading.gauge is None:
                continue
            used = known[reading.gauge].calibration_at(reading.at)
            if used is not None and used.due and used.due < reading.at[:10]:
                late.add(f"{reading.gauge} was due {used.due}")
        found += [
            Obstacle("gauge overdue", f"{row.characteristic.label}: {says}", row.characteristic.name, "sheet", True)
            for says in sorted(late)
        ]
    return found


def _plan(conn: Connection, job: Job) -> list[Obstacle]:
    """Accepted lines of the rework list that are not done."""
    if not rows(conn, "SELECT 1 FROM sqlite_master WHERE name = 'rework_line'"):
        return []
    open_lines = rows(
        conn, "SELECT component, action FROM rework_line WHERE job_id = ? AND outcome = 'open' ORDER BY id", (job.id,)
    )
    return [
        Obstacle("rework not done", f"{component}: {action} is not done", "", "plan", False)
        for component, action in open_lines
    ]


def _parts(conn: Connection, job: Job) -> list[Obstacle]:
    """Parts whose cross-check spoke against them and that were fitted without a reason."""
    sql = "SELECT number, checked FROM fitted WHERE job_id = ? AND checked = 'does not fit' AND why = '' ORDER BY id"
    return [
        Obstacle("part mismatched", f"part {number} {checked} and no reason is given", "", "parts", False)
        for number, checked in rows(conn, sql, (job.id,))
    ]


def _person(record: Record, conn: Connection, job: Job) -> list[Obstacle]:
    """Who acts must be one who may inspect, and not the one who measured, unless the owner allowed it."""
    known = {r[0]: r[1] for r in rows(conn, "SELECT initials, may FROM person WHERE active")}
    if not known:
        return []
    may = people.rights(known.get(record.by, ""))
    if "inspect" not in may:
        return [Obstacle("not an inspector", f"{record.by} may not release; an inspector may", "", "who", False)]
    measured = rows(
        conn, "SELECT 1 FROM reading WHERE job_id = ? AND stage = 'as-left' AND by = ? LIMIT 1", (job.id, record.by)
    )
    if measured and shop.kept(conn, "own_release") != "yes":
        return [
            Obstacle(
                "own work",
                f"{record.by} measured this job and may not release it; the owner may allow it",
                "",
                "who",
                False,
            )
        ]
    return []
