"""Which bushing of those at hand restores a fit: its bore against the journal, its outside against the housing.

The worn bushing has no part in it: a worn part's sizes mislead.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction

from store.errors import Refused
from store.rules.limits import Limit
from store.rules.plan_lines import number


@dataclass(frozen=True, slots=True)
class Bushing:
    """A bushing at hand, sizes in the unit of the fit; `outside` None where it is not listed."""

    number: str
    bore: Fraction
    outside: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Seat:
    """Where it goes: journal and, where measured, housing bore, smallest and largest; the limits of both fits."""

    unit: str
    journal: tuple[Fraction, Fraction]
    clearance: Limit
    housing: tuple[Fraction, Fraction] | None = None
    press: Limit | None = None


@dataclass(frozen=True, slots=True)
class Choice:
    """A bushing that restores the fit: clearance from tightest to loosest, a prediction; `press` is tight below zero."""

    bushing: Bushing
    clearance: tuple[Fraction, Fraction]
    press: tuple[Fraction, Fraction] | None
    formula: str
    note: str


def choose(at_hand: Sequence[Bushing], seat: Seat) -> tuple[Choice, ...]:
    """Those whose clearance lies inside its limit, and whose outside is tight in the housing; the tightest running first.

    Without a limit for the press fit the outside must be larger than the housing. Raises Refused where the clearance has no
    upper limit or a size is not above zero.
    """
    if seat.clearance.high is None:
        raise Refused("choosing a bushing needs an upper limit of the running clearance")
    if min(seat.journal) <= 0:
        raise Refused("a journal has a diameter above zero")
    low = seat.clearance.low or Fraction(0)
    found = []
    for one in at_hand:
        tight, loose = one.bore - max(seat.journal), one.bore - min(seat.journal)
        if tight < low or loose > seat.clearance.high or tight <= 0:
            continue
        press = None
        if seat.housing is not None and one.outside is not None:
            press = (min(seat.housing) - one.outside, max(seat.housing) - one.outside)
            if not _is_tight(press, seat.press):
                continue
        formula = (
            f"{number(one.bore)} - {number(max(seat.journal))} = {number(tight)}"
            + (f" to {number(one.bore)} - {number(min(seat.journal))} = {number(loose)}" if loose != tight else "")
            + f" {seat.unit}"
        )
        found.append(Choice(one, (tight, loose), press, formula, _note(seat, one)))
    return tuple(sorted(found, key=lambda choice: (choice.clearance[1], choice.bushing.number)))


def _is_tight(press: tuple[Fraction, Fraction], limit: Limit | None) -> bool:
    if limit is None or (limit.low is None and limit.high is None):
        return press[1] < 0
    return (limit.low is None or press[0] >= limit.low) and (limit.high is None or press[1] <= limit.high)


def _note(seat: Seat, one: Bushing) -> str:
    if seat.housing is None:
        return "the housing bore is not measured: the press fit is not checked; a porous bushing closes in a little when pressed"
    if one.outside is None:
        return "its outside diameter is not listed: the press fit is not checked"
    return "a porous bushing closes in a little when pressed; measure again in place"
