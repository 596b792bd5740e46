"""Models and units."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any

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


def enter(record: Record, line: Mapping[str, str]) -> Model:
    """Enter a model as typed, a text a column. Raises Refused."""
    number, kind = line["model"], line.get("kind", "").strip()
    with record.change("model entered", " ".join(number.split())) as change:
        insert(change, number, kind, **checked(line))
    return find(record, number)


class CellRefused(Refused):
    """One cell of a model's line that is wrong; `column` names it."""

    def __init__(self, column: str, why: str) -> None:
        self.column = column
        super().__init__(why)


_TEXT = ("volts", "rotation", "viewed_from", "note")
_WHOLE = ("teeth", "bars", "poles")
_YES = {"": True, "yes": True, "true": True, "1": True, "no": False, "false": False, "0": False}


def checked(line: Mapping[str, str]) -> dict[str, Any]:
    """The columns of a model's row but number and kind, from text. Raises CellRefused."""
    values: dict[str, Any] = {column: line.get(column, "").strip() for column in _TEXT}
    for column in _WHOLE:
        text = line.get(column, "").strip()
        if text and (not text.isascii() or not text.isdigit() or not 0 < int(text[:6]) <= 1000):
            raise CellRefused(column, f"{brief(text)!r} is not a whole number from 1 to 1000")
        values[column] = int(text) if text else None
    for column in ("may_turn", "may_undercut"):
        text = line.get(column, "").strip().lower()
        if text not in _YES:
            raise CellRefused(column, f"{brief(text)!r} is neither yes nor no")
        values[column] = _YES[text]
    values["rotation"] = values["rotation"].lower()
    if values["rotation"] not in {"", "cw", "ccw", "both"}:
        raise CellRefused("rotation", f"{brief(values['rotation'])!r} is no rotation; write cw, ccw or both")
    return values


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
