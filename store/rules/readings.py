"""Typed readings: what the bench or a gauge types, as an exact value; and the slips that a typed value may hide."""

from __future__ import annotations

import re
from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction

from store.errors import ReadingRefused, Refused, brief
from store.rules import quantities
from store.rules.quantities import Quantity


class Mark(StrEnum):
    """What a reading says."""

    number = "number"
    passed = "pass"
    failed = "fail"
    cannot_judge = "cannot judge"
    not_measured = "not measured"


@dataclass(frozen=True, slots=True)
class Typed:
    """A reading as typed and what it says: a value in `unit` with `places` decimals, or a mark with its detail."""

    text: str
    mark: Mark
    value: Fraction | None
    unit: str
    places: int
    detail: str


@dataclass(frozen=True, slots=True)
class Expected:
    """What a reading is held against, all in its own unit; None or empty where nothing is known."""

    new: Fraction | None = None
    low: Fraction | None = None
    high: Fraction | None = None
    others: Sequence[Fraction] = ()
    earlier: Sequence[Fraction] = ()


@dataclass(frozen=True, slots=True)
class Slip:
    """A second look: the value that would be plausible, and the question in the words of the bench."""

    instead: Fraction
    question: str


LONGEST = 200
_NEGATIVE = {Quantity.temperature, Quantity.angle}
_NUMBER = re.compile(
    r"""\s*(?P<sign>[+-])?\s*
    (?: (?P<whole>\d+)[ ]+(?P<num>\d+)\s*/\s*(?P<den>\d+)
      | (?P<num2>\d+)\s*/\s*(?P<den2>\d+)
      | (?P<figure>\d+(?:[.,]\d*)?|[.,]\d+)(?:[eE](?P<exponent>[+-]?\d+))?
    )\s*(?P<unit>[^\s\d.,+/-][^\s]{0,15})?\s*\Z""",
    re.VERBOSE,
)
_COLDEST = Fraction(-469, 2)
"""degC; at -234.5 the resistance of copper would be nothing, and no sum over it can be made."""
_NOT_MEASURED = re.compile(r"(?:not measured|n/?m)\b[\s:,;-]*(?P<why>.*)\Z", re.IGNORECASE | re.DOTALL)
_ATTRIBUTE = re.compile(
    r"(?P<mark>pass|p|ok|fail|f|cannot judge|cannot be judged|c)\b[\s:,;-]*(?P<detail>.*)\Z", re.IGNORECASE | re.DOTALL
)


def parse(text: str, quantity: Quantity, unit: str, *, signed: bool = False) -> Typed:
    """A typed reading. `unit` is taken where none is typed: the gauge's, else that of the sheet.

    Taken: 11.4  11,4  .448  +0.02  7/16  1 3/16  11.4 mm  0.448in  0.448", with spaces and leading zeros as gauges
    send them; `not measured REASON`; for tests that pass or fail: `pass`, `fail bars 4-5`, `cannot judge WHY`.
    Temperatures and angles may lie below zero; other sizes only where `signed` (the limit of a fit, say: tight is below
    zero). Raises ReadingRefused in one line that says how to write it.
    """
    stripped = text.strip()
    if not stripped:
        raise ReadingRefused("nothing is typed; a blank is not zero")
    unmeasured = _NOT_MEASURED.match(stripped)
    if unmeasured:
        return Typed(stripped, Mark.not_measured, None, "", 0, " ".join(unmeasured["why"].split()))
    if quantity is Quantity.attribute:
        return _attribute(stripped)
    if len(stripped) > LONGEST:
        raise ReadingRefused(f"{brief(stripped, 40)!r} is no reading; it has {len(stripped):,} characters")
    return _number(stripped, quantity, unit, signed)


def _attribute(text: str) -> Typed:
    found = _ATTRIBUTE.match(text)
    if found is None:
        raise ReadingRefused(
            f"{brief(text, 40)!r} is neither pass nor fail; write pass, fail or cannot judge, detail after it"
        )
    first = found["mark"].casefold()
    mark = Mark.passed if first in {"pass", "p", "ok"} else Mark.failed if first in {"fail", "f"} else Mark.cannot_judge
    return Typed(text, mark, None, "", 0, " ".join(found["detail"].split()))


def _number(text: str, quantity: Quantity, unit: str, signed: bool) -> Typed:
    found = _NUMBER.match(text)
    if found is None:
        raise ReadingRefused(_why_not(text))
    symbol = found["unit"] or unit
    if quantity is Quantity.count:
        if symbol:
            raise ReadingRefused(f"a count has no unit, so not {brief(symbol, 20)}")
    else:
        try:
            known = quantities.unit(symbol)
        except Refused as fault:
            raise ReadingRefused(str(fault)) from None
        if known.quantity is not quantity:
            raise ReadingRefused(f"{known.symbol} is not a unit of {quantity}; write one of {_units(quantity)}")
        symbol = known.symbol
    value, places = _value(found, text)
    if value < 0 and not signed and quantity not in _NEGATIVE:
        raise ReadingRefused(f"{brief(text, 40)}: a {quantity} is not below zero; does the gauge send deviations?")
    if quantity is Quantity.temperature and quantities.convert(value, symbol, "degC") <= _COLDEST:
        raise ReadingRefused(f"{brief(text, 40)}: nothing at the bench is so cold; is the temperature a slip?")
    if quantity is Quantity.count and value.denominator != 1:
        raise ReadingRefused(f"{brief(text, 40)}: a count is a whole number")
    return Typed(text, Mark.number, value, symbol, places, "")


