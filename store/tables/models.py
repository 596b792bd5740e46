"""Models, units and the catalogue of characteristics."""

from __future__ import annotations

from sqlalchemy import CheckConstraint, UniqueConstraint
from sqlmodel import Field, SQLModel


class ModelRow(SQLModel, table=True):
    """A unit number that many units share. `key` is its comparing key (see store.rules.numbers)."""

    __tablename__ = "model"
    __table_args__ = (CheckConstraint("kind IN ('starter','generator','alternator')", name="kind_is_known"),)

    id: int | None = Field(default=None, primary_key=True)
    number: str = Field(unique=True)
    key: str = Field(index=True)
    kind: str
    volts: str = ""
    rotation: str = ""
    viewed_from: str = ""
    teeth: int | None = None
    bars: int | None = None
    poles: int | None = None
    may_turn: bool = True
    may_undercut: bool = True
    note: str = ""


class UnitRow(SQLModel, table=True):
    """One physical machine, known by its serial or the shop's own engraved mark."""

    __tablename__ = "unit"
    __table_args__ = (UniqueConstraint("model_id", "key", name="one_unit_a_serial"),)

    id: int | None = Field(default=None, primary_key=True)
    model_id: int = Field(foreign_key="model.id")
    serial: str
    key: str = Field(index=True)


class CharacteristicRow(SQLModel, table=True):
    """One thing that is measured or tested, with its datum; shipped ones and the shop's own.

    `positions` are separated by semicolons; `derive` says how a derived one is made; `place` orders the sheet.
    """

    __tablename__ = "characteristic"

    id: int | None = Field(default=None, primary_key=True)
    name: str = Field(unique=True)
    component: str
    label: str
    machines: str
    quantity: str
    unit: str = ""
    statistic: str
    derive: str = ""
    positions: str = "1"
    noun: str = ""
    count: int | None = None
    direction: str = ""
    stages: str = "as-found;as-left"
    gauge: str = ""
    datum: str = ""
    caution: str = ""
    place: int = 0
    shipped: bool = False
