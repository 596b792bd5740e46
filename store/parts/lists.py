"""Statements of the lists, looked up a whole level of numbers at once."""

from __future__ import annotations

from collections.abc import Sequence
from json import dumps
from typing import Any

from sqlalchemy import Connection

from store.rules.interchange import Relation, Stated
from store.sqlite.engine import driver, rows

_COLUMNS = "r.id, r.from_id, r.relation, r.to_id, r.caveat, r.source, r.dated"
_ONWARD = (
    f"SELECT {_COLUMNS} FROM json_each(?) n CROSS JOIN relation r ON r.from_id = n.value "  # noqa: S608
    "WHERE r.relation <> 'do-not-use'"
)
_BACK = (
    f"SELECT {_COLUMNS} FROM json_each(?) n CROSS JOIN relation r ON r.to_id = n.value "  # noqa: S608
    "AND r.relation IN ('interchanges-with','same-as')"
)
_BARRED = (
    f"SELECT {_COLUMNS} FROM json_each(?) n CROSS JOIN relation r ON r.from_id = n.value "  # noqa: S608
    "AND r.relation = 'do-not-use'"
)
_AT_ONCE = 250
_RELATIONS = {relation.value: relation for relation in Relation}


class RecordLists:
    """The lists of a record, as `store.rules.interchange.walk` asks them; three statements a level."""

    def __init__(self, conn: Connection) -> None:
        self.conn = conn

    def onward(self, numbers: Sequence[int], most: int, ends: int) -> tuple[Sequence[Stated], bool]:
        """What is stated of these numbers, but do-not-use, and the two-way statements that name them."""
        asked, met = dumps(numbers), set(numbers)
        found: dict[int, Any] = {}
        for sql in (_ONWARD, _BACK):
            cursor = driver(self.conn).execute(sql, (asked,))
            while some := cursor.fetchmany(_AT_ONCE):
                found.update((r[0], r) for r in some)
                met.update(r[1] for r in some)
                met.update(r[3] for r in some)
                if len(found) >= most or len(met) > ends:
                    cursor.close()
                    return [_stated(r) for r in found.values()], True
        return [_stated(r) for r in found.values()], False

    def barred(self, numbers: Sequence[int]) -> Sequence[Stated]:
        """The do-not-use statements of these numbers."""
        return [_stated(r) for r in rows(self.conn, _BARRED, (dumps(numbers),))]


def _stated(r: tuple[int, int, str, int | None, str, str, str]) -> Stated:
    return Stated(r[0], r[1], _RELATIONS[r[2]], r[3], r[4], r[5], r[6])