def _value(found: re.Match[str], text: str) -> tuple[Fraction, int]:
    sign = -1 if found["sign"] == "-" else 1
    numerator = found["num"] or found["num2"]
    if numerator:
        denominator = int(found["den"] or found["den2"])
        if denominator == 0:
            raise ReadingRefused(f"{brief(text, 40)}: nothing is divided by zero")
        value = int(found["whole"] or 0) + Fraction(int(numerator), denominator)
        return sign * value, len(quantities.plain(value).partition(".")[2]) if quantities.terminates(value) else 4
    figure = found["figure"]
    whole, mark, decimals = figure.partition("," if "," in figure else ".")
    if mark == "," and len(decimals) == 3 and whole and whole != "0":
        raise ReadingRefused(f"{figure} may be {whole}.{decimals} or {whole}{decimals}; write the one that is meant")
    exponent = int(found["exponent"] or 0)
    if abs(exponent) > 12:
        raise ReadingRefused(f"{brief(text, 40)}: the exponent is out of reach")
    value = Fraction(int(f"{whole or 0}{decimals}"), 10 ** len(decimals)) * Fraction(10) ** exponent
    return sign * value, max(0, len(decimals) - exponent)


def _why_not(text: str) -> str:
    shown = brief(text, 40)
    if re.match(r"[+-]?\s*(nan|inf)", text, re.IGNORECASE):
        return f"{shown!r} is no number"
    if re.fullmatch(r"[\d.,]+", text) and len(re.findall(r"[.,]", text)) > 1:
        return f"{shown!r} has more than one decimal mark; write it with one and nothing between the thousands"
    if len(re.findall(r"\d+(?:[.,]\d+)?", text)) > 1:
        return f"{shown!r} holds two numbers; type one reading at a time"
    return f"{shown!r} is no reading; write it like 11.4, .448in, 7/16 or 1 3/16"


def _units(quantity: Quantity) -> str:
    return ", ".join(u.symbol for u in quantities.units_of(quantity))


_FACTORS = {
    Quantity.length: (
        (Fraction("25.4"), "inches typed as millimetres"),
        (1 / Fraction("25.4"), "millimetres typed as inches"),
    ),
    Quantity.force: (
        (Fraction("0.2780138509537812"), "ounces typed as newtons"),
        (1 / Fraction("0.2780138509537812"), "newtons typed as ounces"),
        (Fraction("9.80665"), "kilograms-force typed as newtons"),
        (Fraction("4.4482216152605"), "pounds-force typed as newtons"),
    ),
}
_DECIMALS = tuple((Fraction(10) ** n, "a slipped decimal point") for n in (1, -1, 2, -2))


def slips(typed: Typed, expected: Expected) -> tuple[Slip, ...]:
    """Questions about a reading that is not plausible as typed but would be if one usual slip were undone."""
    if typed.value is None or typed.value <= 0:
        return ()
    span = _plausible(expected)
    if span is None or span[0] <= typed.value <= span[1]:
        return ()
    quantity = quantities.unit(typed.unit).quantity
    found = []
    for factor, what in (*_FACTORS.get(quantity, ()), *_DECIMALS):
        instead = typed.value * factor
        if span[0] <= instead <= span[1]:
            shown = quantities.plain(Fraction(quantities.rounded(instead, max(3, typed.places))))
            found.append(Slip(instead, f"{typed.text} {typed.unit}: {what}? {shown} {typed.unit} would be usual"))
    return tuple(found)


def _plausible(expected: Expected) -> tuple[Fraction, Fraction] | None:
    """Where a reading of this may lie: between the known sizes, with half as much again to both sides."""
    known = [v for v in (expected.new, expected.low, expected.high) if v is not None and v > 0]
    known += [v for v in (*expected.others, *expected.earlier) if v > 0]
    if not known:
        return None
    return min(known) / 2, max(known) * 2


def two_units_agree(one: Typed, other: Typed) -> bool:
    """Whether a size that is given in two units is the same in both, within one unit of the last digit of either.

    Printed manuals get it wrong. Raises Refused where the quantities differ, ValueError for marks.
    """
    if one.value is None or other.value is None:
        raise ValueError("a size is wanted")
    here = quantities.convert(other.value, other.unit, one.unit)
    last_one = Fraction(1, 10**one.places)
    last_other = Fraction(1, 10**other.places) * quantities.scale(other.unit, one.unit)
    return abs(here - one.value) < max(last_one, last_other)
