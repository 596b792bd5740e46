"""Lines of a rework plan: what to do with a part, why, by which figures, and what size is predicted.

A prediction is a value of its own type. Nothing that judges takes one, so none can enter a verdict.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction

from store.rules import quantities


class Action(StrEnum):
    """What is proposed for a part."""

    leave = "leave"
    polish = "polish"
    turn = "turn"
    turn_last_cut = "turn-last-cut"
    replace_ = "replace"
    straighten_shaft_first = "straighten-shaft-first"
    not_to_be_turned = "not-to-be-turned"
    re_undercut = "re-undercut"
    keep = "keep"
    fit_bushing = "fit-bushing"
    repair_or_replace = "repair-or-replace"
    measure_again = "measure-again"
    look_for = "look-for"


NO_WORK = frozenset({Action.leave, Action.keep})
"""Actions that ask for no work: they need not be accepted and never stand in a rework list."""


@dataclass(frozen=True, slots=True)
class Predicted:
    """A predicted size, exact, in `unit`; never a measurement.

    name      the characteristic that will show it as left, or what it is (`cuts-left`)
    sense     `about`: the size should be met; `at least`: a bound, more is as predicted
    variance  u squared from the readings it was computed from; None where that is not known
    """

    name: str
    value: Fraction
    unit: str
    sense: str = "about"
    variance: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Line:
    """One line of a plan. `formula` has the numbers put in; `source` says on whose word the rule stands."""

    component: str
    action: Action
    because: str
    formula: str = ""
    predicted: tuple[Predicted, ...] = ()
    source: str = ""

    @property
    def is_work(self) -> bool:
        """Whether there is something to do, and so something to accept and to tick off."""
        return self.action not in NO_WORK


def number(value: Fraction) -> str:
    """A size as it stands in a formula: the exact decimal where it ends."""
    return quantities.plain(value)


def sized(value: Fraction, unit: str) -> str:
    """A size with its unit."""
    return f"{quantities.plain(value)} {unit}".strip()
