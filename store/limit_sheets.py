"""Limit sheets: a model's wear limits in numbered revisions, each limit with its source.

A revision never changes once it stands. Entering or changing limits makes the next revision, which carries over what
was not touched; jobs keep the revision that they were taken in under until somebody moves them.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any

from sqlalchemy import Connection
from sqlmodel import select

from store import catalogue, models
from store.catalogue import Characteristic
from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.records import Record
from store.rules import quantities
from store.rules.limits import Limit, Rule
from store.rules.quantities import Quantity
from store.rules.readings import Mark, parse
from store.rules.statistic import Statistic
from store.tables.limits import LimitRow, RevisionRow

STAGES = ("as-found", "as-left", "both")


@dataclass(frozen=True, slots=True)
class Revision:
    """One revision of a model's sheet."""

    id: int
    model_id: int
    number: int
    decision: Rule
    at: str
    by: str
    why: str


@dataclass(frozen=True, slots=True)
class SheetLimit:
    """One limit as entered: sizes are text as typed in `unit`; `limit` is the same, exact, for judging."""

    id: int
    characteristic: str
    stage: str
    unit: str
    new: str | None
    low: str | None
    high: str | None
    at_limit: str
    count: int | None
    source: str
    note: str
    limit: Limit


@dataclass(frozen=True, slots=True)
class LimitSheet:
    """A revision with its limits, in the order of the catalogue."""

    model: str
    revision: Revision
    limits: tuple[SheetLimit, ...]

    def at(self, characteristic: str, stage: str) -> SheetLimit | None:
        """The limit of a characteristic at a stage: the stage's own before the one for both."""
        both = None
        for one in self.limits:
            if one.characteristic == characteristic:
                if one.stage == stage:
                    return one
                if one.stage == "both":
                    both = one
        return both


@dataclass(frozen=True, slots=True)
class LimitEntry:
    """A limit to be entered. Sizes are as typed and may carry a unit of their own; `source` is never empty."""

    characteristic: str
    source: str
    unit: str = ""
    stage: str = "both"
    new: str = ""
    low: str = ""
    high: str = ""
    at_limit: str = "pass"
    count: int | None = None
    note: str = ""


def revisions(record: Record, model: str) -> tuple[Revision, ...]:
    """The revisions of a model's sheet, oldest first; empty where none was entered. Raises NotFound."""
    found = models.find(record, model)
    with record.read() as conn:
        return _revisions(conn, found.id)


def sheet(record: Record, model: str, revision: int | None = None) -> LimitSheet | None:
    """A model's sheet, the newest revision unless one is named; None where no limit was ever entered.

    Raises NotFound for an unknown model or revision.
    """
    found = models.find(record, model)
    with record.read() as conn:
        known = _revisions(conn, found.id)
        if not known:
            return None
        wanted = known[-1] if revision is None else next((r for r in known if r.number == revision), None)
        if wanted is None:
            raise NotFound(
                f"revision of the sheet of {found.number}", str(revision), [str(r.number) for r in known[-3:]]
            )
        return by_revision(record, conn, wanted.id)


def by_revision(record: Record, conn: Connection, revision_id: int) -> LimitSheet:
    """The sheet of one revision; kept in memory, since a revision never changes."""
    kept = record.cache.get(("sheet", revision_id))
    if isinstance(kept, LimitSheet):
        return kept
    row = conn.execute(select(RevisionRow.__table__).where(RevisionRow.id == revision_id)).first()  # type: ignore[attr-defined]
    if row is None:
        raise NotFound("limit revision", str(revision_id))
    rev = Revision(row.id, row.model_id, row.number, Rule(row.decision), row.at, row.by, row.why)
    known = catalogue.catalogue(record, conn)
    sql = "SELECT *, count AS expected FROM wear_limit WHERE revision_id = ?"  # a row has a method named count
    rows = conn.exec_driver_sql(sql, (revision_id,)).all()
    order = {c.id: n for n, c in enumerate(known.all)}
    limits = tuple(
        SheetLimit(
            r.id, known.by_id[r.characteristic_id].name, r.stage, r.unit, r.new, r.low, r.high, r.at_limit, r.expected,
            r.source, r.note, _limit(r, known.by_id[r.characteristic_id], rev.decision),
        )
        for r in sorted(rows, key=lambda r: (order[r.characteristic_id], STAGES.index(r.stage)))
    )  # fmt: skip
    made = LimitSheet(models.by_id(conn, rev.model_id).number, rev, limits)
    record.cache[("sheet", revision_id)] = made
    return made


