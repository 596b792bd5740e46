"""Commands for what holds for the whole shop."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.group(epilog="Example: wearline shop set warranty_days 365")
def shop() -> None:
    """Show and set what holds for the whole shop."""


@shop.command(epilog="Example: wearline shop show --json")
@as_json
@on_record
def show(record: Record, as_json: bool) -> None:
    """Every setting, its value and what it is for."""
    from store import shop as store_shop

    found = store_shop.settings(record)
    if as_json:
        write_json({s.name: s.value for s in found})
        return
    write_table(("name", "value", "what it is for"), [(s.name, s.value or "-", s.says) for s in found])


@shop.command("set", epilog="Example: wearline shop set polish '0.02 mm'")
@click.argument("name")
@click.argument("value")
@on_record
def set_(record: Record, name: str, value: str) -> None:
    """Set one setting; the change is recorded."""
    from store import shop as store_shop

    store_shop.put(record, name, value)
    click.echo(f"{name} = {store_shop.value(record, name)}")
