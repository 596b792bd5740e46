"""The lines of a rework plan from the as-found sheet of a job: commutator or rings, brushes, bearings, and what else is out."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction

from sqlalchemy import Connection

from store import jobs, past_cuts, sheets, shop
from store.errors import Refused
from store.jobs import Job
from store.models import Model
from store.records import Record
from store.rules import brushes, bushings, commutator, quantities
from store.rules.limits import Verdict
from store.rules.statistic import median
from store.sheets import Sheet, SheetRow
from store.sqlite.engine import rows


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

    @property
    def is_work(self) -> bool:
        """Whether there is something to do, and so something to accept and to tick off."""
        return self.action not in {"leave", "keep"}


def of_sheet(record: Record, conn: Connection, job: Job, model: Model, found: Sheet) -> Iterator[PlanLine]:
    """The lines of a plan in the order of the work. Raises Refused (sizes that cannot be)."""
    yield from _rotating(conn, job, model, found)
    yield from _brushes(record, conn, job, found)
    yield from _bearings(conn, model, found)
    yield from _rest(found)


def _rotating(conn: Connection, job: Job, model: Model, found: Sheet) -> Iterator[PlanLine]:
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
        defect=size("surface-defect-depth") if is_commutator else Fraction(0),
        polish=quantities.convert(polish, "mm", unit),
        lowest=limit(names[0], "low"),
        lowest_passes=_equal_passes(diameter),
        most_runout=limit(names[1], "high"),
        least_undercut=limit("undercut-depth", "low") if is_commutator else None,
        shaft_runout=size(names[3]),
        most_shaft_runout=limit(names[3], "high"),
        surface_failed=surface is not None and surface.verdict is Verdict.out,
        may_turn=model.may_turn,
        may_undercut=model.may_undercut,
        most_runout_passes=_equal_passes(_row(found, names[1])),
        least_undercut_passes=_equal_passes(_row(found, "undercut-depth")),
    )
    rename = {} if is_commutator else {"commutator-diameter": "slip-ring-diameter"}
    for advice in commutator.advise(measured):
        predicted = tuple(Predicted(rename.get(name, name), value, unit) for name, value in advice.predicted)
        because = (
            advice.because
            if is_commutator
            else advice.because.replace(f" Order: {commutator.ORDER}", " Order: turn, polish, measure again")
        )
        because += _at_our_rate(conn, job, names[0], measured, advice)
        yield PlanLine(part, advice.action.value, because, advice.formula, predicted)


def _equal_passes(row: SheetRow | None) -> bool:
    return row is None or row.limit is None or row.limit.at_limit == "pass"


def _at_our_rate(conn: Connection, job: Job, name: str, found: commutator.Found, advice: commutator.Advice) -> str:
    """How many more cuts remain at the rate at which this shop cuts this model; nothing without an earlier cut."""
    turned = dict(advice.predicted).get("commutator-diameter")
    if (
        turned is None
        or found.lowest is None
        or advice.action not in {commutator.Action.turn, commutator.Action.turn_last_cut}
    ):
        return ""
    cuts = past_cuts.of_model(conn, job.model_id, name, job.id)
    if not cuts:
        return ""
    usual = quantities.convert(median(cuts), "mm", found.unit)
    left = commutator.cuts_left(turned, found.lowest, usual)
    of = f"the median of {len(cuts)} earlier cut{'s' if len(cuts) != 1 else ''} on this model"
    return f". At {shown(usual)} {found.unit}, {of}, {left} more would remain"


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
        yield from _bearing(conn, model, row, place, parts, _housing(found))


def _housing(found: Sheet) -> Fraction | None:
    """The housing's bore for a bushing in mm, the largest, where it is measured."""
    row = _row(found, "bushing-housing-bore")
    return None if row is None else _value(row, "mm")


def _sizes(row: SheetRow | None) -> list[Fraction]:
    """The readings of a row in mm."""
    taken = [r.typed for r in row.readings if r is not None] if row is not None else []
    return [quantities.convert(t.value, t.unit, "mm") for t in taken if t.value is not None]


def _bearing(
    conn: Connection,
    model: Model,
    row: SheetRow,
    place: str,
    parts: Sequence[SheetRow | None],
    housing: Fraction | None,
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
    sizes = _sizes(journal)
    exact = row.limit.limit if row.limit else None
    choice, formula = "", "clearance = bore - journal"
    predicted: tuple[Predicted, ...] = ()
    if sizes and exact is not None and exact.high is not None:
        low, high = (None if e is None else quantities.convert(e, exact.unit, "mm") for e in (exact.low, exact.high))
        chosen = bushings.choose(_at_hand(conn, model), min(sizes), low, high, housing, max(sizes))
        if chosen:
            best = chosen[0]
            clearance = quantities.convert(best.clearance, "mm", exact.unit)
            also = f" (also {', '.join(c.bushing.number for c in chosen[1:4])})" if chosen[1:] else ""
            named = f"{best.bushing.number} {best.bushing.maker}".strip()
            fits = (
                "its press fit is not checked: the housing is not measured"
                if housing is None
                else "it is tight in the housing"
            )
            choice = f"; {named} would restore it{also}; {fits}"
            formula += (
                f" = {shown(best.bushing.bore)} - {shown(min(sizes))} = {shown(best.clearance)} mm at the loosest"
            )
            predicted = (Predicted(row.characteristic.name, clearance, exact.unit),)
        else:
            choice = "; no bushing in the lists for this model restores it"
    yield PlanLine("bearings", "replace-bushing", f"{said}: {fit}{choice}", formula, predicted)


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
        said, label = row.judged.because, row.characteristic.label
        said = said if said.startswith(label) else f"{label}: {said}"
        yield PlanLine(row.characteristic.component, action.replace(" ", "-"), said)


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
