"""Running tests: no-load at its voltage, stall, loaded point, solenoid windings, and the customary diagnosis.

The diagnosis is that on which TM 5-4310-354-14 ch. 7, TM 5-3810-303-24 table 10D-1 and TM 10-3930-671-24 agree.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction
from math import pi

from store.errors import Refused
from store.rules import quantities

AS_READ = Fraction(2, 100)
CORRECTED = Fraction(10, 100)
DIAGNOSIS_SOURCE = "TM 5-4310-354-14 ch. 7; TM 5-3810-303-24 table 10D-1; TM 10-3930-671-24"


class Comparison(StrEnum):
    """How a no-load test at some voltage stands against a limit that holds at another."""

    as_read = "as read"
    corrected = "corrected"
    not_comparable = "not comparable"


class Level(StrEnum):
    """Where a value lies against what is rated."""

    none = "none"
    low = "low"
    rated = "rated"
    high = "high"


@dataclass(frozen=True, slots=True)
class NoLoad:
    """A no-load test brought to the specified voltage. `speed` in rpm is corrected where `comparison` says so."""

    comparison: Comparison
    speed: Fraction | None
    current: Fraction | None
    says: str


@dataclass(frozen=True, slots=True)
class Diagnosis:
    """What the pair of speed and current customarily means; `points_to` is empty for a good one."""

    says: str
    points_to: tuple[str, ...]
    source: str = DIAGNOSIS_SOURCE


@dataclass(frozen=True, slots=True)
class Power:
    """A loaded or stalled point, watts. `efficiency` is None where torque or speed is zero, or nothing goes in."""

    out: float
    taken: float | None
    efficiency: float | None
    formula: str


def no_load(
    volts: Fraction, specified: Fraction, *, speed: Fraction | None = None, current: Fraction | None = None
) -> NoLoad:
    """Bring a no-load test to the specified voltage: speed goes with the volts, the current hardly changes.

    Within 2 % it is taken as read; within 10 % the speed is multiplied by specified / volts and printed as corrected;
    beyond that it is not comparable (TM 5-4310-354-14: speed in proportion, current nearly the same).
    Raises Refused for zero volts or a value below zero.
    """
    if volts <= 0 or specified <= 0:
        raise Refused("a no-load test has volts above zero")
    for what, value in (("speed", speed), ("current", current)):
        if value is not None and value < 0:
            raise Refused(f"{what} is not below zero")
    off = abs(volts - specified) / specified
    said = f"{quantities.plain(volts)} V against {quantities.plain(specified)} V"
    if off <= AS_READ:
        return NoLoad(Comparison.as_read, speed, current, f"judged as read ({said}, within 2 %)")
    if off <= CORRECTED:
        made = None if speed is None else speed * specified / volts
        formula = ""
        if speed is not None and made is not None:
            formula = (
                f": {quantities.plain(speed)} x {quantities.plain(specified)} / {quantities.plain(volts)} = "
                f"{quantities.rounded(made, 0)} rpm"
            )
        return NoLoad(
            Comparison.corrected,
            made,
            current,
            f"speed corrected to the specified volts{formula}; current as read ({said})",
        )
    return NoLoad(Comparison.not_comparable, None, None, f"not comparable: {said}, more than 10 % off; test again")


def level(value: Fraction, low: Fraction | None, high: Fraction | None) -> Level:
    """Where a value lies; `none` for zero."""
    if value == 0:
        return Level.none
    if low is not None and value < low:
        return Level.low
    return Level.high if high is not None and value > high else Level.rated


_GOOD = Diagnosis("speed and current are as rated", ())
_MATRIX = {
    (Level.low, Level.high): Diagnosis(
        "low speed with high current",
        ("friction: tight, dirty or worn bearings, bent shaft, loose pole shoe", "shorted armature", "grounded armature or field"),
    ),
    (Level.none, Level.high): Diagnosis("does not run, high current", ("direct ground in terminal or field", "seized bearing")),
    (Level.none, Level.none): Diagnosis(
        "does not run, no current",
        ("open field circuit", "open armature coil", "broken brush springs, worn brushes or high mica"),
    ),
    (Level.low, Level.low): Diagnosis("low speed with low current", ("high internal resistance: connections, dirty commutator",)),
    (Level.high, Level.high): Diagnosis("high speed with high current", ("shorted fields",)),
}  # fmt: skip


def diagnose(speed: Level, current: Level) -> Diagnosis | None:
    """The customary meaning of a no-load test; None where custom has none. A rated current counts as no fault of its own."""
    if speed is Level.rated and current in {Level.rated, Level.low}:
        return _GOOD
    if speed is Level.low and current is Level.rated:
        return _MATRIX[(Level.low, Level.low)]
    return _MATRIX.get((speed, current))


def power(
    torque_nm: Fraction, speed_rpm: Fraction, volts: Fraction | None = None, amps: Fraction | None = None
) -> Power:
    """P = 2 pi n T, n in turns a second; efficiency only where torque and speed are above zero. Raises Refused.

    25 and 5 lbf on a 1 ft pulley at 1800 rpm: 3.427 hp (US Navy, Basic Machines, ch. 8, with true pi).
    """
    for what, value in (("torque", torque_nm), ("speed", speed_rpm), ("volts", volts), ("amps", amps)):
        if value is not None and value < 0:
            raise Refused(f"{what} is not below zero")
    out = 2 * pi * float(speed_rpm / 60) * float(torque_nm)
    taken = None if volts is None or amps is None else float(volts * amps)
    formula = f"2 pi x {quantities.plain(speed_rpm)}/60 x {quantities.plain(torque_nm)} = {out:.0f} W"
    if not taken or out <= 0:
        return Power(out, taken, None, formula)
    return Power(out, taken, out / taken, f"{formula}; {out:.0f} / {taken:.0f} W = {100 * out / taken:.0f} %")


def resistance(volts: Fraction, amps: Fraction) -> Fraction:
    """Ohms from volts and amps: the circuit at stall, or a winding. Raises Refused for zero volts or no current."""
    if volts <= 0:
        raise Refused("zero volts: nothing is tested")
    if amps <= 0:
        raise Refused("no current flows: the circuit is open, or the reading is missing")
    return volts / amps


def windings_agree(
    volts: Fraction, amps: Fraction, ohms: Fraction, within: Fraction = Fraction(5, 100)
) -> tuple[bool, str]:
    """Whether amps, volts and ohms of a winding agree within a share (5 %, common practice, unless said), and the sentence.

    Raises Refused for zero volts, amps or ohms.
    """
    if ohms <= 0:
        raise Refused("a winding has a resistance above zero")
    made = resistance(volts, amps)
    off = abs(made - ohms) / ohms
    said = (
        f"{quantities.plain(volts)} V / {quantities.plain(amps)} A = {quantities.rounded(made, 3)} ohm, "
        f"measured {quantities.plain(ohms)} ohm"
    )
    if off <= within:
        return True, f"{said}: they agree"
    return False, f"{said}: {float(off) * 100:.0f} % apart; one of the three is wrong, or the winding is hot"
