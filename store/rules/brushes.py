"""Brushes and their springs: keep or replace, pressure on the commutator, force at a stated position, life left."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from store.errors import Refused
from store.rules import quantities
from store.rules.plan_lines import number, sized


@dataclass(frozen=True, slots=True)
class Worn:
    """A brush length on a day: `used` is the hours run or the starts made by then."""

    length: Fraction
    used: Fraction


@dataclass(frozen=True, slots=True)
class Life:
    """What is left of a brush: a prediction. `rate` is length per hour or start; `left` in hours or starts."""

    rate: Fraction
    left: Fraction
    formula: str


def pressure(force: Fraction, force_unit: str, area: Fraction, area_unit: str, to: str = "kPa") -> Fraction:
    """Force over section. Raises Refused for a section of nothing or a force below zero."""
    if area <= 0:
        raise Refused("a brush has a section above zero")
    if force < 0:
        raise Refused("a spring force is not below zero")
    newton = quantities.convert(force, force_unit, "N")
    square = quantities.convert(area, area_unit, "mm2")
    return quantities.convert(newton / square * 1000, "kPa", to)


def force_at(force: Fraction, read_at: Fraction, stated_at: Fraction, lost_per_length: Fraction) -> Fraction:
    """The spring's force at the stated position, from one read elsewhere; both positions are brush lengths.

    A positive-gradient spring loses `lost_per_length` of force for each unit of length that the brush is shorter
    (20 gf a millimetre in TM 10-3930-653-14&P). Raises Refused where the spring would push no more.
    """
    if lost_per_length < 0:
        raise Refused("what a spring loses with wear is not below zero")
    made = force - (read_at - stated_at) * lost_per_length
    if made < 0:
        raise Refused("at that position the spring would not touch the brush")
    return made


def life_left(first: Worn | None, second: Worn | None, limit: Fraction, unit: str = "mm", of: str = "h") -> Life:
    """How long until the brush reaches its limit, at the rate between two readings.

    Raises Refused on one point, no wear, no use between them, negative hours, or a brush that grew.
    """
    if first is None or second is None:
        raise Refused("brush life needs two dated readings with hours or starts; one point has no rate")
    if first.used < 0 or second.used < 0:
        raise Refused("hours and starts are not negative")
    if second.used <= first.used:
        raise Refused("between the two readings the unit did not run, so there is no rate")
    if second.length > first.length:
        raise Refused("the brush is longer than before: another brush, or a slip")
    if second.length == first.length:
        raise Refused("the brush shows no wear between the two readings, so there is no rate")
    rate = (first.length - second.length) / (second.used - first.used)
    left = max(Fraction(0), (second.length - limit) / rate)
    formula = (
        f"({number(second.length)} - {number(limit)}) / [({number(first.length)} - {number(second.length)}) / "
        f"({number(second.used)} - {number(first.used)})] = {sized(left, of)}"
    )
    return Life(rate, left, f"{formula}, lengths in {unit}")
