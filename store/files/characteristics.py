"""Files of the shop's own characteristics."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from sqlalchemy import Connection

from store import catalogue
from store.errors import NotFound, Refused
from store.files.kinds import Kind, Loading, Numbered
from store.records import Record

_NEEDED = ("characteristic", "component", "quantity", "statistic")
_OPTIONAL = tuple(column for column in catalogue.COLUMNS if column not in _NEEDED)
_COLUMNS = (*_NEEDED, *_OPTIONAL)


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    taken = 0
    for number, line in lines:
        try:
            if _stands(loading, line):
                continue
            catalogue.add(loading.change, dict(line))
        except NotFound as fault:
            loading.refuse(number, fault.what, fault)
        except Refused as fault:
            loading.refuse(number, "characteristic", fault)
        else:
            taken += 1
    loading.record.forget(loading.change.conn, "catalogue")
    return taken


def _stands(loading: Loading, line: dict[str, str] | object) -> bool:
    """Whether the record has this characteristic already, the same in every column."""
    assert isinstance(line, dict)
    known = catalogue.catalogue(loading.record, loading.change.conn).by_name.get(line["characteristic"].lower())
    if known is None:
        return False
    names = "name,component,label,machines,quantity,unit,statistic,derive,positions,noun,count,direction,stages,gauge,datum,caution"
    row = loading.change.conn.exec_driver_sql(
        f"SELECT {names} FROM characteristic WHERE id = ?",  # noqa: S608
        (known.id,),
    ).one()
    return dict(zip(names.split(","), row, strict=True)) == catalogue.values(line)


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    rows = conn.exec_driver_sql("SELECT * FROM characteristic WHERE NOT shipped ORDER BY place, id").mappings()
    for row in rows:
        line = catalogue.save_line(dict(row))
        yield tuple(line[column] for column in _COLUMNS)


KINDS = (Kind("characteristics", _NEEDED, _OPTIONAL, _take, _give),)
