"""What else the readings of a job say, beside the lines of its plan: diagnosis, corrections, checks of one reading by others."""

from __future__ import annotations

from collections.abc import Iterator
from fractions import Fraction

from store import plan_brushes, strip_chart
from store.errors import Refused
from store.rules import commutator, insulation, iso_fits, quantities, running
from store.rules.limits import Verdict
from store.rules.quantities import Quantity
from store.sheets import Sheet


def of_sheet(sheet: Sheet, model_bars: int | None, poles: int | None) -> Iterator[str]:
    """Sentences, each with its formula where it has one. A test that cannot be (zero volts, say) is told in its place."""
    said = diagnosis(sheet)
    if said:
        yield said
    for made in (
        _dial,
        _to_measure,
        plan_brushes.springs,
        _no_load,
        _stall,
        _loaded,
        _solenoid,
        _insulation,
        _polarization,
        _copper,
        _grades,
    ):
        try:
            yield from made(sheet)
        except Refused as fault:
            yield str(fault)
    yield from _bars(sheet, model_bars, poles)


def diagnosis(sheet: Sheet) -> str:
    """What the no-load test customarily means, "" where it was not made, cannot be compared, or means nothing."""
    amps, rpm = sheet.find("no-load-current"), sheet.find("no-load-speed")
    if amps is None or rpm is None or amps.limit is None or rpm.limit is None:
        return ""
    if Verdict.not_comparable in {amps.verdict, rpm.verdict}:
        return ""
    most, least = amps.limit.limit.high, rpm.limit.limit.low
    current, speed = sheet.size("no-load-current", "A"), sheet.size("no-load-speed", "rpm")
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
    found = sheet.find("commutator-runout")
    count = found.judged.judgement.count if found is not None and found.judged is not None else 0
    if count >= 4:
        share = commutator.read_share(count)
        yield f"if these {count} are single dial readings round the circle, they see {share:.0%} of a once-a-turn runout at least"


def _to_measure(sheet: Sheet) -> Iterator[str]:
    """What the plan had to do without."""
    is_rings = sheet.job.kind == "alternator"
    stem, part = ("slip-ring", "slip rings") if is_rings else ("commutator", "commutator")
    whose, verb = (f"{part}'", "want") if is_rings else (f"{part}'s", "wants")
    surface, runout, diameter = (sheet.find(f"{stem}-{one}") for one in ("surface", "runout", "diameter"))
    depth = sheet.find("slip-ring-defect-depth" if is_rings else "surface-defect-depth")
    if diameter is None or diameter.size("mm") is None:
        if any(found is not None and found.judged is not None for found in (surface, runout)):
            yield f"the {whose} diameter is not measured: without it no cut can be planned"
    else:
        if runout is not None and runout.judged is None:
            yield f"the {whose} runout is not measured: without it nothing says whether it {verb} a cut"
        elif runout is not None and runout.limit is None:
            yield f"no limit of the {whose} runout is entered: nothing says whether it {verb} a cut"
        if not is_rings and sheet.size("shaft-runout", "mm") is None:
            yield "the shaft's runout is not measured: a commutator is not turned on a bent shaft"
        if is_rings and sheet.size("rotor-runout", "mm") is None and sheet.size("shaft-runout", "mm") is None:
            yield "the rotor's runout is not measured: slip rings are not turned on a bent shaft"
        is_unknown = depth is None or depth.size("mm") is None
        if surface is not None and surface.verdict is Verdict.out and is_unknown:
            yield "the depth of the surface defect is not measured: a cut goes below it, so measure it first"


def _no_load(sheet: Sheet) -> Iterator[str]:
    if sheet.size("no-load-voltage", "V") == 0:
        yield "no-load: a test at zero volts says nothing; is the voltage a slip?"


def _stall(sheet: Sheet) -> Iterator[str]:
    volts, amps = sheet.size("stall-voltage", "V"), sheet.size("stall-current", "A")
    if volts == 0:
        yield "stall: a test at zero volts says nothing; is the voltage a slip?"
    elif volts is not None and amps is not None:
        if amps == 0:
            yield "stall: no current flows, so there is no resistance to reckon"
            return
        ohms = running.resistance(volts, amps)
        yield f"stall: {_n(volts)} V / {_n(amps)} A = {quantities.rounded(ohms, 4)} ohm through the motor"