def newest(conn: Connection, model_id: int) -> int | None:
    """The key of the newest revision of a model, None where there is none."""
    return conn.exec_driver_sql(
        "SELECT id FROM revision WHERE model_id=? ORDER BY number DESC LIMIT 1", (model_id,)
    ).scalar()


def enter(
    record: Record, model: str, entries: Sequence[LimitEntry], *, why: str = "", decision: str | None = None
) -> LimitSheet:
    """Enter limits: a new revision with these, and all others carried over from the one before.

    Raises Refused (see `checked`), NotFound.
    """
    found = models.find(record, model)
    with record.change("limits entered", found.number) as change:
        insert(record, change, found.id, entries, why=why, decision=decision)
    made = sheet(record, model)
    assert made is not None
    return made


def drop(record: Record, model: str, characteristic: str, stage: str, why: str) -> LimitSheet:
    """A new revision without one limit. Raises NotFound, Refused where no reason is given."""
    if not why.strip():
        raise Refused("say why the limit goes")
    found = models.find(record, model)
    standing = sheet(record, model)
    if standing is None or not any(x.characteristic == characteristic and x.stage == stage for x in standing.limits):
        raise NotFound("limit", f"{characteristic} {stage}")
    with record.change("limit dropped", found.number) as change:
        insert(record, change, found.id, (), why=why, without={(characteristic, stage)})
    made = sheet(record, model)
    assert made is not None
    return made


def copy(record: Record, source_model: str, model: str, why: str = "") -> LimitSheet:
    """Copy the newest sheet of another model; each source says where it was copied from. Raises NotFound, Refused."""
    standing = sheet(record, source_model)
    if standing is None:
        raise Refused(f"{source_model} has no limits to copy")
    entries = [
        LimitEntry(
            x.characteristic, f"{x.source} (copied from {standing.model})", x.unit, x.stage, x.new or "", x.low or "",
            x.high or "", x.at_limit, x.count, x.note,
        )
        for x in standing.limits
    ]  # fmt: skip
    because = why or f"copied from {standing.model} revision {standing.revision.number}"
    return enter(record, model, entries, why=because, decision=standing.revision.decision.value)


def insert(
    record: Record,
    change: Change,
    model_id: int,
    entries: Sequence[LimitEntry],
    *,
    why: str = "",
    decision: str | None = None,
    without: frozenset[tuple[str, str]] | set[tuple[str, str]] = frozenset(),
    fresh: bool = False,
) -> int:
    """Make the next revision inside a running change; returns its key. `fresh` carries nothing over.

    Raises Refused, NotFound.
    """
    known = catalogue.catalogue(record, change.conn)
    carried: dict[tuple[str, str], dict[str, object]] = {}
    before = newest(change.conn, model_id)
    number, rule = 1, decision
    if before is not None:
        standing = by_revision(record, change.conn, before)
        number = standing.revision.number + 1
        rule = decision or standing.revision.decision.value
        for x in () if fresh else standing.limits:
            carried[(x.characteristic, x.stage)] = _values(x)
    if rule is None:
        from store import shop

        rule = shop.kept(change.conn, "decision")
    for gone in without:
        carried.pop(gone, None)
    seen = set()
    for entry in entries:
        values = checked(known, entry)
        which = (entry.characteristic, str(values["stage"]))
        if which in seen:
            raise Refused(f"{entry.characteristic} {values['stage']} is entered twice")
        seen.add(which)
        carried[which] = values
    made = change.insert(
        RevisionRow, model_id=model_id, number=number, decision=Rule(rule).value, at=change.at, by=change.by, why=why
    )
    for (name, _), values in carried.items():
        change.insert(LimitRow, revision_id=made, characteristic_id=known.find(name).id, **values)
    return made


