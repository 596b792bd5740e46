"""What a rework plan is made of: lines with their reasons, formulas and predictions."""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction

from store.rules import quantities


@dataclass(frozen=True, slots=True)
class Predicted:
    """A predicted size of a characteristic, exact, in its unit; never a measurement."""

    name: str
    value: Fraction
    unit: str


@dataclass(frozen=True, slots=True)
class PlanLine:
    """One line of the plan: what to do to which component and why, the formula with its numbers, predicted sizes."""

    component: str
    action: str
    because: str
    formula: str = ""
    predicted: tuple[Predicted, ...] = ()

    @property
    def is_work(self) -> bool:
        """Whether there is something to do, and so something to accept and to tick off."""
        return self.action not in {"leave", "keep"}


def shown(size: Fraction) -> str:
    """A predicted size in words: four decimals at the most."""
    return quantities.plain(Fraction(quantities.rounded(size, 4)))
