"""The report that stands for a job, as text, as a file, or on paper."""

from __future__ import annotations

import tempfile
from pathlib import Path

from store import releases
from store.records import Record
from store.reports import printing, saving
from store.reports import text as as_text
from store.reports.contents import Report


def standing(record: Record, tag: str) -> Report:
    """The report that stands for a job: the newest that was issued, a draft until one is. Raises NotFound."""
    return releases.standing(record, tag)[0]


def text(record: Record, tag: str) -> str:
    """The report as text, pages parted by form feeds. Raises NotFound."""
    return as_text.write(standing(record, tag))


def save(record: Record, tag: str, path: Path) -> Path:
    """Write the report to a file, as its ending says. Raises NotFound, Refused."""
    return saving.save(standing(record, tag), path)


def print_out(record: Record, tag: str, queue: str = "", folder: Path | None = None) -> str:
    """Hand the PDF to a printer's queue; says in one line what became of it. Raises NotFound, NotPrinted, Refused."""
    report = standing(record, tag)
    where = folder or Path(tempfile.gettempdir())
    path = saving.save(report, where / saving.file_name(report, ".pdf"))
    return str(printing.hand_over(path, queue))
