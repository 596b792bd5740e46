"""A report as a file: PDF, text or JSON by the ending of its name. A file is there whole or not at all."""

from __future__ import annotations

import os
import re
import tempfile
from collections.abc import Callable, Iterable, Iterator
from contextlib import suppress
from pathlib import Path

from store.errors import Refused, brief
from store.reports import pdf, text
from store.reports.canonical import to_json
from store.reports.contents import Report

_WRITERS: dict[str, Callable[[Report], bytes]] = {
    ".pdf": pdf.draw,
    ".txt": lambda report: text.write(report).encode(),
    ".json": lambda report: to_json(report).encode(),
}
ENDINGS = tuple(_WRITERS)
_UNSAFE = re.compile(r"[^A-Za-z0-9._-]+")


def save(report: Report, path: Path) -> Path:
    """Write the report to `path`, as its ending says. Raises Refused (another ending, the file cannot be written)."""
    writer = _WRITERS.get(path.suffix.lower())
    if writer is None:
        raise Refused(f"{brief(path.name)!r}: a report is saved as {', '.join(ENDINGS)}")
    put(path, writer(report))
    return path


def save_many(reports: Iterable[Report], folder: Path) -> Iterator[Path]:
    """Write each report to `folder` as PDF under its own name, yielding each file as it is there. Raises Refused."""
    known: list[Report] = []

    def noted() -> Iterator[Report]:
        for report in reports:
            known.append(report)
            yield report

    for n, made in enumerate(pdf.draw_many(noted())):
        path = folder / file_name(known[n], ".pdf")
        put(path, made)
        yield path


def file_name(report: Report, ending: str) -> str:
    """The name under which a report is kept: its number, or draft and tag, with what a file system may not like as `-`."""
    name = _UNSAFE.sub("-", report.title).strip("-.")[:80]
    return f"{name or 'report'}{ending}"


def put(path: Path, data: bytes) -> None:
    """Write a file beside its place, then move it there. Raises Refused naming the file and what the system says."""
    kept: str | None = None
    try:
        handle, kept = tempfile.mkstemp(prefix=f".{path.name[:40]}-", dir=path.parent)
        with os.fdopen(handle, "wb") as file:
            file.write(data)
            file.flush()
            os.fsync(file.fileno())
        Path(kept).chmod(0o644)
        Path(kept).replace(path)
    except OSError as fault:
        if kept is not None:
            with suppress(OSError):
                Path(kept).unlink()
        raise Refused(f"{path} cannot be written: {fault.strerror or fault}") from None
