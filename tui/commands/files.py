"""Commands for files: load and save."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import end_progress, progress, write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.command(epilog="Example: wearline load models.csv limits.csv --check")
@click.argument("files", nargs=-1, required=True, metavar="FILE...")
@click.option("--check", is_flag=True, help="Only report what would be loaded.")
@as_json
@on_record
def load(record: Record, files: tuple[str, ...], check: bool, as_json: bool) -> None:
    """Load CSV files, each known by its header: all of them or nothing, in the right order."""
    from store import files as store_files

    try:
        done = store_files.load(record, [Path(name) for name in files], check=check, progress=progress())
    finally:
        end_progress()
    if as_json:
        write_json([{"file": d.file, "kind": d.kind, "lines": d.lines} for d in done])
        return
    write_table(("file", "kind", "would load" if check else "loaded"), [(d.file, d.kind, d.lines) for d in done])


@click.command(epilog="Example: wearline save limits limits.csv")
@click.argument("kind")
@click.argument("file")
@on_record
def save(record: Record, kind: str, file: str) -> None:
    """Save one KIND of thing as a CSV FILE, which loads back as it was."""
    from store import files as store_files

    lines = store_files.save(record, kind, Path(file))
    click.echo(f"{file}: {lines} lines of {kind}")
