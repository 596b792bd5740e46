"""The command that shows every verdict of a job."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.command(epilog="Example: wearline judge 1042 --stage as-found")
@click.argument("tag")
@click.option("--stage", type=click.Choice(["as-found", "as-left"]), help="Default: both.")
@as_json
@on_record
def judge(record: Record, tag: str, stage: str | None, as_json: bool) -> None:
    """Every verdict of job TAG, with the limit, its source and why."""
    from store import sheets, verdicts

    stages = [stage] if stage else ["as-found", "as-left"]
    found = [sheets.sheet(record, tag, s) for s in stages]
    if as_json:
        write_json(verdicts.as_json(found))
        return
    for sheet in found:
        standing = ", ".join(f"{count} {verdict}" for verdict, count in sheet.standing.items() if count)
        click.echo(
            f"{sheet.job.tag} {sheet.job.model}, {sheet.stage.replace('-', ' ')}: {standing or 'nothing measured'}"
        )
        write_table(
            ("characteristic", "verdict", "because", "source"),
            [
                (row.characteristic.name, row.verdict.value, row.judged.because if row.judged else "", row.limit.source if row.limit else "")
                for row in sheet.rows
                if row.is_expected
            ],
        )  # fmt: skip
