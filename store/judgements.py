"""Judgements: derived from the readings, kept so that screens, reports, plan and review read the same ones.

A judgement is refreshed in the transaction that adds its reading. All of them can be rebuilt from the readings.
"""

from __future__ import annotations

import json
from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from fractions import Fraction
from typing import Any, Protocol

from sqlalchemy import Connection

from store import audit, gauges, limit_sheets
from store.catalogue import Catalogue, Characteristic, catalogue
from store.gauges import Gauge
from store.limit_sheets import LimitSheet, SheetLimit
from store.records import Record
from store.rules import at_voltage, certainty, derived, quantities
from store.rules.limits import Judgement, Limit, Measured, from_kept, judge, kept
from store.rules.readings import Mark, Typed
from store.rules.verdict_words import because
from store.sqlite.engine import driver, rows

Sure = dict[tuple[int, str, str], tuple[Fraction | None, Fraction | None]]


class Judgeable(Protocol):
    """What of a job decides a judgement."""

    @property
    def id(self) -> int: ...
    @property
    def kind(self) -> str: ...
    @property
    def revision_id(self) -> int | None: ...


@dataclass(frozen=True, slots=True)
class Judged:
    """A judgement with its limit."""

    characteristic: Characteristic
    stage: str
    limit: SheetLimit | None
    judgement: Judgement

    @property
    def because(self) -> str:
        """The sentence that explains the verdict."""
        exact, one, said = self.limit.limit if self.limit else None, self.characteristic, self.judgement
        is_one_of_several = said.expected > 1 or said.count > 1 or said.worst_at not in {"", "1"}
        return because(said, exact, one.noun if one.noun and is_one_of_several else one.label)


_CURRENT = """
SELECT r.characteristic_id, r.position, r.typed, r.mark, r.value, r.unit, r.places, r.detail, r.gauge_id, substr(r.at, 1, 10)
FROM reading r WHERE r.job_id = ? AND r.stage = ? AND r.characteristic_id IN ({})
AND NOT EXISTS (SELECT 1 FROM reading c WHERE c.corrects_id = r.id) ORDER BY r.id
"""
_PUT = """
INSERT INTO judgement(job_id,stage,characteristic_id,limit_id,verdict,size,kept) VALUES(?,?,?,?,?,?,?)
ON CONFLICT(job_id,stage,characteristic_id) DO UPDATE SET
 limit_id=excluded.limit_id, verdict=excluded.verdict, size=excluded.size, kept=excluded.kept
"""
_OF_JOB = "SELECT characteristic_id, limit_id, kept FROM judgement WHERE job_id = ? AND stage = ?"


def of_job(record: Record, job: Judgeable, stage: str, conn: Connection | None = None) -> tuple[Judged, ...]:
    """The judgements of a job at a stage, in the order of the catalogue; what has no reading has none."""
    if conn is None:
        with record.read() as own:
            return of_job(record, job, stage, own)
    known = catalogue(record, conn)
    sheet = _sheet(record, conn, job)
    by_key = {limit.id: limit for limit in sheet.limits} if sheet else {}
    found = {r[0]: r for r in rows(conn, _OF_JOB, (job.id, stage))}
    made = []
    for one in known.all:
        if one.id in found:
            _, limit_id, text = found[one.id]
            judgement = from_kept(json.loads(text))
            limit = by_key.get(limit_id)
            made.append(Judged(one, stage, limit, judgement))
    return tuple(made)


def refresh(record: Record, conn: Connection, job: Judgeable, stage: str, names: Iterable[str]) -> tuple[Judged, ...]:
    """Judge these characteristics anew, and those derived from them, inside a write transaction."""
    known = catalogue(record, conn)
    sheet = _sheet(record, conn, job)
    wanted = _with_derived(known, names, job.kind, sheet, stage)
    readings = _measured(record, conn, job.id, stage, known, wanted)
    return tuple(_put(conn, job.id, one, stage, sheet, readings) for one in wanted if _has_readings(one, readings))


def rebuild(record: Record, conn: Connection, job: Judgeable) -> None:
    """Judge a whole job anew at both stages, inside a write transaction."""
    conn.exec_driver_sql("DELETE FROM judgement WHERE job_id = ?", (job.id,))
    for stage in ("as-found", "as-left"):
        measured = conn.exec_driver_sql(
            "SELECT DISTINCT characteristic_id FROM reading WHERE job_id = ? AND stage = ?", (job.id, stage)
        ).scalars()
        known = catalogue(record, conn)
        refresh(record, conn, job, stage, [known.by_id[int(i)].name for i in measured])


def rebuild_all(record: Record, conn: Connection) -> int:
    """Judge every job anew, inside a write transaction; returns how many judgements there are."""
    driver(conn).execute("DELETE FROM judgement")
    known, owned, count = catalogue(record, conn), gauges.by_id(record, conn), 0
    before: Known = {}
    for (job_id,) in rows(conn, "SELECT id FROM job ORDER BY id"):
        made = _all_of(record, conn, known, owned, job_id, before)
        driver(conn).executemany(_PUT, made.values())
        count += len(made)
    return count


