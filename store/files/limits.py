"""Files of limits: all of a model's lines make one revision of its sheet."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store import catalogue, limit_sheets, models
from store.errors import NotFound, Refused, brief
from store.files.kinds import Kind, Line, Loading, Numbered
from store.limit_sheets import LimitEntry
from store.records import Record
from store.rules.limits import Rule

_DECISIONS = {rule.value for rule in Rule}


def _entry(line: Line) -> LimitEntry:
    count = line.get("count", "")
    if count and (not count.isascii() or not count.isdigit() or int(count) > 1000):
        raise Refused(f"count: {brief(count)!r} is no expected number of readings")
    return LimitEntry(
        characteristic=line["characteristic"].lower(),
        source=line["source"],
        unit=line["unit"],
        stage=line.get("stage") or "both",
        new=line.get("new", ""),
        low=line.get("low", ""),
        high=line.get("high", ""),
        at_limit=line.get("at_limit") or "pass",
        count=int(count) if count else None,
        note=line.get("note", ""),
    )


def _take(loading: Loading, lines: Iterator[Numbered]) -> int:
    known = catalogue.catalogue(loading.record, loading.change.conn)
    sheets: dict[tuple[int, int], list[LimitEntry]] = {}
    decisions: dict[tuple[int, int], str] = {}
    seen: dict[tuple[int, int, str, str], int] = {}
    numbers: dict[str, int | NotFound] = {}
    taken = 0
    for number, line in lines:
        model = _model(loading, numbers, number, line)
        if model is None:
            continue
        revision = line.get("revision", "")
        if revision and not revision.isdigit():
            loading.refuse(number, "revision", f"{brief(revision)!r} is no revision")
            continue
        which = (model, int(revision or 0))
        try:
            entry = _entry(line)
            limit_sheets.checked(known, entry)
        except NotFound as fault:
            loading.refuse(number, fault.what.split()[0] if fault.what != "unit of measurement" else "unit", fault)
            continue
        except Refused as fault:
            loading.refuse(number, _column(str(fault)), fault)
            continue
        cell = (*which, entry.characteristic, entry.stage)
        if cell in seen:
            loading.refuse(
                number, "characteristic", f"{entry.characteristic} {entry.stage} stands in line {seen[cell]} already"
            )
            continue
        seen[cell] = number
        decision = line.get("decision", "")
        if decision and decision not in _DECISIONS:
            loading.refuse(
                number, "decision", f"{brief(decision)!r} is no decision rule; one of {', '.join(sorted(_DECISIONS))}"
            )
            continue
        if decision and decisions.setdefault(which, decision) != decision:
            loading.refuse(
                number, "decision", f"the sheet has {decisions[which]} in an earlier line; a sheet has one rule"
            )
            continue
        sheets.setdefault(which, []).append(entry)
        taken += 1
    if not loading.bad:
        for which in sorted(sheets):
            limit_sheets.insert(
                loading.record, loading.change, which[0], sheets[which],
                why=f"loaded from {loading.file}", decision=decisions.get(which), fresh=bool(which[1]),
            )  # fmt: skip
    return taken


def _model(loading: Loading, numbers: dict[str, int | NotFound], number: int, line: Line) -> int | None:
    name = line["model"]
    if name not in numbers:
        try:
            numbers[name] = models.find(loading.record, name, loading.change.conn).id
        except NotFound as fault:
            numbers[name] = fault
    found = numbers[name]
    if isinstance(found, NotFound):
        loading.refuse(number, "model", found)
        return None
    return found


def _column(why: str) -> str:
    """The column that a refusal speaks of."""
    said = why.lower()
    for side in ("new", "low", "high", "count"):
        if f": {side}" in said or said.startswith(side):
            return side
    if "is not a unit of" in said or "no unit" in said:
        return "unit"
    for word in ("source", "stage", "at_limit"):
        if word in said:
            return word
    return "low" if "low end" in said else "characteristic"


def _give(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    rows: list[Any] = list(
        conn.exec_driver_sql(
            "SELECT r.id FROM revision r JOIN model m ON m.id = r.model_id ORDER BY m.id, r.number"
        ).scalars()
    )
    for revision in rows:
        sheet = limit_sheets.by_revision(record, conn, revision)
        for x in sheet.limits:
            yield (
                sheet.model, x.characteristic, x.unit, x.source, x.stage, x.new or "", x.low or "", x.high or "",
                x.at_limit, str(x.count or ""), sheet.revision.decision.value, x.note, str(sheet.revision.number),
            )  # fmt: skip


KINDS = (
    Kind(
        "limits",
        ("model", "characteristic", "unit", "source"),
        ("stage", "new", "low", "high", "at_limit", "count", "decision", "note", "revision"),
        _take,
        _give,
        may_be_empty=frozenset({"unit"}),  # a test that passes or fails has none
    ),
)
