"""Quantities and units, exact: a size is a Fraction, a unit is a factor to the base of its quantity.

Factors are exact by definition: 1 in = 25.4 mm, 1 lb = 0.453 592 37 kg, g_n = 9.806 65 m/s2
(NIST SP 811, 2008, Appendix B.8; the tests hold the table against it and against pint).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction
from functools import lru_cache

from store.errors import Refused, brief


class Quantity(StrEnum):
    """What is measured. `attribute` passes or fails, `count` is a whole number; both have no unit."""

    length = "length"
    force = "force"
    torque = "torque"
    angle = "angle"
    current = "current"
    voltage = "voltage"
    resistance = "resistance"
    speed = "speed"
    temperature = "temperature"
    time = "time"
    pressure = "pressure"
    ratio = "ratio"
    unbalance = "unbalance"
    area = "area"
    attribute = "attribute"
    count = "count"  # type: ignore[assignment]  # the trade's word; nobody counts letters in a quantity


@dataclass(frozen=True, slots=True)
class Unit:
    """A unit: base value = value x factor + offset."""

    symbol: str
    quantity: Quantity
    factor: Fraction
    offset: Fraction = Fraction(0)


_F = Fraction
_INCH = _F("25.4")
_POUND = _F("0.45359237")
_G = _F("9.80665")
_LBF = _POUND * _G
_KGF = _G
_FOOT = _INCH * 12 / 1000

_UNITS = (
    Unit("mm", Quantity.length, _F(1)),
    Unit("um", Quantity.length, _F(1, 1000)),
    Unit("in", Quantity.length, _INCH),
    Unit("thou", Quantity.length, _INCH / 1000),
    Unit("mm2", Quantity.area, _F(1)),
    Unit("in2", Quantity.area, _INCH**2),
    Unit("N", Quantity.force, _F(1)),
    Unit("lbf", Quantity.force, _LBF),
    Unit("ozf", Quantity.force, _LBF / 16),
    Unit("gf", Quantity.force, _KGF / 1000),
    Unit("kgf", Quantity.force, _KGF),
    Unit("N.m", Quantity.torque, _F(1)),
    Unit("lbf.ft", Quantity.torque, _LBF * _FOOT),
    Unit("lbf.in", Quantity.torque, _LBF * _FOOT / 12),
    Unit("kgf.m", Quantity.torque, _KGF),
    Unit("deg", Quantity.angle, _F(1)),
    Unit("A", Quantity.current, _F(1)),
    Unit("mA", Quantity.current, _F(1, 1000)),
    Unit("uA", Quantity.current, _F(1, 10**6)),
    Unit("V", Quantity.voltage, _F(1)),
    Unit("mV", Quantity.voltage, _F(1, 1000)),
    Unit("ohm", Quantity.resistance, _F(1)),
    Unit("mohm", Quantity.resistance, _F(1, 1000)),
    Unit("uohm", Quantity.resistance, _F(1, 10**6)),
    Unit("kohm", Quantity.resistance, _F(1000)),
    Unit("Mohm", Quantity.resistance, _F(10**6)),
    Unit("rpm", Quantity.speed, _F(1)),
    Unit("degC", Quantity.temperature, _F(1)),
    Unit("degF", Quantity.temperature, _F(5, 9), _F(-160, 9)),
    Unit("kPa", Quantity.pressure, _F(1)),
    Unit("psi", Quantity.pressure, _LBF / (_INCH / 1000) ** 2 / 1000),
    Unit("s", Quantity.time, _F(1)),
    Unit("min", Quantity.time, _F(60)),
    Unit("h", Quantity.time, _F(3600)),
    Unit("%", Quantity.ratio, _F(1)),
    Unit("ozf.in", Quantity.unbalance, _POUND * 1000 / 16 * _INCH),
    Unit("g.mm", Quantity.unbalance, _F(1)),
    Unit("", Quantity.attribute, _F(1)),
)
_BY_SYMBOL = {unit.symbol: unit for unit in _UNITS}
_OTHER_NAMES = {
    '"': "in", "inch": "in", "inches": "in", "''": "in", "mil": "thou", "µm": "um", "μm": "um", "micron": "um",
    "newton": "N", "oz": "ozf", "lb": "lbf", "lbs": "lbf", "g": "gf", "kg": "kgf", "nm": "N.m", "n·m": "N.m",
    "n-m": "N.m", "lb.ft": "lbf.ft", "ft.lb": "lbf.ft", "lb-ft": "lbf.ft", "ft-lb": "lbf.ft", "ftlb": "lbf.ft",
    "lb.in": "lbf.in", "in.lb": "lbf.in", "lb-in": "lbf.in", "in-lb": "lbf.in", "kg.m": "kgf.m", "kg-m": "kgf.m",
    "amp": "A", "amps": "A", "µa": "uA", "μa": "uA", "volt": "V", "volts": "V", "ohms": "ohm", "ω": "ohm",
    "µohm": "uohm", "μohm": "uohm", "kω": "kohm", "mω": "mohm", "megohm": "Mohm", "r/min": "rpm", "c": "degC",
    "°c": "degC", "f": "degF", "°f": "degF", "sec": "s", "hr": "h", "°": "deg", "mm²": "mm2", "in²": "in2",
}  # fmt: skip
_SAME_CASELESS: dict[str, str] = {}
for _symbol in _BY_SYMBOL:
    _folded = _symbol.casefold()
    _SAME_CASELESS[_folded] = "" if _folded in _SAME_CASELESS else _symbol  # mohm and Mohm must be told apart


@lru_cache(maxsize=512)
def unit(symbol: str) -> Unit:
    """The unit of that symbol; usual other spellings and cases are taken where they are unambiguous. Raises Refused."""
    typed = symbol.strip()
    found = _BY_SYMBOL.get(typed)
    if found is None:
        folded = typed.casefold()
        name = _OTHER_NAMES.get(typed) or _OTHER_NAMES.get(folded) or _SAME_CASELESS.get(folded)
        found = _BY_SYMBOL.get(name) if name else None
    if found is None:
        near = _nearest(typed)
        raise Refused(
            f"{brief(typed, 20)!r} is no unit that is known here" + (f"; did you mean {near}?" if near else "")
        )
    return found


def units_of(quantity: Quantity) -> tuple[Unit, ...]:
    """The units of a quantity, the base first."""
    return tuple(u for u in _UNITS if u.quantity is quantity)


def convert(value: Fraction, from_symbol: str, to_symbol: str) -> Fraction:
    """A value in another unit of the same quantity, exact. Raises Refused where the quantities differ."""
    if from_symbol == to_symbol:
        return value
    a, b = unit(from_symbol), unit(to_symbol)
    if a.quantity is not b.quantity:
        raise Refused(f"{from_symbol} is a unit of {a.quantity}, {to_symbol} of {b.quantity}")
    return (value * a.factor + a.offset - b.offset) / b.factor


def scale(from_symbol: str, to_symbol: str) -> Fraction:
    """The factor for a difference or an uncertainty, in which offsets have no part. Raises Refused."""
    if from_symbol == to_symbol:
        return Fraction(1)
    a, b = unit(from_symbol), unit(to_symbol)
    if a.quantity is not b.quantity:
        raise Refused(f"{from_symbol} is a unit of {a.quantity}, {to_symbol} of {b.quantity}")
    return a.factor / b.factor


def terminates(value: Fraction) -> bool:
    """Whether the value has an exact decimal form."""
    rest = value.denominator
    for prime in (2, 5):
        while rest % prime == 0:
            rest //= prime
    return rest == 1


def plain(value: Fraction) -> str:
    """The exact decimal text where it ends, else twelve significant digits."""
    if value.denominator == 1:
        return str(value.numerator)
    if not terminates(value):
        magnitude = len(str(abs(value.numerator) // value.denominator).lstrip("0"))
        return rounded(value, 12 - magnitude).rstrip("0").rstrip(".") if magnitude < 12 else rounded(value, 0)
    places = 0
    rest = value
    while rest.denominator != 1:
        rest *= 10
        places += 1
    return rounded(value, places)


@lru_cache(maxsize=65_536)
def kept(text: str) -> Fraction:
    """The value of `str(Fraction)`, read several times faster than by Fraction itself."""
    numerator, _, denominator = text.partition("/")
    return Fraction(int(numerator), int(denominator or 1))


def rounded(value: Fraction, places: int) -> str:
    """The value to so many decimals, half to even; never `-0`."""
    scaled = round(value * 10**places) if places else round(value)
    digits = str(abs(scaled)).rjust(places + 1, "0")
    text = f"{digits[:-places]}.{digits[-places:]}" if places > 0 else digits
    return f"-{text}" if scaled < 0 else text


def shown(value: Fraction, places: int, apart_from: Sequence[Fraction] = ()) -> str:
    """The value with `places` decimals, and as many more as it takes not to look equal to, or across, `apart_from`.

    A value that is equal to one of them is shown equal. Twelve decimals at the most.
    """
    sides = [_side(value, other) for other in apart_from]
    for digits in range(places, 13):
        seen = Fraction(round(value * 10**digits), 10**digits)
        if all(_side(seen, other) == side for other, side in zip(apart_from, sides, strict=True)):
            return rounded(value, digits)
    return plain(value)


def _side(value: Fraction, other: Fraction) -> int:
    return (value > other) - (value < other)


def _nearest(symbol: str) -> str:
    folded = symbol.casefold()
    close = [s for s in _BY_SYMBOL if s and (s.casefold().startswith(folded[:2]) or folded.startswith(s.casefold()))]
    return ", ".join(close[:3])
