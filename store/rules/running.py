"""Running tests: no-load at its voltage, stall, loaded point, solenoid windings, and the customary diagnosis.

Slightly high volts raise the free speed in proportion and leave the current nearly as it is (TM 5-4310-354-14).
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction
from math import pi

from store.errors import Refused

AS_READ, CORRECTABLE = Fraction(2, 100), Fraction(10, 100)
AGREE = Fraction(5, 100)


class Comparable(StrEnum):
    """Whether a no-load result may be held against its limit."""

    as_read = "as read"
    corrected = "corrected"
    not_comparable = "not comparable"


def at_voltage(volts: Fraction, specified: Fraction) -> Comparable:
    """Within 2 per cent of the specified volts as read, within 10 corrected, beyond that not comparable. Raises Refused."""
    if volts <= 0 or specified <= 0:
        raise Refused("a test at zero volts says nothing")
    off = abs(volts - specified) / specified
    if off <= AS_READ:
        return Comparable.as_read
    return Comparable.corrected if off <= CORRECTABLE else Comparable.not_comparable


def corrected_speed(speed: Fraction, volts: Fraction, specified: Fraction) -> Fraction:
    """The free speed at the specified volts: in proportion. Raises Refused at zero volts."""
    if volts <= 0:
        raise Refused("a test at zero volts says nothing")
    return speed * specified / volts


def power_w(torque_nm: float, speed_rpm: float) -> float:
    """Mechanical power: 2 pi n T, with n in turns a second. Raises Refused below zero."""
    if torque_nm < 0 or speed_rpm < 0:
        raise Refused("torque and speed are not below zero")
    return 2 * pi * speed_rpm / 60 * torque_nm


def efficiency(torque_nm: float, speed_rpm: float, volts: float, amps: float) -> float | None:
    """Mechanical over electrical power; None at stall or running free, where there is none. Raises Refused at zero volts."""
    if volts <= 0 or amps <= 0:
        raise Refused("an efficiency needs volts and amps above zero")
    if torque_nm <= 0 or speed_rpm <= 0:
        return None
    return power_w(torque_nm, speed_rpm) / (volts * amps)


def resistance(volts: Fraction, amps: Fraction) -> Fraction:
    """Volts over amps. Raises Refused at zero amps or volts."""
    if volts <= 0 or amps <= 0:
        raise Refused("volts and amps are above zero")
    return volts / amps


def windings_agree(volts: Fraction, amps: Fraction, ohms: Fraction) -> str:
    """ "" where volts, amps and ohms of a winding agree within five per cent, else the question. Raises Refused at zero."""
    computed = resistance(volts, amps)
    if ohms <= 0:
        raise Refused("a winding's resistance is above zero")
    if abs(computed - ohms) <= AGREE * computed:
        return ""
    return f"{float(volts):g} V at {float(amps):g} A make {float(computed):.3g} ohm, and {float(ohms):g} ohm was read: look again"


@dataclass(frozen=True, slots=True)
class Diagnosis:
    """What the pair of current and speed customarily means."""

    pattern: str
    means: str


_MATRIX = {
    ("rated", "rated"): "rated current and speed: the motor is good",
    (
        "high",
        "low",
    ): "low speed, high current: friction (tight or worn bearings, bent shaft, rubbing), a shorted armature, or a grounded armature or field",
    ("high", "none"): "does not run, high current: a direct ground in terminal or field, or seized bearings",
    (
        "none",
        "none",
    ): "does not run, no current: an open field, an open armature, broken brush springs, worn brushes or high mica",
    ("low", "low"): "low speed, low current: high internal resistance (connections, leads, dirty commutator)",
    ("high", "high"): "high speed, high current: shorted fields",
}


def diagnose(amps: Fraction, rpm: Fraction, most_amps: Fraction, least_rpm: Fraction, least_amps: Fraction | None = None,
             most_rpm: Fraction | None = None) -> Diagnosis | None:  # fmt: skip
    """The customary reading of a no-load test; None where the pair has no customary meaning.

    Source: TM 5-4310-354-14 ch 7, TM 5-3810-303-24 Table 10D-1 and TM 10-3930-671-24 agree. Amps below `least_amps`
    (half the highest where the sheet gives none) count as low, speed above `most_rpm` (1.3 of the least) as high.
    """
    low_amps = least_amps if least_amps is not None else most_amps / 2
    high_rpm = most_rpm if most_rpm is not None else least_rpm * 13 / 10
    current = "none" if amps == 0 else "high" if amps > most_amps else "low" if amps < low_amps else "rated"
    speed = "none" if rpm == 0 else "low" if rpm < least_rpm else "high" if rpm > high_rpm else "rated"
    if (current, speed) == ("low", "rated"):
        current = "rated"
    if (current, speed) == ("rated", "high") or (current, speed) == ("low", "high"):
        return None
    means = _MATRIX.get((current, speed))
    return None if means is None else Diagnosis(f"current {current}, speed {speed}", means)
