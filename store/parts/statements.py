"""Everything that is stated of a number: relations, what it goes on, sizes, attributes; and taking a statement back."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from store import people
from store.errors import NotFound, Refused, brief
from store.parts import numbers
from store.parts.answers import name, statement
from store.parts.numbers import Number
from store.records import Record
from store.rules.interchange import Relation
from store.sqlite.engine import rows
from store.tables.parts import FitRow, PartAttributeRow, PartSizeRow, RelationRow

MOST = 500
_TABLES: dict[str, Any] = {"relation": RelationRow, "fits": FitRow, "size": PartSizeRow, "attribute": PartAttributeRow}


@dataclass(frozen=True, slots=True)
class Statement:
    """One line of a list as stated; `kind` is relation, fits, size or attribute."""

    kind: str
    id: int
    says: str


def stated_of(record: Record, number: Number) -> tuple[Statement, ...]:
    """What is stated of a number, and the relations that name it; at most MOST of a kind, in the order of stating."""
    with record.read() as conn:
        found = rows(
            conn,
            "SELECT id, from_id, relation, to_id, source, caveat, dated FROM relation WHERE from_id = ? OR to_id = ? "
            "ORDER BY id LIMIT ?",
            (number.id, number.id, MOST),
        )
        ids = {r[1] for r in found} | {r[3] for r in found if r[3] is not None}
        named = {one.id: name(one) for one in numbers.by_ids(conn, list(ids))}
        made = [
            Statement("relation", r[0], statement(Relation(r[2]), named[r[1]], named.get(r[3], ""), *r[4:]))
            for r in found
        ]
        sql = (
            "SELECT f.id, m.number, f.position, f.quantity, f.source FROM fit f JOIN model m ON m.id = f.model_id "
            "WHERE f.number_id = ? ORDER BY f.id LIMIT ?"
        )
        for which, model, position, pieces, source in rows(conn, sql, (number.id, MOST)):
            where = f", {position}" if position else ""
            count = f" x{pieces}" if pieces else ""
            made.append(Statement("fits", which, f"goes on {model}{where}{count} ({source or 'no source'})"))
        sql = "SELECT id, name, value, unit FROM part_size WHERE number_id = ? ORDER BY id LIMIT ?"
        made += [Statement("size", r[0], f"{r[1]} {r[2]} {r[3]}") for r in rows(conn, sql, (number.id, MOST))]
        sql = "SELECT id, name, value FROM part_attribute WHERE number_id = ? ORDER BY id LIMIT ?"
        made += [Statement("attribute", r[0], f"{r[1]}: {r[2]}") for r in rows(conn, sql, (number.id, MOST))]
    return tuple(made)


def withdraw(record: Record, kind: str, which: int, why: str) -> None:
    """Take a statement back; what it was and why stays in the chain. Raises Refused (no reason), NotFound."""
    people.require_known(record)
    if not why.strip():
        raise Refused("say why the statement is taken back")
    with record.change(f"{kind} withdrawn", brief(why, 200)) as change:
        if not change.delete(_TABLES[kind], which):
            raise NotFound(kind, str(which))
