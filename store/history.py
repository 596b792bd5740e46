"""The history of a unit: its jobs, and how each size went from visit to visit."""

from __future__ import annotations

from dataclasses import dataclass

from store import jobs, sheets
from store.jobs import Job
from store.records import Record
from store.rules import quantities


@dataclass(frozen=True, slots=True)
class Size:
    """The judged value of one characteristic at one stage of one job, as shown, with its verdict."""

    tag: str
    stage: str
    at: str
    shown: str
    verdict: str


@dataclass(frozen=True, slots=True)
class History:
    """All jobs of a unit, newest first, and its sizes over time by characteristic, oldest first."""

    jobs: tuple[Job, ...]
    sizes: dict[str, tuple[Size, ...]]


def of_unit(record: Record, tag: str) -> History:
    """The history of the unit of a job. Raises NotFound."""
    job = jobs.find(record, tag)
    visits = jobs.of_unit(record, job.model, job.serial)
    sizes: dict[str, list[Size]] = {}
    for visit in reversed(visits):
        for stage in ("as-found", "as-left"):
            for row in sheets.sheet(record, visit.tag, stage).rows:
                judgement = row.judged.judgement if row.judged else None
                if judgement is None or judgement.value is None:
                    continue
                text = f"{quantities.shown(judgement.value, judgement.places)} {judgement.unit}"
                sizes.setdefault(row.characteristic.label, []).append(
                    Size(visit.tag, stage, visit.taken_in, text, judgement.verdict.value)
                )
    return History(visits, {label: tuple(found) for label, found in sizes.items()})
