"""The rework plan of a job: computed from its as-found readings, accepted into the rework list, held against what was left.

A plan predicts sizes; a prediction is never a reading and enters no verdict.
"""

from __future__ import annotations

import json
from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from sqlalchemy import Connection

from store import gauge_fit, jobs, models, people, plan_bearings, plan_lines, plan_remarks, sheets
from store.errors import Refused
from store.jobs import Job
from store.plan_line import PlanLine, Predicted, shown
from store.plan_remarks import diagnosis
from store.records import Record
from store.rules import quantities
from store.sheets import Sheet
from store.sqlite.engine import rows
from store.tables.rework import ReworkRow

__all__ = [
    "Held", "Plan", "PlanLine", "Predicted", "ReworkLine", "accept", "as_json", "compute", "diagnosis", "finish", "held",
    "listing", "shown",
]  # fmt: skip
MOST_TEXT = 10_000


@dataclass(frozen=True, slots=True)
class Plan:
    """The plan of a job, in the order of the work, and what else the readings say."""

    tag: str
    lines: tuple[PlanLine, ...]
    remarks: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class ReworkLine:
    """An accepted line and what came of it: `outcome` is open, done or declined."""

    id: int
    line: PlanLine
    at: str
    by: str
    outcome: str
    note: str
    ended: str | None
    ended_by: str


@dataclass(frozen=True, slots=True)
class Held:
    """A prediction held against what was left: `left` is None until it is measured.

    `beyond` says that they differ by more than the gauge's expanded uncertainty (or by anything where that is not known).
    """

    predicted: Predicted
    left: Fraction | None
    beyond: bool
    says: str


def compute(record: Record, tag: str, conn: Connection | None = None) -> Plan:
    """The plan from the as-found readings. Raises NotFound, Refused (sizes that cannot be)."""
    if conn is None:
        with record.read() as own:
            return compute(record, tag, own)
    job = jobs.find(record, tag, conn)
    model = models.by_id(conn, job.model_id)
    found = sheets.sheet(record, job.tag, "as-found", conn)
    lines = plan_lines.of_sheet(record, conn, job, model, found)
    remarks = [*plan_remarks.of_sheet(found, model.bars, model.poles)]
    remarks += [f"{row.characteristic.label}: {one}" for row in found.rows for one in gauge_fit.said(record, conn, row)]
    return Plan(job.tag, tuple(lines), tuple(remarks))


def accept(record: Record, tag: str, numbers: Sequence[int] | None = None) -> tuple[ReworkLine, ...]:
    """Take lines of the plan (counted from 1; None: all that ask for work) into the rework list. Raises Refused, NotFound."""
    with record.change("rework accepted", tag) as change:
        job = _open(record, change.conn, tag)
        change.subject = job.tag
        people.require_known(record, change.conn)
        plan = compute(record, job.tag, change.conn)
        listed = {_same(r.line) for r in listing(record, job.tag, change.conn)}
        for line in _chosen(plan, numbers):
            if _same(line) in listed:
                continue
            listed.add(_same(line))
            kept = json.dumps([[p.name, quantities.plain(p.value), p.unit] for p in line.predicted])
            change.insert(
                ReworkRow, job_id=job.id, component=line.component, action=line.action, because=line.because, formula=line.formula,
                predicted=kept, at=change.at, by=change.by,
            )  # fmt: skip
    return listing(record, tag)


def _same(line: PlanLine) -> tuple[str, str, str]:
    return line.component, line.action, line.because


def _chosen(plan: Plan, numbers: Sequence[int] | None) -> list[PlanLine]:
    """The lines of these numbers; None: all that ask for work. Raises Refused."""
    if numbers is None:
        return [line for line in plan.lines if line.is_work]
    chosen = []
    for number in numbers:
        if not 1 <= number <= len(plan.lines):
            raise Refused(f"the plan of {plan.tag} has no line {number}; it has {len(plan.lines)}")
        line = plan.lines[number - 1]
        if not line.is_work:
            raise Refused(f"line {number} says {line.action} the {line.component}: there is nothing to do")
        chosen.append(line)
    return chosen


