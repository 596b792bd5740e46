"""The report's contents as JSON and back: one canonical text, exact both ways.

The document begins with the four keys of `wearline judge --json` (tag, model, revision, stages), made from the
contents, and carries the contents themselves under "report", every field in the order of its class. The same contents
give the same text; `from_json(to_json(report)) == report`. A field that is newer than a frozen document takes its
default, so a document stays readable; its own text remains what is attached and hashed.
"""

from __future__ import annotations

import json
import types
from collections import Counter
from dataclasses import MISSING, fields, is_dataclass
from functools import cache
from typing import Any, Union, get_args, get_origin, get_type_hints

from store.errors import Refused
from store.reports.contents import STAGES, VERDICTS, Characteristic, Report, Result

_PLAIN = frozenset({str, int, float, bool, type(None)})


def to_json(report: Report) -> str:
    """The canonical text, ending in a newline. Raises Refused for text that is no Unicode and for NaN or infinity."""
    document = {**judged(report), "report": _out(report)}
    try:
        text = json.dumps(document, ensure_ascii=False, allow_nan=False) + "\n"
        text.encode()
    except UnicodeEncodeError:
        raise Refused("the report holds text that is not Unicode") from None
    except ValueError:
        raise Refused("the report holds a figure that is not a number") from None
    return text


def from_json(text: str) -> Report:
    """The contents of a document made by `to_json`. Raises Refused where it is none, or where its parts contradict."""
    try:
        document = json.loads(text)
    except ValueError:
        raise Refused("this is no report: not JSON") from None
    if not isinstance(document, dict) or "report" not in document:
        raise Refused("this is no report: it has no contents")
    report: Report = _in(Report, document["report"], "report")
    expected = json.loads(json.dumps(judged(report)))
    for key, value in expected.items():
        if document.get(key) != value:
            raise Refused(f"this report contradicts itself: {key} is not what its contents say")
    return report


def judged(report: Report) -> dict[str, Any]:
    """What `wearline judge --json` prints: `{tag, model, revision, stages: {stage: {standing, verdicts}}}`."""
    stages = {}
    for stage in STAGES:
        found = report.results(stage)
        count = Counter(result.verdict for _, result in found)
        stages[stage] = {
            "standing": {verdict: count.get(verdict, 0) for verdict in VERDICTS},
            "verdicts": [_verdict(one, result) for one, result in found],
        }
    return {"tag": report.tag, "model": report.unit.model, "revision": report.revision, "stages": stages}


def _verdict(one: Characteristic, result: Result) -> dict[str, Any]:
    limit = result.limit
    return {
        "characteristic": one.name,
        "component": one.component,
        "statistic": result.statistic,
        "value": result.value,
        "unit": result.unit,
        "low": limit.low if limit else None,
        "high": limit.high if limit else None,
        "verdict": result.verdict,
        "because": result.because,
        "rule": result.rule,
        "probability": result.probability,
        "wear_used": result.wear_used,
        "count": result.count,
        "expected": result.expected,
        "worst_at": result.worst_at,
        "source": limit.source if limit else "",
    }


def _out(value: Any) -> Any:
    kind: Any = type(value)
    if kind in _PLAIN or isinstance(value, str):
        return value
    if kind is tuple:
        return [_out(item) for item in value]
    return {name: _out(getattr(value, name)) for name in _hints(kind)[0]}


def _in(kind: Any, value: Any, where: str) -> Any:
    """`value` as a `kind`: a dataclass, a tuple, an optional or a plain type. Raises Refused naming where it is not."""
    if is_dataclass(kind):
        return _object(kind, value, where)
    origin, inner = get_origin(kind), get_args(kind)
    if origin in (Union, types.UnionType):
        if value is None:
            return None
        return _in(next(one for one in inner if one is not type(None)), value, where)
    if origin is tuple:
        return _row(inner, value, where)
    if kind is float and isinstance(value, (int, float)) and not isinstance(value, bool):
        return float(value)
    if type(value) is not kind:
        raise Refused(f"this is no report: {where} is not as it should be")
    return value


def _object(kind: Any, value: Any, where: str) -> Any:
    hints, needed = _hints(kind)
    if not isinstance(value, dict) or not needed <= set(value) <= set(hints):
        raise Refused(f"this is no report: {where} has other keys than it should")
    return kind(**{name: _in(hints[name], item, f"{where}.{name}") for name, item in value.items()})


def _row(inner: tuple[Any, ...], value: Any, where: str) -> tuple[Any, ...]:
    if not isinstance(value, list):
        raise Refused(f"this is no report: {where} is no list")
    if inner[-1] is Ellipsis:
        return tuple(_in(inner[0], item, f"{where}[{n}]") for n, item in enumerate(value))
    if len(value) != len(inner):
        raise Refused(f"this is no report: {where} has {len(value)} items, not {len(inner)}")
    return tuple(_in(kind, item, f"{where}[{n}]") for n, (kind, item) in enumerate(zip(inner, value, strict=True)))


@cache
def _hints(kind: Any) -> tuple[dict[str, Any], frozenset[str]]:
    """The type of each field, and the fields that have no default."""
    found = get_type_hints(kind)
    needed = frozenset(field.name for field in fields(kind) if field.default is MISSING)
    return {field.name: found[field.name] for field in fields(kind)}, needed
