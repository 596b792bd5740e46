"""Statements of the lists, looked up a whole level of numbers at once."""

from __future__ import annotations

from collections.abc import Sequence
from json import dumps

from sqlalchemy import Connection

from store.rules.interchange import Relation, Stated
from store.sqlite.engine import rows

_COLUMNS = "r.id, r.from_id, r.relation, r.to_id, r.caveat, r.source, r.dated"
_ONWARD = (
    f"SELECT {_COLUMNS} FROM json_each(?) n CROSS JOIN relation r ON r.from_id = n.value "  # noqa: S608
    "WHERE r.relation <> 'do-not-use' LIMIT ?"
)
_BACK = (
    f"SELECT {_COLUMNS} FROM json_each(?) n CROSS JOIN relation r ON r.to_id = n.value "  # noqa: S608
    "AND r.relation IN ('interchanges-with','same-as') LIMIT ?"
)
_BARRED = (
    f"SELECT {_COLUMNS} FROM json_each(?) n CROSS JOIN relation r ON r.from_id = n.value "  # noqa: S608
    "AND r.relation = 'do-not-use'"
)
_RELATIONS = {relation.value: relation for relation in Relation}


class RecordLists:
    """The lists of a record, as `store.rules.interchange.walk` asks them; three statements a level."""

    def __init__(self, conn: Connection) -> None:
        self.conn = conn

    def onward(self, numbers: Sequence[int], most: int) -> Sequence[Stated]:
        """What is stated of these numbers, but do-not-use, and the two-way statements that name them."""
        asked = dumps(numbers)
        found = rows(self.conn, _ONWARD, (asked, most))
        if len(found) < most:
            found += rows(self.conn, _BACK, (asked, most - len(found)))
        return list({r[0]: _stated(r) for r in found}.values()) if len(found) < most else [_stated(r) for r in found]

    def barred(self, numbers: Sequence[int]) -> Sequence[Stated]:
        """The do-not-use statements of these numbers."""
        return [_stated(r) for r in rows(self.conn, _BARRED, (dumps(numbers),))]


def _stated(r: tuple[int, int, str, int | None, str, str, str]) -> Stated:
    return Stated(r[0], r[1], _RELATIONS[r[2]], r[3], r[4], r[5], r[6])
