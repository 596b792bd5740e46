"""Brushes: keep or replace, pressure, and how long they last at the rate at which they wore."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from store.errors import Refused
from store.rules.quantities import plain


@dataclass(frozen=True, slots=True)
class Point:
    """A brush length at so many hours (or starts) of work, counted from any beginning."""

    length: Fraction
    worked: Fraction


def rate(earlier: Point, later: Point) -> Fraction:
    """Length lost per hour (or start). Raises Refused on no work between, negative work, or no wear: then nothing can be said."""
    if earlier.worked < 0 or later.worked < 0:
        raise Refused("hours and starts are not below zero")
    if later.worked <= earlier.worked:
        raise Refused("the later reading has no more hours or starts than the earlier one")
    if later.length >= earlier.length:
        raise Refused("between the two readings nothing wore; there is no rate to reckon with")
    return (earlier.length - later.length) / (later.worked - earlier.worked)


def life_left(earlier: Point, later: Point, limit: Fraction) -> Fraction:
    """Hours (or starts) until the limit at the rate between two readings; 0 where it is reached. Raises like `rate`."""
    return max(Fraction(0), (later.length - limit) / rate(earlier, later))


def pressure_kpa(force_n: Fraction, area_mm2: Fraction) -> Fraction:
    """Force over section: N / mm2 in kPa. Raises Refused for a section that is not above zero or a force below it."""
    if area_mm2 <= 0:
        raise Refused("a brush section is above zero")
    if force_n < 0:
        raise Refused("a spring force is not below zero")
    return force_n / area_mm2 * 1000


def force_at(force: Fraction, read_at: Fraction, stated_at: Fraction, lost_per_length: Fraction) -> Fraction:
    """A positive-gradient spring's force at the stated position, from one read elsewhere; positions are brush lengths.

    It loses `lost_per_length` for each unit of length that the brush is shorter (20 gf a millimetre in TM 10-3930-653-14&P).
    Raises Refused below zero, or where the spring would not reach the brush.
    """
    if force < 0 or lost_per_length < 0:
        raise Refused("a spring force, and what it loses with wear, is not below zero")
    made = force - (read_at - stated_at) * lost_per_length
    if made < 0:
        raise Refused("at that position the spring would not reach the brush")
    return made


def advise(shortest: Fraction, limit: Fraction, passes: bool, unit: str) -> tuple[str, str]:
    """`replace` or `keep`, and why; `passes` says whether a brush at the limit may stay. All brushes of a set go together."""
    short = shortest < limit or (shortest == limit and not passes)
    gap = plain(abs(shortest - limit))
    if short:
        return (
            "replace",
            f"the shortest is {plain(shortest)} {unit}, {gap} under {plain(limit)}; replace the whole set and seat it",
        )
    return "keep", f"the shortest is {plain(shortest)} {unit}, {gap} over {plain(limit)}"
