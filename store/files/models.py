"""Files of models."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store import models
from store.errors import Refused, brief
from store.files.kinds import Kind, Line, Loading, Numbered
from store.records import Record

_TEXT = ("volts", "rotation", "viewed_from", "note")
_WHOLE = ("teeth", "bars", "poles")
_YES = {"": True, "yes": True, "true": True, "1": True, "no": False, "false": False, "0": False}
_COLUMNS = "number, kind, volts, rotation, viewed_from, teeth, bars, poles, may_turn, may_undercut, note"


class _Cell(Refused):
    def __init__(self, column: str, why: str) -> None:
        self.column = column
        super().__init__(why)


def _values(line: Line) -> dict[str, Any]:
    values: dict[str, Any] = {column: line.get(column, "") for column in _TEXT}
    for column in _WHOLE:
        text = line.get(column, "")
        if text and (not text.isascii() or not text.isdigit() or not 0 < int(text) <= 1000):
            raise _Cell(column, f"{brief(text)!r} is not a whole number from 1 to 1000")
        values[column] = int(text) if text else None
    for column in ("may_turn", "may_undercut"):
        text = line.get(column, "").lower()
        if text not in _YES:
            raise _Cell(column, f"{brief(text)!r} is neither yes nor no")
        values[column] = _YES[text]
    if values["rotation"].lower() not in {"", "cw", "ccw", "both"}:
        raise _Cell("rotation", f"{brief(values['rotation'])!r} is no rotation; write cw, ccw or both")
    values["rotation"] = values["rotation"].lower()
    return values


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    taken = 0
    known = {r[0]: tuple(r) for r in loading.change.conn.exec_driver_sql(f"SELECT {_COLUMNS} FROM model")}  # noqa: S608
    for number, line in lines:
        try:
            values = _values(line)
            before = known.get(line["model"])
            if before is not None:
                if _differs(before, line["kind"], values):
                    loading.refuse(number, "model", f"the model {line['model']} is there already, and differs")
                continue
            models.insert(loading.change, line["model"], line["kind"], **values)
            row = (line["model"], line["kind"], *(values[c.strip()] for c in _COLUMNS.split(",")[2:]))
            known[line["model"]] = row
            taken += 1
        except _Cell as fault:
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
