"""What else the readings of a job say, beside the lines of its plan: diagnosis, corrections, checks of one reading by others."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from store.errors import Refused
from store.rules import bars, commutator, insulation, iso_fits, quantities, running
from store.rules.limits import Verdict
from store.rules.quantities import Quantity
from store.sheets import Sheet, SheetRow

_BLOCKS = "▁▂▃▄▅▆▇█"


def of_sheet(sheet: Sheet, model_bars: int | None, poles: int | None) -> Iterator[str]:
    """Sentences, each with its formula where it has one. A test that cannot be (zero volts, say) is told in its place."""
    said = diagnosis(sheet)
    if said:
        yield said
    for made in (_dial, _to_measure, _stall, _loaded, _solenoid, _insulation, _copper, _grades):
        try:
            yield from made(sheet)
        except Refused as fault:
            yield str(fault)
    try:
        yield from _bars(sheet, model_bars, poles)
    except Refused as fault:
        yield f"bar-to-bar: {fault}"


def row(sheet: Sheet, name: str) -> SheetRow | None:
    """A row of a sheet by its characteristic; None where there is none."""
    return next((one for one in sheet.rows if one.characteristic.name == name), None)


def value(sheet: Sheet, name: str, unit: str) -> Fraction | None:
    """The judged value of a characteristic in a unit, None where there is none."""
    found = row(sheet, name)
    if found is None or found.judged is None or found.judged.judgement.value is None:
        return None
    return quantities.convert(found.judged.judgement.value, found.judged.judgement.unit, unit)


def diagnosis(sheet: Sheet) -> str:
    """What the no-load test customarily means, "" where it was not made, cannot be compared, or means nothing."""
    amps, rpm = row(sheet, "no-load-current"), row(sheet, "no-load-speed")
    if amps is None or rpm is None or amps.limit is None or rpm.limit is None:
        return ""
    if Verdict.not_comparable in {amps.verdict, rpm.verdict}:
        return ""
    most, least = amps.limit.limit.high, rpm.limit.limit.low
    current, speed = value(sheet, "no-load-current", "A"), value(sheet, "no-load-speed", "rpm")
    if most is None or least is None or current is None or speed is None:
        return ""
    least_amps = amps.limit.limit.low
    found = running.diagnose(
        current, speed, quantities.convert(most, amps.limit.unit, "A"), quantities.convert(least, rpm.limit.unit, "rpm"),
        None if least_amps is None else quantities.convert(least_amps, amps.limit.unit, "A"),
        None if rpm.limit.limit.high is None else quantities.convert(rpm.limit.limit.high, rpm.limit.unit, "rpm"),
    )  # fmt: skip
    return "" if found is None else f"no-load: {found.means}"


def _dial(sheet: Sheet) -> Iterator[str]:
    found = row(sheet, "commutator-runout")
    count = found.judged.judgement.count if found is not None and found.judged is not None else 0
    if count >= 4:
        share = commutator.read_share(count)
        yield f"if these {count} are single dial readings round the circle, they see {share:.0%} of a once-a-turn runout at least"


def _to_measure(sheet: Sheet) -> Iterator[str]:
    """What the plan had to do without."""
    surface, runout = row(sheet, "commutator-surface"), row(sheet, "commutator-runout")
    if value(sheet, "commutator-diameter", "mm") is None:
        if any(found is not None and found.judged is not None for found in (surface, runout)):
            yield "the commutator's diameter is not measured: without it no cut can be planned"
    else:
        if runout is not None and runout.judged is None:
            yield "the commutator's runout is not measured: without it nothing says whether it wants a cut"
        elif runout is not None and runout.limit is None:
            yield "no limit of the commutator's runout is entered: nothing says whether it wants a cut"
        if value(sheet, "shaft-runout", "mm") is None:
            yield "the shaft's runout is not measured: a commutator is not turned on a bent shaft"
        if (
            surface is not None
            and surface.verdict is Verdict.out
            and value(sheet, "surface-defect-depth", "mm") is None
        ):
            yield "the depth of the surface defect is not measured: a cut goes below it, so measure it first"


def _stall(sheet: Sheet) -> Iterator[str]:
    volts, amps = value(sheet, "stall-voltage", "V"), value(sheet, "stall-current", "A")
    if volts is not None and amps is not None:
        ohms = running.resistance(volts, amps)
        yield f"stall: {_n(volts)} V / {_n(amps)} A = {quantities.rounded(ohms, 4)} ohm through the motor"


def _loaded(sheet: Sheet) -> Iterator[str]:
    torque, speed = value(sheet, "loaded-torque", "N.m"), value(sheet, "loaded-speed", "rpm")
    if torque is None or speed is None:
        return
    watts = running.power_w(float(torque), float(speed))
    said = f"loaded point: 2 pi n T = 2 pi x {_n(speed)}/60 x {_n(torque)} = {watts:.0f} W"
    volts, amps = value(sheet, "loaded-voltage", "V"), value(sheet, "loaded-current", "A")
    if volts is not None and amps is not None:
        share = running.efficiency(float(torque), float(speed), float(volts), float(amps))
        if share is not None:
            said += f"; efficiency {share:.0%}" + (
                "; more out than in: look at the readings again" if share > 1 else ""
            )
    yield said


def _solenoid(sheet: Sheet) -> Iterator[str]:
    volts = value(sheet, "solenoid-test-voltage", "V")
    for winding in ("pull-in", "hold-in"):
        amps = value(sheet, f"solenoid-{winding}-current", "A")
        ohms = value(sheet, f"solenoid-{winding}-resistance", "ohm")
        if volts is not None and amps is not None and ohms is not None:
            question = running.windings_agree(volts, amps, ohms)
            if question:
                yield f"{winding} winding: {question}"


def _insulation(sheet: Sheet) -> Iterator[str]:
    read, t = value(sheet, "insulation-resistance", "Mohm"), value(sheet, "winding-temperature", "degC")
    if read is None:
        return
    volts = value(sheet, "insulation-test-voltage", "V")
    tested = "the test voltage is not recorded" if volts is None else f"tested at {_n(volts)} V"
    if t is None:
        yield f"insulation {_n(read)} Mohm, {tested}; without the winding's temperature it cannot be brought to 40 degC"
        return
    made = insulation.to_40_degc(float(read), float(t))
    yield (
        f"insulation at 40 degC: {_n(read)} x 0.5^((40 - {_n(t)})/10) = {made:.3g} Mohm, {tested}. {insulation.SCOPE}"
    )


def _copper(sheet: Sheet) -> Iterator[str]:
    t = value(sheet, "winding-temperature", "degC")
    for name, unit in (("field-resistance", "ohm"), ("rotor-resistance", "ohm"), ("stator-resistance", "mohm")):
        read = value(sheet, name, unit)
        if t is not None and read is not None:
            made = insulation.copper(read, t)
            formula = f"{_n(read)} x (234.5 + 20)/(234.5 + {_n(t)}) = {quantities.rounded(made, 3)} {unit}"
            yield f"{name.replace('-', ' ')} at 20 degC: {formula}"


def _grades(sheet: Sheet) -> Iterator[str]:
    """Two-sided limits of bores and journals that are a grade of ISO 286, by its name."""
    for one in sheet.rows:
        name, limit = one.characteristic.name, one.limit
        if (
            one.judged is None
            or limit is None
            or one.characteristic.quantity is not Quantity.length
            or one.characteristic.derive
        ):
            continue
        low, high = limit.limit.low, limit.limit.high
        if low is None or high is None:
            continue
        is_hole = "bore" in name or name == "bushing-reamed-size"
        if is_hole or "journal" in name or "outside-diameter" in name or "seat" in name:
            grade = iso_fits.named(*(quantities.convert(s, limit.unit, "mm") for s in (low, high)), is_hole=is_hole)
            if grade:
                yield f"{one.characteristic.label}: its limits are {grade} of ISO 286"


def _bars(sheet: Sheet, model_bars: int | None, poles: int | None) -> Iterator[str]:
    """The strip chart round the commutator, bar 1 first, with the pattern in words."""
    for name in ("bar-to-bar", "bar-to-bar-resistance"):
        found = row(sheet, name)
        if found is None or found.limit is None or found.limit.limit.high is None:
            continue
        read = [
            (int(p), r) for p, r in zip(found.positions, found.readings, strict=True) if r is not None and p.isdigit()
        ]
        sizes = [quantities.convert(r.typed.value, r.typed.unit, found.characteristic.unit)
                 for _, r in sorted(read, key=lambda pair: pair[0]) if r.typed.value is not None]  # fmt: skip
        if len(sizes) < 3:
            continue
        chart = bars.chart(sizes, found.limit.limit.high, model_bars, poles)
        most = max(abs(d) for d in chart.deviations)
        yield (
            f"{found.characteristic.label}, bars 1 to {len(sizes)}: {strip(chart.deviations)}  {chart.pattern}; "
            f"median {quantities.plain(Fraction(quantities.rounded(chart.middle, 4)))} {found.characteristic.unit}, "
            f"furthest {float(most):.1f} %"
        )


def strip(deviations: tuple[Fraction, ...]) -> str:
    """A strip chart in one line, a mark a bar, the scale from the furthest low to the furthest high."""
    most = max((abs(d) for d in deviations), default=Fraction(0))
    if most == 0:
        return _BLOCKS[3] * len(deviations)
    return "".join(_BLOCKS[min(7, int((d / most + 1) * 4))] for d in deviations)


def _n(size: Fraction) -> str:
    return quantities.plain(size)
