"""Wear limits, decision rules and verdicts.

A verdict is a value: what was judged, against what, by which rule, with what certainty, and why. The judged value is
exact and unrounded, in the limit's unit (ASTM E29, absolute method). Guards are compared by their squares, so that no
verdict hangs on a rounded root: margin >= 1.65 u means margin >= 0 and margin^2 >= 1.65^2 u^2.

Decision rules: simple acceptance; guarded with w = 1.65 u (ISO 14253-1:2017); guarded with w = U (ILAC-G8:09/2019).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction
from functools import partial
from math import lcm
from typing import Any

from store.rules import certainty, quantities
from store.rules.readings import Mark, Typed
from store.rules.statistic import Sized, Statistic, governing, median


class Rule(StrEnum):
    """How the gauge's uncertainty enters the decision."""

    simple = "simple"
    guarded_165u = "guarded-1.65u"
    guarded_u = "guarded-U"


class Verdict(StrEnum):
    """What is said of a characteristic."""

    in_ = "in"
    out = "out"
    in_doubt = "in doubt"
    not_measured = "not measured"
    no_limit = "no limit"
    not_comparable = "not comparable"


@dataclass(frozen=True, slots=True)
class Limit:
    """A wear limit, sizes in `unit`. `equal_passes`: whether a value equal to the limit is in."""

    unit: str = ""
    new: Fraction | None = None
    low: Fraction | None = None
    high: Fraction | None = None
    equal_passes: bool = True
    expected: int = 1
    rule: Rule = Rule.guarded_165u


@dataclass(frozen=True, slots=True)
class Measured:
    """A reading for judging: variance (u squared) and expanded uncertainty U in its own unit, None where not known."""

    position: str
    typed: Typed
    variance: Fraction | None = None
    expanded: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Judgement:
    """A verdict with all that it rests on.

    value        the judged value, exact, in `unit`; None where there is none
    worst_at     the position that governs, "" where none does
    count        readings that say something; `expected` how many the limit asks for
    rule         the rule that was applied, `simple` where the uncertainty is not known, whatever was asked for
    probability  that the size conforms (JCGM 106:2012), None without a known uncertainty
    wear_used    (new - y)/(new - limit), may pass 1; None without a new size
    reason       a code that `verdict_words.because` puts into words: "", short, failed, cannot-judge, skipped, narrow, unknown-u, voltage
    detail       what was said with a failed or skipped test, or how the value was brought to the limit's voltage
    """

    verdict: Verdict
    statistic: Statistic
    value: Fraction | None = None
    unit: str = ""
    worst_at: str = ""
    count: int = 0
    expected: int = 1
    variance: Fraction | None = None
    rule: Rule = Rule.simple
    probability: float | None = None
    wear_used: float | None = None
    places: int = 0
    reason: str = ""
    detail: str = ""


_GUARD = {Rule.simple: Fraction(0), Rule.guarded_165u: Fraction("1.65"), Rule.guarded_u: Fraction(2)}
_NARROW = Fraction(5)
_SURE = 0.95


def judge(measured: Sequence[Measured], statistic: Statistic, limit: Limit | None) -> Judgement:
    """Judge readings of one characteristic. An order-free function of them, but that the first of equals governs.

    A number of readings short of the expected can be out, never in: it is `not measured`, reason `short`.
    Raises nothing for readings that `parse` made; a mean of readings in several units is taken in the limit's.
    """
    expected = limit.expected if limit else 1
    if statistic is Statistic.attribute:
        return _attribute(measured, limit, expected)
    numbers = [m for m in measured if m.typed.value is not None]
    if not numbers:
        detail = "; ".join(m.typed.detail for m in measured if m.typed.detail)
        verdict = Verdict.not_measured if limit else Verdict.no_limit
        reason = "skipped" if measured else "none"
        unit = limit.unit if limit else ""
        return Judgement(verdict, statistic, unit=unit, expected=expected, reason=reason, detail=detail)
    unit = limit.unit if limit and statistic is not Statistic.deviation else numbers[0].typed.unit
    sized = [_sized(m, unit) for m in numbers]
    if statistic is Statistic.deviation and median([one[0] for one in sized]) == 0:
        return Judgement(Verdict.not_comparable, statistic, count=len(numbers), expected=expected, reason="cannot-judge",
                         detail="the middle reading is zero; is the supply on?")  # fmt: skip
    within = None if limit is None or (limit.low is None and limit.high is None) else partial(margin, limit=limit)
    value, at, variance = governing(sized, statistic, within)
    places = max(m.typed.places for m in numbers)
    if any(m.typed.unit != unit for m in numbers):
        places = max(places, 4 if unit == "in" else 2)
    if statistic is Statistic.deviation:
        unit, places = "%", 1
    return decide(value, unit, limit, variance, statistic, at=at, count=len(numbers), places=places)


