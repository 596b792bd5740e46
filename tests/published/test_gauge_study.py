"""Gauge studies against a published one and against statsmodels."""

from __future__ import annotations

import random

import pandas
import pytest
import statsmodels.api
from statsmodels.formula.api import ols

from store.errors import Refused
from store.rules.gauge_study import study

# Cano, Moguerza, Redchuk, Six Sigma with R (2012), ch. 5: 3 operators x 3 parts x 3 runs (read)
PUBLISHED = {
    "op1": [[1.27, 0.90, 1.09], [1.12, 1.09, 1.15], [1.73, 1.28, 1.77]],
    "op2": [[1.34, 1.32, 1.27], [1.24, 1.00, 1.14], [1.64, 1.65, 1.77]],
    "op3": [[1.09, 1.26, 1.09], [1.48, 1.15, 1.15], [1.64, 1.44, 1.68]],
}


def test_as_published() -> None:
    """The interaction is pooled; variance components as printed, to eight decimals."""
    cells = [[PUBLISHED[person][part] for person in PUBLISHED] for part in range(3)]
    found = study(cells)
    assert found.pooled
    assert found.gauge == pytest.approx(0.14792656, abs=5e-9)
    assert found.repeatability == pytest.approx(0.14597518, abs=5e-9)
    assert found.reproducibility == pytest.approx(0.02394813, abs=5e-9)
    assert found.part == pytest.approx(0.25365123, abs=5e-9)


@pytest.mark.parametrize("seed", range(20))
def test_against_statsmodels(seed: int) -> None:
    """Sums of squares, F and p of random tables, with and without interaction."""
    draw = random.Random(seed)
    parts, people, repeats = draw.randint(2, 6), draw.randint(2, 4), draw.randint(2, 4)
    crossed = draw.choice([0.0, 0.3])
    lines = []
    cells: list[list[list[float]]] = []
    for i in range(parts):
        row = []
        for j in range(people):
            shift = draw.gauss(0, crossed)
            cell = [10 + 0.5 * i + 0.1 * j + shift + draw.gauss(0, 0.1) for _ in range(repeats)]
            lines += [{"part": f"p{i}", "person": f"o{j}", "value": v} for v in cell]
            row.append(cell)
        cells.append(row)
    found = study(cells)
    formula = "value ~ C(part) + C(person)" + ("" if found.pooled else " + C(part):C(person)")
    table = statsmodels.api.stats.anova_lm(ols(formula, pandas.DataFrame(lines)).fit(), typ=2)
    rows = {"part": "C(part)", "person": "C(person)", "part x person": "C(part):C(person)", "repeatability": "Residual"}
    for effect in found.effects:
        theirs = table.loc[rows[effect.name]]
        assert effect.squares == pytest.approx(theirs["sum_sq"], rel=1e-9, abs=1e-12)
        assert effect.freedom == theirs["df"]
        if effect.name == "part x person" or (found.pooled and effect.f is not None):
            assert effect.f == pytest.approx(theirs["F"], rel=1e-9)
            assert effect.p == pytest.approx(theirs["PR(>F)"], rel=1e-6, abs=1e-12)


def test_gaps_are_refused() -> None:
    """Two of each at least, and none missing."""
    for cells in (
        [],
        [[[1.0, 2.0]]],
        [[[1.0], [2.0]], [[1.0], [2.0]]],
        [[[1.0, 2.0], [1.0]], [[1.0, 2.0], [1.0, 2.0]]],
    ):
        with pytest.raises(Refused):
            study(cells)