def rebuild_by_gauge(record: Record, conn: Connection, gauge_id: int) -> int:
    """Judge anew every job with a reading by this gauge, inside a write transaction; returns how many."""
    known, owned = catalogue(record, conn), gauges.by_id(record, conn)
    before: Known = {}
    touched = rows(conn, "SELECT DISTINCT job_id FROM reading WHERE gauge_id = ?", (gauge_id,))
    for (job_id,) in touched:
        driver(conn).execute("DELETE FROM judgement WHERE job_id = ?", (job_id,))
        driver(conn).executemany(_PUT, _all_of(record, conn, known, owned, job_id, before).values())
    return len(touched)


def compare(record: Record, job_ids: Sequence[int]) -> tuple[int, tuple[str, str] | None]:
    """Judge jobs anew and hold it against what is kept: how many judgements stand, and the first that does not."""
    stand = 0
    with record.read() as conn:
        known = catalogue(record, conn)
        owned = gauges.by_id(record, conn)
        before: Known = {}
        for job_id in job_ids:
            kept_by = {
                (r[1], r[2]): tuple(r) for r in rows(conn, "SELECT * FROM judgement WHERE job_id = ?", (job_id,))
            }
            made = _all_of(record, conn, known, owned, job_id, before)
            for key in kept_by.keys() | made.keys():
                if kept_by.get(key) != made.get(key):
                    tag = rows(conn, "SELECT tag FROM job WHERE id = ?", (job_id,))[0][0]
                    one = known.by_id.get(key[1])
                    where = f"judgement of {tag}, {one.name if one else key[1]}, {key[0]}"
                    return stand, (where, "does not agree with the readings")
            stand += len(made)
    return stand, None


_EVERY = (
    "SELECT r.characteristic_id, r.position, r.typed, r.mark, r.value, r.unit, r.places, r.detail, r.gauge_id, "
    "substr(r.at, 1, 10), r.stage, r.id, r.corrects_id FROM reading r WHERE r.job_id = ? ORDER BY r.id"
)
_KIND = (
    "SELECT m.kind, j.revision_id FROM job j JOIN unit u ON u.id = j.unit_id JOIN model m ON m.id = u.model_id "
    "WHERE j.id = ?"
)


Known = dict[tuple[Any, ...], tuple[Any, ...]]
MOST_KNOWN = 200_000


def _all_of(
    record: Record, conn: Connection, known: Catalogue, owned: dict[int, Gauge], job_id: int, before: Known
) -> dict[tuple[str, int], tuple[Any, ...]]:
    """The judgements of one job as rows, from all its readings read at once.

    `before` keeps what the same readings under the same limit were judged: most tests pass, and many sizes repeat.
    """
    found = rows(conn, _EVERY, (job_id,))
    if not found:
        return {}
    corrected = {r[12] for r in found if r[12] is not None}
    kind, revision_id = rows(conn, _KIND, (job_id,))[0]
    sheet = None if revision_id is None else limit_sheets.by_revision(record, conn, revision_id)
    by_stage: dict[str, dict[str, list[Any]]] = {}
    for r in found:
        if r[11] not in corrected:
            by_stage.setdefault(r[10], {}).setdefault(known.by_id[r[0]].name, []).append(r[:10])
    made = {}
    for stage, taken in by_stage.items():
        for one in _with_derived(known, taken, kind, sheet, stage):
            if not all(name in taken for name in one.sources or (one.name,)):
                continue
            limit, sources = sheet.at(one.name, stage) if sheet else None, [n for n in read_for(one) if n in taken]
            volts = _volts_limit(one, sheet, stage)
            key = (one.id, limit.id if limit else None, volts, *(tuple(taken[name]) for name in sources))
            tail = before.get(key)
            if tail is None:
                sure: Sure = {}
                readings = {name: [measured(r, owned, sure) for r in taken[name]] for name in sources}
                tail = stored(job_id, one, stage, limit, judged(one, limit, readings, volts))[3:]
                if len(before) < MOST_KNOWN:
                    before[key] = tail
            made[(stage, one.id)] = (job_id, stage, one.id, *tail)
    return made


def judged(
    one: Characteristic, limit: SheetLimit | None, readings: dict[str, list[Measured]], volts: Limit | None = None
) -> Judgement:
    """The judgement of one characteristic by readings of it (or of what it is derived from), by name.

    `volts` is the limit of the voltage that governs it, where one does.
    """
    exact = limit.limit if limit else None
    if volts is not None:
        tested = readings.get(at_voltage.GOVERNED[one.name], [])
        return at_voltage.judge_at(one.name, readings.get(one.name, []), one.statistic, exact, tested, volts)
    if one.derive:
        return derived.judge(one.derive, {name: readings.get(name, []) for name in one.sources}, exact)
    return judge(readings.get(one.name, []), one.statistic, exact)


