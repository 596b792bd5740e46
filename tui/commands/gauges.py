"""Commands for gauges."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import write_json, write_table

if TYPE_CHECKING:
    from store.records import Record


@click.group(epilog="Example: wearline gauges due")
def gauges() -> None:
    """Gauges: due dates, calibrations, and the jobs that one touched."""


@gauges.command(epilog="Example: wearline gauges due --json")
@as_json
@on_record
def due(record: Record, as_json: bool) -> None:
    """Every gauge in use, those due first on top."""
    from store import gauges as store_gauges

    today, found = record.now(), store_gauges.listing(record)
    if as_json:
        write_json(
            [
                {
                    "gauge": g.name, "kind": g.kind, "unit": g.unit, "resolution": g.resolution,
                    "expanded_uncertainty": g.calibration.expanded_uncertainty if g.calibration else None,
                    "k": g.calibration.k if g.calibration else None,
                    "calibrated": g.calibration.calibrated if g.calibration else None,
                    "due": g.due, "overdue": g.is_overdue(today),
                }
                for g in found
            ]
        )  # fmt: skip
        return
    write_table(
        ("gauge", "kind", "resolution", "U", "unit", "calibrated", "due", ""),
        [
            (
                g.name, g.kind, g.resolution, g.calibration.expanded_uncertainty if g.calibration else None, g.unit,
                g.calibration.calibrated if g.calibration else None, g.due or "no date",
                "OVERDUE" if g.is_overdue(today) else "",
            )
            for g in found
        ],
        empty="no gauges yet; load a file of gauges or enter one on the Gauges screen",
    )  # fmt: skip


@gauges.command(epilog="Example: wearline gauges calibrate OM-25 --expanded 0.004 --due 2027-12-01")
@click.argument("gauge")
@click.option("--expanded", default="", help="Expanded uncertainty U.")
@click.option("--k", default="2", show_default=True, help="Coverage factor.")
@click.option("--on", "calibrated", default="", help="Date; default: today.")
@click.option("--due", default="", help="Date of the next.")
@click.option("--result", type=click.Choice(["good", "bad"]), default="good", show_default=True)
@click.option("--note", default="")
@on_record
def calibrate(record: Record, gauge: str, expanded: str, **values: str) -> None:
    """Enter a calibration; a bad one makes `recall` list what the gauge touched."""
    from store import calibrations

    made = calibrations.enter(record, gauge, expanded_uncertainty=expanded, **values)
    click.echo(f"{made.name}: {values['result']}, due {made.due or 'no date'}")


@gauges.command(epilog="Example: wearline gauges recall OM-25")
@click.argument("gauge")
@as_json
@on_record
def recall(record: Record, gauge: str, as_json: bool) -> None:
    """Every job with readings by this gauge since its last good calibration, released jobs first."""
    from store import gauges as store_gauges
    from store import times

    found = store_gauges.recall(record, gauge)
    if as_json:
        write_json(
            [
                {"tag": t.tag, "outcome": t.outcome, "readings": t.readings, "first": t.first, "last": t.last}
                for t in found
            ]
        )
        return
    write_table(
        ("tag", "stands", "readings", "first", "last"),
        [(t.tag, t.outcome, t.readings, times.local(t.first), times.local(t.last)) for t in found],
        empty=f"no reading by {gauge} since its last good calibration",
    )


@gauges.command(
    epilog="Example: wearline gauges study micrometer.csv --gauge OM-25 --model KS-100 --characteristic commutator-diameter"
)
@click.argument("file", type=click.Path(exists=True, dir_okay=False, path_type=Path))
@click.option("--gauge", default="", help="Whose study it is; its unit holds in the file.")
@click.option("--unit", default="mm", show_default=True, help="Unit of the file, without --gauge.")
@click.option("--model", default="", help="Hold it against a limit of this model's sheet.")
@click.option("--characteristic", default="", help="The limit to hold it against.")
@click.option("--keep", is_flag=True, help="Keep the repeatability for the gauge; it counts in every verdict by it.")
@as_json
@on_record
def study(
    record: Record, file: Path, gauge: str, unit: str, model: str, characteristic: str, keep: bool, as_json: bool
) -> None:
    """A gauge study from FILE (part, person, value): repeatability, people, and which limit the gauge can judge."""
    from store import gauge_studies as studies

    if keep and not gauge:
        raise click.UsageError("--keep needs --gauge")
    if bool(model) != bool(characteristic):
        raise click.UsageError("--model and --characteristic go together")
    made = studies.of_gauge(record, file, gauge)[0] if gauge else studies.read(file, unit)
    held = studies.against(record, made, model, characteristic) if model else None
    kept = studies.keep(record, gauge, made).name if keep else None
    if as_json:
        write_json(studies.as_json(made, held, kept))
        return
    found, shares = made.study, made.shares
    click.echo(f"{len(made.parts)} parts x {len(made.people)} people x {made.repeats} repeats, {made.unit}")
    pooled = "is pooled into repeatability" if found.pooled else "is significant and kept"
    click.echo(f"the interaction of parts and people {pooled} (alpha {studies.ALPHA})")
    write_table(
        ("effect", "df", "SS", "MS", "F", "p"),
        [
            (e.name, e.freedom, f"{e.squares:.6g}", f"{e.mean:.6g}", *("" if x is None else f"{x:.4g}" for x in (e.f, e.p)))
            for e in found.effects
        ],
    )  # fmt: skip
    write_table(
        ("spread", f"sd, {made.unit}", "of study variation"),
        [(name, f"{shares[name] * found.total:.5g}", f"{100 * shares[name]:.1f} %") for name in shares],
    )
    if held:
        click.echo(f"{held.characteristic}: {held.says}")
    if kept:
        click.echo(f"kept as the repeatability of {kept}")
