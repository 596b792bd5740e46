"""Verdicts: both sides of every limit, every statistic, and what holds whatever the numbers are."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction
from typing import Any

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.certainty import conformance
from store.rules.limits import Limit, Measured, Rule, Verdict, from_kept, judge, kept
from store.rules.quantities import Quantity
from store.rules.readings import parse
from store.rules.statistic import Statistic
from store.rules.verdict_words import because

F = Fraction


def read(*texts: str, u: str | None = None, quantity: Quantity = Quantity.length) -> list[Measured]:
    """Readings at positions 1, 2 ..., each with the same standard uncertainty."""
    variance = None if u is None else F(u) ** 2
    return [
        Measured(str(n), parse(text, quantity, "mm" if quantity is Quantity.length else ""), variance)
        for n, text in enumerate(texts, start=1)
    ]


LOW = Limit("mm", F(14), F("9.5"), None, rule=Rule.simple)
HIGH = Limit("mm", None, None, F("0.05"), rule=Rule.simple)
BAND = Limit("mm", None, F("0.1"), F("0.3"), rule=Rule.simple)


@pytest.mark.parametrize(
    ("text", "limit", "verdict"),
    [
        ("9.49", LOW, "out"), ("9.5", LOW, "in"), ("9.51", LOW, "in"), ("9.5", replace(LOW, equal_passes=False), "out"),
        ("0.051", HIGH, "out"), ("0.05", HIGH, "in"), ("0.05", replace(HIGH, equal_passes=False), "out"), ("0.049", HIGH, "in"),
        ("0.09", BAND, "out"), ("0.1", BAND, "in"), ("0.3", BAND, "in"), ("0.31", BAND, "out"),
        ("0.450 in", replace(LOW, low=F("11.43")), "in"), ("0.4499 in", replace(LOW, low=F("11.43")), "out"),
    ],
)  # fmt: skip
def test_both_sides_of_each_limit(text: str, limit: Limit, verdict: str) -> None:
    """Under simple acceptance the limit itself decides, to the last digit."""
    assert judge(read(text), Statistic.each, limit).verdict == verdict


@pytest.mark.parametrize(
    ("statistic", "value", "at"),
    [
        (Statistic.smallest, "9.2", "4"), (Statistic.largest, "11.5", "3"), (Statistic.mean, "10.825", ""),
        (Statistic.spread, "2.3", "4 to 3"), (Statistic.each, "9.2", "4"),
    ],
)  # fmt: skip
def test_statistics(statistic: Statistic, value: str, at: str) -> None:
    """What is judged, and where it stands."""
    judged = judge(read("11.4", "11.2", "11.5", "9.2"), statistic, LOW)
    assert (judged.value, judged.worst_at) == (F(value), at)


def test_deviation_is_from_the_median_in_per_cent() -> None:
    """One dead coil does not drag its neighbours with it."""
    judged = judge(
        read("10", "10", "10", "5", "10"), Statistic.deviation, Limit("%", None, None, F(5), rule=Rule.simple)
    )
    assert (judged.value, judged.unit, judged.worst_at, judged.verdict) == (F(50), "%", "4", Verdict.out)


@pytest.mark.parametrize(
    ("texts", "expected", "verdict"),
    [
        (("pass",), 1, "in"), (("pass", "pass"), 4, "not measured"), (("pass", "fail bars 4-5"), 4, "out"),
        (("cannot judge",), 1, "not comparable"), (("not measured no tool",), 1, "not measured"), ((), 1, "not measured"),
    ],
)  # fmt: skip
def test_tests(texts: tuple[str, ...], expected: int, verdict: str) -> None:
    """Any failure is out; a pass on one of four is not a pass."""
    limit = Limit(expected=expected)
    assert judge(read(*texts, quantity=Quantity.attribute), Statistic.attribute, limit).verdict == verdict


def test_too_few_readings_can_be_out_never_in() -> None:
    """Two of four brushes in say nothing of the others; one that is out is out."""
    limit = replace(LOW, expected=4)
    assert judge(read("11", "12"), Statistic.smallest, limit).verdict is Verdict.not_measured
    assert judge(read("11", "9"), Statistic.smallest, limit).verdict is Verdict.out


def test_without_a_known_uncertainty_it_is_judged_as_read() -> None:
    """The guard needs a known u; without it the judgement says that it was simple."""
    judged = judge(read("9.51"), Statistic.smallest, replace(LOW, rule=Rule.guarded_165u))
    assert (judged.verdict, judged.rule, judged.probability) == (Verdict.in_, Rule.simple, None)


SIZES = st.decimals(min_value=0, max_value=30, places=3)
RULES = st.sampled_from(list(Rule))
LIMITS = st.builds(
    lambda low, span, equal, rule: Limit("mm", None, F(str(low)), F(str(low)) + F(str(span)), equal, 1, rule),
    SIZES,
    SIZES,
    st.booleans(),
    RULES,
)


@given(SIZES, LIMITS, st.decimals(min_value="0.001", max_value=2, places=3))
def test_kept_judgements_come_back(value: Any, limit: Limit, u: Any) -> None:
    """What is stored of a judgement gives back the very same."""
    judged = judge(read(str(value), u=str(u)), Statistic.each, limit)
    assert from_kept(kept(judged)) == judged


@given(SIZES, SIZES, st.decimals(min_value="0.001", max_value=2, places=3))
def test_mirror(value: Any, limit: Any, u: Any) -> None:
    """pc_low(y, T) = pc_high(-y, -T)."""
    y, t, variance = F(str(value)), F(str(limit)), F(str(u)) ** 2
    assert conformance(y, t, None, variance) == pytest.approx(conformance(-y, None, -t, variance), abs=1e-15)


@given(SIZES, SIZES, st.decimals(min_value="0.001", max_value=2, places=3), RULES)
def test_more_metal_is_never_worse(one: Any, other: Any, u: Any, rule: Rule) -> None:
    """Against a low limit a larger size has a verdict at least as good."""
    limit = Limit("mm", None, F("9.5"), None, rule=rule)
    rank = {Verdict.out: 0, Verdict.in_doubt: 1, Verdict.in_: 2}
    small, large = sorted((one, other))
    assert (
        rank[judge(read(str(small), u=str(u)), Statistic.each, limit).verdict]
        <= rank[judge(read(str(large), u=str(u)), Statistic.each, limit).verdict]
    )


@given(SIZES, LIMITS, st.one_of(st.none(), st.decimals(min_value="0.001", max_value=2, places=3)))
def test_the_sentence_never_contradicts_the_verdict(value: Any, limit: Limit, u: Any) -> None:
    """A value that is out is said to be under the minimum, over the maximum, or equal to an end that fails."""
    judged = judge(read(str(value), u=None if u is None else str(u)), Statistic.each, limit)
    sentence = because(judged, limit, "brush")
    assert "\n" not in sentence
    if judged.verdict is Verdict.out and judged.reason != "narrow":
        assert "under the" in sentence or "over the" in sentence or "which fails" in sentence
    if judged.verdict is Verdict.in_doubt:
        assert "cannot tell" in sentence


@given(SIZES, LIMITS)
def test_narrow_limits_are_judged_by_the_probability(value: Any, limit: Limit) -> None:
    """Under five u between the ends, `in` means at least 95 per cent."""
    judged = judge(read(str(value), u="8"), Statistic.each, replace(limit, rule=Rule.guarded_165u))
    assert judged.probability is not None
    if judged.verdict is Verdict.in_:
        assert judged.probability >= 0.95


def test_zeros_round_the_commutator_are_no_even_readings() -> None:
    """With the supply off every drop is zero: that says nothing of the bars, whatever the limit."""
    zeros = [Measured(str(n), parse("0", Quantity.voltage, "mV")) for n in range(1, 28)]
    judged = judge(zeros, Statistic.deviation, Limit("%", high=F(10), expected=27))
    assert (judged.verdict, judged.value) == (Verdict.not_comparable, None)
    assert "is the supply on?" in because(judged, Limit("%", high=F(10)), "bar")