def checked(known: catalogue.Catalogue, entry: LimitEntry) -> dict[str, object]:
    """A limit's row values. Raises Refused: a unit of another quantity, low above high, no source, nothing limited."""
    what = known.find(entry.characteristic)
    if not entry.source.strip():
        raise Refused(f"{what.name}: a limit names its source")
    if entry.stage not in STAGES:
        raise Refused(f"{what.name}: {brief(entry.stage)!r} is no stage; as-found, as-left or both")
    if entry.at_limit not in {"pass", "fail"}:
        raise Refused(f"{what.name}: at_limit is pass or fail: does a reading equal to the limit pass?")
    if entry.count is not None and not 0 < entry.count <= 1000:
        raise Refused(f"{what.name}: {entry.count} is no expected number of readings")
    unit = entry.unit.strip() or _default_unit(what)
    quantity = _limit_quantity(what)
    if unit and quantities.unit(unit).quantity != quantity:
        raise Refused(f"{what.name}: {unit} is not a unit of {quantity}")
    sizes: dict[str, tuple[str, Fraction] | None] = {
        side: _size(what, quantity, side, text, unit)
        for side, text in (("new", entry.new), ("low", entry.low), ("high", entry.high))
    }
    low, high = sizes["low"], sizes["high"]
    if quantity is not Quantity.attribute and low is None and high is None:
        raise Refused(f"{what.name}: a limit has a low end, a high end or both")
    if low and high and low[1] > high[1]:
        raise Refused(f"{what.name}: low {low[0]} is above high {high[0]}")
    return {
        "stage": entry.stage, "unit": unit, "new": sizes["new"][0] if sizes["new"] else None,
        "low": low[0] if low else None, "high": high[0] if high else None, "at_limit": entry.at_limit,
        "count": entry.count, "source": " ".join(entry.source.split()), "note": " ".join(entry.note.split()),
    }  # fmt: skip


def _size(what: Characteristic, quantity: Quantity, side: str, text: str, unit: str) -> tuple[str, Fraction] | None:
    """A size of a limit as kept (exact text in `unit`, digits as typed) and as a number; None where none is typed."""
    if not text.strip():
        return None
    if quantity is Quantity.attribute:
        raise Refused(f"{what.name}: passes or fails; it has no {side} size")
    try:
        typed = parse(text, quantity, unit, signed=what.derive.startswith("clearance"))
    except Refused as fault:
        raise Refused(f"{what.name}: {side}: {fault}") from None
    if typed.mark is not Mark.number or typed.value is None:
        raise Refused(f"{what.name}: {side}: {brief(text)!r} is no size")
    value = quantities.convert(typed.value, typed.unit, unit)
    plain = quantities.plain(value)
    if Fraction(plain) != value:
        raise Refused(f"{what.name}: {side}: {brief(text)} has no exact size in {unit}; give the limit in {typed.unit}")
    return (quantities.rounded(value, typed.places) if typed.unit == unit and typed.places else plain), value


def _default_unit(what: Characteristic) -> str:
    return "%" if what.statistic is Statistic.deviation else what.unit


def _limit_quantity(what: Characteristic) -> Quantity:
    return Quantity.ratio if what.statistic is Statistic.deviation else what.quantity


def _values(x: SheetLimit) -> dict[str, object]:
    return {
        "stage": x.stage, "unit": x.unit, "new": x.new, "low": x.low, "high": x.high, "at_limit": x.at_limit,
        "count": x.count, "source": x.source, "note": x.note,
    }  # fmt: skip


def _limit(r: Any, what: Characteristic, decision: Rule) -> Limit:
    def size(text: str | None) -> Fraction | None:
        return None if text is None else Fraction(text)

    return Limit(
        unit=r.unit,
        new=size(r.new),
        low=size(r.low),
        high=size(r.high),
        equal_passes=r.at_limit == "pass",
        expected=r.expected or what.count or 1,
        rule=decision,
    )


def _revisions(conn: Connection, model_id: int) -> tuple[Revision, ...]:
    rows = conn.execute(
        select(RevisionRow.__table__).where(RevisionRow.model_id == model_id).order_by("number")  # type: ignore[attr-defined]
    ).all()
    return tuple(Revision(r.id, r.model_id, r.number, Rule(r.decision), r.at, r.by, r.why) for r in rows)
