"""The owner's report as a file, or on paper."""

from __future__ import annotations

import tempfile
from pathlib import Path

from store.errors import Refused, brief
from store.reports import printing
from store.reports.figures import day
from store.reports.owner import drawing
from store.reports.owner.contents import Owner, to_json
from store.reports.typesetting import typeset
from store.whole_files import write_whole

ENDINGS = (".pdf", ".json")


def draw(owner: Owner) -> bytes:
    """The report as PDF/A-3b with its figures attached; the same contents give the same bytes. Raises Refused."""
    return typeset("owner.typ", lambda seen: drawing.of(owner, seen), to_json(owner), owner.at)


def save(owner: Owner, path: Path) -> Path:
    """Write it to a file, as its ending says. Raises Refused."""
    write_whole(named(path), draw(owner) if path.suffix.lower() == ".pdf" else to_json(owner).encode())
    return path


def named(path: Path) -> Path:
    """A file's name by which the report can be saved. Raises Refused for an ending that it has no form for."""
    if path.suffix.lower() not in ENDINGS:
        raise Refused(f"{brief(path.name)!r}: the owner's report is saved as {' or '.join(ENDINGS)}")
    return path


def print_out(owner: Owner, queue: str = "", folder: Path | None = None) -> str:
    """Hand the PDF to a printer's queue; says in one line what became of it. Raises NotPrinted, Refused."""
    where = folder or Path(tempfile.gettempdir())
    path = save(owner, where / f"comebacks-{day(owner.at)}.pdf")
    return str(printing.hand_over(path, queue))
