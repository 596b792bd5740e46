"""The command that shows and accepts a rework plan."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import one_line, write_json

if TYPE_CHECKING:
    from store.plans import ReworkLine
    from store.records import Record


@click.command(epilog="Example: wearline plan 1042 --accept 1 --accept 2")
@click.argument("tag")
@click.option(
    "--accept",
    "accepted",
    multiple=True,
    type=int,
    metavar="LINE",
    help="Take a line into the rework list; may be given again.",
)
@click.option("--accept-all", is_flag=True, help="Take every line that asks for work.")
@click.option("--done", "done", type=int, metavar="ID", help="A line of the rework list is done.")
@click.option(
    "--decline", "declined", type=int, metavar="ID", help="A line of the rework list is not done; say --note why."
)
@click.option("--note", default="")
@as_json
@on_record
def plan(
    record: Record, tag: str, accepted: tuple[int, ...], accept_all: bool, done: int | None, declined: int | None, note: str,
    as_json: bool,
) -> None:  # fmt: skip
    """The rework plan of job TAG: what to do, why, the formula with its numbers, and predicted sizes (no measurements)."""
    from store import plans

    if accept_all or accepted:
        plans.accept(record, tag, None if accept_all else list(accepted))
    if done is not None:
        plans.finish(record, tag, done, note=note)
    if declined is not None:
        plans.finish(record, tag, declined, outcome="declined", note=note)
    made, listed = plans.compute(record, tag), plans.listing(record, tag)
    if as_json:
        write_json({**plans.as_json(made), "rework": [_rework(record, tag, entry) for entry in listed]})
        return
    for number, line in enumerate(made.lines, start=1):
        click.echo(f"{number}  {line.component}: {line.action}. {one_line(line.because)}")
        if line.formula:
            click.echo(f"   {line.formula}")
        for predicted in line.predicted:
            click.echo(f"   predicted, not measured: {predicted.name} {plans.shown(predicted.value)} {predicted.unit}")
    if not made.lines:
        click.echo("nothing to be done by the as-found readings")
    for remark in made.remarks:
        click.echo(one_line(remark))
    if listed:
        click.echo("rework list")
    for entry in listed:
        click.echo(
            f"  {entry.id}  {entry.line.component}: {entry.line.action}, {entry.outcome}{': ' + one_line(entry.note) if entry.note else ''}"
        )
        for found in plans.held(record, tag, entry.line):
            click.echo(f"     {found.says}")


def _rework(record: Record, tag: str, entry: ReworkLine) -> dict[str, Any]:
    """One accepted line with what came of it, its predictions held against what was left."""
    from store import plans

    return {
        "id": entry.id, "component": entry.line.component, "action": entry.line.action, "outcome": entry.outcome,
        "note": entry.note, "by": entry.ended_by or entry.by, "at": entry.ended or entry.at,
        "held": [
            {"name": h.predicted.name, "beyond": h.beyond, "says": h.says}
            for h in plans.held(record, tag, entry.line)
        ],
    }  # fmt: skip
