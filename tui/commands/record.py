"""Commands for the record itself: verify, backup, restore, export."""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import end_progress, progress, write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


def _quiet(what: str, done: int) -> None:
    """No progress where stderr is no terminal."""


@click.command(epilog="Example: wearline verify --head 3fa9c1...")
@click.option("--head", metavar="HASH", help="A head as printed on a report: did this record have it?")
@as_json
@on_record
def verify(record: Record, head: str | None, as_json: bool) -> None:
    """Verify the whole record: the file, the audit chain, every row, judgements, frozen reports.

    The index of the search, a cache beside the record, is compared with it too, and made anew where it differs.
    """
    from store import search
    from store import verify as store_verify
    from store.errors import Refused

    known = store_verify.knows(record, head) if head else None
    if head and known is None:
        raise Refused("this record never had that head")
    try:
        found = store_verify.verify(record, progress() or _quiet)
        for difference in () if found.wrong else search.mend(record):
            click.echo(f"{difference}; the index was made anew", err=True)
    finally:
        end_progress()
    if as_json:
        write_json(
            {
                "head": found.head, "entries": found.entries, "rows": found.rows, "judgements": found.judgements,
                "reports": found.reports, "wrong": None if found.wrong is None else str(found.wrong),
                "asked": None if known is None else {"head": head, "entry": known[0], "at": known[1]},
            }
        )  # fmt: skip
    if found.wrong is not None:
        raise Refused(f"not verified: {found.wrong}")
    if not as_json:
        if known is not None:
            click.echo(f"the record had this head at entry {known[0]}, {known[1]}")
        click.echo(
            f"verified: {found.entries:,} entries, {found.rows:,} rows, {found.judgements:,} judgements, {found.reports:,} reports\nhead {found.head}"
        )


@click.command(epilog="Example: wearline backup /media/stick/shop-2026-12-01.wearline")
@click.argument("file")
@on_record
def backup(record: Record, file: str) -> None:
    """Copy the record to a new FILE, while others write."""
    from store import backups

    try:
        click.echo(backups.backup(record, Path(file), progress() or _quiet))
    finally:
        end_progress()


@click.command(epilog="Example: wearline restore shop-2026-12-01.wearline --to shop-restored.wearline")
@click.argument("file")
@click.option("--to", "new", required=True, metavar="NEW", help="A new file; nothing is overwritten.")
@click.option("--debug", is_flag=True, hidden=True)
def restore(file: str, new: str, debug: bool) -> None:
    """Restore a backup FILE into a new one, which is verified before it is named."""
    from store import backups

    try:
        click.echo(backups.restore(Path(file), Path(new), progress() or _quiet))
    finally:
        end_progress()


@click.command(epilog="Example: wearline export everything/")
@click.argument("folder", metavar="DIR")
@on_record
def export(record: Record, folder: str) -> None:
    """Write everything into DIR: a CSV file a kind, and the whole as JSON."""
    from store import exports

    written = exports.export(record, Path(folder))
    write_table(("file", "lines"), written.items())
    sys.stdout.flush()
