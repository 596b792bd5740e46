"""Resistance at its temperature: copper to a reference, insulation to 40 degC (IEEE 43); and what IEEE 43 is not for."""

from __future__ import annotations

from fractions import Fraction

from store.errors import Refused
from store.rules.quantities import plain

COPPER = Fraction("234.5")
SCOPE = "IEEE 43 is written for machines of 750 W and more and excludes smaller ones; used here for comparison only"
MEANS_LITTLE_ABOVE = Fraction(5000)
HIGH = "above 5000 Mohm after one minute the index says little (IEEE 43)"
"""From memory of IEEE 43; the one-minute value in Mohm, as read."""


def copper(resistance: Fraction, at_degc: Fraction, reference_degc: Fraction = Fraction(20)) -> Fraction:
    """Copper resistance at the reference temperature: R (234.5 + t_ref)/(234.5 + t). Raises Refused at or below -234.5 degC."""
    for degc in (at_degc, reference_degc):
        if degc <= -COPPER:
            raise Refused(f"copper has no resistance to reckon with at {plain(degc)} degC; is the temperature a slip?")
    if resistance < 0:
        raise Refused("a resistance is not below zero")
    return resistance * (COPPER + reference_degc) / (COPPER + at_degc)


def copper_temperature(resistance: Fraction, known: Fraction, known_degc: Fraction) -> Fraction:
    """The temperature at which a winding has this resistance, from a known pair. Raises Refused for one not above zero."""
    if known <= 0 or resistance <= 0:
        raise Refused("a resistance is above zero")
    return (COPPER + known_degc) * resistance / known - COPPER


def to_40_degc(megohm: float, at_degc: float) -> float:
    """Insulation resistance at 40 degC: R x 0.5 ** ((40 - t)/10), halving every 10 degC (IEEE 43). Raises Refused."""
    if at_degc <= -COPPER:
        raise Refused(f"{at_degc:g} degC is no temperature of a winding")
    if megohm < 0:
        raise Refused("a resistance is not below zero")
    return float(megohm * 0.5 ** ((40.0 - at_degc) / 10.0))


def polarization_index(one_minute: Fraction | None, ten_minutes: Fraction | None) -> Fraction | None:
    """Ten-minute over one-minute value (IEEE 43); None where the ten-minute value was not taken. Raises Refused at zero."""
    if one_minute is None or ten_minutes is None:
        return None
    if one_minute <= 0:
        raise Refused("the one-minute value is above zero")
    return ten_minutes / one_minute
