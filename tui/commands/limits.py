"""Commands for limit sheets."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.group(epilog="Example: wearline limits show KM-2210")
def limits() -> None:
    """Show a model's limit sheet; enter limits by `wearline load`."""


@limits.command(epilog="Example: wearline limits show KM-2210 --revision 1")
@click.argument("model")
@click.option("--revision", type=int, help="Default: the newest.")
@as_json
@on_record
def show(record: Record, model: str, revision: int | None, as_json: bool) -> None:
    """A model's wear limits, each with its source."""
    from store import limit_sheets, times

    sheet = limit_sheets.sheet(record, model, revision)
    known = limit_sheets.revisions(record, model)
    if sheet is None:
        if as_json:
            write_json({"model": model, "revision": None, "limits": []})
        else:
            click.echo(f"{model} has no limits yet; enter them on the Limits screen or load a file of limits")
        return
    fields = ("characteristic", "stage", "unit", "new", "low", "high", "at_limit", "count", "source", "note")
    if as_json:
        write_json(
            {
                "model": sheet.model, "revision": sheet.revision.number, "decision": sheet.revision.decision.value,
                "entered": sheet.revision.at, "by": sheet.revision.by, "why": sheet.revision.why,
                "revisions": [r.number for r in known],
                "limits": [{name: getattr(x, name) for name in fields} for x in sheet.limits],
            }
        )  # fmt: skip
        return
    rev = sheet.revision
    click.echo(
        f"{sheet.model}, revision {rev.number} of {len(known)}, {rev.decision.value}, {times.local(rev.at)} by {rev.by}"
    )
    write_table(
        ("characteristic", "stage", "new", "low", "high", "unit", "equal", "count", "source"),
        [
            (x.characteristic, x.stage, x.new, x.low, x.high, x.unit, x.at_limit, x.count, x.source)
            for x in sheet.limits
        ],
    )


@limits.command(epilog="Example: wearline limits copy KM-2210 KM-2212")
@click.argument("from_model")
@click.argument("model")
@on_record
def copy(record: Record, from_model: str, model: str) -> None:
    """Copy the newest sheet of FROM_MODEL to MODEL as its next revision; each source says where it came from."""
    from store import limit_sheets

    made = limit_sheets.copy(record, from_model, model)
    click.echo(f"{made.model}: revision {made.revision.number} with {len(made.limits)} limits")
