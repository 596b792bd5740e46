"""A verdict in one sentence, as the bench, the report and the command say it."""

from __future__ import annotations

from fractions import Fraction
from math import floor

from store.rules import quantities
from store.rules.limits import Judgement, Limit, Verdict
from store.rules.statistic import Statistic

_CERTAIN = 0.9995


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
