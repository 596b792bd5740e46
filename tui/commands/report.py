"""The command that writes or prints a tolerance report."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from tui.commands.acting import on_record

if TYPE_CHECKING:
    from store.records import Record


@click.command(epilog="Example: wearline report 1042 -o report-1042.pdf")
@click.argument("tag")
@click.option("-o", "out", metavar="FILE", help="Ending .pdf, .txt or .json; default: text on the terminal.")
@click.option(
    "--print", "queue", is_flag=False, flag_value="", default=None, metavar="[QUEUE]", help="Hand the PDF to a printer."
)
@on_record
def report(record: Record, tag: str, out: str | None, queue: str | None) -> None:
    """The tolerance report of job TAG: a draft until the job is released."""
    from store.reports import issue

    if out is not None:
        click.echo(issue.save(record, tag, Path(out)))
    if queue is not None:
        click.echo(issue.print_out(record, tag, queue))
    if out is None and queue is None:
        click.echo(issue.text(record, tag), nl=False)
