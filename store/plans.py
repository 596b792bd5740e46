"""The rework plan of a job: computed from its as-found readings, accepted into the rework list, held against what was left.

A plan predicts sizes; a prediction is never a reading and enters no verdict.
"""

from __future__ import annotations

import json
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from sqlalchemy import Connection

from store import jobs, models, people, sheets, shop
from store.errors import Refused
from store.jobs import Job
from store.models import Model
from store.records import Record
from store.rules import brushes, bushings, commutator, quantities, running
from store.rules.limits import Verdict
from store.sheets import Sheet, SheetRow
from store.sqlite.engine import rows
from store.tables.rework import ReworkRow

MOST_TEXT = 10_000


@dataclass(frozen=True, slots=True)
class Predicted:
    """A predicted size of a characteristic, exact, in its unit; never a measurement."""

    name: str
    value: Fraction
    unit: str


@dataclass(frozen=True, slots=True)
class PlanLine:
    """One line of the plan: what to do to which component and why, the formula with its numbers, predicted sizes."""

    component: str
    action: str
    because: str
    formula: str = ""
    predicted: tuple[Predicted, ...] = ()


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
    lines = [
        *_rotating(conn, model, found),
        *_brushes(record, conn, job, found),
        *_bearings(conn, model, found),
        *_rest(found),
    ]
    return Plan(job.tag, tuple(lines), tuple(_remarks(found)))


def _rotating(conn: Connection, model: Model, found: Sheet) -> Iterator[PlanLine]:
    """The commutator, or on an alternator its slip rings; never undercut or turning of a commutator there."""
    polish = quantities.convert(*_size(shop.kept(conn, "polish")), "mm")
    if model.kind == "alternator":
        part, names = "slip rings", ("slip-ring-diameter", "slip-ring-runout", "slip-ring-surface", "rotor-runout")
    else:
        part, names = "commutator", ("commutator-diameter", "commutator-runout", "commutator-surface", "shaft-runout")
    diameter = _row(found, names[0])
    if diameter is None or _value(diameter, "mm") is None:
        return
    unit = _unit(diameter)

    def size(name: str) -> Fraction | None:
        row = _row(found, name)
        return None if row is None else _value(row, unit)

    def limit(name: str, end: str) -> Fraction | None:
        row = _row(found, name)
        if row is None or row.limit is None:
            return None
        kept: Fraction | None = getattr(row.limit.limit, end)
        return None if kept is None else quantities.convert(kept, row.limit.unit, unit)

    surface = _row(found, names[2])
    is_commutator = part == "commutator"
    measured = commutator.Found(
        unit=unit,
        diameter=size(names[0]),
        runout=size(names[1]),
        undercut=size("undercut-depth") if is_commutator else None,
        defect=(size("surface-defect-depth") or Fraction(0)) if is_commutator else Fraction(0),
        polish=quantities.convert(polish, "mm", unit),
        lowest=limit(names[0], "low"),
        lowest_passes=diameter.limit is None or diameter.limit.at_limit == "pass",
        most_runout=limit(names[1], "high"),
        least_undercut=limit("undercut-depth", "low") if is_commutator else None,
        shaft_runout=size(names[3]),
        most_shaft_runout=limit(names[3], "high"),
        surface_failed=surface is not None and surface.verdict is Verdict.out,
        may_turn=model.may_turn,
        may_undercut=model.may_undercut,
    )
    rename = {} if is_commutator else {"commutator-diameter": "slip-ring-diameter"}
    for advice in commutator.advise(measured):
        predicted = tuple(Predicted(rename.get(name, name), value, unit) for name, value in advice.predicted)
        because = (
            advice.because
            if is_commutator
            else advice.because.replace(f" Order: {commutator.ORDER}", " Order: turn, polish, measure again")
        )
        yield PlanLine(part, advice.action.value, because, advice.formula, predicted)


def _brushes(record: Record, conn: Connection, job: Job, found: Sheet) -> Iterator[PlanLine]:
    row = _row(found, "brush-length")
    if (
        row is None
        or row.judged is None
        or row.judged.judgement.value is None
        or row.limit is None
        or row.limit.limit.low is None
    ):
        return
    exact = row.limit.limit
    assert exact.low is not None
    shortest = row.judged.judgement.value
    action, because = brushes.advise(shortest, exact.low, exact.equal_passes, exact.unit)
    left = _life(record, conn, job, shortest, exact.low, exact.unit)
    yield PlanLine("brushes", action, because + left)


