"""Derived characteristics: judged like measured ones, from the readings of what they are made of.

A spec says how one is made:

    clearance BORE JOURNAL     bore - journal: largest bore - smallest journal for the high limit, smallest bore -
                               largest journal for the low one
    ovality X                  largest - smallest at one station; the worst station governs
    taper X                    difference of station means, the largest
    spread X                   largest - smallest of all
    wear X                     new - now, the worst; the limit's new size is the new size of X (zero wear is none)
    pressure FORCE SECTION     force / area, each

Uncertainties of the parts are combined as of independent readings (JCGM 100:2008, 5.1.2).
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import replace
from fractions import Fraction

from store.errors import Refused, brief
from store.rules import certainty, limits, quantities
from store.rules.limits import Judgement, Limit, Measured, Verdict
from store.rules.quantities import Quantity
from store.rules.statistic import Statistic

_PARTS = {"clearance": 2, "ovality": 1, "taper": 1, "spread": 1, "wear": 1, "pressure": 2}
_Sized = tuple[Fraction, str, Fraction | None, int]


def sources(spec: str) -> tuple[str, ...]:
    """The names of the characteristics that a spec is made from. Raises Refused for a spec that there is not."""
    kind, *names = spec.split()
    if _PARTS.get(kind) != len(names):
        raise Refused(f"{brief(spec)!r} says nothing that can be derived; one of {', '.join(_PARTS)} and its parts")
    return tuple(names)


def judge(spec: str, readings: Mapping[str, Sequence[Measured]], limit: Limit | None) -> Judgement:
    """Judge a derived characteristic from the readings of its parts, in the limit's unit.

    A part without readings, or short of what it takes (one reading for an ovality), gives `not measured`.
    """
    kind = spec.split()[0]
    parts = [[m for m in readings.get(name, ()) if m.typed.value is not None] for name in sources(spec)]
    if not all(parts):
        verdict = Verdict.not_measured if limit else Verdict.no_limit
        return Judgement(verdict, Statistic.each, unit=limit.unit if limit else "", reason="none")
    unit = limit.unit if limit and limit.unit else _unit(kind, parts)
    if kind == "pressure":
        return _pressure(parts[0], parts[1], unit, limit)
    sized = [[_sized(m, unit) for m in part] for part in parts]
    if kind == "clearance":
        return _clearance(sized[0], sized[1], unit, limit)
    if kind == "wear":
        return _wear(sized[0], unit, limit)
    found = _spread_of(kind, sized[0])
    if found is None:
        verdict = Verdict.not_measured if limit else Verdict.no_limit
        return Judgement(verdict, Statistic.spread, unit=unit, count=len(sized[0]), reason="none")
    value, at, variance, places = found
    return limits.decide(value, unit, _single(limit), variance, Statistic.spread, at=at, count=1, places=places)


def _unit(kind: str, parts: Sequence[Sequence[Measured]]) -> str:
    return "kPa" if kind == "pressure" else parts[0][0].typed.unit


def _sized(one: Measured, unit: str) -> _Sized:
    value = one.typed.value
    assert value is not None
    by = quantities.scale(one.typed.unit, unit)
    places = one.typed.places if one.typed.unit == unit else max(one.typed.places, 4 if unit == "in" else 3)
    converted = quantities.convert(value, one.typed.unit, unit)
    return converted, one.position, None if one.variance is None else one.variance * by * by, places


def _clearance(bores: Sequence[_Sized], journals: Sequence[_Sized], unit: str, limit: Limit | None) -> Judgement:
    """Both ends are tried; the nearer to its limit governs. Without a limit the loosest is given."""
    loose = _difference(max(bores, key=_value), min(journals, key=_value))
    tight = _difference(min(bores, key=_value), max(journals, key=_value))
    governing = loose
    if (
        limit is not None
        and limit.low is not None
        and (limit.high is None or tight[0] - limit.low < limit.high - loose[0])
    ):
        governing = tight
    value, at, variance, places = governing
    return limits.decide(value, unit, _single(limit), variance, Statistic.each, at=at, count=1, places=places)


def _difference(bore: _Sized, journal: _Sized) -> _Sized:
    at = f"bore {bore[1]}, journal {journal[1]}"
    return bore[0] - journal[0], at, certainty.combine((bore[2], journal[2])), max(bore[3], journal[3])


def _wear(sized: Sequence[_Sized], unit: str, limit: Limit | None) -> Judgement:
    if limit is None or limit.new is None:
        return Judgement(Verdict.no_limit, Statistic.largest, unit=unit, count=len(sized), reason="none")
    least = min(sized, key=_value)
    value = limit.new - least[0]
    worn = replace(limit, new=Fraction(0))
    return limits.decide(value, unit, worn, least[2], Statistic.largest, at=least[1], count=len(sized), places=least[3])


def _spread_of(kind: str, sized: Sequence[_Sized]) -> _Sized | None:
    """Ovality, taper or spread; None where there are too few readings for one."""
    if kind == "spread":
        return _range(sized) if len(sized) > 1 else None
    stations: dict[str, list[_Sized]] = {}
    for one in sized:
        stations.setdefault(one[1].rstrip("0123456789") or one[1], []).append(one)
    if kind == "ovality":
        found = [(_range(of), name) for name, of in stations.items() if len(of) > 1]
        if not found:
            return None
        (value, _, variance, places), name = max(found, key=lambda pair: pair[0][0])
        return value, name, variance, places
    if len(stations) < 2:
        return None
    return _range([_mean(of, name) for name, of in stations.items()])


def _range(sized: Sequence[_Sized]) -> _Sized:
    low, high = min(sized, key=_value), max(sized, key=_value)
    at = f"{low[1]} to {high[1]}" if low[1] != high[1] else low[1]
    return high[0] - low[0], at, certainty.combine((low[2], high[2])), max(low[3], high[3])


def _mean(sized: Sequence[_Sized], name: str) -> _Sized:
    total = certainty.combine(one[2] for one in sized)
    n = len(sized)
    return (
        sum((one[0] for one in sized), Fraction(0)) / n,
        name,
        None if total is None else total / n**2,
        max(one[3] for one in sized),
    )


def _pressure(forces: Sequence[Measured], sections: Sequence[Measured], unit: str, limit: Limit | None) -> Judgement:
    """Force over section, brush by brush; one section serves all. To first order u(p)^2 = p^2 (u(F)^2/F^2 + u(A)^2/A^2)."""
    if quantities.unit(unit).quantity is not Quantity.pressure:
        unit = "kPa"
    areas = {m.position: m for m in sections}
    found: list[_Sized] = []
    for m in forces:
        area = areas.get(m.position) or sections[0]
        newton = quantities.convert(m.typed.value or Fraction(0), m.typed.unit, "N")
        square = quantities.convert(area.typed.value or Fraction(0), area.typed.unit, "mm2")
        if square <= 0:
            continue
        pressure = quantities.convert(newton / square * 1000, "kPa", unit)
        variance = None
        if m.variance is not None and area.variance is not None and m.typed.value and area.typed.value:
            relative = m.variance / m.typed.value**2 + area.variance / area.typed.value**2
            variance = pressure**2 * relative
        found.append((pressure, m.position, variance, 1))
    if not found:
        return Judgement(Verdict.not_measured, Statistic.each, unit=unit, reason="none")
    worst = found[0]
    if limit is not None and (limit.low is not None or limit.high is not None):
        worst = min(found, key=lambda one: limits.margin(one[0], limit))
    return limits.decide(worst[0], unit, limit, worst[2], Statistic.each, at=worst[1], count=len(found), places=1)


def _single(limit: Limit | None) -> Limit | None:
    return None if limit is None else replace(limit, expected=1)


def _value(one: _Sized) -> Fraction:
    return one[0]
