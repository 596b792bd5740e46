"""Commands for part numbers: check one, search by size, fit one on a job."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json
from tui.commands.part_answers import check_json, say, size_json, write_check, write_size

if TYPE_CHECKING:
    from store.records import Record


@click.group(epilog="Example: wearline parts check 'KS-1?0' --on KS-100")
def parts() -> None:
    """Check a part or unit number, search parts by size, fit a part on a job."""


@parts.command(epilog="Example: wearline parts check KS-1?0 --on KS-100")
@click.argument("number")
@click.option("--on", metavar="MODEL", help="Does it, and does what it leads to, go on this model?")
@as_json
@on_record
def check(record: Record, number: str, on: str | None, as_json: bool) -> None:
    """What NUMBER may be and all that it leads to, step by step with each source; ? is a character that cannot be read."""
    from store.parts import checking

    answer = checking.check(record, number, on=on)
    if as_json:
        write_json(check_json(answer))
    else:
        write_check(answer)


@parts.command(epilog="Example: wearline parts size brush width=8 thickness=16 --within 0.2")
@click.argument("kind")
@click.argument("sizes", nargs=-1, required=True, metavar="NAME=VALUE...")
@click.option("--within", metavar="T", help="Tolerance, mm where no unit is given; 0.1 mm unless given.")
@as_json
@on_record
def size(record: Record, kind: str, sizes: tuple[str, ...], within: str | None, as_json: bool) -> None:
    """Parts of a KIND by measured sizes; for a bushing give housing-bore= and journal=."""
    from store.errors import Refused
    from store.parts import by_size

    asked: dict[str, str] = {}
    for typed in sizes:
        name, equals, value = typed.partition("=")
        if not equals or not name.strip() or not value.strip():
            raise Refused(f"{typed!r} is not NAME=VALUE, width=8 or od=5/8in for instance")
        asked[name] = value
    answer = by_size.search(record, kind, asked, within)
    if as_json:
        write_json(size_json(answer))
    else:
        write_size(answer)


@parts.command(epilog="Example: wearline parts fit 1042 BR-2210 --lot L7 --supplier Northgate")
@click.argument("tag")
@click.argument("number")
@click.option("--maker", default="", help="Where several makers have the number.")
@click.option("--lot", default="")
@click.option("--supplier", default="")
@click.option("--position", default="", help="Where it went.")
@click.option("--quantity", type=int, default=1)
@click.option("--because", default="", metavar="WHY", help="The reason, where the cross-check speaks against it.")
@as_json
@on_record
def fit(record: Record, tag: str, number: str, as_json: bool, because: str, **options: Any) -> None:
    """Fit a part on the job TAG, its NUMBER as printed; the cross-check runs, and a mismatch asks for a reason."""
    from store.parts import fitting

    made = fitting.fit(record, tag, number, why=because, **options)
    if as_json:
        fields = ("tag", "number", "maker", "lot", "supplier", "position", "quantity", "by", "at", "checked", "why")
        write_json({field: getattr(made, field) for field in fields})
    else:
        say(f"{made.tag}: {made.number} fitted; {made.checked}")
