"""Commands for people."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.group(epilog="Example: wearline people add JD 'Jo Dunmore' --may bench --may inspect")
def people() -> None:
    """Who works here, and what they may do."""


@people.command("list", epilog="Example: wearline people list")
@as_json
@on_record
def list_(record: Record, as_json: bool) -> None:
    """Everyone who works here."""
    from store import people as store_people

    known = store_people.listing(record)
    if as_json:
        write_json([{"initials": p.initials, "name": p.name, "may": list(p.may)} for p in known])
        return
    write_table(
        ("initials", "name", "may"), [(p.initials, p.name, ", ".join(p.may)) for p in known],
        empty="nobody is entered yet; the record acts as `shop`",
    )  # fmt: skip


@people.command(epilog="Example: wearline people add JD 'Jo Dunmore' --may bench --may inspect")
@click.argument("initials")
@click.argument("name")
@click.option(
    "--may", multiple=True, default=("bench",), show_default=True, help="bench, inspect or own; may be given again."
)
@on_record
def add(record: Record, initials: str, name: str, may: tuple[str, ...]) -> None:
    """Enter a person; from the first one on, a change says who made it."""
    from store import people as store_people

    made = store_people.add(record, initials, name, ";".join(may))
    click.echo(f"{made.initials}: {made.name}, may {', '.join(made.may)}")
