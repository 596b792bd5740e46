"""The wear rule in characters: each part has a mark of its own, in twenty columns and without colour."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.limits import Limit, Rule
from store.rules.wear import wear_rule
from tui.widgets.wear_rule import BEYOND, GUARD, JUDGED, LIMIT, NEW, OFF_LEFT, OFF_RIGHT, SCALE, draw


def limit(new: str | None, low: str | None, high: str | None) -> Limit:
    """A limit in millimetres."""
    sizes = [None if text is None else Fraction(text) for text in (new, low, high)]
    return Limit("mm", sizes[0], sizes[1], sizes[2], equal_passes=True, expected=1, rule=Rule.guarded_165u)


def drawn(limits: Limit, values: list[str], variance: str | None = "0.01", width: int = 20) -> str:
    """The rule of some readings, the first one judged."""
    sizes = [Fraction(v) for v in values]
    made = wear_rule(limits, sizes, sizes[0] if sizes else None, None if variance is None else Fraction(variance))
    assert made is not None
    return draw(made, width)


def test_new_limit_guard_and_reading_in_twenty_columns() -> None:
    """New size at the left, limit at the right with its guard band, the judged reading between, beyond past it."""
    shown = drawn(limit("14", "9.5", None), ["12"], variance="0.09")
    assert len(shown) == 20
    assert shown.index(NEW) < shown.index(JUDGED) < shown.index(GUARD) <= shown.index(LIMIT) < shown.index(BEYOND)


@pytest.mark.parametrize(("value", "is_beyond"), [("9.0", True), ("9.6", False)])
def test_a_worn_reading_stands_past_the_limit(value: str, *, is_beyond: bool) -> None:
    """Below the low limit the judged mark is to the right of the limit, above it to the left or upon it."""
    shown = drawn(limit("14", "9.5", None), [value], variance=None)
    assert is_beyond == (LIMIT in shown and shown.index(JUDGED) > shown.index(LIMIT))


def test_two_limits_have_two_ends() -> None:
    """A two-sided limit has a low end at the left and a high end at the right, beyond outside both."""
    shown = drawn(limit(None, "0.1", "0.3"), ["0.2"], variance=None)
    assert shown.count(LIMIT) == 2
    assert shown[0] == shown[-1] == BEYOND
    assert shown.index(LIMIT) < shown.index(JUDGED) < shown.rindex(LIMIT)


def test_what_is_off_the_scale_points_there() -> None:
    """A reading far off either end is a mark that points to it."""
    assert drawn(limit("14", "9.5", None), ["1"])[-1] == OFF_RIGHT
    assert drawn(limit("14", "9.5", None), ["99"])[0] == OFF_LEFT


def test_a_scale_stands_without_readings() -> None:
    """Before the first reading there are new size and limit already."""
    shown = drawn(limit("14", "9.5", None), [], variance=None)
    assert set(shown) == {SCALE, NEW, LIMIT, BEYOND}


@given(
    st.fractions(min_value=1, max_value=100), st.fractions(min_value=1, max_value=100),
    st.lists(st.fractions(min_value=0, max_value=200), max_size=8), st.integers(8, 80),
)  # fmt: skip
def test_it_is_as_wide_as_asked(new: Fraction, low: Fraction, values: list[Fraction], width: int) -> None:
    """Whatever the sizes, it fills just its columns."""
    made = wear_rule(Limit("mm", new, low, None, True, 1, Rule.simple), values, values[0] if values else None)
    assert made is not None
    assert len(draw(made, width)) == width
