"""Files of part numbers and of the relations between them; made for a million lines."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable, Iterable, Iterator, Sequence
from contextlib import AbstractContextManager, nullcontext
from itertools import chain, islice
from typing import Any

from sqlalchemy import Connection

from store import times
from store.errors import Refused
from store.files.kinds import Kind, Loading, Numbered
from store.parts import numbers
from store.parts.known import Known, known
from store.records import Record
from store.rules.numbers import comparing_key, folded_key, printed
from store.sqlite.bulk import indexes_afterwards
from store.tables.parts import NumberRow, RelationRow

MANY = 20_000


def _bulk(
    loading: Loading, table: str, what: str, lines: Iterator[Numbered]
) -> tuple[Iterable[Numbered], AbstractContextManager[None]]:
    """The lines again, and how their rows are best written: a long file into a short table has its indexes made last."""
    first = list(islice(lines, MANY))
    raw: sqlite3.Connection = loading.change.raw
    there = int(raw.execute(f"SELECT coalesce(max(id),0) FROM {table}").fetchone()[0])  # noqa: S608
    if len(first) < MANY or there > 10 * MANY:
        return chain(first, lines), nullcontext()
    told: Callable[[str], None] = lambda name: loading.progress(f"{what}, index {name}", 0)  # noqa: E731
    return chain(first, lines), indexes_afterwards(raw, table, told)


def _take_numbers(loading: Loading, lines: Iterator[Numbered]) -> int:
    at_hand = known(loading.change)
    again, writing = _bulk(loading, "part_number", "numbers", lines)
    with writing:
        return loading.change.load(NumberRow, _number_rows(loading, again, at_hand))


def _number_rows(loading: Loading, lines: Iterable[Numbered], at_hand: Known) -> Iterator[tuple[Any, ...]]:
    first = 1 + int(loading.change.raw.execute("SELECT coalesce(max(id),0) FROM part_number").fetchone()[0])
    next_id = first
    for place, line in lines:
        get = line.get
        maker, kind = get("maker", ""), line["kind"]
        description, status = get("description", ""), get("status", "")
        try:
            number = printed(line["number"])
        except Refused as fault:
            loading.refuse(place, "number", fault)
            continue
        if len(maker) > 80 or len(kind) > 60 or len(status) > 60 or len(description) > 1000:
            loading.refuse(place, *_too_long(line))
            continue
        key = comparing_key(number)
        row = (None, number, maker, key, folded_key(key), kind, description, status)
        there = at_hand.exactly(number, maker)
        if there is not None:
            if there >= first or not _is_same(loading, there, row):
                what = "stands in this file already" if there >= first else "is there already, and differs"
                loading.refuse(place, "number", f"the number {number}{f' of {maker}' if maker else ''} {what}")
            continue
        at_hand.add(number, maker, next_id)
        next_id += 1
        yield row


def _too_long(line: Any) -> tuple[str, str]:
    most = {"maker": numbers.MOST_MAKER, "kind": numbers.MOST_KIND, "status": numbers.MOST_STATUS}
    for column, limit in most.items():
        if len(line.get(column, "")) > limit:
            return column, f"{len(line[column])} characters; at most {limit}"
    return "description", f"longer than {numbers.MOST_TEXT:,} characters"


def _is_same(loading: Loading, there: int, row: tuple[Any, ...]) -> bool:
    """Whether the number that an earlier load brought says the very same."""
    sql = "SELECT kind, description, status FROM part_number WHERE id = ?"
    return bool(loading.change.raw.execute(sql, (there,)).fetchone() == row[5:])


def _give_numbers(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = "SELECT number, kind, maker, description, status FROM part_number ORDER BY id"
    yield from map(tuple, conn.exec_driver_sql(sql))


def _take_relations(loading: Loading, lines: Iterator[Numbered]) -> int:
    at_hand = known(loading.change)
    again, writing = _bulk(loading, "relation", "relations", lines)
    with writing:
        return loading.change.load(RelationRow, _relation_rows(loading, again, at_hand))


def _relation_rows(loading: Loading, lines: Iterable[Numbered], at_hand: Known) -> Iterator[tuple[Any, ...]]:
    find, dates = at_hand.find, {"": ""}
    for place, line in lines:
        get = line.get
        column = "from_number"
        try:
            of = find(line["from_number"], get("from_maker", ""))
            column, to_number = "to_number", get("to_number", "")
            to = find(to_number, get("to_maker", "")) if to_number else None
            column, dated = "dated", get("dated", "")
            if dated not in dates:
                dates[dated] = times.read(dated)
            column = "relation"
            row = numbers.checked_relation(of, line["relation"], to, get("caveat", ""), get("source", ""), dates[dated])
        except Refused as fault:
            loading.refuse(place, _column(column, str(fault)), fault)
            continue
        yield row


def _column(column: str, why: str) -> str:
    if column == "relation" and ("to itself" in why or "leads to a number" in why):
        return "to_number"
    return "caveat" if why.startswith("caveat") else column


def _give_relations(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT a.number, r.relation, a.maker, coalesce(b.number,''), coalesce(b.maker,''), r.caveat, r.source, r.dated "
        "FROM relation r JOIN part_number a ON a.id = r.from_id LEFT JOIN part_number b ON b.id = r.to_id ORDER BY r.id"
    )
    yield from map(tuple, conn.exec_driver_sql(sql))


KINDS = (
    Kind("numbers", ("number", "kind"), ("maker", "description", "status"), _take_numbers, _give_numbers),
    Kind(
        "relations",
        ("from_number", "relation"),
        ("from_maker", "to_number", "to_maker", "caveat", "source", "dated"),
        _take_relations,
        _give_relations,
    ),
)
