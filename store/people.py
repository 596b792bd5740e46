"""People: initials, names, and what they may do."""

from __future__ import annotations

from dataclasses import dataclass

from sqlalchemy import Connection
from sqlmodel import select

from store.errors import NotFound, Refused
from store.nearest import nearest
from store.records import SHOP, Record
from store.sqlite.engine import rows
from store.tables.people import PersonRow

RIGHTS = ("bench", "inspect", "own")


@dataclass(frozen=True, slots=True)
class Person:
    """One person. `may` is a subset of RIGHTS, in that order."""

    id: int
    initials: str
    name: str
    may: tuple[str, ...]


def listing(record: Record) -> tuple[Person, ...]:
    """Everyone who works here, by initials."""
    with record.read() as conn:
        found = conn.execute(
            select(PersonRow.id, PersonRow.initials, PersonRow.name, PersonRow.may)
            .where(PersonRow.active)
            .order_by(PersonRow.initials)
        ).all()
    return tuple(Person(r[0] or 0, r[1], r[2], rights(r[3])) for r in found)


def acting(record: Record, by: str | None) -> str:
    """The initials under which `by` acts: as written in the record; `shop` while nobody has been entered.

    Raises NotFound for someone unknown, Refused where nobody is said though people are entered.
    """
    known = {person.initials.casefold(): person.initials for person in listing(record)}
    if by is None or by == "":
        return SHOP
    if by.casefold() in known:
        return known[by.casefold()]
    if not known and by.casefold() == SHOP:
        return SHOP
    raise NotFound("person with the initials", by, nearest(by, list(known.values())))


def require_known(record: Record, conn: Connection | None = None) -> None:
    """Raises Refused when people are entered and nobody known acts: a change must say who made it."""
    if record.by != SHOP:
        return
    if conn is None:
        with record.read() as own:
            require_known(record, own)
        return
    if found := rows(conn, "SELECT initials FROM person WHERE active ORDER BY initials LIMIT 8"):
        raise Refused(f"say who acts: --as INITIALS, one of {', '.join(r[0] for r in found)}")


def find(record: Record, initials: str) -> Person:
    """The person with these initials. Raises NotFound."""
    known = {person.initials.casefold(): person for person in listing(record)}
    if initials.casefold() not in known:
        raise NotFound("person with the initials", initials, nearest(initials, [p.initials for p in known.values()]))
    return known[initials.casefold()]


def rights(text: str) -> tuple[str, ...]:
    """`bench;inspect` as a tuple in the order of RIGHTS. Raises Refused for a right that there is not."""
    asked = {part.strip() for part in text.replace(",", ";").split(";") if part.strip()}
    for unknown in sorted(asked - set(RIGHTS)):
        raise Refused(f"{unknown!r} is not something a person may do; write bench, inspect or own")
    return tuple(right for right in RIGHTS if right in asked)


def add(record: Record, initials: str, name: str, may: str = "bench") -> Person:
    """Enter a person. Raises Refused for empty or taken initials."""
    initials, name = initials.strip(), name.strip()
    if not initials or len(initials) > 8 or any(c.isspace() for c in initials):
        raise Refused("initials are one to eight characters without spaces")
    if not name:
        raise Refused("a person has a name")
    allowed = rights(may)
    if any(person.initials.casefold() == initials.casefold() for person in listing(record)):
        raise Refused(f"the initials {initials} are taken")
    with record.change("person entered", initials) as change:
        made = change.insert(PersonRow, initials=initials, name=name, may=";".join(allowed))
    return Person(made, initials, name, allowed)