def finish(record: Record, tag: str, line_id: int, *, outcome: str = "done", note: str = "") -> tuple[ReworkLine, ...]:
    """Say what came of a line: done, or declined with a reason. Raises Refused, NotFound."""
    if outcome not in {"done", "declined"}:
        raise Refused("a line is done or declined")
    if outcome == "declined" and not note.strip():
        raise Refused("say why the line is declined")
    if len(note) > MOST_TEXT:
        raise Refused(f"a note has at most {MOST_TEXT:,} characters")
    known = {r.id: r for r in listing(record, tag)}
    if line_id not in known:
        raise Refused(f"the rework list of {tag} has no line {line_id}")
    with record.change(f"rework {outcome}", tag) as change:
        job = _open(record, change.conn, tag)
        change.subject = job.tag
        people.require_known(record, change.conn)
        change.update(ReworkRow, line_id, outcome=outcome, note=note.strip(), ended=change.at, ended_by=change.by)
    return listing(record, tag)


def listing(record: Record, tag: str, conn: Connection | None = None) -> tuple[ReworkLine, ...]:
    """The rework list of a job, in the order in which it was accepted. Raises NotFound."""
    if conn is None:
        with record.read() as own:
            return listing(record, tag, own)
    job = jobs.find(record, tag, conn)
    sql = (
        "SELECT id, component, action, because, formula, predicted, at, by, outcome, note, ended, ended_by "
        "FROM rework_line WHERE job_id = ? ORDER BY id"
    )
    made = []
    for r in rows(conn, sql, (job.id,)):
        predicted = tuple(Predicted(name, Fraction(value), unit) for name, value, unit in json.loads(r[5]))
        made.append(ReworkLine(r[0], PlanLine(r[1], r[2], r[3], r[4], predicted), r[6], r[7], r[8], r[9], r[10], r[11]))
    return tuple(made)


def held(record: Record, tag: str, line: PlanLine, conn: Connection | None = None) -> tuple[Held, ...]:
    """The predictions of a line against the as-left readings; none of a part that is replaced, as its size is another's.

    Raises NotFound.
    """
    if not line.predicted or line.action == "replace":
        return ()
    if conn is None:
        with record.read() as own:
            return held(record, tag, line, own)
    left = sheets.sheet(record, tag, "as-left", conn)
    return tuple(_held(left, predicted) for predicted in line.predicted)


_BOUNDS = {"undercut-depth"}
"""Predicted as a bound: deeper than predicted, after undercutting above all, is as predicted."""


def _held(left: Sheet, predicted: Predicted) -> Held:
    row, unit = left.find(predicted.name), predicted.unit
    said = f"predicted {shown(predicted.value)} {unit}"
    value = None if row is None else row.size(unit)
    if row is None or row.judged is None or value is None:
        return Held(predicted, None, False, f"{said}, not measured as left")
    loosest = plan_bearings.loosest(left, predicted.name, unit)  # a clearance is predicted at its loosest
    value = value if loosest is None else loosest
    variance = row.judged.judgement.variance
    by = quantities.scale(row.judged.judgement.unit, unit)
    allowed = Fraction(0) if variance is None else 4 * variance * by * by
    if predicted.name in _BOUNDS and value >= predicted.value:
        return Held(predicted, value, False, f"{said} at least, left {shown(value)}: as predicted")
    beyond = (value - predicted.value) ** 2 > allowed
    difference = shown(abs(value - predicted.value))
    how = "beyond the gauge's uncertainty" if beyond else "within the gauge's uncertainty"
    if variance is None:
        how = "the gauge's uncertainty is not known"
    return Held(predicted, value, beyond, f"{said}, left {shown(value)}: {difference} apart, {how}")


def as_json(plan: Plan) -> dict[str, Any]:
    """The contract of `plan --json`."""
    return {
        "tag": plan.tag,
        "lines": [
            {
                "component": line.component, "action": line.action, "because": line.because, "formula": line.formula,
                "predicted": {p.name: {"value": quantities.plain(p.value), "unit": p.unit} for p in line.predicted},
            }
            for line in plan.lines
        ],
        "remarks": list(plan.remarks),
    }  # fmt: skip


def _open(record: Record, conn: Connection, tag: str) -> Job:
    job = jobs.find(record, tag, conn)
    if not job.is_open:
        raise Refused(f"{job.tag} was {job.outcome}; its rework list stays as it is")
    return job