def _life(record: Record, conn: Connection, job: Job, now: Fraction, limit: Fraction, unit: str) -> str:
    """How long brushes last at the rate since the unit's last release, where both visits have hours; else nothing."""
    if job.earlier is None or job.hours is None:
        return ""
    before = jobs.find(record, job.earlier, conn)
    if before.hours is None:
        return ""
    row = _row(sheets.sheet(record, before.tag, "as-left", conn), "brush-length")
    earlier = None if row is None else _value(row, unit)
    if earlier is None:
        return ""
    try:
        left = brushes.life_left(
            brushes.Point(earlier, Fraction(before.hours)), brushes.Point(now, Fraction(job.hours)), limit
        )  # fmt: skip
    except Refused:
        return ""
    return f"; at the rate since {before.tag} the limit is {float(left):.0f} h away"


def _bearings(conn: Connection, model: Model, found: Sheet) -> Iterator[PlanLine]:
    for row in found.rows:
        name = row.characteristic.name
        if not name.endswith("-clearance") or not row.characteristic.derive.startswith("clearance"):
            continue
        place = name.removesuffix("-clearance")
        parts = [_row(found, f"{place}-bore"), _row(found, f"{place}-journal")]
        worn = [part for part in parts if part is not None and part.verdict is Verdict.out]
        if row.verdict is not Verdict.out and not worn:
            continue
        yield from _bearing(conn, model, row, place, parts)


def _bearing(
    conn: Connection, model: Model, row: SheetRow, place: str, parts: Sequence[SheetRow | None]
) -> Iterator[PlanLine]:
    said = place.replace("-", " ")
    journal = parts[1]
    if journal is not None and journal.verdict is Verdict.out and journal.judged is not None:
        yield PlanLine(
            "bearings", "replace", f"{said} shaft: {journal.judged.because}; a bushing alone does not restore the fit"
        )
        return
    fit = (
        f"{row.judged.because}"
        if row.judged is not None
        else f"the bore is {parts[0].judged.because}"
        if parts[0] and parts[0].judged
        else ""
    )
    size = None if journal is None else _value(journal, "mm")
    exact = row.limit.limit if row.limit else None
    choice = ""
    predicted: tuple[Predicted, ...] = ()
    if size is not None and exact is not None:
        low, high = (
            None if end is None else quantities.convert(end, exact.unit, "mm") for end in (exact.low, exact.high)
        )
        chosen = bushings.choose(_at_hand(conn, model), size, low, high)
        if chosen:
            best = chosen[0]
            clearance = quantities.convert(best.clearance, "mm", exact.unit)
            choice = f"; {best.bushing.number} {best.bushing.maker} would restore it".replace("  ", " ")
            predicted = (Predicted(row.characteristic.name, clearance, exact.unit),)
        else:
            choice = "; no bushing in the lists for this model restores it"
    yield PlanLine("bearings", "replace-bushing", f"{said}: {fit}{choice}", "clearance = bore - journal", predicted)


def _at_hand(conn: Connection, model: Model) -> list[bushings.Bushing]:
    """Bushings that the lists give for this model, with inside and outside diameter in mm."""
    sql = (
        "SELECT p.number, p.maker, s.name, s.value, s.unit FROM part_number p JOIN fit f ON f.number_id = p.id "
        "JOIN part_size s ON s.number_id = p.id WHERE f.model_id = ? AND p.kind = 'bushing' AND s.name IN ('id', 'od')"
    )
    sizes: dict[tuple[str, str], dict[str, Fraction]] = {}
    for number, maker, name, value, unit in rows(conn, sql, (model.id,)):
        sizes.setdefault((number, maker), {})[name] = quantities.convert(Fraction(value), unit, "mm")
    return [bushings.Bushing(n, m, s["id"], s["od"]) for (n, m), s in sorted(sizes.items()) if {"id", "od"} <= s.keys()]


_DONE_ABOVE = {
    "commutator-diameter", "commutator-runout", "undercut-depth", "commutator-surface", "surface-defect-depth", "brush-length",
    "slip-ring-diameter", "slip-ring-runout", "slip-ring-surface", "shaft-runout", "commutator-ovality", "commutator-taper",
}  # fmt: skip
_ACTIONS = {
    "growler-short": "rewind or replace", "armature-open": "rewind or replace", "armature-ground": "rewind or replace",
    "field-open": "repair or replace", "field-ground": "repair or replace", "rotor-ground": "rewind or replace",
    "stator-ground": "rewind or replace", "stator-open": "rewind or replace", "end-play": "adjust",
}  # fmt: skip


def _rest(found: Sheet) -> Iterator[PlanLine]:
    """Whatever else is out: replaced, repaired or adjusted."""
    for row in found.rows:
        name = row.characteristic.name
        if row.verdict is not Verdict.out or name in _DONE_ABOVE or row.judged is None:
            continue
        if row.characteristic.component == "bearings" and name.endswith(("-clearance", "-bore", "-journal")):
            continue
        action = _ACTIONS.get(name, "adjust" if name.startswith("pinion-clearance") else "replace")
        yield PlanLine(
            row.characteristic.component, action.replace(" ", "-"), f"{row.characteristic.label}: {row.judged.because}"
        )


