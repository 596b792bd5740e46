"""Resistance brought to a reference temperature: copper windings, and insulation.

Copper: (234.5 + t_ref)/(234.5 + t), the inferred zero of copper (IEC 60034-1, IEEE 118). Insulation: halved for every
10 degC above 40 (IEEE 43).
"""

from __future__ import annotations

from fractions import Fraction

from store.errors import Refused

COPPER_ZERO = Fraction("-234.5")
ABSOLUTE_ZERO = Fraction("-273.15")
SCOPE = "IEEE 43 holds for machines of 750 W and more; this one lies below, so the correction is a guide and not the standard's"
SCOPE_UNKNOWN = "IEEE 43 holds for machines of 750 W and more; most starting motors' ratings are not entered here"
_LEAST_WATTS = 750


def copper_at(ohms: Fraction, at_degc: Fraction, to_degc: Fraction = Fraction(20)) -> Fraction:
    """A copper winding's resistance at another temperature, exact. Raises Refused at or below -234.5 degC, or for no ohms."""
    for t in (at_degc, to_degc):
        if t <= COPPER_ZERO:
            raise Refused(f"{float(t):g} degC is not above -234.5, where copper would have no resistance")
    if ohms < 0:
        raise Refused("a resistance is not below zero")
    return ohms * (to_degc - COPPER_ZERO) / (at_degc - COPPER_ZERO)


def copper_temperature(cold_ohms: Fraction, cold_degc: Fraction, hot_ohms: Fraction) -> Fraction:
    """The temperature of a copper winding from its resistance cold and hot, degC. Raises Refused."""
    if cold_degc <= COPPER_ZERO:
        raise Refused(f"{float(cold_degc):g} degC is not above -234.5, where copper would have no resistance")
    if cold_ohms <= 0 or hot_ohms <= 0:
        raise Refused("a winding has a resistance above zero")
    return hot_ohms / cold_ohms * (cold_degc - COPPER_ZERO) + COPPER_ZERO


def factor_to_40(at_degc: Fraction) -> float:
    """What an insulation resistance read at this temperature is multiplied by: 0.5^((40 - t)/10). Raises Refused."""
    if at_degc < ABSOLUTE_ZERO:
        raise Refused(f"{float(at_degc):g} degC lies below absolute zero")
    return float(0.5 ** (float(40 - at_degc) / 10))


def insulation_at_40(megohms: Fraction, at_degc: Fraction) -> float:
    """An insulation resistance brought to 40 degC, in the unit given. Raises Refused."""
    if megohms < 0:
        raise Refused("a resistance is not below zero")
    return float(megohms) * factor_to_40(at_degc)


def polarization_index(one_minute: Fraction | None, ten_minutes: Fraction | None) -> Fraction:
    """Ten-minute over one-minute insulation resistance, exact. Raises Refused where one of them lacks or is zero."""
    if one_minute is None or ten_minutes is None:
        raise Refused("a polarization index needs the one-minute and the ten-minute value")
    if one_minute <= 0 or ten_minutes <= 0:
        raise Refused("an insulation resistance for a polarization index is above zero")
    return ten_minutes / one_minute


def scope_note(watts: Fraction | None) -> str:
    """What to say of IEEE 43's scope; empty for a machine that it covers."""
    if watts is None:
        return SCOPE_UNKNOWN
    return SCOPE if watts < _LEAST_WATTS else ""
