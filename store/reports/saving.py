"""A report as a file: PDF, text or JSON by the ending of its name. A file is there whole or not at all."""

from __future__ import annotations

import re
from collections.abc import Callable, Iterable, Iterator
from pathlib import Path

from store.errors import Refused, brief
from store.reports import pdf, text
from store.reports.canonical import to_json
from store.reports.contents import Frozen, Report
from store.whole_files import write_whole

_WRITERS: dict[str, Callable[[Report, str | None], bytes]] = {
    ".pdf": pdf.draw,
    ".txt": lambda report, frozen: text.write(report).encode(),
    ".json": lambda report, frozen: (to_json(report) if frozen is None else frozen).encode(),
}
ENDINGS = tuple(_WRITERS)
_UNSAFE = re.compile(r"[^A-Za-z0-9._-]+")


def save(report: Report, path: Path, frozen: str | None = None) -> Path:
    """Write the report to `path`, as its ending says; `frozen` is the text that it was issued as, where it was.

    Raises Refused (another ending, the file cannot be written).
    """
    writer = _WRITERS.get(path.suffix.lower())
    if writer is None:
        raise Refused(f"{brief(path.name)!r}: a report is saved as {', '.join(ENDINGS)}")
    write_whole(path, writer(report, frozen))
    return path


def save_many(reports: Iterable[Frozen], folder: Path) -> Iterator[Path]:
    """Write each report to `folder` as PDF under its own name, yielding each file as it is there. Raises Refused."""
    known: list[Report] = []

    def noted() -> Iterator[Frozen]:
        for report, frozen in reports:
            known.append(report)
            yield report, frozen

    for n, made in enumerate(pdf.draw_many(noted())):
        path = folder / file_name(known[n], ".pdf")
        write_whole(path, made)
        yield path


def file_name(report: Report, ending: str) -> str:
    """The name under which a report is kept: its number, or draft and tag, with what a file system may not like as `-`."""
    name = _UNSAFE.sub("-", report.title).strip("-.")[:80]
    return f"{name or 'report'}{ending}"
