"""What commands write: aligned tables for people, JSON for programs, progress only on a terminal."""

from __future__ import annotations

import json
import sys
from collections.abc import Callable, Iterable, Sequence
from typing import Any

import click


def write_json(value: Any) -> None:
    """Write a value as JSON, in UTF-8, two spaces deep."""
    click.echo(json.dumps(value, ensure_ascii=False, indent=2))


def write_table(columns: Sequence[str], rows: Iterable[Sequence[Any]], empty: str = "") -> None:
    """Write rows under their columns, two spaces apart, numbers as they come; `empty` where there are none."""
    cells = [["" if cell is None else one_line(str(cell)) for cell in row] for row in rows]
    if not cells:
        if empty:
            click.echo(empty)
        return
    widths = [max(len(row[n]) for row in [list(columns), *cells]) for n in range(len(columns))]
    for row in [list(columns), *cells]:
        click.echo("  ".join(cell.ljust(width) for cell, width in zip(row, widths, strict=True)).rstrip())


def one_line(text: str) -> str:
    """Text on one line without control characters, so that no stored text can steer a terminal."""
    return "".join(c if c.isprintable() else " " for c in text)


def progress() -> Callable[[str, int], None] | None:
    """A teller of progress on stderr past the first second; None where stderr is no terminal."""
    if not sys.stderr.isatty():
        return None
    import time

    began = time.monotonic()
    last = [0.0]

    def tell(what: str, done: int) -> None:
        now = time.monotonic()
        if now - began > 1 and now - last[0] > 0.2:
            last[0] = now
            sys.stderr.write(f"\r{what}: {done:,} lines \x1b[K")
            sys.stderr.flush()

    return tell


def end_progress() -> None:
    """Clear the line of progress."""
    if sys.stderr.isatty():
        sys.stderr.write("\r\x1b[K")
