"""A check drawn: each path step by step with direction, source, caveat and trust, conflicts with both sides."""

from __future__ import annotations

from typing import Any

from rich.style import Style
from rich.text import Text

_ARROWS = {
    "superseded-by": "─superseded by→", "interchanges-with": "←interchanges with→", "same-as": "←same as→",
    "substitute": "─substitute→", "holds": "─holds→",
}  # fmt: skip


def drawn(check: Any, tones: dict[str, str]) -> Text:
    """The whole answer as text. Words carry everything; colour only helps."""
    loud, quiet = Style(color=tones["loud"], bold=True), Style(color=tones["quiet"])
    text = Text()
    for warning in check.warnings:
        text.append(f"WARNING  {warning}\n", loud)
    _asked(text, check, quiet)
    for stop in check.stopped:
        text.append(f"\nNOT {stop.number.number}: {stop.says}\n", loud)
        _path(text, stop.path, quiet)
    for conflict in check.conflicts:
        text.append(f"\nCONFLICT  {conflict.what}\n", loud)
        for says in conflict.says:
            text.append(f"   {says}\n")
    _tree(text, check, quiet, loud)
    if check.bounded:
        text.append("\nThere is more than this: only the nearest numbers were walked.\n", Style(bold=True))
    if check.followed and not check.leads_to and not check.stopped:
        text.append("\nNo list leads on from here.\n", quiet)
    _parts(text, check, quiet, loud)
    return text


def _asked(text: Text, check: Any, quiet: Style) -> None:
    for one in check.followed:
        text.append(one.number, Style(bold=True))
        text.append(f" {one.maker}  {one.kind}  {one.description}  {one.status}".rstrip())
        seen = check.evidence.get(one.id)
        if seen is not None and seen.fitted:
            text.append(f"  {seen.says}", quiet)
        text.append("\n")
    if check.on is not None:
        text.append(f"on {check.on.model}: {check.on.says}\n", Style(bold=True))
        for a in check.on.comparison.attributes:
            text.append(f"   {a.name:<18}{a.state:<9}{a.part or '?'}", Style(bold=a.state == "differs"))
            text.append(f"  against {a.model or '?'}{'' if a.must else '  need not match'}\n", quiet)


def _tree(text: Text, check: Any, quiet: Style, loud: Style) -> None:
    """Every number led to under the one that it was reached from, so that its path is read from the top down."""
    known = {_steps(led.path): led for led in check.leads_to}
    under: dict[Any, list[Any]] = {}
    for steps, led in known.items():
        under.setdefault(steps[:-1] if steps[:-1] in known else (), []).append((steps, led))
    waiting = [(steps, led, 0) for steps, led in reversed(under.get((), ()))]
    if waiting:
        text.append("\nleads to\n", Style(bold=True))
    while waiting:
        steps, led, depth = waiting.pop()
        whole = led.path if depth == 0 else led.path[-1:]
        for n, way in enumerate(whole):
            indent = "   " + "  " * min(depth + n, 12)
            text.append(f"{indent}{_ARROWS[way.relation]} ")
            _named(text, way.end)
            text.append(f"\n{indent}    {_word(way)}", quiet)
            if way.caveat:
                text.append(f"  CAVEAT {way.caveat}", Style(bold=True))
            if n + 1 < len(whole):
                text.append("\n")
        text.append("  ")
        text.append(led.trust, loud if led.trust == "disputed" else Style(bold=True))
        text.append(f"  {led.evidence.says}\n", quiet)
        if led.on is not None:
            text.append(f"{indent}    on {led.on.model}: {led.on.says}\n", _verdict_style(led.on, loud))
        waiting += [(more, one, depth + len(whole)) for more, one in reversed(under.get(steps, ()))]


def _steps(path: Any) -> tuple[Any, ...]:
    return tuple((way.start.id, way.end.id, way.relation) for way in path)


def _word(way: Any) -> str:
    return f"{way.source}, {way.dated or 'undated'}" if way.source else "no source"


def _path(text: Text, path: Any, quiet: Style) -> None:
    for depth, way in enumerate(path):
        text.append(f"   {'  ' * min(depth, 8)}{way.start.number} {_ARROWS[way.relation]} {way.end.number}")
        text.append(f"   {_word(way)}", quiet)
        if way.caveat:
            text.append(f"   CAVEAT {way.caveat}", Style(bold=True))
        text.append("\n")


def _named(text: Text, number: Any) -> None:
    text.append(number.number, Style(bold=True))
    text.append(f" {number.maker}  {number.kind}".rstrip())


def _parts(text: Text, check: Any, quiet: Style, loud: Style) -> None:
    model = None
    for part in check.parts:
        if part.model != model:
            model = part.model
            text.append(f"\ngoes on {model}\n", Style(bold=True))
        pieces = f" x{part.quantity}" if part.quantity and part.quantity > 1 else ""
        text.append(f"   {part.position or part.number.kind:<18}")
        _named(text, part.number)
        text.append(f"{pieces}\n")
        text.append(f"      {part.source or 'no source'}  {part.evidence.says}", quiet)
        if part.newer:
            text.append(f"  superseded by {', '.join(part.newer)}", Style(bold=True))
        text.append("\n")
        if part.on.is_mismatch:
            text.append(f"      {part.on.says}\n", loud)


def _verdict_style(on: Any, loud: Style) -> Style:
    return loud if on.is_mismatch else Style()
