"""The catalogue of characteristics: what is measured and tested, from what datum, and how it is judged.

What ships is in characteristics.csv beside this module: the list of *what*, never a limit. The shop adds its own.
"""

from __future__ import annotations

import csv
from dataclasses import dataclass
from importlib import resources

from sqlalchemy import Connection
from sqlmodel import select

from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.nearest import nearest
from store.records import Record
from store.rules import derived, quantities
from store.rules.quantities import Quantity
from store.rules.statistic import Statistic
from store.tables.models import CharacteristicRow

MACHINES = ("starter", "generator", "alternator")
STAGES = ("as-found", "as-left")
COLUMNS = (
    "characteristic", "component", "name", "machines", "quantity", "unit", "statistic", "derive", "positions",
    "noun", "count", "direction", "stages", "gauge", "datum", "caution",
)  # fmt: skip


@dataclass(frozen=True, slots=True)
class Characteristic:
    """One characteristic. `name` is the word used in commands and files, `label` the one on screens and reports."""

    id: int
    name: str
    component: str
    label: str
    machines: tuple[str, ...]
    quantity: Quantity
    unit: str
    statistic: Statistic
    derive: str
    positions: tuple[str, ...]
    noun: str
    count: int | None
    direction: str
    stages: tuple[str, ...]
    gauge: str
    datum: str
    caution: str
    shipped: bool

    @property
    def sources(self) -> tuple[str, ...]:
        """Names of the characteristics that a derived one is made from; empty for a measured one."""
        return derived.sources(self.derive) if self.derive else ()


@dataclass(frozen=True, slots=True)
class Catalogue:
    """All characteristics of a record, in the order of the sheet."""

    all: tuple[Characteristic, ...]
    by_name: dict[str, Characteristic]
    by_id: dict[int, Characteristic]
    derived_from: dict[str, tuple[Characteristic, ...]]

    def find(self, name: str) -> Characteristic:
        """The characteristic of that name. Raises NotFound with the nearest names."""
        wanted = name.strip().lower()
        found = self.by_name.get(wanted)
        if found is None:
            raise NotFound("characteristic", name, nearest(wanted, list(self.by_name)))
        return found

    def of(self, machine: str) -> tuple[Characteristic, ...]:
        """Those that concern a kind of machine."""
        return tuple(c for c in self.all if machine in c.machines)


def catalogue(record: Record, conn: Connection | None = None) -> Catalogue:
    """The catalogue of a record; read once and kept until it grows."""
    if conn is None:
        with record.read() as own:
            return catalogue(record, own)
    return record.kept(conn, "catalogue", "SELECT max(id) FROM characteristic", _read)


def _read(conn: Connection) -> Catalogue:
    sql = "SELECT *, count AS expected FROM characteristic ORDER BY place, id"  # a row has a method named count
    rows = conn.exec_driver_sql(sql).all()
    found = tuple(
        Characteristic(
            id=r.id, name=r.name, component=r.component, label=r.label, machines=_parts(r.machines),
            quantity=Quantity(r.quantity), unit=r.unit, statistic=Statistic(r.statistic), derive=r.derive,
            positions=_parts(r.positions) or ("1",), noun=r.noun, count=r.expected, direction=r.direction,
            stages=_parts(r.stages), gauge=r.gauge, datum=r.datum, caution=r.caution, shipped=bool(r.shipped),
        )
        for r in rows
    )  # fmt: skip
    made_from: dict[str, list[Characteristic]] = {}
    for one in found:
        for source in one.sources:
            made_from.setdefault(source, []).append(one)
    return Catalogue(
        found, {c.name: c for c in found}, {c.id: c for c in found}, {n: tuple(c) for n, c in made_from.items()}
    )


def _parts(text: str) -> tuple[str, ...]:
    return tuple(part.strip() for part in text.split(";") if part.strip())


