"""Files of gauges, each line a gauge with its calibration in force."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from sqlalchemy import Connection

from store import gauges
from store.errors import NotFound, Refused
from store.files.kinds import Kind, Loading, Numbered
from store.records import Record

_OPTIONAL = ("unit", "resolution", "expanded_uncertainty", "k", "calibrated", "due", "note")


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    taken = 0
    known = {line[0]: line for line in _give(loading.record, loading.change.conn)}
    for number, line in lines:
        name = line["gauge"]
        whole = (name, line["kind"], *(line.get(column, "") for column in _OPTIONAL))
        if name in known:
            if tuple(known[name]) != whole:
                loading.refuse(number, "gauge", f"the gauge {name} is there already, and differs")
            continue
        try:
            gauges.insert(loading.change, name, line["kind"], **{column: line.get(column, "") for column in _OPTIONAL})
        except NotFound as fault:
            loading.refuse(number, "unit", fault)
        except Refused as fault:
            loading.refuse(number, _column(str(fault)), fault)
        else:
            known[name] = whole
            taken += 1
    loading.record.forget(loading.change.conn, "gauges")
    return taken


def _column(why: str) -> str:
    for words, column in (
        ("resolution", "resolution"), ("expanded uncertainty", "expanded_uncertainty"), ("coverage factor", "k"),
        ("due", "due"), ("no date", "calibrated"), ("kind", "kind"), ("unit", "unit"),
    ):  # fmt: skip
        if words in why:
            return column
    return "gauge"


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    for gauge in sorted(gauges.by_id(record, conn).values(), key=lambda g: g.id):
        last = gauge.calibration
        yield (
            gauge.name, gauge.kind, gauge.unit, gauge.resolution or "",
            (last.expanded_uncertainty or "") if last else "", (last.k or "") if last else "",
            (last.calibrated or "") if last else "", (last.due or "") if last else "", gauge.note,
        )  # fmt: skip


KINDS = (Kind("gauges", ("gauge", "kind"), _OPTIONAL, _take, _give),)
