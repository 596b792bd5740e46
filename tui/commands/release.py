"""Commands that end a job: release, concessions, scrapping, return, amendment."""

from __future__ import annotations

from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import one_line, write_json, write_table

if TYPE_CHECKING:
    from store.records import Record
    from store.releases import Issued


@click.command(
    epilog="Example: wearline release 1042 --concede end-play --because 'new thrust washer on order, owner agrees'"
)
@click.argument("tag")
@click.option(
    "--concede", "conceded", multiple=True, metavar="CHARACTERISTIC", help="Accept a departure; may be given again."
)
@click.option(
    "--because", "reasons", multiple=True, metavar="WHY", help="The reason of the concession, in the same order."
)
@click.option("--check", is_flag=True, help="Only show what stands in the way.")
@click.option("--scrap", metavar="WHY", help="End the job by scrapping the core.")
@click.option("--return", "give_back", metavar="WHY", help="End the job by returning the core unrepaired.")
@click.option("--note", default="", help="A word beside the signature.")
@click.option("--pin", envvar="WEARLINE_PIN", help="The PIN of who acts, where one is set.")
@as_json
@on_record
def release(
    record: Record, tag: str, conceded: tuple[str, ...], reasons: tuple[str, ...], check: bool, scrap: str | None,
    give_back: str | None, note: str, pin: str | None, as_json: bool,
) -> None:  # fmt: skip
    """Release job TAG: its report is frozen and numbered. What stands in the way is said line by line."""
    from store import obstacles, releases

    if len(conceded) != len(reasons):
        raise click.UsageError("every --concede has its --because")
    if scrap is not None and give_back is not None:
        raise click.UsageError("a core is scrapped or returned, not both")
    if check:
        found = obstacles.standing(record, tag)
        if as_json:
            write_json(
                [
                    {"kind": o.kind, "says": o.says, "characteristic": o.characteristic, "may_concede": o.may_concede}
                    for o in found
                ]
            )
            return
        write_table(
            ("what", "", "concede as"),
            [(o.kind, o.says, o.characteristic) for o in found],
            empty="nothing stands in the way",
        )
        return
    for characteristic, because in zip(conceded, reasons, strict=True):
        releases.concede(record, tag, characteristic, because)
    try:
        if scrap is not None:
            issued = releases.scrap(record, tag, scrap, pin=pin)
        elif give_back is not None:
            issued = releases.give_back(record, tag, give_back, pin=pin)
        else:
            issued = releases.release(record, tag, note=note, pin=pin)
    except releases.NotReleased as fault:
        for obstacle in fault.obstacles[1:]:
            click.echo(f"also: {one_line(obstacle.says)}", err=False)
        raise
    _say(issued, as_json)


@click.command(epilog="Example: wearline amend 1042 --why 'customer named wrongly' --set customer='Tolland Quarry'")
@click.argument("tag")
@click.option("--why", required=True)
@click.option(
    "--set", "fields", multiple=True, metavar="FIELD=VALUE", help="customer, application, hours, starts, complaint ..."
)
@click.option("--correct", "corrections", multiple=True, nargs=4, metavar="STAGE CHARACTERISTIC POSITION VALUE")
@click.option("--pin", envvar="WEARLINE_PIN")
@as_json
@on_record
def amend(
    record: Record, tag: str, why: str, fields: tuple[str, ...], corrections: tuple[tuple[str, str, str, str], ...],
    pin: str | None, as_json: bool,
) -> None:  # fmt: skip
    """Issue a new report for job TAG in the place of the newest; it names the old one and says what changed."""
    from store import readings, releases

    values = {}
    for field in fields:
        name, mark, value = field.partition("=")
        if not mark:
            raise click.UsageError("--set takes FIELD=VALUE")
        values[name.strip()] = value
    entries = [readings.Entry(name, text, stage, place, why=why) for stage, name, place, text in corrections]
    _say(releases.amend(record, tag, why, fields=values, corrections=entries, pin=pin), as_json)


def _say(issued: Issued, as_json: bool) -> None:
    if as_json:
        fields = ("tag", "number", "outcome", "at", "by", "why", "amends", "head", "digest")
        write_json({name: getattr(issued, name) for name in fields})
    else:
        click.echo(
            f"{issued.tag} {issued.outcome}: report {issued.number}"
            + (f", in the place of {issued.amends}" if issued.amends else "")
        )
