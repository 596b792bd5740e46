"""A gauge study: parts x people x repeats, all crossed, by analysis of variance.

Sums of squares are exact. An interaction of parts and people whose p is above `alpha` is pooled into repeatability.
Negative components are taken as none. Method: ANOVA of a crossed random design (Montgomery and Runger 1993; AIAG MSA);
the published study of Cano, Moguerza and Redchuk (2012), ch. 5, is among the checks.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import floor, sqrt

from store.errors import Refused

ALPHA = 0.05
FIT, MARGINAL = 0.10, 0.30
"""Shares of the tolerance (6 standard deviations of the gauge over it) up to which a gauge is good, and barely good."""

Table = Sequence[Sequence[Sequence[Fraction]]]


@dataclass(frozen=True, slots=True)
class Term:
    """One line of the analysis: exact sum of squares, degrees of freedom, F against `against`, and its p."""

    name: str
    squares: Fraction
    freedom: int
    f: float | None
    p: float | None

    @property
    def mean(self) -> Fraction:
        """The mean square."""
        return self.squares / self.freedom


@dataclass(frozen=True, slots=True)
class Study:
    """What a gauge study found; standard deviations in the unit of the readings, shares of the total study variation."""

    parts: int
    people: int
    repeats: int
    terms: tuple[Term, ...]
    is_pooled: bool
    alpha: float
    repeatability: float
    reproducibility: float
    gauge: float
    part: float
    total: float
    shares: Mapping[str, float]
    categories: int

    def judges(self, width: Fraction | None) -> tuple[str, float | None, str]:
        """Whether the gauge can judge a tolerance of this width (one-sided: new size to limit): word, share, sentence."""
        if width is None or width <= 0:
            return "unknown", None, "no width of a limit to hold it against: a band, or a new size with one limit"
        share = 6 * self.gauge / float(width)
        word = "can" if share <= FIT else "barely" if share <= MARGINAL else "cannot"
        says = {
            "can": "it can judge this limit",
            "barely": "it can barely judge this limit: between 10 and 30 %",
            "cannot": "it cannot judge this limit: over 30 %",
        }[word]
        return (
            word,
            share,
            f"6 x {self.gauge:.4g} / {float(width):.4g} = {100 * share:.0f} % of the tolerance: {says} (common practice)",
        )


def study(readings: Table, alpha: float = ALPHA) -> Study:
    """Analyse `readings[part][person][repeat]`. At least two of each, all cells alike. Raises Refused."""
    _check(readings, alpha)
    a, b, n = len(readings), len(readings[0]), len(readings[0][0])
    whole = [x for part in readings for cell in part for x in cell]
    grand = sum(whole, Fraction(0)) ** 2 / (a * b * n)
    part_ss = sum((_sum(x for cell in part for x in cell) ** 2 for part in readings), Fraction(0)) / (b * n) - grand
    person_ss = (
        sum((_sum(x for part in readings for x in part[k]) ** 2 for k in range(b)), Fraction(0)) / (a * n) - grand
    )
    cell_ss = sum((_sum(cell) ** 2 for part in readings for cell in part), Fraction(0)) / n - grand
    both_ss = cell_ss - part_ss - person_ss
    rest_ss = sum((x * x for x in whole), Fraction(0)) - grand - cell_ss
    freedom = (a - 1, b - 1, (a - 1) * (b - 1), a * b * (n - 1))
    f_both, p_both = _f(both_ss, freedom[2], rest_ss, freedom[3])
    is_pooled = p_both is None or p_both > alpha
    error_ss, error_df = (both_ss + rest_ss, freedom[2] + freedom[3]) if is_pooled else (rest_ss, freedom[3])
    against = (error_ss, error_df) if is_pooled else (both_ss, freedom[2])
    terms = (
        Term("part", part_ss, freedom[0], *_f(part_ss, freedom[0], *against)),
        Term("person", person_ss, freedom[1], *_f(person_ss, freedom[1], *against)),
        Term("part x person", both_ss, freedom[2], f_both, p_both),
        Term("repeatability", error_ss, error_df, None, None),
    )
    return _components(terms, is_pooled, alpha, a, b, n)


def _components(terms: tuple[Term, ...], is_pooled: bool, alpha: float, a: int, b: int, n: int) -> Study:
    part, person, both, error = (term.mean for term in terms)
    against = error if is_pooled else both
    none = Fraction(0)
    variances = {
        "repeatability": error,
        "person": max(none, (person - against) / (a * n)),
        "part x person": none if is_pooled else max(none, (both - error) / n),
        "part": max(none, (part - against) / (b * n)),
    }
    reproducibility = variances["person"] + variances["part x person"]
    gauge = error + reproducibility
    total = gauge + variances["part"]
    sd = {name: sqrt(v) for name, v in variances.items()}
    sd |= {"reproducibility": sqrt(reproducibility), "gauge": sqrt(gauge), "total": sqrt(total)}
    shares = {name: (s / sd["total"] if total else 0.0) for name, s in sd.items()}
    categories = floor(sqrt(2) * sd["part"] / sd["gauge"]) if gauge else 0
    return Study(
        a, b, n, terms, is_pooled, alpha, sd["repeatability"], sd["reproducibility"], sd["gauge"], sd["part"], sd["total"],
        shares, categories,
    )  # fmt: skip


def _check(readings: Table, alpha: float) -> None:
    if not 0 < alpha < 1:
        raise Refused("alpha lies between 0 and 1")
    if len(readings) < 2 or len(readings[0]) < 2 or len(readings[0][0]) < 2:
        raise Refused("a gauge study takes at least two parts, two people and two repeats")
    people, repeats = len(readings[0]), len(readings[0][0])
    for n, part in enumerate(readings, 1):
        if len(part) != people or any(len(cell) != repeats for cell in part):
            raise Refused(f"part {n} has not the same people and repeats as the first; every cell is measured alike")


def _f(squares: Fraction, freedom: int, error: Fraction, error_freedom: int) -> tuple[float | None, float | None]:
    """F and its p; None both where there is no error to hold it against."""
    if error == 0:
        return None, None if squares == 0 else 0.0
    from scipy.special import fdtrc  # a second to import, and only a study needs it

    f = float((squares / freedom) / (error / error_freedom))
    return f, float(fdtrc(freedom, error_freedom, f))


def _sum(values: object) -> Fraction:
    return sum(values, Fraction(0))  # type: ignore[call-overload,no-any-return]
