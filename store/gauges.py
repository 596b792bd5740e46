"""Gauges: what they resolve, how sure they are, when calibration is due, and every reading taken with one."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from sqlalchemy import Connection
from sqlmodel import select

from store import times
from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.nearest import nearest
from store.records import Record
from store.rules import quantities
from store.rules.certainty import Certainty
from store.rules.quantities import Quantity
from store.rules.readings import parse
from store.tables.gauges import CalibrationRow, GaugeRow


@dataclass(frozen=True, slots=True)
class Calibration:
    """One calibration; sizes are text in the gauge's unit. `due` None: no date is set."""

    id: int
    calibrated: str | None
    due: str | None
    expanded_uncertainty: str | None
    k: str | None
    result: str
    note: str


@dataclass(frozen=True, slots=True)
class Gauge:
    """A gauge with its calibrations, newest last."""

    id: int
    name: str
    kind: str
    unit: str
    resolution: str | None
    repeatability: str | None
    note: str
    retired: bool
    calibrations: tuple[Calibration, ...]
    certainties: tuple[Certainty, ...]

    @property
    def certainty(self) -> Certainty:
        """How sure its readings are by the newest calibration."""
        return self.certainties[-1]

    def certainty_at(self, at: str) -> Certainty:
        """How sure its readings are by the calibration in force on the day of `at` (see `calibration_at`)."""
        used = self.calibration_at(at)
        return self.certainties[0 if used is None else self.calibrations.index(used)]

    @property
    def calibration(self) -> Calibration | None:
        """The calibration in force: the newest."""
        return self.calibrations[-1] if self.calibrations else None

    def calibration_at(self, at: str) -> Calibration | None:
        """The calibration in force on the day of `at`: the newest not after it, else the first."""
        before = [c for c in self.calibrations if (c.calibrated or "") <= at[:10]]
        return before[-1] if before else (self.calibrations[0] if self.calibrations else None)

    @property
    def due(self) -> str | None:
        """The date at which it is due; None where none is set."""
        return self.calibration.due if self.calibration else None

    def is_overdue(self, at: str) -> bool:
        """Whether calibration was due before the day of `at`."""
        return self.due is not None and self.due < at[:10]


@dataclass(frozen=True, slots=True)
class Touched:
    """A job that a gauge touched: how many readings since its last good calibration."""

    tag: str
    outcome: str
    readings: int
    first: str
    last: str


_STAMP = (
    "SELECT (SELECT max(id) FROM calibration), (SELECT count(*) FROM gauge), "
    "(SELECT total(length(coalesce(repeatability,'')) + retired * 1000 + id) FROM gauge)"
)


def listing(record: Record, *, retired: bool = False) -> tuple[Gauge, ...]:
    """The gauges in use, those due first on top; with `retired` the retired ones too."""
    found = [g for g in _all(record).values() if retired or not g.retired]
    return tuple(sorted(found, key=lambda g: (g.due or "9999", g.name)))


def find(record: Record, name: str, conn: Connection | None = None) -> Gauge:
    """The gauge of that name. Raises NotFound."""
    known = _all(record, conn)
    found = known.get(name.strip().casefold())
    if found is None:
        raise NotFound("gauge", name, nearest(name, [g.name for g in known.values()]))
    return found


def by_id(record: Record, conn: Connection) -> dict[int, Gauge]:
    """All gauges by key, inside a running transaction."""
    return {gauge.id: gauge for gauge in _all(record, conn).values()}


def _all(record: Record, conn: Connection | None = None) -> dict[str, Gauge]:
    """Gauges by lower-case name; read again whenever one was added, calibrated or changed."""
    if conn is None:
        with record.read() as own:
            return _all(record, own)
    return record.kept(conn, "gauges", _STAMP, _read)


def _read(conn: Connection) -> dict[str, Gauge]:
    calibrations: dict[int, list[Calibration]] = {}
    for r in conn.execute(select(CalibrationRow.__table__).order_by("calibrated", "id")).all():  # type: ignore[attr-defined]
        one = Calibration(r.id, r.calibrated, r.due, r.expanded_uncertainty, r.k, r.result, r.note)
        calibrations.setdefault(r.gauge_id, []).append(one)
    rows = conn.execute(select(GaugeRow.__table__)).all()  # type: ignore[attr-defined]
    return {r.name.casefold(): _gauge(r, tuple(calibrations.get(r.id, ()))) for r in rows}


