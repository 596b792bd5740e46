"""Commands for what comes back."""

from __future__ import annotations

import csv
import io
import json
from pathlib import Path
from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.command(epilog="Example: wearline comebacks --by lot --since 2025-01-01")
@click.option(
    "--by",
    type=click.Choice(["model", "part", "supplier", "lot", "assembler", "finding"]),
    help="Compare groups of this kind.",
)
@click.option("--since", default="", help="Released on or after this day.")
@click.option("--until", default="", help="Followed to this day; default: today.")
@click.option(
    "--count", "counted", multiple=True, help="An outcome that counts; may be given again. Default: the shop's."
)
@click.option(
    "--rate",
    type=click.FloatRange(0, 1, min_open=True, max_open=True),
    help="Rate of false alarms; default: the shop's.",
)
@click.option("-o", "out", metavar="FILE", help="Write to a file: .csv (the groups, else the curve) or .json.")
@as_json
@on_record
def comebacks(
    record: Record, by: str | None, since: str, until: str, counted: tuple[str, ...], rate: float | None, out: str | None,
    as_json: bool,
) -> None:  # fmt: skip
    """What returns of the units released in a period, how soon, and whether groups differ by more than chance."""
    from store import comeback_words, files
    from store import comebacks as store_comebacks
    from store.errors import Refused
    from tui.commands import comebacks_text

    found = store_comebacks.review(record, by=by, since=since, until=until, counted=counted or None, rate=rate)
    whole = store_comebacks.as_json(found)
    if as_json or out is not None:
        fields = ("word", "back", "of_back", "other", "of_other")
        whole["words"] = [
            {name: getattr(w, name) for name in fields} for w in comeback_words.words(record, until=until)
        ]
    if out is not None:
        path = Path(out)
        if path.suffix == ".json":
            data = json.dumps(whole, ensure_ascii=False, indent=2) + "\n"
        elif path.suffix == ".csv":
            data = _csv(whole["groups"] or whole["curve"])
        else:
            raise Refused(f"{path.name}: a review is written as .csv or .json")
        files.write_whole(path, data.encode())
        click.echo(path)
        return
    if as_json:
        write_json(whole)
        return
    for line in comebacks_text.lines(found, comeback_words.words(record, until=until)):
        click.echo(line)


@click.command(epilog="Example: wearline foretell")
@click.option("--since", default="")
@click.option("--until", default="")
@as_json
@on_record
def foretell(record: Record, since: str, until: str, as_json: bool) -> None:
    """Which as-left readings of earlier jobs went with comebacks within a year."""
    from store import foretelling

    found = foretelling.foretell(record, since=since, until=until)
    if as_json:
        write_json(foretelling.as_json(found))
        return
    write_table(
        ("model", "characteristic", "back", "stayed", "area", "adjusted", ""),
        [
            (
                f.model,
                f.characteristic,
                f.found.returned,
                f.found.stayed,
                f"{f.found.area:.2f}",
                f"{f.adjusted:.2g}",
                f.says,
            )
            for f in found
        ],
        empty="too few comebacks followed for a year with readings as left: nothing can be foretold yet",
    )


def _csv(lines: list[dict[str, object]]) -> str:
    out = io.StringIO()
    if lines:
        writer = csv.DictWriter(out, list(lines[0]), lineterminator="\n")
        writer.writeheader()
        writer.writerows(lines)
    return out.getvalue()
