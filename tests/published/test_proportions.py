"""Proportions against published values."""

from __future__ import annotations

import pytest

from store.rules.proportions import wilson


@pytest.mark.parametrize(
    ("cases", "of", "low", "high"),
    [(81, 263, 0.2553, 0.3662), (15, 148, 0.0624, 0.1605), (0, 20, 0.0, 0.1611), (1, 29, 0.0061, 0.1718)],
)
def test_wilson_interval(cases: int, of: int, low: float, high: float) -> None:
    """Source: Newcombe, Statistics in Medicine 17 (1998), Table I, method 3; read in a public secondary text that cites it
    (81/263 and 15/148), the two others from memory."""
    assert wilson(cases, of) == pytest.approx((low, high), abs=5e-5)


def test_nothing_seen_says_nothing() -> None:
    """No case: anything from none to all."""
    assert wilson(0, 0) == (0.0, 1.0)