def read_for(one: Characteristic) -> tuple[str, ...]:
    """The characteristics whose readings decide the judgement of one: its parts or itself, and the voltage it was tested at."""
    own = one.sources or (one.name,)
    governed_by = at_voltage.GOVERNED.get(one.name)
    return own if governed_by is None else (*own, governed_by)


def _volts_limit(one: Characteristic, sheet: LimitSheet | None, stage: str) -> Limit | None:
    governed_by = at_voltage.GOVERNED.get(one.name)
    limit = sheet.at(governed_by, stage) if sheet and governed_by else None
    return limit.limit if limit else None


def _put(
    conn: Connection, job_id: int, one: Characteristic, stage: str, sheet: LimitSheet | None,
    readings: dict[str, list[Measured]],
) -> Judged:  # fmt: skip
    limit = sheet.at(one.name, stage) if sheet else None
    judgement = judged(one, limit, readings, _volts_limit(one, sheet, stage))
    row = stored(job_id, one, stage, limit, judgement)
    driver(conn).execute(_PUT, row)
    return Judged(one, stage, limit, judgement)


def stored(
    job_id: int, one: Characteristic, stage: str, limit: SheetLimit | None, judgement: Judgement
) -> tuple[Any, ...]:
    """A judgement as the row that keeps it; `size` is in the characteristic's own unit where it converts."""
    size = None
    if judgement.value is not None:
        size = float(judgement.value)
        if one.unit and judgement.unit != one.unit and judgement.unit != "%":
            size = float(quantities.convert(judgement.value, judgement.unit, one.unit))
    text = audit.canonical(kept(judgement))
    return (job_id, stage, one.id, limit.id if limit else None, judgement.verdict.value, size, text)


def _with_derived(
    known: Catalogue, names: Iterable[str], kind: str, sheet: LimitSheet | None, stage: str
) -> list[Characteristic]:
    """The characteristics of these names, those that a voltage among them governs, and the derived ones that are limited."""
    wanted: dict[str, Characteristic] = {}
    for name in names:
        wanted[name] = known.by_name[name]
        for governed in at_voltage.GOVERNS.get(name, ()):
            wanted[governed] = known.by_name[governed]
        for made in known.derived_from.get(name, ()):
            if kind in made.machines and sheet is not None and sheet.at(made.name, stage) is not None:
                wanted[made.name] = made
    return list(wanted.values())


def unlimited(
    record: Record, conn: Connection, job: Judgeable, stage: str, wanted: Sequence[Characteristic]
) -> tuple[Judged, ...]:
    """Derived characteristics that no limit asks for, from the readings as they stand; such are not kept."""
    known = catalogue(record, conn)
    readings = _measured(record, conn, job.id, stage, known, wanted) if wanted else {}
    return tuple(
        Judged(one, stage, None, judged(one, None, readings)) for one in wanted if _has_readings(one, readings)
    )


def _has_readings(one: Characteristic, readings: dict[str, list[Measured]]) -> bool:
    if one.derive:
        return all(readings.get(name) for name in one.sources)
    return bool(readings.get(one.name))


def _sheet(record: Record, conn: Connection, job: Judgeable) -> LimitSheet | None:
    return None if job.revision_id is None else limit_sheets.by_revision(record, conn, job.revision_id)


def _measured(
    record: Record, conn: Connection, job_id: int, stage: str, known: Catalogue, wanted: Sequence[Characteristic]
) -> dict[str, list[Measured]]:
    ids = {known.by_name[name].id for one in wanted for name in read_for(one)}
    owned = gauges.by_id(record, conn)
    found = rows(conn, _CURRENT.format(",".join("?" * len(ids))), (job_id, stage, *ids))
    sure: Sure = {}
    made: dict[str, list[Measured]] = {}
    for r in found:
        made.setdefault(known.by_id[r[0]].name, []).append(measured(r, owned, sure))
    return made


def measured(r: Sequence[Any], owned: dict[int, Gauge], sure: Sure) -> Measured:
    """A reading's row (position, typed, mark, value, unit, places, detail, gauge_id, day from its second column) for judging.

    `sure` keeps variance and expanded uncertainty by gauge, unit and day from row to row.
    """
    gauge_id = r[8]
    variance = expanded = None
    if r[4] is None:
        return Measured(r[1], Typed(r[2], Mark(r[3]), None, r[5], r[6], r[7]))
    if gauge_id is not None:
        known = sure.get((gauge_id, r[5], r[9]))
        if known is None:
            known = sure[(gauge_id, r[5], r[9])] = certainty.of_reading(owned[gauge_id].certainty_at(r[9]), r[5])
        variance, expanded = known
    return Measured(r[1], Typed(r[2], Mark.number, quantities.kept(r[4]), r[5], r[6], r[7]), variance, expanded)
