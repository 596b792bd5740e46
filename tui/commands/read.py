"""The command that adds and corrects readings."""

from __future__ import annotations

import sys
from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json

if TYPE_CHECKING:
    from store.judgements import Judged
    from store.readings import Accepted
    from store.records import Record


@click.command(epilog="Example: wearline read 1042 brush-length 11.4 11.2 11.5 9.2 --gauge CAL-2")
@click.argument("tag")
@click.argument("characteristic")
@click.argument("values", nargs=-1, required=True, metavar="VALUE...")
@click.option("--stage", type=click.Choice(["as-found", "as-left"]), default="as-found", show_default=True)
@click.option("--at", "position", help="Where, such as brush 4: --at 4; default: the next without a reading.")
@click.option("--gauge", help="The gauge it was read with.")
@click.option("--unit", help="The unit where none is typed; default: the gauge's, else the sheet's.")
@click.option("--note", default="")
@click.option(
    "--correct", "why", metavar="WHY", default="", help="Correct the reading that stands there, for this reason."
)
@as_json
@on_record
def read(
    record: Record, tag: str, characteristic: str, values: tuple[str, ...], stage: str, position: str | None,
    gauge: str | None, unit: str | None, note: str, why: str, as_json: bool,
) -> None:  # fmt: skip
    """Add readings to job TAG, as many as are given or none; a refused one refuses all.

    A value is typed as the bench writes it: 11.4, .448in, 7/16, 1 3/16, pass, "fail bars 4-5", "not measured no tool".
    Write -- before a value that begins with a minus. The caution of a test under power comes before its first value on a
    job; at a terminal it asks whether to go on.
    """
    from store import cautions, readings, slips

    if position is not None and len(values) > 1:
        raise click.UsageError("--at takes one value")
    entries = [readings.Entry(characteristic, text, stage, position, unit, gauge, note, why) for text in values]
    _warn(cautions.first(record, tag, characteristic))
    answers = readings.add_all(record, tag, entries)
    last = answers[-1]
    if as_json:
        write_json({"tag": tag, "added": [_added(a) for a in answers], "verdicts": [_verdict(j) for j in last.judged]})
    else:
        for j in last.judged:
            click.echo(f"{j.characteristic.label}: {j.judgement.verdict.value}; {j.because}")
    for answer in answers:
        for question in slips.questions(record, tag, answer.reading):
            click.echo(f"look again: {question}", err=True)


def _warn(caution: str) -> None:
    """Show a caution before anything is written; somebody who sits there says that it was read."""
    if caution:
        click.echo(f"CAUTION  {caution}", err=True)
        if sys.stdin.isatty() and sys.stderr.isatty():
            click.confirm("read; go on", err=True, abort=True)


def _added(answer: Accepted) -> dict[str, str]:
    reading = answer.reading
    return {
        "characteristic": reading.characteristic,
        "position": reading.position,
        "value": reading.typed.text,
        "unit": reading.typed.unit,
    }


def _verdict(judged: Judged) -> dict[str, str]:
    return {
        "characteristic": judged.characteristic.name,
        "verdict": judged.judgement.verdict.value,
        "because": judged.because,
    }
