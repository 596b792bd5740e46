"""Units against NIST SP 811 and against pint."""

from __future__ import annotations

from fractions import Fraction
from itertools import product

import pint
import pytest

from store.rules import quantities
from store.rules.quantities import Quantity, convert, plain, rounded

REGISTRY = pint.UnitRegistry()
PINT = {
    "mm": "millimeter", "um": "micrometer", "in": "inch", "thou": "mil_length", "mm2": "millimeter**2", "in2": "inch**2",
    "N": "newton", "lbf": "force_pound", "ozf": "force_ounce", "gf": "force_gram", "kgf": "force_kilogram",
    "N.m": "newton*meter", "lbf.ft": "force_pound*foot", "lbf.in": "force_pound*inch", "kgf.m": "force_kilogram*meter",
    "deg": "degree", "A": "ampere", "mA": "milliampere", "uA": "microampere", "V": "volt", "mV": "millivolt",
    "ohm": "ohm", "mohm": "milliohm", "uohm": "microohm", "kohm": "kiloohm", "Mohm": "megaohm", "rpm": "rpm",
    "degC": "degree_Celsius", "degF": "degree_Fahrenheit", "kPa": "kilopascal", "psi": "psi", "s": "second", "min": "minute",
    "h": "hour", "%": "percent", "ozf.in": "ounce*inch", "g.mm": "gram*millimeter",
}  # fmt: skip


@pytest.mark.parametrize("quantity", [q for q in Quantity if q not in {Quantity.attribute, Quantity.count}])
def test_every_pair_of_units_agrees_with_pint(quantity: Quantity) -> None:
    """Source: pint's definitions, an independent library."""
    for a, b in product(quantities.units_of(quantity), repeat=2):
        ours = float(convert(Fraction(7, 3), a.symbol, b.symbol))
        name_a = "thou" if a.symbol == "thou" else PINT[a.symbol]
        name_b = "thou" if b.symbol == "thou" else PINT[b.symbol]
        theirs = REGISTRY.Quantity(7 / 3, name_a).to(name_b).magnitude
        assert ours == pytest.approx(theirs, rel=1e-12), (a.symbol, b.symbol)


@pytest.mark.parametrize(
    ("value", "unit", "to", "places", "printed"),
    [
        # NIST SP 811 (2008) App. B.8, read in a public secondary text
        ("1", "in", "mm", 1, "25.4"),
        ("0.001", "in", "mm", 4, "0.0254"),
        ("1", "lbf", "N", 6, "4.448222"),
        ("1", "ozf", "N", 7, "0.2780139"),
        ("1", "lbf.ft", "N.m", 6, "1.355818"),
        ("1", "lbf.in", "N.m", 7, "0.1129848"),
        ("1", "psi", "kPa", 6, "6.894757"),
        ("32", "degF", "degC", 1, "0.0"),
        ("212", "degF", "degC", 1, "100.0"),
        # from memory: standard gravity
        ("1", "kgf", "N", 5, "9.80665"),
        # TM 9-2920-243-34 prints 30 oz
        ("30", "ozf", "N", 2, "8.34"),
    ],
)
def test_factors_as_published(value: str, unit: str, to: str, places: int, printed: str) -> None:
    """Each factor to the digits of its source."""
    assert rounded(convert(Fraction(value), unit, to), places) == printed


def test_exact_by_definition() -> None:
    """1 lbf is exactly 4.4482216152605 N (NIST SP 811); 7/16 in is 11.1125 mm; 0.450 in equals 11.43 mm."""
    assert plain(convert(Fraction(1), "lbf", "N")) == "4.4482216152605"
    assert plain(convert(Fraction(7, 16), "in", "mm")) == "11.1125"
    assert convert(Fraction("0.450"), "in", "mm") == Fraction("11.43")
