"""The command that writes or prints a tolerance report."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from tui.commands.acting import on_record
from tui.commands.output import end_progress, progress

if TYPE_CHECKING:
    from store.records import Record


@click.command(
    epilog="Example: wearline report 1042 -o report-1042.pdf; of a whole day: wearline report --day 2026-12-01 --print"
)
@click.argument("tag", default="")
@click.option("-o", "out", metavar="FILE", help="Ending .pdf, .txt or .json; default: text on the terminal.")
@click.option(
    "--print", "queue", is_flag=False, flag_value="", default=None, metavar="[QUEUE]", help="Hand the PDF to a printer."
)
@click.option("--day", metavar="DATE", help="With --print: every report issued on that day (UTC).")
@on_record
def report(record: Record, tag: str, out: str | None, queue: str | None, day: str | None) -> None:
    """The tolerance report of job TAG: a draft until the job is released. With --day those issued on a day are printed."""
    from store.reports import issue

    if day is not None:
        if tag or out is not None or queue is None:
            raise click.UsageError("--day prints a whole day: wearline report --day DATE --print [QUEUE]")
        _print_day(record, day, queue)
        return
    if not tag:
        raise click.UsageError("say which job: wearline report TAG")
    if out is not None:
        click.echo(issue.save(record, tag, Path(out)))
    if queue is not None:
        click.echo(issue.print_out(record, tag, queue))
    if out is None and queue is None:
        click.echo(issue.text(record, tag), nl=False)


def _print_day(record: Record, day: str, queue: str) -> None:
    from store.reports import issue

    try:
        done = issue.print_day(record, day, queue, progress=progress())
    finally:
        end_progress()
    for one in done:
        click.echo(one)
    click.echo(f"{len(done)} reports handed to the printer" if done else f"no report was issued on {day}")
