"""How sure a reading is: uncertainty from the gauge, and the probability that what was read conforms.

Sources: JCGM 100:2008 (GUM) for combining, JCGM 106:2012 for the probability of conformity.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from fractions import Fraction
from functools import lru_cache
from math import erfc, sqrt

from store.rules import quantities


@dataclass(frozen=True, slots=True)
class Certainty:
    """What is known of a gauge, sizes in `unit`; None where nothing is known.

    `expanded` is U, `k` its coverage factor (2 where none is said), `repeatability` a standard deviation.
    """

    resolution: Fraction | None = None
    expanded: Fraction | None = None
    k: Fraction | None = None
    repeatability: Fraction | None = None
    unit: str = ""


def variance(known: Certainty) -> Fraction | None:
    """u squared, in the gauge's unit squared: (U/k)^2 + d^2/12 + s^2 (GUM 4.3.7, 5.1.2). None where U is not known."""
    if known.expanded is None:
        return None
    found = (known.expanded / (known.k or Fraction(2))) ** 2
    if known.resolution is not None:
        found += known.resolution**2 / 12
    if known.repeatability is not None:
        found += known.repeatability**2
    return found


@lru_cache(maxsize=1024)
def of_reading(known: Certainty, unit: str) -> tuple[Fraction | None, Fraction | None]:
    """Variance and expanded uncertainty of a reading in `unit` by this gauge; None where it is not known.

    A gauge of another quantity (a caliper for a force, say) tells nothing.
    """
    found = variance(known)
    if found is None or not known.unit or quantities.unit(known.unit).quantity is not quantities.unit(unit).quantity:
        return None, None
    by = quantities.scale(known.unit, unit)
    return found * by**2, (known.expanded or Fraction(0)) * by


FINEST, LEAST_RATIO = 10, 4
"""A resolution to a tenth of the tolerance, and a tolerance of four times 2 U: common practice, warned of, never a verdict."""


def coarse(known: Certainty, tolerance: Fraction, unit: str) -> str:
    """Why a gauge is coarse for a tolerance in `unit`, in words; "" where it is not or nothing of the kind is known."""
    if tolerance <= 0 or not known.unit or quantities.unit(known.unit).quantity is not quantities.unit(unit).quantity:
        return ""
    by, said = quantities.scale(known.unit, unit), []
    of = f"the tolerance of {quantities.plain(tolerance)} {unit}"
    if known.resolution is not None and known.resolution * by * FINEST > tolerance:
        said.append(f"its resolution of {quantities.plain(known.resolution * by)} {unit} is over a tenth of {of}")
    if known.expanded and tolerance < LEAST_RATIO * 2 * known.expanded * by:
        ratio = quantities.rounded(tolerance / (2 * known.expanded * by), 1)
        said.append(f"{of} is {ratio} times 2 U, under {LEAST_RATIO}")
    return "; ".join(said)


def combine(variances: Iterable[Fraction | None]) -> Fraction | None:
    """The variance of a sum or difference of independent readings; None where one of them is not known (GUM 5.1.2)."""
    total = Fraction(0)
    for one in variances:
        if one is None:
            return None
        total += one
    return total


def conformance(value: Fraction, low: Fraction | None, high: Fraction | None, variance: Fraction) -> float:
    """The probability that the size lies within its limits: Phi((high - y)/u) - Phi((low - y)/u) (JCGM 106:2012, 7.3)."""
    return conformance_of(
        None if low is None else float(low - value), None if high is None else float(high - value), float(variance)
    )


def conformance_of(below: float | None, above: float | None, variance: float) -> float:
    """The same by the distances low - y and high - y; None where there is no such end."""
    u = sqrt(variance)
    if u == 0.0:
        return 1.0 if (below is None or below <= 0) and (above is None or above >= 0) else 0.0
    upper = 1.0 if above is None else phi(above / u)
    lower = 0.0 if below is None else phi(below / u)
    return max(0.0, upper - lower)


def phi(z: float) -> float:
    """The standard normal distribution function."""
    return 0.5 * erfc(-z / sqrt(2.0))
