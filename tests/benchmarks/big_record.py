"""A big record for measuring: so many jobs, released, with readings at both stages, loaded in bulk."""

from __future__ import annotations

import random
from collections.abc import Iterator
from pathlib import Path
from typing import Any

from store import judgements, records
from store.catalogue import catalogue
from store.tables.jobs import JobRow
from store.tables.models import UnitRow
from store.tables.readings import ReadingRow
from tests import shop

READ = (
    ("brush-length", 4, 9.6, 14.0),
    ("commutator-diameter", 4, 42.6, 45.0),
    ("commutator-runout", 1, 0.005, 0.05),
    ("end-play", 1, 0.1, 0.3),
)
MORE = (*READ, ("brush-spring-force", 4, 12.0, 18.0), ("shaft-runout", 1, 0.005, 0.08))
"""Fifteen a job and stage."""


def make(path: Path, jobs: int, folder: Path, read: tuple[tuple[str, int, float, float], ...] = READ) -> None:
    """Ten readings a job and stage unless `read` says more, judged; one audit entry."""
    record = records.open(path, create=True)
    shop.fill(record, folder)
    draw = random.Random(jobs)
    with record.read() as conn:
        known = catalogue(record, conn)
    ids = {name: known.by_name[name].id for name, *_ in read}

    def units() -> Iterator[tuple[Any, ...]]:
        for n in range(1, jobs + 1):
            yield None, 1, f"S{n}", f"S{n}"

    def rows() -> Iterator[tuple[Any, ...]]:
        key = 0
        for job in range(1, jobs + 1):
            for stage in ("as-found", "as-left"):
                for name, count, low, high in read:
                    for place in range(count):
                        key += 1
                        text = f"{draw.uniform(low, high):.3f}"
                        position = (
                            ("A0", "A90", "B0", "B90")[place] if name == "commutator-diameter" else str(place + 1)
                        )
                        value = f"{int(text.replace('.', ''))}/1000"
                        unit = "N" if name == "brush-spring-force" else "mm"
                        said = (text, "number", value, unit, 3, "", 1, "2026-01-02T08:00:00Z", "shop", "", None, "")
                        yield (key, job, stage, ids[name], position, *said)

    with record.change("made for measuring") as change:
        change.load(UnitRow, units())
        blank = {
            "customer": "walk-in",
            "taken_in": "2026-01-01",
            "by": "shop",
            "outcome": "released",
            "ended": "2026-01-05",
            "from_history": True,
            "revision_id": 1,
        }
        change.load(
            JobRow,
            (change.row(JobRow, {**blank, "tag": f"T{n}", "key": f"T{n}", "unit_id": n}) for n in range(1, jobs + 1)),
        )
        change.load(ReadingRow, rows())
        judgements.rebuild_all(record, change.conn)
    record.close()
