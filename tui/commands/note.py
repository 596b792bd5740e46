"""Commands for notes: adding, finding again, findings, shorthand, and the index of the search."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import end_progress, one_line, progress, write_json, write_table

if TYPE_CHECKING:
    from store.records import Record
    from store.search import Answer


@click.group(epilog="Example: wearline note find 'solinoid contcts -welded'")
def note() -> None:
    """Notes of jobs: add one, find any again."""


@note.command(epilog="Example: wearline note add 1042 'grwler ok, comm burnt'")
@click.argument("tag")
@click.argument("text", nargs=-1, required=True)
@as_json
@on_record
def add(record: Record, tag: str, text: tuple[str, ...], as_json: bool) -> None:
    """Add a note to job TAG. What it looks like is said, as a finding to take or leave."""
    from store import findings, notes

    made = notes.add(record, tag, " ".join(text))
    offers = findings.offers(record, made.text)
    if as_json:
        looks = [{"component": f.component, "mode": f.mode, "mechanism": f.mechanism, "cause": f.cause} for f in offers]
        write_json({"tag": tag, "at": made.at, "by": made.by, "text": made.text, "looks_like": looks})
        return
    for offer in offers:
        click.echo(f"looks like: {offer.component}: {offer.mode}", err=True)
    if offers:
        first = offers[0]
        click.echo(f'to take it: wearline note finding {tag} "{first.component}" "{first.mode}"', err=True)


@note.command(epilog="Example: wearline note find 'slow crank' --model KS-110R --since 2026-01 --comeback yes")
@click.argument("text", nargs=-1, required=True)
@click.option("--model", default="", help="Only jobs of this model.")
@click.option("--since", default="", metavar="DATE", help="From this day, month or year on.")
@click.option("--until", default="", metavar="DATE", help="To this day.")
@click.option(
    "--stage", default="", help="Jobs measured as-found or as-left, or that are open, released, scrapped, returned."
)
@click.option("--verdict", default="", help="Jobs with such a verdict: in, out, 'in doubt' ...")
@click.option("--comeback", default="", metavar="YES|NO", help="Only comebacks, or none.")
@click.option("--by", default="", metavar="INITIALS", help="Written by.")
@click.option("--in", "within", default="", help="Only notes, complaints, findings, readings or parts.")
@click.option("--as-typed", is_flag=True, help="Refuse every correction. A single word is taken as typed in quotes.")
@click.option("--limit", "most", type=click.IntRange(1, 1000), default=50, show_default=True)
@as_json
@on_record
def find(
    record: Record, text: tuple[str, ...], as_typed: bool, most: int, as_json: bool, within: str, **given: str
) -> None:
    """Find notes, complaints, findings and remarks, whichever side made the slip.

    All words before some, exact before corrected, near before far, recent before old. "Phrases" stand in quotes, a minus
    leaves a word out. The corrections made are said. Filters may stand in the text too, as model:KS-110R or since:2026.
    """
    from store import search

    filters = {name: value for name, value in {**given, "in": within}.items() if value}
    answer = search.find(record, " ".join(text), filters=filters, as_typed=as_typed, most=most)
    if as_json:
        write_json(_json(answer))
        return
    _say(answer)


def _json(answer: Answer) -> dict[str, Any]:
    return {
        "asked": answer.asked,
        "corrected": {word: list(meant) for word, meant in answer.corrected.items()},
        "hits": [
            {"tag": hit.tag, "at": hit.at, "by": hit.by, "where": hit.where, "text": hit.text} for hit in answer.hits
        ],
    }


def _say(answer: Answer) -> None:
    from store import times

    if answer.said:
        click.echo(answer.said, err=True)
    for word, meant in answer.corrected.items():
        click.echo(f'{word}: looked for {", ".join(meant)} too; "{word}" in quotes refuses it', err=True)
    for hit in answer.hits:
        click.echo(f"{hit.tag or '-'}  {hit.model}  {times.local(hit.at) if hit.at else ''}  {hit.by}  {hit.where}")
        click.echo(f"    {_marked(hit.text, hit.marks)}")
    if not answer.hits and not answer.said:
        click.echo("nothing found", err=True)


def _marked(text: str, marks: tuple[tuple[int, int], ...]) -> str:
    """The text on one line, what was found in bold on a terminal."""
    made, at = [], 0
    for start, end in marks:
        made += [one_line(text[at:start]), click.style(one_line(text[start:end]), bold=True)]
        at = end
    return "".join([*made, one_line(text[at:])])


@note.command(epilog="Example: wearline note finding 1042 solenoid 'contacts burned' --cause overload")
@click.argument("tag")
@click.argument("component")
@click.argument("mode")
@click.option("--mechanism", default="", help="The physical process: wear, overheating, breakage ...")
@click.option("--cause", default="", help="What brought it about.")
@click.option("--note", "remark", default="")
@on_record
def finding(record: Record, tag: str, component: str, mode: str, mechanism: str, cause: str, remark: str) -> None:
    """Add a finding to job TAG: what was found wrong with which component."""
    from store import findings

    findings.add(record, tag, component, mode, mechanism=mechanism, cause=cause, note=remark)


@note.command(epilog="Example: wearline note shorthand hsg housing")
@click.argument("short", required=False)
@click.argument("long", required=False)
@click.option("--drop", is_flag=True, help="Take SHORT out of the list.")
@as_json
@on_record
def shorthand(record: Record, short: str | None, long: str | None, drop: bool, as_json: bool) -> None:
    """Show the shop's shorthand, enter or change a line of it, or drop one. Short and long find each other."""
    from store import shorthand as lines

    if short and drop and not long:
        lines.drop(record, short)
    elif short and long and not drop:
        lines.enter(record, short, long)
    elif short or long or drop:
        raise click.UsageError("give SHORT and LONG to enter a line, or SHORT and --drop")
    elif as_json:
        write_json(lines.lines(record))
    else:
        write_table(("short", "long"), lines.lines(record).items())


@note.command(epilog="Example: wearline note index --check")
@click.option("--check", is_flag=True, help="Compare the index with the record instead; exit 1 where they differ.")
@on_record
def index(record: Record, check: bool) -> None:
    """Make the index of the search anew. It is a cache: nothing is lost with it."""
    from store import search
    from store.errors import RecordUnusable

    if check:
        differences = search.differences(record)
        for difference in differences[1:]:
            click.echo(difference, err=True)
        if differences:
            raise RecordUnusable(f"{differences[0]}; make the index anew: wearline note index")
        click.echo("the search index agrees with the record")
        return
    texts = search.rebuild(record, progress())
    end_progress()
    click.echo(f"{texts:,} texts")