def values(line: dict[str, str]) -> dict[str, object]:
    """One line of a catalogue file, checked, as the values of its row (without place and shipped). Raises Refused."""
    name = line["characteristic"].strip().lower()
    if not name or any(not (c.isalnum() or c == "-") for c in name) or len(name) > 60:
        raise Refused("a characteristic's name is letters, figures and hyphens, such as brush-length")
    quantity = line.get("quantity", "").strip()
    if quantity not in set(Quantity):
        raise Refused(f"{brief(quantity)!r} is no quantity; one of {', '.join(Quantity)}")
    unit = line.get("unit", "").strip()
    if unit and quantities.unit(unit).quantity != quantity:
        raise Refused(f"{unit} is not a unit of {quantity}")
    statistic = line.get("statistic", "").strip()
    if statistic not in set(Statistic):
        raise Refused(f"{brief(statistic)!r} is no statistic; one of {', '.join(Statistic)}")
    machines = _parts(line.get("machines", "")) or MACHINES
    for machine in machines:
        if machine not in MACHINES:
            raise Refused(f"{brief(machine)!r} is no kind of machine; one of {', '.join(MACHINES)}")
    stages = _parts(line.get("stages", "")) or STAGES
    for stage in stages:
        if stage not in STAGES:
            raise Refused(f"{brief(stage)!r} is no stage; as-found or as-left")
    count = line.get("count", "").strip()
    if count and (not count.isdigit() or not 0 < int(count) <= 1000):
        raise Refused(f"{brief(count)!r} is no expected number of readings")
    derive = " ".join(line.get("derive", "").split())
    if derive:
        derived.sources(derive)
    return {
        "name": name,
        "component": line["component"].strip(),
        "label": line.get("name", "").strip() or name.replace("-", " "),
        "machines": ";".join(machines),
        "quantity": quantity,
        "unit": unit,
        "statistic": statistic,
        "derive": derive,
        "positions": ";".join(_parts(line.get("positions", "")) or ("1",)),
        "noun": line.get("noun", "").strip(),
        "count": int(count) if count else None,
        "direction": line.get("direction", "").strip(),
        "stages": ";".join(stages),
        "gauge": line.get("gauge", "").strip(),
        "datum": " ".join(line.get("datum", "").split()),
        "caution": " ".join(line.get("caution", "").split()),
    }


def add(change: Change, line: dict[str, str]) -> int:
    """Add a characteristic of the shop's own inside a running change. Raises Refused (taken, wrong)."""
    made = values(line)
    taken = change.conn.execute(select(CharacteristicRow.id).where(CharacteristicRow.name == made["name"])).first()
    if taken is not None:
        raise Refused(f"the characteristic {made['name']} is there already")
    place = change.conn.exec_driver_sql("SELECT coalesce(max(place),0)+10 FROM characteristic").scalar()
    return change.insert(CharacteristicRow, **made, place=int(place or 10), shipped=False)


def ship(change: Change) -> None:
    """Bring the shipped rows of a record up to this program's; the shop's own rows are never touched."""
    with resources.files(__name__).joinpath("characteristics.csv").open(encoding="utf-8") as lines:
        shipped = [values(line) for line in csv.DictReader(lines)]
    kept = {r[1]: (r[0], bool(r[2])) for r in change.conn.execute(
        select(CharacteristicRow.id, CharacteristicRow.name, CharacteristicRow.shipped)
    ).all()}  # fmt: skip
    for place, row in enumerate(shipped, start=1):
        known = kept.get(str(row["name"]))
        if known is None:
            change.insert(CharacteristicRow, **row, place=place * 10, shipped=True)
        elif known[1]:
            change.update(CharacteristicRow, known[0], **row, place=place * 10)


def save_line(row: dict[str, object]) -> dict[str, str]:
    """The line of a catalogue file that gives back this row."""
    line = {column: "" if (v := row.get(column)) is None else str(v) for column in COLUMNS}
    line["characteristic"], line["name"] = str(row["name"]), str(row["label"])
    return line
