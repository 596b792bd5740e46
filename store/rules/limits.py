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
from math import floor, lcm
from typing import Any

from store.rules import certainty, quantities
from store.rules.readings import Mark, Typed


class Statistic(StrEnum):
    """What of several readings is judged."""

    each = "each"
    smallest = "smallest"
    largest = "largest"
    mean = "mean"
    spread = "spread"
    deviation = "deviation"
    attribute = "attribute"


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
    reason       a code that `because` puts into words: "", short, failed, cannot-judge, skipped, narrow, unknown-u, voltage
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
        return Judgement(
            verdict,
            statistic,
            count=0,
            expected=expected,
            unit=limit.unit if limit else "",
            reason=reason,
            detail=detail,
        )
    unit = limit.unit if limit and statistic is not Statistic.deviation else numbers[0].typed.unit
    sized = [_sized(m, unit) for m in numbers]
    value, at, variance = _governing(sized, statistic, limit)
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


_Sized = tuple[Fraction, str, Fraction | None]


def _sized(one: Measured, unit: str) -> _Sized:
    value = one.typed.value
    assert value is not None
    if one.typed.unit == unit:
        return value, one.position, one.variance
    by = quantities.scale(one.typed.unit, unit)
    return (
        quantities.convert(value, one.typed.unit, unit),
        one.position,
        None if one.variance is None else one.variance * by * by,
    )


def _governing(sized: Sequence[_Sized], statistic: Statistic, limit: Limit | None) -> _Sized:
    """The judged value, where it was read, and its variance."""
    if statistic is Statistic.smallest:
        return min(sized, key=_value)
    if statistic is Statistic.largest:
        return max(sized, key=_value)
    if statistic is Statistic.mean:
        total = certainty.combine(one[2] for one in sized)
        n = len(sized)
        return sum((one[0] for one in sized), Fraction(0)) / n, "", None if total is None else total / n**2
    if statistic is Statistic.spread:
        low, high = min(sized, key=_value), max(sized, key=_value)
        at = f"{low[1]} to {high[1]}" if low[1] != high[1] else ""
        return high[0] - low[0], at, certainty.combine((low[2], high[2])) if len(sized) > 1 else low[2]
    if statistic is Statistic.deviation:
        return _deviation(sized)
    if limit is None or (limit.low is None and limit.high is None):
        return min(sized, key=_value)
    return min(sized, key=lambda one: margin(one[0], limit))


def _deviation(sized: Sequence[_Sized]) -> _Sized:
    """The largest deviation from the median to either side, in per cent of it. A median of zero has none: 0."""
    middle = median([one[0] for one in sized])
    if middle == 0:
        return Fraction(0), sized[0][1], None
    worst = max(sized, key=lambda one: abs(one[0] - middle))
    by = Fraction(100) / middle
    return abs((worst[0] - middle) * by), worst[1], None if worst[2] is None else worst[2] * by * by


def median(values: Sequence[Fraction]) -> Fraction:
    """The middle value, or the mean of the two in the middle. At least one value."""
    ordered = sorted(values)
    half = len(ordered) // 2
    return ordered[half] if len(ordered) % 2 else (ordered[half - 1] + ordered[half]) / 2


def _value(one: _Sized) -> Fraction:
    return one[0]


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


def because(judged: Judgement, limit: Limit | None, noun: str) -> str:
    """The verdict in one sentence: "brush 4 is 9.2 mm, 0.3 under the 9.5 minimum".

    `noun` is what a position is called (brush, slot), or what the whole is. Figures have as many digits as it takes not
    to contradict the verdict.
    """
    if judged.reason in {"failed", "cannot-judge", "skipped", "none"} or judged.statistic is Statistic.attribute:
        return _said(judged, noun)
    if judged.value is None:
        return f"{judged.count} of {judged.expected} read" if judged.count else "no reading"
    subject = _subject(judged, noun)
    if judged.reason == "voltage":
        return f"{subject} is {_with_unit(quantities.shown(judged.value, judged.places), judged.unit)}; {judged.detail}"
    if limit is None or (limit.low is None and limit.high is None):
        return f"{subject} is {_with_unit(quantities.shown(judged.value, judged.places), judged.unit)}; no limit is entered"
    sentence = f"{subject} is {_against(judged, limit)}"
    if judged.detail:
        sentence += f" ({judged.detail})"
    if judged.reason == "short":
        sentence = f"{judged.count} of {judged.expected} read; so far {sentence}"
    if judged.verdict is Verdict.in_doubt:
        sentence += "; the gauge cannot tell"
    if judged.probability is not None and judged.verdict is not Verdict.not_measured and judged.probability < _CERTAIN:
        sentence += f" ({floor(judged.probability * 1000 + 1e-9) / 10} % sure to be inside)"
    if judged.reason == "unknown-u":
        sentence += "; judged as read, the gauge's uncertainty is not known"
    return sentence


_CERTAIN = 0.9995


def _said(judged: Judgement, noun: str) -> str:
    where = f"{noun} {judged.worst_at}".strip() if judged.worst_at not in {"", "1"} else ""
    detail = f": {judged.detail}" if judged.detail else ""
    if judged.reason == "failed":
        return f"{where} failed{detail}".strip()
    if judged.reason == "cannot-judge":
        return f"{where} cannot be judged by this test{detail}".strip()
    if judged.reason == "skipped":
        return f"{where} not measured{detail}".strip()
    if judged.reason in {"short", "none"}:
        return f"{judged.count} of {judged.expected} tested" if judged.count else "no reading"
    return "passed" if judged.count <= 1 else f"all {judged.count} passed"


def _subject(judged: Judgement, noun: str) -> str:
    kind = {Statistic.mean: "the mean", Statistic.spread: "the spread"}.get(judged.statistic)
    if kind:
        return f"{kind} of {judged.count}"
    if " " in judged.worst_at:
        return f"{noun} ({judged.worst_at})"
    if (judged.worst_at and judged.worst_at != "1") or judged.count > 1:
        return f"{noun} {judged.worst_at}".strip()
    return noun


def _against(judged: Judgement, limit: Limit) -> str:
    value = judged.value
    assert value is not None
    ends = [(end, name) for end, name in ((limit.low, "minimum"), (limit.high, "maximum")) if end is not None]
    text = quantities.shown(value, judged.places, [end for end, _ in ends])
    end, name = min(ends, key=lambda pair: value - pair[0] if pair[1] == "minimum" else pair[0] - value)
    shown_end = _exactly(end, judged.places)
    if value == end:
        fails = "" if judged.verdict is not Verdict.out else ", which fails"
        return f"{_with_unit(text, judged.unit)}, equal to the {name}{fails}"
    gap = _exactly(abs(Fraction(text) - end), judged.places)
    side = "under" if value < end else "over"
    return f"{_with_unit(text, judged.unit)}, {gap} {side} the {shown_end} {name}"


def _exactly(size: Fraction, places: int) -> str:
    """An exact size with at least so many decimals."""
    text = quantities.rounded(size, places)
    return text if Fraction(text) == size else quantities.plain(size)


def _with_unit(text: str, unit: str) -> str:
    return f"{text} {unit}".strip()


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
