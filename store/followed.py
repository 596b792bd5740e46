"""Released units followed: how long each stayed away, and whether it came back for a cause that counts.

A job is a comeback when its unit has an earlier release. Days run from that release to the comeback's taking in; units that
have not come back are known to have stayed away until the end of the period, or until they came back for a cause that is
not counted.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from store import shop, times
from store.errors import Refused, brief
from store.jobs import COMEBACK_OUTCOMES
from store.records import Record
from store.sqlite.engine import rows

_RELEASED = (
    "SELECT j.id, j.tag, j.unit_id, j.ended, m.number, j.assembled_by FROM job j JOIN unit u ON u.id = j.unit_id "
    "JOIN model m ON m.id = u.model_id WHERE j.outcome = 'released' AND j.ended IS NOT NULL "
    "AND substr(j.ended, 1, 10) >= ? AND substr(j.ended, 1, 10) <= ? ORDER BY j.id"
)
_CAME_BACK = (
    "SELECT j.earlier_id, j.id, j.tag, j.taken_in, j.comeback_outcome FROM job j WHERE j.earlier_id IS NOT NULL "
    "AND substr(j.taken_in, 1, 10) <= ? ORDER BY j.taken_in, j.id"
)


@dataclass
class Followed:
    """The releases of the period as columns: days followed, whether that ended in a counted comeback, and who is who.

    `comeback_of` leads from a released job to the one that came back; `wrong` counts dates that run backwards, left out.
    """

    ids: list[int]
    tags: list[str]
    units: list[int]
    models: list[str]
    assemblers: list[str]
    days: list[float]
    returned: list[bool]
    comeback_of: dict[int, int]
    wrong: int


def period(record: Record, since: str, until: str) -> tuple[str, str]:
    """The first and the last day; from the beginning and to today unless said. Raises Refused."""
    first = times.read(since)[:10] if since else "0001-01-01"
    last = times.read(until)[:10] if until else record.now()[:10]
    if first > last:
        raise Refused(f"the period ends {last} before it begins {first}")
    return first, last


def counted(record: Record, asked: tuple[str, ...] | None) -> tuple[str, ...]:
    """The outcomes that count: those asked for, else the shop's setting. Raises Refused for one that there is not."""
    text = shop.value(record, "comebacks_count")
    chosen = asked if asked is not None else tuple(part.strip() for part in text.split(";") if part.strip())
    for outcome in chosen:
        if outcome not in COMEBACK_OUTCOMES:
            raise Refused(f"{brief(outcome)!r} is no outcome of a comeback; one of {', '.join(COMEBACK_OUTCOMES)}")
    return chosen


def follow(conn: Any, since: str, until: str, chosen: tuple[str, ...]) -> Followed:
    """Every release with how it went on; an outcome that is not yet known counts."""
    first: dict[int, tuple[int, str, str]] = {}
    for earlier, job, _, taken_in, outcome in rows(conn, _CAME_BACK, (until,)):
        if earlier not in first:
            first[earlier] = (job, taken_in, outcome)
    seen = Followed([], [], [], [], [], [], [], {}, 0)
    for job, tag, unit, ended, model, assembler in rows(conn, _RELEASED, (since, until)):
        came = first.get(job)
        days = times.days_between(ended[:10], came[1][:10] if came else until)
        if days < 0:
            seen.wrong += 1
            continue
        is_counted = came is not None and (not came[2] or came[2] in chosen)
        seen.ids.append(job)
        seen.tags.append(tag)
        seen.units.append(unit)
        seen.models.append(model)
        seen.assemblers.append(assembler)
        seen.days.append(days)
        seen.returned.append(is_counted)
        if came is not None and is_counted:
            seen.comeback_of[job] = came[0]
    return seen
