"""Which record a command works on and who acts, the same on every command."""

from __future__ import annotations

import functools
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

import click

if TYPE_CHECKING:
    from store.records import Record

Function = Callable[..., Any]


def default_path() -> Path:
    """Where the shop's record lies unless another is named: the per-user data folder."""
    import platformdirs

    return platformdirs.user_data_path("wearline", appauthor=False, ensure_exists=True) / "shop.wearline"


def open_record(path: str | None, acting: str | None) -> Record:
    """The record that is asked for, opened. The default one is made where there is none.

    Raises RecordUnusable, NotFound (an unknown person).
    """
    from store import records

    if path is not None:
        return records.open(Path(path), by=acting, create=True)
    return records.open(default_path(), by=acting, create=True)


def on_record(function: Function) -> Function:
    """Gives a command the record as its first argument, and the options --record, --as and --debug."""

    @click.option("--record", "record_path", metavar="FILE", default=None, help="The record (or WEARLINE_RECORD).")
    @click.option("--as", "acting", metavar="INITIALS", default=None, help="Who acts (or WEARLINE_AS).")
    @click.option("--debug", "debug", is_flag=True, hidden=True)
    @click.pass_context
    @functools.wraps(function)
    def command(ctx: click.Context, /, *args: Any, **options: Any) -> Any:
        record_path, acting = options.pop("record_path"), options.pop("acting")
        options.pop("debug")
        shared = ctx.find_object(dict) or {}
        record = open_record(record_path or shared.get("record"), acting or shared.get("acting"))
        try:
            return function(record, *args, **options)
        finally:
            record.close()

    return command


as_json = click.option("--json", "as_json", is_flag=True, help="Write JSON.")
