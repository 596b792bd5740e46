"""The report that stands for a job, as text, as a file, or on paper."""

from __future__ import annotations

import tempfile
from collections.abc import Callable
from pathlib import Path

from store import releases, times
from store.records import Record
from store.reports import printing, saving
from store.reports import text as as_text
from store.reports.printing import HandedOver

Progress = Callable[[str, int], None]


def text(record: Record, tag: str) -> str:
    """The report that stands for a job as text, pages parted by form feeds: a draft until one is issued. Raises NotFound."""
    return as_text.write(releases.standing(record, tag)[0])


def save(record: Record, tag: str, path: Path) -> Path:
    """Write the report that stands to a file, as its ending says. Raises NotFound, Refused."""
    report, frozen = releases.standing(record, tag)
    return saving.save(report, path, frozen)


def print_out(record: Record, tag: str, queue: str = "", folder: Path | None = None) -> str:
    """Hand the PDF to a printer's queue; says in one line what became of it. Raises NotFound, NotPrinted, Refused."""
    report, frozen = releases.standing(record, tag)
    path = saving.save(report, _where(folder) / saving.file_name(report, ".pdf"), frozen)
    return str(printing.hand_over(path, queue))


def print_day(
    record: Record, day: str, queue: str = "", folder: Path | None = None, progress: Progress | None = None
) -> tuple[HandedOver, ...]:
    """Hand every report issued on a day (UTC, 2026-12-01) to a printer, oldest first; `progress` is told after each.

    Raises NotPrinted at the first that no printer takes, Refused for a date that there is not.
    """
    issued = releases.on_day(record, times.read(day)[:10])
    pairs = (releases.frozen(record, one.number) for one in issued)
    done = []
    for one in printing.print_many(pairs, _where(folder), queue):
        done.append(one)
        if progress is not None:
            progress(f"printing, of {len(issued)} reports", len(done))
    return tuple(done)


def _where(folder: Path | None) -> Path:
    return folder or Path(tempfile.gettempdir())
