"""Files of the shop's settings and of its people."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from sqlalchemy import Connection

from store import people, shop
from store.errors import Refused
from store.files.kinds import Kind, Loading, Numbered
from store.records import Record
from store.tables.people import PersonRow, SettingRow


def _take_shop(loading: Loading, lines: Iterator[Numbered]) -> int:
    kept = {str(r[0]) for r in loading.change.conn.exec_driver_sql("SELECT name FROM setting")}
    taken, seen = 0, set()
    for number, line in lines:
        name = line["name"]
        try:
            value = shop.checked(name, line["value"])
        except Refused as fault:
            loading.refuse(number, "value" if name in shop.NAMES else "name", fault)
            continue
        if name in seen:
            loading.refuse(number, "name", f"{name} is set twice")
            continue
        seen.add(name)
        taken += 1
        if name in kept:
            loading.change.update(SettingRow, name, value=value)
        else:
            loading.change.insert(SettingRow, name=name, value=value)
    return taken


def _give_shop(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    yield from map(tuple, conn.exec_driver_sql("SELECT name, value FROM setting ORDER BY name"))


def _take_people(loading: Loading, lines: Iterator[Numbered]) -> int:
    rows = loading.change.conn.exec_driver_sql("SELECT initials, name, may FROM person")
    known = {r[0].casefold(): (r[0], r[1], r[2]) for r in rows}
    taken = 0
    for number, line in lines:
        initials = line["initials"]
        if len(initials) > 8 or any(c.isspace() for c in initials):
            loading.refuse(number, "initials", "initials are one to eight characters without spaces")
            continue
        try:
            may = ";".join(people.rights(line.get("may") or "bench"))
        except Refused as fault:
            loading.refuse(number, "may", fault)
            continue
        before = known.get(initials.casefold())
        if before is not None:
            if before != (initials, line["name"], may):
                loading.refuse(number, "initials", f"the initials {initials} are taken by {before[1]}")
            continue
        known[initials.casefold()] = (initials, line["name"], may)
        loading.change.insert(PersonRow, initials=initials, name=line["name"], may=may)
        taken += 1
    return taken


def _give_people(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    for row in conn.exec_driver_sql("SELECT initials, name, may FROM person ORDER BY id"):
        yield tuple(row)


KINDS = (
    Kind("shop", ("name", "value"), (), _take_shop, _give_shop),
    Kind("people", ("initials", "name"), ("may",), _take_people, _give_people),
)