def _gauge(r: Any, calibrations: tuple[Calibration, ...]) -> Gauge:
    sure = tuple(
        Certainty(
            resolution=_number(r.resolution),
            expanded=_number(one.expanded_uncertainty if one else None),
            k=_number(one.k if one else None),
            repeatability=_number(r.repeatability),
            unit=r.unit,
        )
        for one in (calibrations or (None,))
    )
    return Gauge(
        r.id, r.name, r.kind, r.unit, r.resolution, r.repeatability, r.note, bool(r.retired), calibrations, sure
    )


def insert(
    change: Change, name: str, kind: str, *, unit: str = "", resolution: str = "", expanded_uncertainty: str = "",
    k: str = "", calibrated: str = "", due: str = "", note: str = "",
) -> int:  # fmt: skip
    """Enter a gauge with its calibration inside a running change. Raises Refused."""
    name, kind, unit = " ".join(name.split()), " ".join(kind.split()), unit.strip()
    if not name or len(name) > 60:
        raise Refused("a gauge has a name of one to sixty characters, such as its engraved number")
    if not kind:
        raise Refused(f"gauge {name}: say what kind it is, such as outside micrometer")
    if change.conn.execute(select(GaugeRow.id).where(GaugeRow.name == name)).first() is not None:
        raise Refused(f"the gauge {name} is there already")
    if unit:
        quantities.unit(unit)
    made = change.insert(
        GaugeRow, name=name, kind=kind, unit=unit, resolution=_size(name, "resolution", resolution, unit), note=note
    )
    if expanded_uncertainty or k or calibrated or due:
        calibrate_in(change, made, name, unit, expanded_uncertainty, k, calibrated, due)
    return made


def calibrate_in(
    change: Change, gauge_id: int, name: str, unit: str, expanded: str, k: str, calibrated: str, due: str,
    result: str = "good", note: str = "",
) -> int:  # fmt: skip
    """Enter a calibration inside a running change. Raises Refused."""
    if result not in {"good", "bad"}:
        raise Refused(f"gauge {name}: a calibration's result is good or bad")
    on, until = (times.read(calibrated)[:10] if calibrated else None), (times.read(due)[:10] if due else None)
    if on and until and until < on:
        raise Refused(f"gauge {name}: due {until} lies before calibrated {on}")
    factor = None
    if k:
        factor = _size(name, "coverage factor k", k, "%")
        if Fraction(str(factor)) < 1:
            raise Refused(f"gauge {name}: the coverage factor k is 1 or more, usually 2")
    return change.insert(
        CalibrationRow, gauge_id=gauge_id, calibrated=on, due=until,
        expanded_uncertainty=_size(name, "expanded uncertainty", expanded, unit), k=factor, result=result,
        by=change.by, note=note,
    )  # fmt: skip


def add(record: Record, name: str, kind: str, **values: str) -> Gauge:
    """Enter a gauge; `values` as for `insert`. Raises Refused."""
    with record.change("gauge entered", name) as change:
        insert(change, name, kind, **values)
    return find(record, name)


def retire(record: Record, name: str, why: str) -> Gauge:
    """Take a gauge out of use; its readings stay. Raises NotFound, Refused without a reason."""
    gauge = find(record, name)
    if not why.strip():
        raise Refused("say why the gauge is taken out of use")
    with record.change("gauge retired", gauge.name) as change:
        change.update(GaugeRow, gauge.id, retired=True, note=f"{gauge.note} {why}".strip())
    return find(record, name)


def recall(record: Record, name: str) -> tuple[Touched, ...]:
    """The jobs with readings by this gauge since its last good calibration, released jobs first. Raises NotFound."""
    gauge = find(record, name)
    good = [c.calibrated for c in gauge.calibrations if c.result == "good" and c.calibrated]
    since = good[-1] if good else ""
    with record.read() as conn:
        found = conn.exec_driver_sql(
            "SELECT j.tag, j.outcome, count(*), min(r.at), max(r.at) FROM reading r JOIN job j ON j.id = r.job_id "
            "WHERE r.gauge_id = ? AND r.at >= ? GROUP BY j.id ORDER BY j.outcome <> 'released', min(r.at), j.tag",
            (gauge.id, since),
        ).all()
    return tuple(Touched(*r) for r in found)


def _size(name: str, what: str, text: str, unit: str) -> str | None:
    if not text.strip():
        return None
    quantity = quantities.unit(unit).quantity if unit else Quantity.ratio
    try:
        typed = parse(text, quantity, unit or "%")
    except Refused as fault:
        raise Refused(f"gauge {name}: {what}: {fault}") from None
    if typed.value is None or typed.value <= 0:
        raise Refused(f"gauge {name}: {what} {brief(text)} is not above zero")
    return quantities.plain(quantities.convert(typed.value, typed.unit, unit) if unit else typed.value)


def _number(text: str | None) -> Fraction | None:
    return None if text is None else Fraction(text)
