"""The wear rule: what stands where, whatever the numbers."""

from __future__ import annotations

from fractions import Fraction
from typing import Any

from hypothesis import given
from hypothesis import strategies as st

from store.rules.limits import Limit
from store.rules.wear import wear_rule

SIZES = st.decimals(min_value="0.01", max_value=50, places=2).map(lambda d: Fraction(str(d)))


@given(SIZES, SIZES, SIZES)
def test_new_stands_left_of_the_limit(new: Fraction, low: Fraction, value: Fraction) -> None:
    """A size that shrinks: new at the left, the limit at the right, beyond it farther right."""
    if new <= low:
        return
    drawn = wear_rule(Limit("mm", new, low, None), [value], value)
    assert drawn is not None
    assert drawn.new is not None
    (end, _) = drawn.ends[0]
    assert drawn.new[0] < end
    assert drawn.judged is not None
    assert (drawn.judged > end) == (value < low)


@given(SIZES, SIZES, SIZES)
def test_two_ends_enclose_what_conforms(low: Fraction, span: Fraction, value: Fraction) -> None:
    """A two-sided limit has its ends in order and the readings on their sides."""
    drawn = wear_rule(Limit("mm", None, low, low + span), [value], value, Fraction(1, 100))
    assert drawn is not None
    (left, _), (right, _) = drawn.ends
    assert left < right
    assert drawn.judged is not None
    assert (left <= drawn.judged <= right) == (low <= value <= low + span)


@given(st.one_of(st.none(), SIZES), SIZES, st.lists(SIZES, max_size=4))
def test_there_is_always_a_scale(new: Any, high: Fraction, values: list[Fraction]) -> None:
    """Without a new size or readings there is still a rule; without a limit there is none."""
    assert wear_rule(Limit("mm", new, None, high), values) is not None
    assert wear_rule(Limit("mm", new, None, None), values) is None
