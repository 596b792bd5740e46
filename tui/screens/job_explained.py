"""The lines below the sheet: the row under the cursor explained, most needed first where there is little room."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Mapping
from dataclasses import dataclass
from textwrap import wrap
from typing import Any

from rich.style import NULL_STYLE, Style
from rich.text import Text
from textual.geometry import Size
from textual.widget import Widget

from tui.screens.job_faces import Which, rule, shown
from tui.widgets import wear_rule
from tui.widgets.keying import Asking, Cell, Keying, State
from tui.widgets.listing import flat

WIDEST_RULE = 60


@dataclass(frozen=True, slots=True)
class Known:
    """What the lines are made from: the sheet, the open questions, the gauges in use by kind, and what went before."""

    sheet: Any
    questions: Mapping[Which, str]
    gauges: Mapping[str, str]
    precedents: Mapping[str, Any]


@dataclass(frozen=True, slots=True)
class Said:
    """One thing to say: how much it is needed (0 most), its text and its tone; a drawing is not wrapped."""

    rank: int
    text: str
    tone: str = ""
    is_drawing: bool = False
    is_whole: bool = False


class Explanation(Widget):
    """The lines as a widget. They are made when it is painted, so that a burst of keys pays for no more than what is seen."""

    def __init__(self, lines: Callable[[Size], Text], *, id: str) -> None:  # noqa: A002
        super().__init__(id=id)
        self.lines = lines

    def render(self) -> Text:
        """As many lines as there is room for."""
        return self.lines(self.content_size)


def explanation(known: Known, keying: Keying, room: Size, tones: Mapping[str, str]) -> Text:
    """As many lines as there is room for, about the cell under the cursor; what is being asked comes first."""
    said: list[Said] = []
    if keying.aside:
        said.append(
            Said(0, f"no place for: {', '.join(keying.aside[-6:])}  (every asked cell has its reading)", "bold")
        )
    if keying.at is None:
        refused = _refused_elsewhere(known, keying)
        through = "Every row that is asked for has its readings. Arrows move; F2 the other stage, F9 the report."
        said += refused or [Said(0, through)]
        return laid_out(said, room, tones)
    row = known.sheet.rows[keying.at[0]]
    cells = keying.rows[keying.at[0]].cells
    cell = cells[keying.at[1]]
    place = f", {row.characteristic.noun} {cell.position}" if len(cells) > 1 else ""
    said.append(_head(known, keying, cell, row, f"{row.characteristic.label}{place}"))
    said += _refused_elsewhere(known, keying)
    question = known.questions.get((known.sheet.stage, row.characteristic.name, cell.position))
    if question:
        said.append(Said(1, f"?  {question}  ^y it is right; or type over it", "doubt"))
    return laid_out([*said, *_about(known, row, room.width)], room, tones)


def _head(known: Known, keying: Keying, cell: Cell, row: Any, name: str) -> Said:
    one = row.characteristic
    if keying.asking is not Asking.value:
        held = f" {cell.text} to {keying.held}" if keying.held else ""
        return Said(0, f"{name}{held}: {keying.asking.value}? {keying.buffer}▏  Enter keeps it, Esc drops it", "asking")
    if cell.state is State.refused:
        return Said(0, f"!  {name}: {cell.why}", "asking")
    if len(keying.buffer) > 6:
        return Said(0, f"{name}: {keying.buffer[-200:]}▏", "bold")
    gauge = known.gauges.get(one.gauge)
    is_test = keying.at is not None and keying.rows[keying.at[0]].is_test
    hint = "   p pass  f fail  c cannot judge" if is_test else f"   with {gauge}" if gauge else ""
    asked = sum(which[0] == known.sheet.stage for which in known.questions)
    return Said(0, f"{name}{hint}{f'   ? {asked} to look at again, ^y' if asked else ''}", "bold")


def _refused_elsewhere(known: Known, keying: Keying) -> list[Said]:
    """The first value that was refused in another cell than the one under the cursor, with the reason."""
    for n, row in enumerate(keying.rows):
        for column, cell in enumerate(row.cells):
            if cell.state is State.refused and (n, column) != keying.at:
                label = known.sheet.rows[n].characteristic.label
                is_caution = cell.why.startswith("CAUTION")
                return [Said(1, f"!  {label} {cell.position}, {cell.text}: {cell.why}", "loud", is_whole=is_caution)]
    return []


def _about(known: Known, row: Any, width: int) -> list[Said]:
    """Verdict, wear rule, what it was before, where the limit comes from, caution, datum."""
    one, said = row.characteristic, []
    if row.judged is not None:
        said.append(Said(2, row.judged.because))
    drawn = rule(row)
    if drawn is not None:
        used = row.judged.judgement.wear_used if row.judged else None
        worn = f"  {used:.0%} of the wear used" if used is not None else ""
        said.append(Said(4, wear_rule.draw(drawn, min(WIDEST_RULE, max(20, width - 24))) + worn, is_drawing=True))
    said += [Said(7 + n, text, "quiet") for n, text in enumerate(_before(known, row))]
    if row.limit is not None:
        from store.reports.gather import limit_text

        at_limit = ", equal to it fails" if row.limit.at_limit == "fail" else ""
        note = f"  {row.limit.note}" if row.limit.note else ""
        words = limit_text(row.limit.low, row.limit.high, row.limit.unit)
        source = f"limit {words}{at_limit}: {row.limit.source}, revision {known.sheet.job.revision}{note}"
        said.append(Said(5, source, "quiet"))
    elif not one.derive:
        said.append(Said(5, "no limit is entered for this model: ^l enters one", "quiet"))
    if one.caution:
        is_first = row.judged is None  # before the first value of this job the whole of it is read, whatever the room
        said.append(Said(1 if is_first else 3, f"CAUTION  {one.caution}", "bold", is_whole=is_first))
    by = f"  By {one.gauge}{'' if one.gauge in known.gauges else ', F4 names which'}." if one.gauge else ""
    said.append(Said(6, f"{one.datum}{by}", "quiet"))
    return said


def _before(known: Known, row: Any) -> list[str]:
    """The other stage, the last visit of this unit, and what units of this model usually measure."""
    made = []
    if row.other:
        other = "as left" if known.sheet.stage == "as-found" else "as found"
        made.append(f"{other} {'  '.join(shown(r) for r in row.other[:8])}")
    precedent = known.precedents.get(row.characteristic.name)
    if precedent is not None:
        made += [f"last visit {precedent.last}"] * bool(precedent.last)
        made += [f"this model here {precedent.usual}"] * bool(precedent.usual)
    return made


def laid_out(said: list[Said], room: Size, tones: Mapping[str, str]) -> Text:
    """What is needed most gets a line each, in the order given; lines to spare go to those that need more than one."""
    width, height = max(20, room.width), max(1, room.height)
    whole = {id(one): min(len(wrap(flat(one.text), width)) - 1, max(0, height - 2)) for one in said if one.is_whole}
    places = max(1 + len(whole), height - sum(whole.values()))
    chosen = sorted(sorted(said, key=lambda s: s.rank)[:places], key=said.index)
    spare = max(0, height - len(chosen) - sum(whole.values()))
    text = Text(no_wrap=True, overflow="ellipsis")
    for one in chosen:
        lines = (
            wrap(flat(one.text)[: width * height], width) or [""]
            if not one.text.startswith(("├", "▸", "─", "╌", "◂"))
            else [one.text]
        )
        extra = whole.get(id(one), min(spare, len(lines) - 1))
        spare -= 0 if one.is_whole else extra
        kept = lines[: 1 + extra]
        if len(lines) > len(kept):
            kept[-1] = (kept[-1][: width - 1]).rstrip() + "…"
        for line in kept:
            text.append(f"{line}\n", style=_style(one.tone, tones))
    return text


def cautions_shown(cautions: Iterable[str], drawn: str, room: Size) -> set[str]:
    """Those cautions that stand in what was drawn: whole, or as much as there is room for."""
    if "CAUTION" not in drawn:
        return set()
    shown, found = " ".join(drawn.split()), set()
    for caution in filter(None, cautions):
        words = f"CAUTION {' '.join(caution.split())}"
        is_cut_short = words[:24] in shown and len(wrap(words, max(20, room.width))) > room.height - 2
        if words in shown or is_cut_short:
            found.add(caution)
    return found


def _style(tone: str, tones: Mapping[str, str]) -> Style:
    if tone == "asking":
        return Style(color=tones["brass-ink"], bgcolor=tones["brass"], bold=True)
    if tone == "bold":
        return Style(bold=True)
    return Style(color=tones[tone], bold=tone in {"doubt", "loud"} or None) if tone else NULL_STYLE
