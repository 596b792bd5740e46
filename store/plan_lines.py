"""The lines of a rework plan from the as-found sheet of a job: commutator or rings, brushes, bearings, and what else is out."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from fractions import Fraction
from math import ceil

from sqlalchemy import Connection

from store import past_cuts, plan_bearings, plan_brushes, shop
from store.jobs import Job
from store.models import Model
from store.plan_line import PlanLine, Predicted, shown
from store.records import Record
from store.rules import commutator, quantities, turning
from store.rules.limits import Verdict
from store.rules.statistic import median
from store.rules.turning import Action
from store.sheets import Sheet, SheetRow

MILLION = 1_000_000


def of_sheet(record: Record, conn: Connection, job: Job, model: Model, found: Sheet) -> Iterator[PlanLine]:
    """The lines of a plan in the order of the work: a dead winding comes before any turning. Raises Refused (sizes that cannot be)."""
    turned = list(_rotating(conn, job, model, found))
    rest = list(_rest(found, model, {line.action for line in turned}))
    dead = [line for line in rest if line.component in {"armature", "rotor"} and line.action == _joined(_REWIND)]
    yield from dead
    yield from turned
    yield from plan_brushes.of_sheet(record, conn, job, found)
    yield from plan_bearings.of_sheet(conn, model, found)
    yield from (line for line in rest if line not in dead)


class _Names:
    """The characteristics of what turns under the brushes: a commutator, or on an alternator its slip rings."""

    def __init__(self, kind: str) -> None:
        is_rings = kind == "alternator"
        self.part = "slip rings" if is_rings else "commutator"
        stem = "slip-ring" if is_rings else "commutator"
        self.diameter, self.runout, self.surface = f"{stem}-diameter", f"{stem}-runout", f"{stem}-surface"
        self.defect = "slip-ring-defect-depth" if is_rings else "surface-defect-depth"
        self.undercut = "" if is_rings else "undercut-depth"
        self.shaft = ("rotor-runout", "shaft-runout") if is_rings else ("shaft-runout",)
        self.shape = (f"{stem}-ovality",) if is_rings else (f"{stem}-ovality", f"{stem}-taper")

    @property
    def all(self) -> frozenset[str]:
        """Every name that the lines of this part speak of."""
        one = (self.diameter, self.runout, self.surface, self.defect, self.undercut)
        return frozenset((*one, *self.shaft, *self.shape))


def _rotating(conn: Connection, job: Job, model: Model, found: Sheet) -> Iterator[PlanLine]:
    """The commutator, or on an alternator its slip rings; never undercut or turning of a commutator there."""
    names = _Names(model.kind)
    measured = _measured(conn, model, found, names)
    for advice in turning.advise(measured):
        predicted = tuple(
            Predicted(names.diameter if name == "commutator-diameter" else name, value, measured.unit)
            for name, value in advice.predicted
        )
        because = advice.because + _at_our_rate(conn, job, names.diameter, measured, advice)
        yield PlanLine(names.part, advice.action.value, because, advice.formula, predicted)


def _measured(conn: Connection, model: Model, found: Sheet, names: _Names) -> turning.Found:
    """What of the sheet decides about a cut, in the unit of the diameter."""
    diameter, runout, undercut = (found.find(name) for name in (names.diameter, names.runout, names.undercut))
    surface, shaft = found.find(names.surface), _shaft(found, names)
    unit = diameter.judged.judgement.unit if diameter is not None and diameter.judged is not None else "mm"

    def size(row: SheetRow | None) -> Fraction | None:
        return None if row is None else row.size(unit)

    def end(row: SheetRow | None, which: str) -> Fraction | None:
        return None if row is None else row.end(which, unit)

    return turning.Found(
        unit=unit,
        diameter=size(diameter),
        runout=size(runout),
        undercut=size(undercut),
        defect=size(found.find(names.defect)),
        polish=_polish(conn, unit),
        lowest=end(diameter, "low"),
        lowest_passes=_equal_passes(diameter),
        most_runout=end(runout, "high"),
        most_runout_passes=_equal_passes(runout),
        least_undercut=end(undercut, "low"),
        least_undercut_passes=_equal_passes(undercut),
        shaft_runout=size(shaft),
        most_shaft_runout=end(shaft, "high"),
        most_shaft_runout_passes=_equal_passes(shaft),
        surface_failed=surface is not None and surface.verdict is Verdict.out,
        may_turn=model.may_turn,
        may_undercut=model.may_undercut,
        out_of_shape=_out_of_shape(found, names),
        stations=1 if diameter is None else max(1, len(diameter.sizes(unit))),
        noun="commutator" if model.kind != "alternator" else "slip rings",
    )


def _shaft(found: Sheet, names: _Names) -> SheetRow | None:
    """The shaft's runout that decides: one that is out, else the first that is measured."""
    rows = [row for row in map(found.find, names.shaft) if row is not None and row.judged is not None]
    out = [row for row in rows if row.verdict is Verdict.out]
    return next(iter(out or rows), None)


