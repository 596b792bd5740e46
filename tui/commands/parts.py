"""Commands for part numbers: check one, search by size, fit one on a job."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

import click

from tui.commands.acting import as_json, on_record
from tui.commands.output import one_line, write_json, write_table

if TYPE_CHECKING:
    from store.parts.by_size import BySize
    from store.parts.checking import Check, LedTo, Way
    from store.parts.on_model import OnModel
    from store.records import Record


@click.group(epilog="Example: wearline parts check 'KS-1?0' --on KS-100")
def parts() -> None:
    """Check a part or unit number, search parts by size, fit a part on a job."""


@parts.command(epilog="Example: wearline parts check KS-1?0 --on KS-100")
@click.argument("number")
@click.option("--on", metavar="MODEL", help="Does it, and does what it leads to, go on this model?")
@as_json
@on_record
def check(record: Record, number: str, on: str | None, as_json: bool) -> None:
    """What NUMBER may be and all that it leads to, step by step with each source; ? is a character that cannot be read."""
    from store.parts import checking

    answer = checking.check(record, number, on=on)
    if as_json:
        write_json(_check_json(answer))
    else:
        _write_check(answer)


def _check_json(answer: Check) -> dict[str, Any]:
    made: dict[str, Any] = {
        "asked": answer.asked,
        "candidates": [
            {"number": c.number, "maker": c.maker, "how": c.how.value, "kind": c.kind, "description": c.description}
            for c in answer.candidates
        ],
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
                "position": p.position, "quantity": p.quantity, "source": p.source,
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


def _say(text: str = "") -> None:
    click.echo(one_line(text))


def _write_check(answer: Check) -> None:
    if not answer.candidates:
        _say(f"no number like {answer.asked!r} is in the lists; try fewer characters, or ? for those that are worn")
        return
    write_table(
        ("number", "maker", "how", "kind", "description"),
        [(c.number, c.maker, c.how.value, c.kind, c.description) for c in answer.candidates],
    )
    if not answer.followed:
        _say()
        _say("none is the very number; check the one that you mean")
    for warning in answer.warnings:
        _say(f"WARNING  {warning}")
    for led in answer.leads_to:
        _say()
        _write_led(led)
    for stop in answer.stopped:
        _say()
        _say(f"NOT {stop.number.number}: {stop.says}")
        for way in stop.path:
            _say(f"    {way.says}")
    for conflict in answer.conflicts:
        _say()
        _say(f"CONFLICT  {conflict.what}")
        for says in conflict.says:
            _say(f"    {says}")
    if answer.bounded:
        _say()
        _say("there is more than this: only the nearest numbers were walked")
    _write_models(answer)


def _write_led(led: LedTo) -> None:
    from store.parts.checking import name

    seen = led.evidence
    low, high = seen.interval
    bench = (
        f"fitted on {seen.fitted}, {seen.came_back} came back ({low:.0%} to {high:.0%})"
        if seen.fitted
        else "not fitted here yet"
    )
    _say(f"-> {name(led.number)}  {led.number.kind}   trust: {led.trust.value}; {bench}")
    for way in led.path:
        _say(f"    {way.says}")
    if led.on is not None:
        _say(f"    on {led.on.model}: {led.on.says}")


def _write_models(answer: Check) -> None:
    if answer.on is not None:
        _say()
        _say(f"on {answer.on.model}: {answer.on.says}")
        write_table(
            ("attribute", "part", "model", "", ""),
            [(a.name, a.part or "?", a.model or "?", a.state.value, "must match" if a.must else "") for a in answer.on.comparison.attributes],
        )  # fmt: skip
    if answer.models:
        _say()
        _say(f"model: {', '.join(answer.models)}")
    if answer.parts:
        write_table(
            ("position", "number", "maker", "kind", "pieces", "source"),
            [(p.position, p.number.number, p.number.maker, p.number.kind, p.quantity, p.source) for p in answer.parts],
        )


@parts.command(epilog="Example: wearline parts size brush width=8 thickness=16 --within 0.2")
@click.argument("kind")
@click.argument("sizes", nargs=-1, required=True, metavar="NAME=VALUE...")
@click.option("--within", metavar="T", help="Tolerance, mm where no unit is given; 0.1 mm unless given.")
@as_json
@on_record
def size(record: Record, kind: str, sizes: tuple[str, ...], within: str | None, as_json: bool) -> None:
    """Parts of a KIND by measured sizes; for a bushing give housing-bore= and journal=."""
    from store.errors import Refused
    from store.parts import by_size

    asked: dict[str, str] = {}
    for typed in sizes:
        name, equals, value = typed.partition("=")
        if not equals or not name.strip() or not value.strip():
            raise Refused(f"{typed!r} is not NAME=VALUE, width=8 or od=5/8in for instance")
        asked[name] = value
    answer = by_size.search(record, kind, asked, within)
    if as_json:
        write_json(_size_json(answer))
    else:
        _write_size(answer)


def _size_json(answer: BySize) -> dict[str, Any]:
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


def _write_size(answer: BySize) -> None:
    from store.rules import sizes

    for one in answer.asked:
        near = ""
        if sizes.base_unit(one.unit) == "mm":
            inch, metric = sizes.nominals(one)
            near = f"   nearest nominals {inch}, {metric}"
        _say(f"{one.name}  {sizes.both_systems(one)}{near}")
    _say(f"within {answer.within.text}")
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
        _say(f"! {caution}")
    if answer.more:
        _say("there are more; give another size or a smaller tolerance")


@parts.command(epilog="Example: wearline parts fit 1042 BR-2210 --lot L7 --supplier Northgate")
@click.argument("tag")
@click.argument("number")
@click.option("--maker", default="", help="Where several makers have the number.")
@click.option("--lot", default="")
@click.option("--supplier", default="")
@click.option("--position", default="", help="Where it went.")
@click.option("--quantity", type=int, default=1)
@click.option("--because", default="", metavar="WHY", help="The reason, where the cross-check speaks against it.")
@as_json
@on_record
def fit(record: Record, tag: str, number: str, as_json: bool, because: str, **options: Any) -> None:
    """Fit a part on the job TAG, its NUMBER as printed; the cross-check runs, and a mismatch asks for a reason."""
    from store.parts import fitting

    made = fitting.fit(record, tag, number, why=because, **options)
    if as_json:
        fields = ("tag", "number", "maker", "lot", "supplier", "position", "quantity", "by", "at", "checked", "why")
        write_json({field: getattr(made, field) for field in fields})
    else:
        _say(f"{made.tag}: {made.number} fitted; {made.checked}")
