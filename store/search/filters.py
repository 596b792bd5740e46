"""Which texts may be shown at all: by model, date, stage, verdict, comeback, by whom, and what kind of text."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import UTC, datetime, timedelta

import numpy as np
from numpy.typing import NDArray
from sqlalchemy import Connection

from store import models
from store.errors import Refused, brief
from store.records import Record
from store.rules.limits import Verdict
from store.search.shelf import Shelf
from store.search.sources import SOURCES
from store.sqlite.engine import rows

NOBODY = 65_535
STAGES = ("as-found", "as-left")
STANDS = ("open", "released", "scrapped", "returned")
_YES, _NO = {"yes", "y", "true", "1"}, {"no", "n", "false", "0"}


def wanted(record: Record, conn: Connection, shelf: Shelf, filters: Mapping[str, str]) -> NDArray[np.bool_]:
    """For each text whether it stands and passes every filter. Raises Refused (no such value), NotFound (model)."""
    lines = shelf.lines
    made = shelf.standing()
    given = {name: value for name, value in filters.items() if value}
    if "since" in given:
        made &= lines["at"] >= _seconds(given["since"], "since")
    if "until" in given:
        made &= lines["at"] < _seconds(given["until"], "until", end=True)
    if "by" in given:
        exact, loud = shelf.person(given["by"]), shelf.person(given["by"].upper())
        made &= lines["by"] == (exact if exact is not None else loud if loud is not None else NOBODY)
    if "in" in given:
        made &= np.isin(lines["source"], _sources(given["in"]))
    jobs = _jobs(record, conn, given)
    if jobs is not None:
        made &= jobs[np.minimum(lines["job"], len(jobs) - 1)]
    return made


def _jobs(record: Record, conn: Connection, given: Mapping[str, str]) -> NDArray[np.bool_] | None:
    """By job number whether the job passes; the last place stands for every job beyond. None: no filter asks."""
    where, values = [], []
    if "model" in given:
        where.append("j.unit_id IN (SELECT id FROM unit WHERE model_id = ?)")
        values.append(str(models.find(record, given["model"]).id))
    if "comeback" in given:
        where.append(f"j.earlier_id IS {'NOT ' if _is_yes(given['comeback']) else ''}NULL")
    stage = _one_of(given.get("stage", ""), (*STAGES, *STANDS), "stage")
    if stage in STANDS:
        where.append("j.outcome = ?")
        values.append(stage)
    judged = []
    if stage in STAGES:
        judged.append("g.stage = ?")
        values.append(stage)
    if "verdict" in given:
        judged.append("g.verdict = ?")
        values.append(_one_of(given["verdict"].replace("-", " "), tuple(v.value for v in Verdict), "verdict"))
    if judged:
        where.append(f"EXISTS (SELECT 1 FROM judgement g WHERE g.job_id = j.id AND {' AND '.join(judged)})")  # noqa: S608
    if not where:
        return None
    found = [r[0] for r in rows(conn, f"SELECT j.id FROM job j WHERE {' AND '.join(where)}", values)]  # noqa: S608
    made = np.zeros(max(found, default=0) + 2, np.bool_)
    made[found] = True
    return made


def _one_of(value: str, known: tuple[str, ...], name: str) -> str:
    if value and value not in known:
        raise Refused(f"{brief(value)!r} is no {name}; one of {', '.join(known)}")
    return value


def _sources(value: str) -> list[int]:
    name = value.lower().removesuffix("s")
    numbers = [n for n, source in enumerate(SOURCES) if source.where == name]
    if not numbers:
        known = dict.fromkeys(source.where for source in SOURCES)
        raise Refused(f"{brief(value)!r} is no kind of text; one of {', '.join(known)}")
    return numbers


def _is_yes(value: str) -> bool:
    if value.lower() in _YES | _NO:
        return value.lower() in _YES
    raise Refused(f"comeback is yes or no, not {brief(value)!r}")


def _seconds(value: str, name: str, *, end: bool = False) -> int:
    """The moment at which a year, a month, a day or a time of day begins; with `end` the first moment after it."""
    try:
        if len(value) == 4:
            at = datetime(int(value) + end, 1, 1, tzinfo=UTC)
        elif len(value) == 7:
            first = datetime.fromisoformat(f"{value}-01")
            at = datetime(first.year + (first.month + end > 12), (first.month - 1 + end) % 12 + 1, 1, tzinfo=UTC)
        else:
            said = datetime.fromisoformat(value)
            at = (said if said.tzinfo else said.replace(tzinfo=UTC)) + timedelta(days=end and len(value) == 10)
        return min(max(int(at.timestamp()), 0), 2**32 - 1)
    except (ValueError, OverflowError):
        raise Refused(f"{name} is a date such as 2026-03-01, not {brief(value)!r}") from None
