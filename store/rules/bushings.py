"""Which bushing restores a fit: from the sizes at hand, the housing bore and the journal; worn bushings mislead."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction


@dataclass(frozen=True, slots=True)
class Bushing:
    """A bushing at hand, all sizes in one unit; `bore` as fitted."""

    number: str
    maker: str
    bore: Fraction
    outside: Fraction


@dataclass(frozen=True, slots=True)
class Choice:
    """A bushing that restores the clearance; `clearance` on the smallest journal, `interference` in the housing, None where not measured."""

    bushing: Bushing
    clearance: Fraction
    interference: Fraction | None


def choose(
    at_hand: Iterable[Bushing], journal: Fraction, low: Fraction | None, high: Fraction | None,
    housing: Fraction | None = None, widest: Fraction | None = None,
) -> tuple[Choice, ...]:  # fmt: skip
    """Those whose clearance on the journal lies within the limits and that press into the housing, the middle ones first.

    `journal` is the smallest diameter of the journal, against which the high limit holds; `widest` its largest, for the low
    one. `housing` is the largest bore of the housing. Empty where none restores the fit.
    """
    found = []
    for bushing in at_hand:
        clearance = bushing.bore - journal
        tight = bushing.bore - (journal if widest is None else widest)
        if (low is not None and tight < low) or (high is not None and clearance > high) or tight <= 0:
            continue
        interference = None if housing is None else bushing.outside - housing
        if interference is not None and interference <= 0:
            continue
        found.append(Choice(bushing, clearance, interference))
    middle = None if low is None or high is None else (low + high) / 2
    return tuple(
        sorted(
            found, key=lambda c: (abs(c.clearance - middle) if middle is not None else c.clearance, c.bushing.number)
        )
    )
