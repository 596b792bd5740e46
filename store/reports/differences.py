"""What differs between two reports, said in lines that a reader of both can check."""

from __future__ import annotations

from collections.abc import Iterator

from store.reports.contents import Characteristic, Report

_FIELDS = (
    ("customer", "customer"), ("application", "application"), ("hours", "hours"), ("starts", "starts"),
    ("complaint", "complaint"), ("outcome", "outcome"), ("revision", "limit revision"), ("assembled_by", "assembled by"),
    ("findings", "findings"), ("plan", "rework"), ("fitted", "parts fitted"), ("concessions", "concessions"),
    ("diagnosis", "diagnosis"), ("gauges", "gauges"), ("measured_by", "measured by"),
)  # fmt: skip


def between(before: Report, after: Report) -> tuple[str, ...]:
    """One line for everything that a report says otherwise than the one before, numbers and dates of issue apart."""
    return tuple(_all(before, after))


def _all(before: Report, after: Report) -> Iterator[str]:
    for field, name in _FIELDS:
        old, new = getattr(before, field), getattr(after, field)
        if old != new:
            yield f"{name}: {_said(old)} became {_said(new)}"
    known = {one.name: one for one in before.characteristics}
    for one in after.characteristics:
        yield from _characteristic(known.pop(one.name, None), one)
    for gone in known.values():
        yield f"{gone.label}: no longer in the report"


def _characteristic(before: Characteristic | None, after: Characteristic) -> Iterator[str]:
    if before is None:
        yield f"{after.label}: added"
        return
    for result in after.results:
        old = before.at(result.stage)
        stage = result.stage.replace("-", " ")
        if old is None:
            yield f"{after.label}, {stage}: added"
            continue
        places = {r.position: r for r in old.readings}
        for reading in result.readings:
            was = places.pop(reading.position, None)
            if was is None or was.typed != reading.typed:
                yield f"{after.label} {reading.position}, {stage}: {was.typed if was else 'nothing'} became {reading.typed}"
        if old.verdict != result.verdict:
            yield f"{after.label}, {stage}: verdict {old.verdict} became {result.verdict}"


def _said(value: object) -> str:
    if value is None or value == "" or value == ():
        return "nothing"
    if isinstance(value, tuple):
        named = [str(getattr(one, "initials", None) or getattr(one, "name", "")) for one in value]
        return ", ".join(named) if all(named) else f"{len(value)} lines"
    text = str(getattr(value, "initials", value))
    return text if len(text) <= 80 else text[:79] + "…"
