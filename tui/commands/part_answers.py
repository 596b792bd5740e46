"""How answers of the cross-check are written: as text and as JSON."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import click

from tui.commands.output import one_line, write_table

if TYPE_CHECKING:
    from store.parts.answers import Check, LedTo, Way
    from store.parts.by_size import BySize
    from store.parts.on_model import OnModel


def check_json(answer: Check) -> dict[str, Any]:
    """The answer of `parts check` as JSON."""
    made: dict[str, Any] = {
        "asked": answer.asked,
        "candidates": [
            {"number": c.number, "maker": c.maker, "how": c.how.value, "kind": c.kind, "description": c.description}
            for c in answer.candidates
        ],
        "asked_fitted": sum(seen.fitted for seen in answer.evidence.values()),
        "asked_came_back": sum(seen.came_back for seen in answer.evidence.values()),
        "leads_to": [_led_json(led) for led in answer.leads_to],
        "conflicts": [{"what": c.what, "says": list(c.says)} for c in answer.conflicts],
        "stopped": [
            {"number": s.number.number, "maker": s.number.maker, "path": _path_json(s.path), "because": s.says}
            for s in answer.stopped
        ],
        "warnings": list(answer.warnings),
        "models": list(answer.models),
        "parts": [
            {
                "model": p.model, "number": p.number.number, "maker": p.number.maker, "kind": p.number.kind,
                "position": p.position, "quantity": p.quantity, "source": p.source, "verdict": p.on.verdict.value,
                "says": p.on.says, "superseded_by": list(p.newer), "fitted": p.evidence.fitted,
                "came_back": p.evidence.came_back,
            }
            for p in answer.parts
        ],
        "bounded": answer.bounded,
    }  # fmt: skip
    if answer.on is not None:
        made["on"] = _on_json(answer.on)
    return made


def _led_json(led: LedTo) -> dict[str, Any]:
    low, high = led.evidence.interval
    made: dict[str, Any] = {
        "number": led.number.number, "maker": led.number.maker, "kind": led.number.kind, "path": _path_json(led.path),
        "trust": led.trust.value, "fitted": led.evidence.fitted, "came_back": led.evidence.came_back,
        "came_back_low": low, "came_back_high": high,
    }  # fmt: skip
    if led.on is not None:
        made["on"] = _on_json(led.on)
    return made


def _path_json(path: tuple[Way, ...]) -> list[dict[str, str]]:
    return [
        {
            "from": way.start.number, "from_maker": way.start.maker, "relation": way.relation.value, "to": way.end.number,
            "to_maker": way.end.maker, "source": way.source, "caveat": way.caveat, "dated": way.dated,
        }
        for way in path
    ]  # fmt: skip


def _on_json(on: OnModel) -> dict[str, Any]:
    return {
        "model": on.model,
        "verdict": on.verdict.value,
        "says": on.says,
        "attributes": [
            {"name": a.name, "part": a.part, "model": a.model, "state": a.state.value, "must_match": a.must}
            for a in on.comparison.attributes
        ],
        "listed": [{"position": x.position, "quantity": x.quantity, "source": x.source} for x in on.listed],
    }


def say(text: str = "") -> None:
    """One line, whatever is stored in it."""
    click.echo(one_line(text))


def write_check(answer: Check) -> None:
    """The answer of `parts check` as text."""
    if not answer.candidates:
        say(f"no number like {answer.asked!r} is in the lists; try fewer characters, or ? for those that are worn")
        return
    write_table(
        ("number", "maker", "how", "kind", "description"),
        [(c.number, c.maker, c.how.value, c.kind, c.description) for c in answer.candidates],
    )
    if not answer.followed:
        say()
        say("none is the very number; check the one that you mean")
    for one in answer.followed:
        if one.id is not None and answer.evidence[one.id].fitted:
            say(f"{one.number}: {answer.evidence[one.id].says}")
    for warning in answer.warnings:
        say(f"WARNING  {warning}")
    for led in answer.leads_to:
        say()
        _write_led(led)
    for stop in answer.stopped:
        say()
        say(f"NOT {stop.number.number}: {stop.says}")
        for way in stop.path:
            say(f"    {way.says}")
    for conflict in answer.conflicts:
        say()
        say(f"CONFLICT  {conflict.what}")
        for says in conflict.says:
            say(f"    {says}")
    if answer.bounded:
        say()
        say("there is more than this: only the nearest numbers were walked")
    _write_models(answer)


def _write_led(led: LedTo) -> None:
    from store.parts.answers import name

    say(f"-> {name(led.number)}  {led.number.kind}   trust: {led.trust.value}; {led.evidence.says}")
    for way in led.path:
        say(f"    {way.says}")
    if led.on is not None:
        say(f"    on {led.on.model}: {led.on.says}")


def _write_models(answer: Check) -> None:
    if answer.on is not None:
        say()
        say(f"on {answer.on.model}: {answer.on.says}")
        write_table(
            ("attribute", "part", "model", "", ""),
            [(a.name, a.part or "?", a.model or "?", a.state.value, "must match" if a.must else "") for a in answer.on.comparison.attributes],
        )  # fmt: skip
    if answer.models:
        say()
        say(f"model: {', '.join(answer.models)}")
    if answer.parts:
        write_table(
            ("model", "position", "number", "maker", "kind", "pieces", "on whose word", "bench", "newer"),
            [
                (
                    p.model,
                    p.position,
                    p.number.number,
                    p.number.maker,
                    p.number.kind,
                    p.quantity,
                    p.source,
                    p.evidence.says,
                    ", ".join(p.newer),
                )
                for p in answer.parts
            ],
        )


def size_json(answer: BySize) -> dict[str, Any]:
    """The answer of `parts size` as JSON; sizes are exact decimal text."""
    from store.rules import quantities

    return {
        "kind": answer.kind,
        "asked": [{"name": s.name, "value": quantities.plain(s.value), "unit": s.unit} for s in answer.asked],
        "within": {"value": quantities.plain(answer.within.value), "unit": answer.within.unit},
        "matches": [
            {
                "number": m.number.number, "maker": m.number.maker, "kind": m.number.kind, "worst": m.worst,
                "fitted": m.evidence.fitted, "came_back": m.evidence.came_back, "warnings": list(m.warnings),
                "sizes": [
                    {
                        "name": d.part.name, "value": quantities.plain(d.part.value), "unit": d.part.unit,
                        "over": quantities.plain(d.over or d.part.value * 0), "warning": d.warning,
                    }
                    for d in m.differences if d.part is not None
                ],
            }
            for m in answer.matches
        ],
        "cautions": list(answer.cautions),
        "more": answer.more,
    }  # fmt: skip


def write_size(answer: BySize) -> None:
    """The answer of `parts size` as text."""
    from store.rules import sizes

    for one in answer.asked:
        near = ""
        if sizes.base_unit(one.unit) == "mm":
            inch, metric = sizes.nominals(one)
            near = f"   nearest nominals {inch}, {metric}"
        say(f"{one.name}  {sizes.both_systems(one)}{near}")
    say(f"within {answer.within.text}")
    rows = [
        (
            m.number.number, m.number.maker, m.number.kind, f"{m.worst:.0%}",
            "  ".join(f"{d.part.name} {sizes.both_systems(d.part)}" for d in m.differences if d.part), "; ".join(m.warnings),
        )
        for m in answer.matches
    ]  # fmt: skip
    write_table(
        ("number", "maker", "kind", "of tolerance", "sizes", "look at"),
        rows,
        f"no {answer.kind} is listed with these sizes",
    )
    for caution in answer.cautions:
        say(f"! {caution}")
    if answer.more:
        say("there are more; give another size or a smaller tolerance")
