"""ISO 286 tolerance grades of the sizes that bushings, bearings and journals have: named where a pair of limits is one.

Widths and deviations in micrometres for nominals above 3 up to 50 mm, from ISO 286-1:2010 tables 1, 2 and 3 as remembered
and held by the tests against published pairs (20H6, 20H7, 20e7, 20s6, 12H7, 12f7).
"""

from __future__ import annotations

from fractions import Fraction

_STEPS = (6, 10, 18, 30, 50)
_WIDTHS = {
    5: (5, 6, 8, 9, 11),
    6: (8, 9, 11, 13, 16),
    7: (12, 15, 18, 21, 25),
    8: (18, 22, 27, 33, 39),
    9: (30, 36, 43, 52, 62),
}
_UPPER = {"e": (20, 25, 32, 40, 50), "f": (10, 13, 16, 20, 25), "g": (4, 5, 6, 7, 9), "h": (0, 0, 0, 0, 0)}
_LOWER = {"n": (8, 10, 12, 15, 17), "p": (12, 15, 18, 22, 26), "r": (15, 19, 23, 28, 34), "s": (19, 23, 28, 35, 43)}
"""Shafts: distance of the upper deviation below the nominal, and of the lower one above it."""


def limits_mm(name: str, nominal_mm: int) -> tuple[Fraction, Fraction] | None:
    """Smallest and largest size of a grade such as `H7` or `f7`; None outside the table. H alone stands for a hole."""
    letter, grade = name[:1], int(name[1:] or 0)
    step = _step(nominal_mm)
    if step is None or grade not in _WIDTHS:
        return None
    width = _WIDTHS[grade][step]
    if letter == "H":
        low, high = 0, width
    elif letter in _UPPER:
        high = -_UPPER[letter][step]
        low = high - width
    elif letter in _LOWER:
        low = _LOWER[letter][step]
        high = low + width
    else:
        return None
    return nominal_mm + Fraction(low, 1000), nominal_mm + Fraction(high, 1000)


def named(low_mm: Fraction, high_mm: Fraction, *, is_hole: bool) -> str:
    """The grade that a pair of limits is, such as `20H7`; empty where it is none in the table."""
    for nominal in {round(low_mm), round(high_mm)}:
        letters = ("H",) if is_hole else (*_UPPER, *_LOWER)
        for letter in letters:
            for grade in _WIDTHS:
                if limits_mm(f"{letter}{grade}", nominal) == (low_mm, high_mm):
                    return f"{nominal}{letter}{grade}"
    return ""


def _step(nominal_mm: int) -> int | None:
    if nominal_mm <= 3:
        return None
    return next((n for n, top in enumerate(_STEPS) if nominal_mm <= top), None)
