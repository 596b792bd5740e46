"""Commands for what comes back."""

from __future__ import annotations

import csv
import io
import json
from dataclasses import asdict
from pathlib import Path
from typing import TYPE_CHECKING, Any, NamedTuple

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record
    from store.reports.owner.contents import Owner


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
@click.option(
    "-o",
    "out",
    metavar="FILE",
    help="Write the owner's report: .pdf or .txt; or only figures: .csv (the groups, else the curve), .json.",
)
@click.option(
    "--print", "queue", is_flag=False, flag_value="", default=None, metavar="[QUEUE]",
    help="Hand the owner's report to a printer.",
)  # fmt: skip
@as_json
@on_record
def comebacks(
    record: Record, by: str | None, since: str, until: str, counted: tuple[str, ...], rate: float | None, out: str | None,
    queue: str | None, as_json: bool,
) -> None:  # fmt: skip
    """What returns of the units released in a period, how soon, and whether groups differ by more than chance.

    The owner's report holds every kind of group unless --by names one.
    """
    asked = Asked(since, until, counted or None, rate)
    if out is not None:
        click.echo(_save(record, by, asked, Path(out)))
    if queue is not None:
        from store.reports.owner import issue

        click.echo(issue.print_out(_owner(record, by, asked), queue))
    if out is not None or queue is not None:
        return
    if as_json:
        write_json(_figures(record, by, asked))
        return
    from store import comeback_words
    from store import comebacks as store_comebacks
    from tui.commands import comebacks_text

    found = store_comebacks.review(record, by=by, **asked._asdict())
    for line in comebacks_text.lines(found, comeback_words.words(record, until=until)):
        click.echo(line)


class Asked(NamedTuple):
    """The period, what counts and the rate of false alarms; empty or None: the shop's."""

    since: str
    until: str
    counted: tuple[str, ...] | None
    rate: float | None


def _save(record: Record, by: str | None, asked: Asked, path: Path) -> Path:
    """Write the owner's report or the figures, as the ending says."""
    from store.errors import Refused, brief
    from store.reports.owner import issue
    from store.whole_files import write_whole
    from tui.commands import comebacks_text

    ending = path.suffix.lower()
    if ending == ".pdf":
        return issue.save(_owner(record, by, asked), path)
    if ending == ".txt":
        owner = _owner(record, by, asked)
        lines = comebacks_text.lines(owner.review, owner.words, owner.foretold, jobs=True)
        text = "\n".join([*comebacks_text.head(owner), "", *lines, ""])
    elif ending == ".json":
        text = json.dumps(_figures(record, by, asked), ensure_ascii=False, indent=2) + "\n"
    elif ending == ".csv":
        figures = _figures(record, by, asked)
        text = _csv(figures["groups"] or figures["curve"])
    else:
        raise Refused(f"{brief(path.name)!r}: a review is written as .pdf, .txt, .csv or .json")
    write_whole(path, text.encode())
    return path


def _owner(record: Record, by: str | None, asked: Asked) -> Owner:
    from store.reports.owner import contents

    return contents.gather(record, kinds=(by,) if by else (), **asked._asdict())


def _figures(record: Record, by: str | None, asked: Asked) -> dict[str, Any]:
    """The contract of `--json`."""
    from store import comeback_words
    from store import comebacks as store_comebacks

    figures = store_comebacks.as_json(store_comebacks.review(record, by=by, **asked._asdict()))
    return {**figures, "words": [asdict(word) for word in comeback_words.words(record, until=asked.until)]}


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
