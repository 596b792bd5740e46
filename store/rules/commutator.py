"""A commutator on the lathe: the diameter at which it is clean, the slots that are left, what a dial sees, cuts that remain.

Terms: D smallest measured diameter, r TIR taken from the journals, u smallest undercut, g deepest defect below the
surface (0 where there is none), p polish allowance on the diameter. All in one unit, exact.

    clean-up diameter   D' = D - r - 2 g - p       never larger than the true one, exact for pure eccentricity (p = 0)
    worst slot after    u - [(D - D') / 2 + r]     a bound for any shape
                        u - [(D - D') / 2 + r / 2] for a round commutator off its centre

The bound holds for the true smallest diameter: stations that missed it make D too large, so the advice says what it rests on.

Source: geometry; the tests turn sampled profiles about their axis. The polish allowance is common practice, and the shop's.
"""

from __future__ import annotations

from fractions import Fraction
from math import ceil, cos, floor, pi

from store.errors import Refused
from store.rules.quantities import plain


def clean_up(
    diameter: Fraction, runout: Fraction, defect: Fraction = Fraction(0), polish: Fraction = Fraction(0)
) -> Fraction:
    """The diameter at which the whole surface is clean. Raises Refused for a TIR as large as the diameter, or below zero."""
    for what, size in (("runout", runout), ("defect", defect), ("polish allowance", polish)):
        if size < 0:
            raise Refused(f"a {what} is not below zero")
    if diameter <= 0:
        raise Refused("a diameter is above zero")
    if runout >= diameter:
        raise Refused(
            f"a runout of {plain(runout)} is not smaller than the diameter {plain(diameter)}; is one of them a slip?"
        )
    made = diameter - runout - 2 * defect - polish
    if made <= 0:
        raise Refused("nothing would be left of the commutator; is a defect or a runout a slip?")
    return made


def worst_slot(undercut: Fraction, diameter: Fraction, turned: Fraction, runout: Fraction) -> Fraction:
    """The least undercut after turning to `turned`, a bound for any shape; below zero: the mica stands proud."""
    return undercut - ((diameter - turned) / 2 + runout)


def worst_slot_eccentric(undercut: Fraction, diameter: Fraction, turned: Fraction, runout: Fraction) -> Fraction:
    """The least undercut after turning a round commutator that was off its centre."""
    return undercut - ((diameter - turned) / 2 + runout / 2)


def read_share(readings: int) -> float:
    """The share of a once-a-turn runout that so many equally spaced dial readings see at least: cos(pi/N) for even N.

    For odd N the least spread of N points of a full turn is seen: cos(pi/(2 N)). Raises Refused under two readings.
    """
    if readings < 2:
        raise Refused("one dial reading shows no runout")
    return cos(pi / readings) if readings % 2 == 0 else cos(pi / (2 * readings))


def cuts_left(diameter: Fraction, lowest: Fraction, cut: Fraction, equal_passes: bool = True) -> int:
    """How many further cuts of this size remain inside the limit. Raises Refused for a cut that takes nothing."""
    if cut <= 0:
        raise Refused("a cut takes something off")
    room = (diameter - lowest) / cut
    return max(0, floor(room) if equal_passes else ceil(room) - 1)
