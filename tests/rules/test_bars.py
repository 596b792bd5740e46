"""Bar-to-bar patterns, each named where it stands and not where it does not."""

from __future__ import annotations

from fractions import Fraction

import pytest

from store.errors import Refused
from store.rules.bars import chart

EVEN = [Fraction(100)] * 24


def with_bars(**values: int) -> list[Fraction]:
    """Twenty-four even bars but for these (b3=50: bar 3)."""
    made = list(EVEN)
    for name, value in values.items():
        made[int(name[1:]) - 1] = Fraction(value)
    return made


@pytest.mark.parametrize(
    ("values", "said", "far"),
    [
        (EVEN, "even all round", ()), (with_bars(b3=50), "one low at 3: a short", (3,)),
        (with_bars(b3=300, b2=90, b4=90), "one high at 3 with its neighbours low: an open coil", (2, 3, 4)),
        (with_bars(b3=112, b4=112), "a pair high at 3 and 4: a riser joint", (3, 4)),
        (with_bars(b1=112, b24=112), "a pair high at 1 and 24", (1, 24)), (with_bars(b3=50, b9=60), "low at 3, 9: no pattern", (3, 9)),
        (with_bars(b3=300, b2=99, b4=99), "high at 3: no pattern", (3,)),
        (with_bars(b3=300, b2=90, b4=90, b9=90), "low at 2, 4, 9 and high at 3: no pattern", (2, 3, 4, 9)),
        (with_bars(b3=112, b4=112, b9=110, b10=110), "pairs high at 3 and 4, 9 and 10: riser joints", (3, 4, 9, 10)),
        (with_bars(b3=112, b4=112, b5=112), "high at 3, 4, 5: no pattern", (3, 4, 5)),
    ],
)  # fmt: skip
def test_patterns(values: list[Fraction], said: str, far: tuple[int, ...]) -> None:
    """The pattern and the bars that make it."""
    found = chart(values, Fraction(5), 24, 4)
    assert said in found.pattern
    assert found.far == far


def test_bars_that_were_not_read_do_not_move_the_others() -> None:
    """Bars 1, 2, 3, 7 and 9 of 24: the low one is bar 7; neighbours are neighbours on the commutator, not in the list."""
    read = [Fraction(n) for n in (100, 100, 100, 50, 100)]
    found = chart(read, Fraction(5), 24, 4, [1, 2, 3, 7, 9])
    assert (found.far, found.pattern) == ((7,), "one low at 7: a short is suspected there")
    high = [Fraction(n) for n in (100, 112, 100, 112, 100)]
    assert "no pattern" in chart(high, Fraction(5), 24, 4, [1, 3, 5, 7, 9]).pattern
    assert chart(read[:3], Fraction(5), 24).pattern == "even, 3 of 24 bars read"
    with pytest.raises(Refused, match="bar 25: this model's commutator has 24 bars"):
        chart(read, Fraction(5), 24, 4, [1, 2, 3, 7, 25])


def test_without_a_limit_no_pattern_is_named() -> None:
    """The readings are shown all the same."""
    found = chart(with_bars(b3=50), None, 24)
    assert (found.far, found.pattern) == ((), "no limit is entered, so no pattern is named")
    assert found.deviations[2] == -50


def test_one_dead_coil_does_not_drag_the_middle() -> None:
    """Deviations are from the median: the others stay at nought."""
    found = chart(with_bars(b3=0), Fraction(5), 24)
    assert found.middle == 100
    assert [d for d in found.deviations if d != 0] == [Fraction(-100)]


def test_an_equalised_winding_repeats() -> None:
    """A period of bars over pole pairs is named, and like is to be compared with like."""
    values = [Fraction(100 + 20 * (n % 12 == 0)) for n in range(24)]
    assert "repeats every 12 bars" in chart(values, Fraction(5), 24, 4).pattern


@pytest.mark.parametrize(
    ("values", "bars", "why"),
    [
        (EVEN, 23, "has 23 bars"),
        (EVEN[:2], None, "three bars"),
        ([Fraction(0)] * 5, None, "is the supply on"),
        ([Fraction(-1)] * 5, None, "below zero"),
    ],
)
def test_bad_input(values: list[Fraction], bars: int | None, why: str) -> None:
    """One clear line each."""
    with pytest.raises(Refused, match=why):
        chart(values, Fraction(5), bars)
