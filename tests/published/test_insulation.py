"""Insulation and copper resistance against IEEE 43 and worked figures."""

from __future__ import annotations

from fractions import Fraction

import pytest

from store.errors import Refused
from store.rules import insulation

F = Fraction


@pytest.mark.parametrize(("degc", "k"), [(10, 0.125), (20, 0.25), (30, 0.5), (40, 1), (50, 2), (60, 4), (70, 8)])
def test_halving_per_ten_degrees(degc: float, k: float) -> None:
    """IEEE 43 (secondary): K at 10 to 70 degC."""
    assert insulation.to_40_degc(1.0, degc) == pytest.approx(k)


def test_copper() -> None:
    """Secondary: 80 ohm at 20 degC to 100 ohm: 83.63 degC; 1.21 ohm 20 to 75 degC: printed 1.472, which is 1.4715."""
    assert float(insulation.copper_temperature(F(100), F(80), F(20))) == pytest.approx(83.63, abs=0.005)
    assert float(insulation.copper(F("1.21"), F(20), F(75))) == pytest.approx(1.472, abs=6e-4)


@pytest.mark.parametrize("degc", ["-234.5", "-300"])
def test_no_winding_is_so_cold(degc: str) -> None:
    """Refused in one line."""
    with pytest.raises(Refused):
        insulation.copper(F(1), F(degc))
    with pytest.raises(Refused):
        insulation.to_40_degc(1.0, float(degc))


def test_polarization_index_only_where_ten_minutes_were_waited() -> None:
    """None without the ten-minute value; the scope says whom the standard leaves out."""
    assert insulation.polarization_index(F(100), None) is None
    assert insulation.polarization_index(F(100), F(250)) == F("2.5")
    assert "750 W" in insulation.SCOPE
