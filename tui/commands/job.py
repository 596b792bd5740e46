"""Commands for jobs."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import one_line, write_json, write_table

if TYPE_CHECKING:
    from store.jobs import Job
    from store.records import Record


@click.group(epilog="Example: wearline job new --model KM-2210 --serial 88213")
def job() -> None:
    """Take in a core; list, show and link jobs."""


@job.command(epilog="Example: wearline job new --model KM-2210 --serial 88213 --complaint 'cranks slow'")
@click.option("--model", required=True, help="The unit's number, or any number that leads to it.")
@click.option("--serial", required=True, help="Its serial, or the shop's own engraved mark.")
@click.option("--tag", help="The ticket's number; default: the next.")
@click.option("--customer", default="")
@click.option("--application", default="", help="What it works on.")
@click.option("--complaint", default="")
@click.option("--hours", help="Hours run, where known.")
@click.option("--starts", help="Starts made, where known.")
@as_json
@on_record
def new(record: Record, as_json: bool, **values: Any) -> None:
    """Take in a core; prints its tag. A unit that was released before becomes a comeback at once."""
    from store import jobs

    made = jobs.take_in(record, **values)
    if as_json:
        write_json(_json(made))
        return
    click.echo(made.tag)
    if made.earlier:
        click.echo(f"comeback: this unit was released as {made.earlier} before", err=True)


@job.command("list", epilog="Example: wearline job list --all --search 88213")
@click.option("--all", "everything", is_flag=True, help="Ended jobs too.")
@click.option("--model")
@click.option("--search", default="", help="Words in tag, serial, model or customer.")
@click.option("--limit", "most", type=click.IntRange(1, 1_000_000), default=500, show_default=True)
@as_json
@on_record
def list_(record: Record, everything: bool, model: str | None, search: str, most: int, as_json: bool) -> None:
    """Open jobs, newest first: where each stands and what is next."""
    from store import jobs, times

    lines = jobs.listing(record, outcome=None if everything else "open", model=model, search=search, most=most)
    if as_json:
        fields = (
            "tag",
            "model",
            "serial",
            "customer",
            "complaint",
            "taken_in",
            "ended",
            "stands",
            "out",
            "in_doubt",
            "earlier",
            "next",
        )
        write_json([{name: getattr(line, name) for name in fields} for line in lines])
        return
    rows = [
        (
            x.tag,
            x.model,
            x.serial,
            x.customer[:24],
            times.local(x.taken_in),
            x.stands,
            x.out or "",
            x.in_doubt or "",
            x.next,
        )
        for x in lines
    ]
    write_table(
        ("tag", "model", "serial", "customer", "taken in", "stands", "out", "in doubt", "next"), rows,
        empty="no such jobs; take a core in with: wearline job new --model M --serial S",
    )  # fmt: skip


@job.command(epilog="Example: wearline job show 1042")
@click.argument("tag")
@as_json
@on_record
def show(record: Record, tag: str, as_json: bool) -> None:
    """What the ticket of a job says, and the earlier jobs of its unit."""
    from store import jobs, times

    found = jobs.find(record, tag)
    before = [j for j in jobs.of_unit(record, found.model, found.serial) if j.id != found.id]
    if as_json:
        write_json({**_json(found), "of_this_unit": [_json(j) for j in before]})
        return
    rows = [
        ("tag", found.tag), ("model", f"{found.model} ({found.kind})"), ("serial", found.serial),
        ("customer", found.customer), ("application", found.application), ("hours", found.hours),
        ("starts", found.starts), ("complaint", found.complaint), ("taken in", times.local(found.taken_in)),
        ("by", found.by), ("limits", f"revision {found.revision}" if found.revision else "none entered for this model"),
        ("stands", found.outcome), ("ended", times.local(found.ended) if found.ended else ""),
        ("comeback of", found.earlier), ("came back as", found.comeback_outcome),
    ]  # fmt: skip
    for name, value in rows:
        if value:
            click.echo(f"{name:<14}{one_line(str(value))}")
    for j in before:
        ended = f", {j.outcome} {times.local(j.ended)[:10]}" if j.ended else ""
        click.echo(f"{'earlier':<14}{j.tag}: {times.local(j.taken_in)[:10]}{ended}")


@job.command(epilog="Example: wearline job link 1042 0988 --outcome part")
@click.argument("tag")
@click.argument("earlier")
@click.option("--outcome", help="workmanship, part, wear, system, installation, wrong-part, no-fault or not-ours.")
@on_record
def link(record: Record, tag: str, earlier: str, outcome: str | None) -> None:
    """Make job TAG the comeback of the EARLIER one."""
    from store import jobs

    made = jobs.link(record, tag, earlier, outcome)
    click.echo(f"{made.tag} is a comeback of {made.earlier}")


@job.command("revision", epilog="Example: wearline job revision 1042")
@click.argument("tag")
@click.argument("number", type=int, required=False)
@on_record
def move_revision(record: Record, tag: str, number: int | None) -> None:
    """Judge a job by another revision of its limits, the newest unless a NUMBER is given."""
    from store import jobs

    made = jobs.move_to_revision(record, tag, number)
    click.echo(f"{made.tag} is judged by revision {made.revision} of the sheet of {made.model}")


def _json(found: Job) -> dict[str, Any]:
    fields = (
        "tag", "model", "kind", "serial", "revision", "customer", "application", "hours", "starts", "complaint", "taken_in",
        "by", "assembled_by", "outcome", "ended", "ended_by", "earlier", "comeback_outcome", "from_history",
    )  # fmt: skip
    return {name: getattr(found, name) for name in fields}
