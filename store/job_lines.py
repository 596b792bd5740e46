"""Jobs as a list shows them: where each stands and what is next. Only the driver and rules are needed, so that the first
screen has its list before the rest of the store is imported.
"""

from __future__ import annotations

import sqlite3
from collections import Counter
from collections.abc import Iterable
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from store.rules.numbers import comparing_key
from store.sqlite.connections import connect


@dataclass(frozen=True, slots=True)
class JobLine:
    """A job as a list shows it: `stands` is taken in, stripped, on rework, to inspect, released, scrapped or returned."""

    tag: str
    model: str
    serial: str
    customer: str
    complaint: str
    taken_in: str
    ended: str | None
    stands: str
    out: int
    in_doubt: int
    earlier: str | None
    next: str


# Counts of judgements decide where an open job stands; a release ends it.
_LINES = """
SELECT j.tag, m.number, u.serial, j.customer, j.complaint, j.taken_in, j.ended, j.outcome, e.tag,
 (SELECT count(*) FROM judgement g WHERE g.job_id = j.id AND g.stage = 'as-found'),
 (SELECT count(*) FROM judgement g WHERE g.job_id = j.id AND g.stage = 'as-left' AND g.verdict <> 'not measured'),
 (SELECT count(*) FROM judgement g WHERE g.job_id = j.id AND g.verdict = 'out'
   AND g.stage = CASE WHEN EXISTS(SELECT 1 FROM judgement h WHERE h.job_id = j.id AND h.stage = 'as-left')
                 THEN 'as-left' ELSE 'as-found' END),
 (SELECT count(*) FROM judgement g WHERE g.job_id = j.id AND g.verdict = 'in doubt'
   AND g.stage = CASE WHEN EXISTS(SELECT 1 FROM judgement h WHERE h.job_id = j.id AND h.stage = 'as-left')
                 THEN 'as-left' ELSE 'as-found' END),
 (SELECT count(*) FROM wear_limit l WHERE l.revision_id = j.revision_id AND l.stage <> 'as-found'
   AND NOT EXISTS(SELECT 1 FROM judgement g WHERE g.job_id = j.id AND g.stage = 'as-left'
                  AND g.characteristic_id = l.characteristic_id AND g.verdict <> 'not measured'))
FROM job j JOIN unit u ON u.id = j.unit_id JOIN model m ON m.id = u.model_id LEFT JOIN job e ON e.id = j.earlier_id
"""

_NEXT = {
    "taken in": "strip and measure",
    "stripped": "plan the rework",
    "on rework": "measure as left",
    "to inspect": "inspect, release",
}


def search(
    raw: sqlite3.Connection, *, outcome: str | None = "open", model_id: int | None = None, words: str = "", most: int = 500,
    before_id: int | None = None,
) -> tuple[JobLine, ...]:  # fmt: skip
    """Jobs, newest first; each of `words` (the first eight) must stand in tag, serial, model or customer."""
    where: list[str] = []
    values: list[Any] = []
    for condition, value in (("j.outcome = ?", outcome), ("m.id = ?", model_id), ("j.id < ?", before_id)):
        if value is not None:
            where.append(condition)
            values.append(value)
    for word in words.split()[:8]:
        like = "%" + word.replace("\\", "\\\\").replace("%", "\\%").replace("_", "\\_") + "%"
        key = comparing_key(word)
        where.append(
            "(j.tag LIKE ? ESCAPE '\\' OR u.serial LIKE ? ESCAPE '\\' OR m.number LIKE ? ESCAPE '\\' "
            "OR j.customer LIKE ? ESCAPE '\\' OR u.key = ? OR m.key = ? OR j.key = ?)"
        )
        values += [like, like, like, like, key, key, key]
    sql = _LINES + (f"WHERE {' AND '.join(where)} " if where else "") + "ORDER BY j.id DESC LIMIT ?"
    return tuple(map(_line, raw.execute(sql, (*values, most)).fetchall()))


def counts(lines: Iterable[JobLine]) -> dict[str, int]:
    """How many of these jobs stand where, in the order of the work."""
    found = Counter(line.stands for line in lines)
    return {stands: found.get(stands, 0) for stands in _NEXT}


def first_look(path: Path) -> tuple[JobLine, ...] | None:
    """The open jobs of a record, before it is opened in full; None where that cannot be told yet. Never raises."""
    if not path.is_file():
        return None
    try:
        raw = connect(path, read_only=True)
        try:
            return search(raw)
        finally:
            raw.close()
    except sqlite3.Error:
        return None


def _line(r: Any) -> JobLine:
    tag, model, serial, customer, complaint, taken_in, ended, outcome, earlier, found, left, out, doubt, missing = r
    stands = outcome
    if outcome == "open":
        stands = "taken in" if not found and not left else "stripped"
        if left:
            stands = "on rework" if missing else "to inspect"
    return JobLine(
        tag, model, serial, customer, complaint, taken_in, ended, stands, out, doubt, earlier, _NEXT.get(stands, "")
    )