def decide(
    value: Fraction, unit: str, limit: Limit | None, variance: Fraction | None, statistic: Statistic, *,
    at: str = "", count: int = 1, places: int = 2,
) -> Judgement:  # fmt: skip
    """The verdict on one value in the limit's unit: the same for measured and for derived characteristics."""
    if limit is None or (limit.low is None and limit.high is None):
        return Judgement(
            Verdict.no_limit, statistic, value, unit, at, count, limit.expected if limit else 1, variance, places=places
        )
    rule = limit.rule if variance is not None else Rule.simple
    scaled = _Scaled(value, limit)
    probability = None if variance is None else scaled.conformance(variance)
    verdict, reason = _verdict(scaled, limit, rule, variance, probability)
    if variance is None and limit.rule is not Rule.simple:
        reason = reason or "unknown-u"
    if count < limit.expected and verdict is not Verdict.out:
        verdict, reason = Verdict.not_measured, "short"
    return Judgement(
        verdict, statistic, value, unit, at, count, limit.expected, variance, rule, probability,
        scaled.wear_used(), places, reason,
    )  # fmt: skip


class _Scaled:
    """A value with its limits as whole numbers over one denominator: exact as Fractions are, and several times faster."""

    __slots__ = ("high", "low", "new", "over", "value")

    def __init__(self, value: Fraction, limit: Limit) -> None:
        sizes = [size for size in (value, limit.low, limit.high, limit.new) if size is not None]
        self.over = over = lcm(*(size.denominator for size in sizes))
        self.value = value.numerator * (over // value.denominator)
        self.low, self.high, self.new = (
            None if size is None else size.numerator * (over // size.denominator)
            for size in (limit.low, limit.high, limit.new)
        )

    def margin(self) -> int:
        """How far inside the nearer end the value lies; negative beyond."""
        if self.low is None:
            assert self.high is not None
            return self.high - self.value
        if self.high is None:
            return self.value - self.low
        return min(self.value - self.low, self.high - self.value)

    def is_within(self, distance: int, times: Fraction, variance: Fraction) -> bool:
        """Whether a distance is less than so many times u, by their squares."""
        ours = (distance * times.denominator) ** 2 * variance.denominator
        return ours < (times.numerator * self.over) ** 2 * variance.numerator

    def conformance(self, variance: Fraction) -> float:
        """The probability of conformity (JCGM 106:2012, 7.3)."""
        above = None if self.high is None else (self.high - self.value) / self.over
        below = None if self.low is None else (self.low - self.value) / self.over
        return certainty.conformance_of(below, above, variance.numerator / variance.denominator)

    def wear_used(self) -> float | None:
        """As `wear_used`."""
        if self.new is None:
            return None
        end = self.low if self.high is None else self.high if self.low is None else None
        if end is None:
            end = self.low if self.value < self.new else self.high
        return None if end is None or end == self.new else (self.new - self.value) / (self.new - end)


def margin(value: Fraction, limit: Limit) -> Fraction:
    """How far inside the nearer limit a value lies; negative beyond. The limit has at least one end."""
    ends = []
    if limit.low is not None:
        ends.append(value - limit.low)
    if limit.high is not None:
        ends.append(limit.high - value)
    return min(ends)


def tolerance(limit: Limit) -> Fraction | None:
    """From end to end of a two-sided limit, from new size to the limit of a one-sided one; None without either."""
    if limit.low is not None and limit.high is not None:
        return limit.high - limit.low
    end = limit.low if limit.high is None else limit.high
    return None if end is None or limit.new is None else abs(limit.new - end)


def stated(limit: Limit) -> Fraction | None:
    """The size at which something is specified, in the limit's unit: its new size, else the middle of its ends, else the end."""
    if limit.new is not None:
        return limit.new
    ends = [end for end in (limit.low, limit.high) if end is not None]
    return sum(ends, Fraction(0)) / len(ends) if ends else None


def wear_used(value: Fraction, limit: Limit) -> float | None:
    """(new - y)/(new - limit) on the side on which the size wears; None without a new size or at a limit of it."""
    return _Scaled(value, limit).wear_used()


def _verdict(
    scaled: _Scaled, limit: Limit, rule: Rule, variance: Fraction | None, probability: float | None
) -> tuple[Verdict, str]:
    inside = scaled.margin()
    if rule is Rule.simple or variance is None or variance.numerator == 0:
        passes = inside > 0 or (inside == 0 and limit.equal_passes)
        return (Verdict.in_ if passes else Verdict.out), ""
    if (
        scaled.low is not None
        and scaled.high is not None
        and scaled.is_within(scaled.high - scaled.low, _NARROW, variance)
    ):
        assert probability is not None
        if probability >= _SURE:
            return Verdict.in_, "narrow"
        return (Verdict.out if probability <= 1 - _SURE else Verdict.in_doubt), "narrow"
    if scaled.is_within(inside, _GUARD[rule], variance):
        return Verdict.in_doubt, ""
    return (Verdict.in_ if inside > 0 else Verdict.out), ""


def _sized(one: Measured, unit: str) -> Sized:
    value = one.typed.value
    assert value is not None
    if one.typed.unit == unit:
        return value, one.position, one.variance
    by = quantities.scale(one.typed.unit, unit)
    variance = None if one.variance is None else one.variance * by * by
    return quantities.convert(value, one.typed.unit, unit), one.position, variance


def _attribute(measured: Sequence[Measured], limit: Limit | None, expected: int) -> Judgement:
    """Any failure is out, limit or no limit: a test that fails has failed. What cannot be judged is not comparable."""

    def made(verdict: Verdict, at: str = "", reason: str = "", detail: str = "") -> Judgement:
        count = sum(m.typed.mark in {Mark.passed, Mark.failed} for m in measured)
        return Judgement(verdict, Statistic.attribute, None, "", at, count, expected, reason=reason, detail=detail)

    for mark, verdict, reason in (
        (Mark.failed, Verdict.out, "failed"),
        (Mark.cannot_judge, Verdict.not_comparable, "cannot-judge"),
        (Mark.not_measured, Verdict.not_measured, "skipped"),
    ):
        for m in measured:
            if m.typed.mark is mark:
                return made(verdict, m.position, reason, m.typed.detail)
    if len(measured) < expected:
        return made(Verdict.not_measured, reason="short" if measured else "none")
    return made(Verdict.in_)


def kept(judged: Judgement) -> list[Any]:
    """A judgement as plain values that JSON keeps exactly; `from_kept` gives it back."""
    return [
        judged.verdict.value, judged.statistic.value, None if judged.value is None else str(judged.value), judged.unit,
        judged.worst_at, judged.count, judged.expected, None if judged.variance is None else str(judged.variance),
        judged.rule.value, judged.probability, judged.wear_used, judged.places, judged.reason, judged.detail,
    ]  # fmt: skip


def from_kept(values: Sequence[Any]) -> Judgement:
    """The judgement that `kept` took apart. Raises ValueError for anything else."""
    verdict, statistic, value, unit, at, count, expected, variance, rule, probability, wear, places, reason, detail = (
        values
    )
    return Judgement(
        Verdict(verdict), Statistic(statistic), None if value is None else Fraction(value), unit, at, count, expected,
        None if variance is None else Fraction(variance), Rule(rule), probability, wear, places, reason, detail,
    )  # fmt: skip