def _loaded(sheet: Sheet) -> Iterator[str]:
    torque, speed = sheet.size("loaded-torque", "N.m"), sheet.size("loaded-speed", "rpm")
    if torque is None or speed is None:
        return
    watts = running.power_w(float(torque), float(speed))
    said = f"loaded point: 2 pi n T = 2 pi x {_n(speed)}/60 x {_n(torque)} = {watts:.0f} W"
    volts, amps = sheet.size("loaded-voltage", "V"), sheet.size("loaded-current", "A")
    if volts == 0:
        said += "; at zero volts there is no efficiency; is the voltage a slip?"
    elif volts is not None and amps:
        share = running.efficiency(float(torque), float(speed), float(volts), float(amps))
        if share is not None:
            said += f"; efficiency {share:.0%}" + (
                "; more out than in: look at the readings again" if share > 1 else ""
            )
    yield said


def _solenoid(sheet: Sheet) -> Iterator[str]:
    volts = sheet.size("solenoid-test-voltage", "V")
    if volts == 0:
        yield "solenoid: a test at zero volts says nothing; is the voltage a slip?"
        return
    for winding in ("pull-in", "hold-in"):
        amps = sheet.size(f"solenoid-{winding}-current", "A")
        ohms = sheet.size(f"solenoid-{winding}-resistance", "ohm")
        if volts is None or amps is None or ohms is None:
            continue
        try:
            question = running.windings_agree(volts, amps, ohms)
        except Refused as fault:
            question = str(fault)
        if question:
            yield f"{winding} winding: {question}"


def _insulation(sheet: Sheet) -> Iterator[str]:
    read, t = sheet.size("insulation-resistance", "Mohm"), sheet.size("winding-temperature", "degC")
    if read is None:
        return
    volts = sheet.size("insulation-test-voltage", "V")
    tested = "the test voltage is not recorded" if volts is None else f"tested at {_n(volts)} V"
    if t is None:
        yield f"insulation {_n(read)} Mohm, {tested}; without the winding's temperature it cannot be brought to 40 degC"
        return
    made = insulation.to_40_degc(float(read), float(t))
    yield (
        f"insulation at 40 degC: {_n(read)} x 0.5^((40 - {_n(t)})/10) = {made:.3g} Mohm, {tested}. {insulation.SCOPE}"
    )


def _polarization(sheet: Sheet) -> Iterator[str]:
    """Ten-minute over one-minute value, circuit by circuit; both are of one temperature, so neither is corrected."""
    one, ten = sheet.find("insulation-resistance"), sheet.find("insulation-resistance-10-min")
    if one is None or ten is None:
        return
    first = one.sizes("Mohm")
    for at, later in ten.sizes("Mohm").items():
        where = f", circuit {at}" if len(first) > 1 else ""
        try:
            index = insulation.polarization_index(first.get(at), later)
        except Refused as fault:
            yield f"polarization index{where}: {fault}"
            continue
        if index is None:
            yield f"polarization index{where}: the one-minute value is not read"
            continue
        weak = f"; {insulation.HIGH}" if first[at] > insulation.MEANS_LITTLE_ABOVE else ""
        yield (
            f"polarization index{where}: R10/R1 = {_n(later)}/{_n(first[at])} = {quantities.rounded(index, 2)}{weak}. "
            f"{insulation.SCOPE}"
        )


def _copper(sheet: Sheet) -> Iterator[str]:
    t = sheet.size("winding-temperature", "degC")
    for name, unit in (("field-resistance", "ohm"), ("rotor-resistance", "ohm"), ("stator-resistance", "mohm")):
        read = sheet.size(name, unit)
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
    """The strip chart round the commutator with the pattern in words."""
    for found in filter(None, map(sheet.find, strip_chart.CHARACTERISTICS)):
        try:
            chart = strip_chart.of_row(found, model_bars, poles)
        except Refused as fault:
            yield f"{found.characteristic.label}: {fault}"
            continue
        if chart is not None:
            words = strip_chart.sentence(chart, found.characteristic.unit)
            named = f"{found.characteristic.label}, bars {chart.numbers[0]} to {chart.numbers[-1]}"
            yield f"{named}: {strip_chart.strip(chart)}  {words}"


def _n(size: Fraction) -> str:
    return quantities.plain(size)
