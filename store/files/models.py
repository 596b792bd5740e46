"""Files of models."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store import models
from store.errors import Refused
from store.files.kinds import Kind, Loading, Numbered
from store.records import Record

_COLUMNS = "number, kind, volts, rotation, viewed_from, teeth, bars, poles, may_turn, may_undercut, note"


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    taken = 0
    known = {r[0]: tuple(r) for r in loading.change.conn.exec_driver_sql(f"SELECT {_COLUMNS} FROM model")}  # noqa: S608
    for number, line in lines:
        try:
            values = models.checked(line)
            before = known.get(line["model"])
            if before is not None:
                if _differs(before, line["kind"], values):
                    loading.refuse(number, "model", f"the model {line['model']} is there already, and differs")
                continue
            models.insert(loading.change, line["model"], line["kind"], **values)
            row = (line["model"], line["kind"], *(values[c.strip()] for c in _COLUMNS.split(",")[2:]))
            known[line["model"]] = row
            taken += 1
        except models.CellRefused as fault:
            loading.refuse(number, fault.column, fault)
        except Refused as fault:
            loading.refuse(number, "kind" if "kind of machine" in str(fault) else "model", fault)
    return taken


def _differs(before: tuple[Any, ...], kind: str, values: dict[str, Any]) -> bool:
    return before[1:] != (kind, *(values[column.strip()] for column in _COLUMNS.split(",")[2:]))


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    for r in conn.exec_driver_sql(f"SELECT {_COLUMNS} FROM model ORDER BY id"):  # noqa: S608
        whole = ("" if r[n] is None else str(r[n]) for n in (5, 6, 7))
        yield (*r[:5], *whole, "yes" if r[8] else "no", "yes" if r[9] else "no", r[10])


KINDS = (
    Kind(
        "models",
        ("model", "kind"),
        ("volts", "rotation", "viewed_from", "teeth", "bars", "poles", "may_turn", "may_undercut", "note"),
        _take,
        _give,
    ),
)
