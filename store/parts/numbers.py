"""Part numbers and what is stated of them: found, entered, related, edited; every change under the audit chain."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from sqlalchemy import Connection

from store import people, times
from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.records import Record
from store.rules import numbers as rule
from store.rules.attributes import attribute_name
from store.rules.interchange import Relation
from store.sqlite.engine import rows
from store.tables.parts import FitRow, NumberRow, PartAttributeRow, PartSizeRow, RelationRow

MOST_MAKER, MOST_KIND, MOST_STATUS, MOST_TEXT = 80, 60, 60, 1000
_NUMBER = "SELECT id, number, maker, key, kind, description, status FROM part_number "


@dataclass(frozen=True, slots=True)
class Number:
    """A part number of one maker, as printed. `maker`, `description` and `status` may be empty."""

    id: int
    number: str
    maker: str
    key: str
    kind: str
    description: str
    status: str


def find(record: Record, number: str, maker: str = "", conn: Connection | None = None) -> Number:
    """The number that is meant: as printed, else by its comparing key. Raises NotFound, Refused (several makers)."""
    if conn is None:
        with record.read() as own:
            return find(record, number, maker, own)
    return by_ids(conn, [_find(conn, number, maker)])[0]


def by_ids(conn: Connection, ids: list[int]) -> list[Number]:
    """The numbers with these keys, in that order; a key that is not there is left out."""
    from json import dumps

    sql = f"{_NUMBER}WHERE id IN (SELECT value FROM json_each(?))"  # noqa: S608
    found = {r[0]: Number(*r) for r in rows(conn, sql, (dumps(ids),))}
    return [found[which] for which in ids if which in found]


def enter(
    record: Record, number: str, kind: str, *, maker: str = "", description: str = "", status: str = ""
) -> Number:
    """Enter a number. Raises Refused: not a number, there already, no kind, a text too long."""
    people.require_known(record)
    row = checked(number, kind, maker, description, status)
    with record.change("number entered", row[1]) as change:
        which = insert(change, row)
    with record.read() as conn:
        return by_ids(conn, [which])[0]


def checked(number: str, kind: str, maker: str, description: str, status: str) -> tuple[Any, ...]:
    """A row of the numbers table, key still None. Raises Refused in one line."""
    kept = rule.printed(number)
    if not kind.strip():
        raise Refused("a number has a kind: brush, drive, starter ...")
    for name, text, most in (
        ("maker", maker, MOST_MAKER), ("kind", kind, MOST_KIND), ("status", status, MOST_STATUS), ("description", description, MOST_TEXT),
    ):  # fmt: skip
        if len(text) > most or "\n" in text:
            raise Refused(f"{name} has {len(text)} characters; at most {most}, on one line")
    key = rule.comparing_key(kept)
    return (None, kept, maker, key, rule.folded_key(key), kind, description, status)


def insert(change: Change, row: tuple[Any, ...]) -> int:
    """Enter a checked number inside a running change. Raises Refused where it is there already."""
    _, number, maker, key, folded, kind, description, status = row
    there = change.raw.execute("SELECT 1 FROM part_number WHERE number = ? AND maker = ?", (number, maker)).fetchone()
    if there:
        raise Refused(f"the number {number}{f' of {maker}' if maker else ''} is there already")
    return change.insert(
        NumberRow, number=number, maker=maker, key=key, folded=folded, kind=kind, description=description, status=status
    )


def edit(record: Record, number: Number, *, kind: str, description: str, status: str) -> Number:
    """Change what is said of a number; the number itself and its maker stay. Raises Refused."""
    people.require_known(record)
    checked(number.number, kind, number.maker, description, status)
    with record.change("number changed", number.number) as change:
        change.update(NumberRow, number.id, kind=kind.strip(), description=description, status=status)
    with record.read() as conn:
        return by_ids(conn, [number.id])[0]


def resolve(change: Change, number: str, maker: str) -> int:
    """The key of a number named in a list; a model that is named gets a row of its own. Raises NotFound, Refused."""
    try:
        return _find(change.conn, number, maker)
    except NotFound:
        key = rule.comparing_key(number)
        sql = "SELECT number, kind FROM model WHERE number = ? OR (key = ? AND key <> '') ORDER BY number <> ? LIMIT 2"
        models = change.raw.execute(sql, (number, key, number)).fetchall()
        if maker or not models or (len(models) > 1 and models[0][0] != number):
            raise
    name, kind = models[0]
    return insert(change, checked(name, kind, "", "", ""))


def relate(
    record: Record, number: str, relation: str, other: str = "", *, maker: str = "", other_maker: str = "",
    caveat: str = "", source: str = "", dated: str = "",
) -> int:  # fmt: skip
    """State a relation; returns its key. Raises Refused (unknown relation, to itself, nowhere to), NotFound."""
    people.require_known(record)
    with record.change("relation stated", " ".join(number.split())) as change:
        of = resolve(change, number.strip(), maker.strip())
        to = resolve(change, other.strip(), other_maker.strip()) if other.strip() else None
        row = checked_relation(of, relation, to, caveat, source, times.read(dated) if dated.strip() else "")
        return change.insert(
            RelationRow, from_id=of, relation=row[2], to_id=to, caveat=row[4], source=row[5], dated=row[6]
        )


RELATIONS = frozenset(relation.value for relation in Relation)


def checked_relation(
    of: int, relation: str, to: int | None, caveat: str, source: str, dated: str
) -> tuple[Any, ...]:  # fmt: skip
    """A row of the relations table, key still None. Raises Refused in one line."""
    if relation not in RELATIONS:
        raise Refused(f"{brief(relation)!r} is no relation; one of {', '.join(Relation)}")
    if to is None and relation != "do-not-use":
        raise Refused(f"{relation} leads to a number; only do-not-use may stand alone")
    if to == of:
        raise Refused(
            "a number cannot be related to itself" + ("; leave to_number empty" if relation == "do-not-use" else "")
        )
    if len(caveat) > MOST_TEXT or len(source) > MOST_TEXT:
        raise Refused(f"caveat and source have at most {MOST_TEXT} characters")
    return (None, of, relation, to, caveat, source, dated)


def say_fits(
    record: Record, number: str, model: str, *, maker: str = "", position: str = "", quantity: int | None = None, source: str = ""
) -> int:  # fmt: skip
    """State that a number goes on a model, where, how many, and on whose word. Raises Refused, NotFound."""
    from store import models

    people.require_known(record)
    goes_on = models.find(record, model)
    with record.change("fit stated", " ".join(number.split())) as change:
        which = resolve(change, number.strip(), maker.strip())
        return change.insert(
            FitRow,
            number_id=which,
            model_id=goes_on.id,
            position=position.strip(),
            quantity=quantity,
            source=source.strip(),
        )


def say_size(record: Record, number: str, name: str, value: str, unit: str, *, maker: str = "") -> int:
    """State a size of a number. Raises Refused (no size, unknown unit), NotFound."""
    from store.rules import sizes

    people.require_known(record)
    made = sizes.size(name, value, unit)
    with record.change("size stated", " ".join(number.split())) as change:
        which = resolve(change, number.strip(), maker.strip())
        return change.insert(
            PartSizeRow, number_id=which, name=made.name, value=made.text, unit=made.unit,
            millionths=sizes.millionths(made.value, made.unit),
        )  # fmt: skip


def say_attribute(record: Record, name: str, value: str, *, number: str = "", maker: str = "", model: str = "") -> int:
    """State an attribute of a number or of a model, of one of them. Raises Refused, NotFound."""
    from store import models

    people.require_known(record)
    if bool(number.strip()) == bool(model.strip()):
        raise Refused("an attribute belongs to a number or to a model, to one of them")
    if not name.strip() or not value.strip() or len(value) > MOST_TEXT:
        raise Refused("an attribute has a name and a value")
    goes_on = models.find(record, model).id if model.strip() else None
    with record.change("attribute stated", " ".join((number or model).split())) as change:
        which = resolve(change, number.strip(), maker.strip()) if number.strip() else None
        return change.insert(
            PartAttributeRow, number_id=which, model_id=goes_on, name=attribute_name(name), value=value.strip()
        )


def _find(conn: Connection, number: str, maker: str) -> int:
    kept = " ".join(number.split())
    key = rule.comparing_key(kept)
    sql = "SELECT id, number, maker, key FROM part_number WHERE folded = ?"
    same = [r for r in rows(conn, sql, (rule.folded_key(key),)) if r[3] == key] if key else []
    wanted = maker.casefold()
    of_maker = [r for r in same if r[2].casefold() == wanted] or ([] if maker else same)
    found = [r for r in of_maker if r[1] == kept] or of_maker
    if not found:
        raise NotFound("number", kept + (f" of {maker}" if maker else ""))
    if len(found) > 1:
        of = ", ".join(sorted({f"{r[1]} of {r[2]}" if r[2] else r[1] for r in found})[:4])
        raise Refused(f"{brief(kept, 30)} may be {of}; say which maker")
    return int(found[0][0])
