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
from store.files.kinds import Cells, Kind, Loading
from store.parts import numbers
from store.parts.known import Known, known
from store.records import Record
from store.rules.numbers import keyed
from store.sqlite.bulk import indexes_afterwards
from store.tables.parts import NumberRow, RelationRow

MANY = 20_000
TELL_EVERY = 1 << 13


def _bulk(
    loading: Loading, table: str, what: str, lines: Iterator[Cells]
) -> tuple[Iterable[Cells], AbstractContextManager[None]]:
    """The lines again, and how their rows are best written: a long file into a short table has its indexes made last."""
    first = list(islice(lines, MANY))
    raw: sqlite3.Connection = loading.change.raw
    there = int(raw.execute(f"SELECT coalesce(max(id),0) FROM {table}").fetchone()[0])  # noqa: S608
    if len(first) < MANY or there > 10 * MANY:
        return chain(first, lines), nullcontext()
    told: Callable[[str], None] = lambda name: loading.progress(f"{what}, index {name}", 0)  # noqa: E731
    return chain(first, lines), indexes_afterwards(raw, table, told)


def _take_numbers(loading: Loading, lines: Iterator[Cells]) -> int:
    at_hand = known(loading.change)
    again, writing = _bulk(loading, "part_number", "numbers", lines)
    with writing:
        return loading.change.load(NumberRow, _number_rows(loading, again, at_hand))


def _number_rows(loading: Loading, lines: Iterable[Cells], at_hand: Known) -> Iterator[tuple[Any, ...]]:
    first = 1 + int(loading.change.raw.execute("SELECT coalesce(max(id),0) FROM part_number").fetchone()[0])
    next_id, exactly, add = first, at_hand.exactly, at_hand.add
    for place, (typed, kind, maker, description, status) in lines:
        if not place % TELL_EVERY:
            loading.progress("numbers", next_id - first)
        try:
            number, key, folded = keyed(typed)
        except Refused as fault:
            loading.refuse(place, "number", fault)
            continue
        if not kind or len(maker) > 80 or len(kind) > 60 or len(status) > 60 or len(description) > 1000:
            loading.refuse(place, *_wrong_text(kind, maker, status))
            continue
        there = exactly(number, maker)
        row = (None, number, maker, key, folded, kind, description, status)
        if there is not None:
            if there >= first or not _is_same(loading, there, row):
                what = "stands in this file already" if there >= first else "is there already, and differs"
                loading.refuse(place, "number", f"the number {number}{f' of {maker}' if maker else ''} {what}")
            continue
        add(number, maker, next_id)
        next_id += 1
        yield row


def _wrong_text(kind: str, maker: str, status: str) -> tuple[str, str]:
    if not kind:
        return "kind", "nothing is written here, and it is needed"
    for column, text, most in (
        ("maker", maker, numbers.MOST_MAKER),
        ("kind", kind, numbers.MOST_KIND),
        ("status", status, numbers.MOST_STATUS),
    ):
        if len(text) > most:
            return column, f"{len(text)} characters; at most {most}"
    return "description", f"longer than {numbers.MOST_TEXT:,} characters"


def _is_same(loading: Loading, there: int, row: tuple[Any, ...]) -> bool:
    """Whether the number that an earlier load brought says the very same."""
    sql = "SELECT kind, description, status FROM part_number WHERE id = ?"
    return bool(loading.change.raw.execute(sql, (there,)).fetchone() == row[5:])


def _give_numbers(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = "SELECT number, kind, maker, description, status FROM part_number ORDER BY id"
    yield from map(tuple, conn.exec_driver_sql(sql))


def _take_relations(loading: Loading, lines: Iterator[Cells]) -> int:
    at_hand = known(loading.change)
    again, writing = _bulk(loading, "relation", "relations", lines)
    with writing:
        return loading.change.load(RelationRow, _relation_rows(loading, again, at_hand))


def _relation_rows(loading: Loading, lines: Iterable[Cells], at_hand: Known) -> Iterator[tuple[Any, ...]]:
    """A row a line. The common case is told at once; whatever is unusual is looked at by `_careful`."""
    exactly, dates, relations, most = at_hand.ids.get, {"": ""}, numbers.RELATIONS, numbers.MOST_TEXT
    for place, cells in lines:
        if not place % TELL_EVERY:
            loading.progress("relations", place)
        number, relation, maker, other, other_maker, caveat, source, dated = cells
        of = exactly(f"{number}\n{maker}" if maker else number)
        to = exactly(f"{other}\n{other_maker}" if other_maker else other)
        if (
            of is None
            or to is None
            or of == to
            or relation not in relations
            or dated not in dates
            or len(caveat) + len(source) > most
        ):
            row = _careful(loading, place, cells, at_hand, dates)
            if row is not None:
                yield row
        else:
            yield (None, of, relation, to, caveat, source, dates[dated])


def _careful(
    loading: Loading, place: int, cells: tuple[str, ...], at_hand: Known, dates: dict[str, str]
) -> tuple[Any, ...] | None:
    """The row of a line looked at step by step; None when it was refused."""
    number, relation, maker, other, other_maker, caveat, source, dated = cells
    column = "from_number"
    try:
        if not number:
            raise Refused("nothing is written here, and it is needed")
        of = at_hand.find(number, maker)
        column = "to_number"
        to = at_hand.find(other, other_maker) if other else None
        column = "dated"
        if dated not in dates:
            dates[dated] = times.read(dated)
        column = "relation"
        return numbers.checked_relation(of, relation, to, caveat, source, dates[dated])
    except Refused as fault:
        loading.refuse(place, _column(column, str(fault)), fault)
        return None


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
    Kind(
        "numbers", ("number", "kind"), ("maker", "description", "status"), None, _give_numbers, take_cells=_take_numbers
    ),
    Kind(
        "relations",
        ("from_number", "relation"),
        ("from_maker", "to_number", "to_maker", "caveat", "source", "dated"),
        None,
        _give_relations,
        take_cells=_take_relations,
    ),
)