def _remarks(found: Sheet) -> Iterator[str]:
    """What else the readings say: the customary diagnosis, dial readings that under-read."""
    said = diagnosis(found)
    if said:
        yield said
    row = _row(found, "commutator-runout")
    if row is not None and row.judged is not None and row.judged.judgement.count >= 4:
        share = commutator.read_share(row.judged.judgement.count)
        count = row.judged.judgement.count
        yield f"if these {count} are single dial readings round the circle, they see {share:.0%} of a once-a-turn runout at least"


def diagnosis(sheet: Sheet) -> str:
    """What the no-load test customarily means, "" where it was not made or means nothing."""
    amps, rpm = _row(sheet, "no-load-current"), _row(sheet, "no-load-speed")
    if amps is None or rpm is None or amps.limit is None or rpm.limit is None:
        return ""
    most, least = amps.limit.limit.high, rpm.limit.limit.low
    current, speed = _value(amps, "A"), _value(rpm, "rpm")
    if most is None or least is None or current is None or speed is None:
        return ""
    found = running.diagnose(
        current, speed, quantities.convert(most, amps.limit.unit, "A"), least, amps.limit.limit.low
    )
    return "" if found is None else f"no-load: {found.means}"


def accept(record: Record, tag: str, numbers: Sequence[int] | None = None) -> tuple[ReworkLine, ...]:
    """Take lines of the plan (counted from 1; None: all) into the rework list. Raises Refused, NotFound."""
    plan = compute(record, tag)
    chosen = range(1, len(plan.lines) + 1) if numbers is None else numbers
    for number in chosen:
        if not 1 <= number <= len(plan.lines):
            raise Refused(f"the plan of {plan.tag} has no line {number}; it has {len(plan.lines)}")
    listed = {(r.line.component, r.line.action, r.line.because) for r in listing(record, tag)}
    with record.change("rework accepted", plan.tag) as change:
        job = _open(record, change.conn, plan.tag)
        people.require_known(record, change.conn)
        for number in chosen:
            line = plan.lines[number - 1]
            if (line.component, line.action, line.because) in listed:
                continue
            kept = json.dumps([[p.name, quantities.plain(p.value), p.unit] for p in line.predicted])
            change.insert(
                ReworkRow, job_id=job.id, component=line.component, action=line.action, because=line.because, formula=line.formula,
                predicted=kept, at=change.at, by=change.by,
            )  # fmt: skip
    return listing(record, tag)


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
    """The predictions of a line against the as-left readings. Raises NotFound."""
    if not line.predicted:
        return ()
    if conn is None:
        with record.read() as own:
            return held(record, tag, line, own)
    left = sheets.sheet(record, tag, "as-left", conn)
    return tuple(_held(left, predicted) for predicted in line.predicted)


def _held(left: Sheet, predicted: Predicted) -> Held:
    row = _row(left, predicted.name)
    value = None if row is None else _value(row, predicted.unit)
    said = f"predicted {shown(predicted.value)} {predicted.unit}"
    if row is None or value is None or row.judged is None:
        return Held(predicted, None, False, f"{said}, not measured as left")
    variance = row.judged.judgement.variance
    by = quantities.scale(row.judged.judgement.unit, predicted.unit)
    allowed = Fraction(0) if variance is None else 4 * variance * by * by
    beyond = (value - predicted.value) ** 2 > allowed
    difference = quantities.plain(Fraction(quantities.rounded(abs(value - predicted.value), 4)))
    how = "within the gauge's uncertainty" if not beyond else "beyond the gauge's uncertainty"
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


def shown(size: Fraction) -> str:
    """A predicted size in words: four decimals at the most."""
    return quantities.plain(Fraction(quantities.rounded(size, 4)))


def _row(sheet: Sheet, name: str) -> SheetRow | None:
    return next((row for row in sheet.rows if row.characteristic.name == name), None)


def _value(row: SheetRow, unit: str) -> Fraction | None:
    """The judged value of a row in a unit, None where there is none."""
    if row.judged is None or row.judged.judgement.value is None:
        return None
    return quantities.convert(row.judged.judgement.value, row.judged.judgement.unit, unit)


def _unit(row: SheetRow) -> str:
    return row.judged.judgement.unit if row.judged is not None else row.characteristic.unit


def _size(text: str) -> tuple[Fraction, str]:
    number, _, unit = text.partition(" ")
    return Fraction(number), unit or "mm"


def _open(record: Record, conn: Connection, tag: str) -> Job:
    job = jobs.find(record, tag, conn)
    if not job.is_open:
        raise Refused(f"{job.tag} was {job.outcome}; its rework list stays as it is")
    return job
