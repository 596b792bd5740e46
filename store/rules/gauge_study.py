"""A gauge study: crossed parts x people x repeats by analysis of variance; what of the spread is the gauge's.

Method: two-way random effects with interaction; the interaction is pooled into repeatability where it is not significant
at ALPHA. Source: Cano, Moguerza, Redchuk, Six Sigma with R (2012), ch. 5; the tests hold it against statsmodels.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from math import sqrt

from store.errors import Refused

ALPHA = 0.05
Cells = Sequence[Sequence[Sequence[float]]]


@dataclass(frozen=True, slots=True)
class Effect:
    """A line of the analysis: degrees of freedom, sum of squares, mean square, F and p (None for the rest)."""

    name: str
    freedom: int
    squares: float
    mean: float
    f: float | None = None
    p: float | None = None


@dataclass(frozen=True, slots=True)
class Study:
    """Standard deviations in the unit of the readings: repeatability (the gauge's own), reproducibility (people), part, total.

    `share` is the gauge's (both) share of the total; `pooled` whether the interaction was pooled.
    """

    effects: tuple[Effect, ...]
    repeatability: float
    reproducibility: float
    part: float
    total: float
    pooled: bool

    @property
    def gauge(self) -> float:
        """Repeatability and reproducibility together."""
        return sqrt(self.repeatability**2 + self.reproducibility**2)

    @property
    def share(self) -> float:
        """The gauge's share of the total spread, 0 to 1."""
        return self.gauge / self.total if self.total else 0.0

    def judges(self, tolerance: float) -> tuple[bool, float]:
        """Whether six standard deviations of the gauge are within 30 per cent of a tolerance, and the share (common practice)."""
        if tolerance <= 0:
            raise Refused("a tolerance is above zero")
        share = 6 * self.gauge / tolerance
        return share <= 0.3, share


def study(cells: Cells) -> Study:
    """Analyse readings[part][person][repeat]. Raises Refused: fewer than two of each, or a table with gaps."""
    parts, people = len(cells), len(cells[0]) if cells else 0
    repeats = len(cells[0][0]) if people else 0
    if parts < 2 or people < 2 or repeats < 2:
        raise Refused("a gauge study takes at least two parts, two people and two repeats each")
    if any(len(row) != people or any(len(cell) != repeats for cell in row) for row in cells):
        raise Refused("a gauge study has as many repeats of every part by every person; there is a gap")
    a, b, n = parts, people, repeats
    grand = _mean([v for row in cells for cell in row for v in cell])
    of_part = [_mean([v for cell in row for v in cell]) for row in cells]
    of_person = [_mean([v for row in cells for v in row[j]]) for j in range(b)]
    of_cell = [[_mean(cell) for cell in row] for row in cells]
    ss_part = b * n * sum((m - grand) ** 2 for m in of_part)
    ss_person = a * n * sum((m - grand) ** 2 for m in of_person)
    ss_cell = n * sum((of_cell[i][j] - of_part[i] - of_person[j] + grand) ** 2 for i in range(a) for j in range(b))
    ss_error = sum((v - of_cell[i][j]) ** 2 for i in range(a) for j in range(b) for v in cells[i][j])
    df = (a - 1, b - 1, (a - 1) * (b - 1), a * b * (n - 1))
    return _components(a, b, n, df, (ss_part, ss_person, ss_cell, ss_error))


def _components(a: int, b: int, n: int, df: tuple[int, ...], ss: tuple[float, ...]) -> Study:
    ms_part, ms_person, ms_cell, ms_error = (s / d for s, d in zip(ss, df, strict=True))
    f_cell = ms_cell / ms_error if ms_error else float("inf")
    p_cell = _upper(f_cell, df[2], df[3])
    pooled = p_cell >= ALPHA
    effects: tuple[Effect, ...]
    if pooled:
        rest_df, rest_ss = df[2] + df[3], ss[2] + ss[3]
        rest = rest_ss / rest_df
        effects = (
            _effect("part", df[0], ss[0], rest, rest_df), _effect("person", df[1], ss[1], rest, rest_df),
            Effect("repeatability", rest_df, rest_ss, rest),
        )  # fmt: skip
        person = max(0.0, (ms_person - rest) / (a * n))
        part = max(0.0, (ms_part - rest) / (b * n))
        return _study(effects, rest, person, part, pooled)
    effects = (
        _effect("part", df[0], ss[0], ms_cell, df[2]), _effect("person", df[1], ss[1], ms_cell, df[2]),
        Effect("part x person", df[2], ss[2], ms_cell, f_cell, p_cell), Effect("repeatability", df[3], ss[3], ms_error),
    )  # fmt: skip
    both = max(0.0, (ms_cell - ms_error) / n)
    person = max(0.0, (ms_person - ms_cell) / (a * n)) + both
    part = max(0.0, (ms_part - ms_cell) / (b * n))
    return _study(effects, ms_error, person, part, pooled)


def _study(effects: tuple[Effect, ...], error: float, person: float, part: float, pooled: bool) -> Study:
    return Study(effects, sqrt(error), sqrt(person), sqrt(part), sqrt(error + person + part), pooled)


def _effect(name: str, freedom: int, squares: float, rest: float, rest_freedom: int) -> Effect:
    mean = squares / freedom
    f = mean / rest if rest else float("inf")
    return Effect(name, freedom, squares, mean, f, _upper(f, freedom, rest_freedom))


def _upper(f: float, one: int, other: int) -> float:
    """The probability of an F at least so large."""
    from scipy.stats import f as distribution

    return float(distribution.sf(f, one, other))


def _mean(values: Sequence[float]) -> float:
    return sum(values) / len(values)
