"""Models and units."""

from __future__ import annotations

from dataclasses import dataclass

from sqlalchemy import Connection
from sqlmodel import select

from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.nearest import nearest
from store.records import Record
from store.rules.numbers import comparing_key
from store.tables.models import ModelRow, UnitRow


@dataclass(frozen=True, slots=True)
class Model:
    """A unit number that many units share. `rotation` is as seen from `viewed_from`."""

    id: int
    number: str
    kind: str
    volts: str
    rotation: str
    viewed_from: str
    teeth: int | None
    bars: int | None
    poles: int | None
    may_turn: bool
    may_undercut: bool
    note: str


@dataclass(frozen=True, slots=True)
class Unit:
    """One physical machine."""

    id: int
    model_id: int
    serial: str


_MODEL = select(ModelRow.__table__)  # type: ignore[attr-defined]


def listing(record: Record) -> tuple[Model, ...]:
    """Every model, by number."""
    with record.read() as conn:
        return tuple(map(_model, conn.execute(_MODEL.order_by(ModelRow.number)).all()))


def find(record: Record, number: str, conn: Connection | None = None) -> Model:
    """The model of that number, by its comparing key where it is not written exactly. Raises NotFound."""
    if conn is None:
        with record.read() as own:
            return find(record, number, own)
    found = conn.execute(_MODEL.where(ModelRow.number == number.strip())).all()
    if not found and (key := comparing_key(number)):
        found = conn.execute(_MODEL.where(ModelRow.key == key)).all()
    if len(found) == 1:
        return _model(found[0])
    if found:
        raise NotFound("one model", number, [r.number for r in found[:5]])
    known = [r[0] for r in conn.execute(select(ModelRow.number)).all()]
    raise NotFound("model", number, nearest(number, known))


def by_id(conn: Connection, which: int) -> Model:
    """The model with this key. Raises NotFound."""
    found = conn.execute(_MODEL.where(ModelRow.id == which)).first()
    if found is None:
        raise NotFound("model", str(which))
    return _model(found)


def add(record: Record, number: str, kind: str, **values: object) -> Model:
    """Enter a model; `values` are columns of its row. Raises Refused (taken, unknown kind)."""
    with record.change("model entered", number) as change:
        insert(change, number, kind, **values)
    return find(record, number)


def insert(change: Change, number: str, kind: str, **values: object) -> int:
    """Enter a model inside a running change. Raises Refused."""
    number = " ".join(number.split())
    key = comparing_key(number)
    if not key or len(number) > 60:
        raise Refused(f"{brief(number)!r} is no model number; one to sixty letters and figures")
    if kind not in {"starter", "generator", "alternator"}:
        raise Refused(f"{brief(kind)!r} is no kind of machine; write starter, generator or alternator")
    taken = change.conn.execute(select(ModelRow.number).where(ModelRow.number == number)).first()
    if taken is not None:
        raise Refused(f"the model {number} is there already")
    return change.insert(ModelRow, number=number, key=key, kind=kind, **values)


def unit_of(change: Change, model_id: int, serial: str) -> tuple[int, bool]:
    """The unit with this serial or engraved mark, entered where it is new; second: whether it was there. Raises Refused."""
    serial = " ".join(serial.split())
    key = comparing_key(serial)
    if not key or len(serial) > 60:
        raise Refused("a unit has a serial or the shop's own engraved mark, one to sixty letters and figures")
    found = change.conn.execute(select(UnitRow.id).where(UnitRow.model_id == model_id, UnitRow.key == key)).first()
    if found is not None:
        return int(found[0] or 0), True
    return change.insert(UnitRow, model_id=model_id, serial=serial, key=key), False


def _model(r: object) -> Model:
    return Model(*(getattr(r, field) for field in Model.__dataclass_fields__))