def _polish(conn: Connection, unit: str) -> Fraction:
    """The polish allowance in the unit of the sheet, rounded up to a millionth of it: it never promises more."""
    number, _, kept = shop.kept(conn, "polish").partition(" ")
    return Fraction(ceil(quantities.convert(Fraction(number), kept or "mm", unit) * MILLION), MILLION)


def _out_of_shape(found: Sheet, names: _Names) -> str:
    """What is said of ovality and taper that are out of limits of their own."""
    rows = [row for row in map(found.find, names.shape) if row is not None and row.verdict is Verdict.out]
    return " and ".join(row.judged.because for row in rows if row.judged is not None)


def _equal_passes(row: SheetRow | None) -> bool:
    return row is None or row.limit is None or row.limit.at_limit == "pass"


def _at_our_rate(conn: Connection, job: Job, name: str, found: turning.Found, advice: turning.Advice) -> str:
    """How many more cuts remain at the rate at which this shop cuts this model; nothing without an earlier cut."""
    turned = dict(advice.predicted).get("commutator-diameter")
    if turned is None or found.lowest is None or advice.action not in {Action.turn, Action.turn_last_cut}:
        return ""
    cuts = past_cuts.of_model(conn, job.model_id, name, job.id)
    if not cuts:
        return ""
    usual = quantities.convert(median(cuts), "mm", found.unit)
    left = commutator.cuts_left(turned, found.lowest, usual, found.lowest_passes)
    of = f"the median of {len(cuts)} earlier cut{'s' if len(cuts) != 1 else ''} on this model"
    return f". At {shown(usual)} {found.unit}, {of}, {left} more would remain"


_REWIND, _REPAIR, _CAUSE = "rewind or replace", "repair or replace", "find the cause"
_ACTIONS = {
    "growler-short": _REWIND, "armature-open": _REWIND, "armature-ground": _REWIND, "bar-to-bar": _REWIND,
    "bar-to-bar-resistance": _REWIND, "bar-to-bar-growler-current": _REWIND, "rotor-ground": _REWIND,
    "rotor-resistance": _REWIND, "rotor-current": _REWIND, "stator-ground": _REWIND, "stator-open": _REWIND,
    "stator-resistance": _REWIND, "stator-balance": _REWIND, "field-open": _REPAIR, "field-ground": _REPAIR,
    "field-resistance": _REPAIR, "field-current": _REPAIR, "field-coil-drop": _REPAIR, "brush-holder-ground": _REPAIR,
    "armature-body-runout": "straighten or replace", "pole-drag": _CAUSE, "bar-height": "secure and measure again",
    "undercut-width": "re-undercut", "brush-free": "clean or replace", "brush-holder-gap": "adjust",
    "brush-side-clearance": "clean or replace", "drive-slides": "clean or replace", "pole-shoes": "tighten or replace",
    "end-play": "adjust", "pinion-clearance-to-stop": "adjust", "pinion-clearance-to-housing": "adjust",
    "regulated-voltage": "adjust", "insulation-resistance": "clean, dry and test again",
    "insulation-resistance-10-min": "clean, dry and test again",
}  # fmt: skip
_CONDITIONS = frozenset({
    "winding-temperature", "insulation-test-voltage", "solenoid-test-voltage", "output-test-speed", "no-load-voltage",
    "stall-voltage", "loaded-voltage", "alternator-output-voltage",
})  # fmt: skip
"""How something was tested; out, the test is made again and nothing is mended."""


def _rest(found: Sheet, model: Model, planned: Iterable[str]) -> Iterator[PlanLine]:
    """Whatever else is out: replaced, repaired or adjusted; of a running test that is out the cause is looked for."""
    done = _Names(model.kind).all | plan_bearings.covered() | {"brush-length", "brush-spring-position"}
    for row in found.rows:
        name = row.characteristic.name
        if row.verdict is not Verdict.out or name in done or row.judged is None:
            continue
        action = _action(row)
        if name == "undercut-width":
            if Action.re_undercut.value in planned:
                continue
            action = action if model.may_undercut else "replace"
        said, label = row.judged.because, row.characteristic.label
        said = said if said.startswith(label) else f"{label}: {said}"
        yield PlanLine(row.characteristic.component, _joined(action), said)


def _joined(action: str) -> str:
    return action.replace(",", "").replace(" ", "-")


def _action(row: SheetRow) -> str:
    name, is_running = row.characteristic.name, row.characteristic.component == "running tests"
    if name in _CONDITIONS:
        return "test again"
    return _ACTIONS.get(name, _CAUSE if is_running else "replace")
