"""What a sheet looks like: the store's rows as the cells, faces and explanations that the Job screen draws."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from rich.text import Text

from store.rules.wear import WearRule
from tui.widgets import wear_rule
from tui.widgets.keying import Asking, Cell, Keying, Row, State
from tui.widgets.sheet import Face

Which = tuple[str, str, str]


def rows(sheet: Any, refused: Mapping[tuple[str, str], Cell]) -> list[Row]:
    """The rows that keys go into. Without any limit every row is asked, else those that the sheet asks for.

    `refused` are cells that hold what was typed and not taken, by characteristic and position: they keep it.
    """
    none_limited = not any(row.limit for row in sheet.rows)
    made = []
    for row in sheet.rows:
        cells = [
            Cell(place, shown(reading), State.accepted)
            if reading
            else refused.get((row.characteristic.name, place), Cell(place))
            for place, reading in zip(row.positions, row.readings, strict=True)
        ]
        is_test = row.characteristic.statistic.value == "attribute"
        made.append(Row(row.characteristic.name, cells, is_test, none_limited or row.is_expected))
    return made


def asked(sheet: Any, *, every: bool) -> Any:
    """The sheet with only the rows that it asks for or that have readings; all of them with `every` or without limits."""
    if every or not any(row.limit for row in sheet.rows):
        return sheet
    return replace(sheet, rows=tuple(row for row in sheet.rows if row.is_expected))


def shown(reading: Any) -> str:
    """A reading in its cell: as typed; a mark by its word."""
    mark = reading.typed.mark.value
    if mark == "number":
        return str(reading.typed.text)
    word = str({"not measured": "n.m.", "cannot judge": "n.j."}.get(mark, mark))
    return word + (f" {reading.typed.detail}" if reading.typed.detail else "")


def faces(sheet: Any) -> list[Face]:
    """The faces of all rows, each first of its component with the heading."""
    return [face(sheet, n) for n in range(len(sheet.rows))]


def face(sheet: Any, n: int) -> Face:
    """What row `n` says beside its cells."""
    row = sheet.rows[n]
    group = row.characteristic.component
    opens = n == 0 or sheet.rows[n - 1].characteristic.component != group
    judgement = row.judged.judgement if row.judged else None
    return Face(
        label=row.characteristic.label,
        limit=limit(row),
        verdict=verdict(row),
        group=group if opens else "",
        derived=_derived(row),
        worst=judgement.worst_at if judgement else "",
        rule=rule(row),
    )


def limit(row: Any) -> str:
    """The limit in twelve columns: `9.5 mm min`; nothing where there is none."""
    if row.limit is None:
        return "" if row.characteristic.derive or not row.characteristic.unit else row.characteristic.unit
    low, high, unit = row.limit.low, row.limit.high, row.limit.unit
    if low is not None and high is not None:
        return f"{low}-{high}" if len(low) + len(high) > 8 else f"{low}-{high} {unit}"
    if low is None and high is None:
        return "pass"
    return f"≥ {low} {unit}" if low is not None else f"≤ {high} {unit}"


def verdict(row: Any) -> str:
    """The verdict in its column; a row short of readings says how many there are."""
    if row.judged is None:
        return ""
    judgement = row.judged.judgement
    if judgement.reason == "short":
        return f"{judgement.count} of {judgement.expected}"
    return str(judgement.verdict.value)


def _derived(row: Any) -> str:
    if not row.characteristic.derive:
        return ""
    judgement = row.judged.judgement if row.judged else None
    if judgement is None or judgement.value is None:
        return "computed"
    from store.rules import quantities

    return f"{quantities.shown(judgement.value, judgement.places)} {judgement.unit}"


def rule(row: Any) -> WearRule | None:
    """The wear rule of a row, None where there is nothing to draw."""
    if row.limit is None or row.judged is None or row.judged.judgement.value is None:
        return None
    from store.reports.gather import sizes
    from store.rules.wear import wear_rule as make

    exact, judgement = row.limit.limit, row.judged.judgement
    values = sizes(row.readings, exact.unit) or [judgement.value]
    return make(exact, values, judgement.value, judgement.variance, sizes(row.other, exact.unit))


def with_judged(sheet: Any, n: int, judged: Any, keys: Row) -> Any:
    """The sheet with a new judgement in row `n`; the full rows follow with the next reading of the sheet."""
    changed = list(sheet.rows)
    changed[n] = replace(changed[n], judged=judged)
    return replace(sheet, rows=tuple(changed))


def explanation(
    sheet: Any, keying: Keying, questions: Mapping[Which, str], gauges: Mapping[str, str], width: int
) -> Text:
    """Six lines about the row under the cursor; what is being asked comes first."""
    text = Text(no_wrap=True, overflow="ellipsis")
    if keying.aside:
        text.append(f"no place for: {', '.join(keying.aside[-6:])}  (every asked cell is filled)\n", style="bold")
    if keying.at is None:
        text.append("Every row that is asked for has its readings. Arrows move; F2 the other stage, F6 the report.")
        return text
    row = sheet.rows[keying.at[0]]
    cell = keying.rows[keying.at[0]].cells[keying.at[1]]
    one = row.characteristic
    place = f"{one.noun} {cell.position}".strip() if len(keying.rows[keying.at[0]].cells) > 1 else ""
    _first_line(text, keying, cell, one, place)
    question = questions.get((sheet.stage, one.name, cell.position))
    if question:
        text.append(f"look again: {question}\n", style="bold italic")
    if row.judged is not None:
        text.append(f"{row.judged.because}\n")
    drawn = rule(row)
    if drawn is not None:
        text.append(f"{wear_rule.draw(drawn, min(60, max(20, width - 24)))}")
        used = row.judged.judgement.wear_used
        text.append(f"  {used:.0%} of the wear used\n" if used is not None else "\n")
    before = [f"{shown(r)}" for r in row.other]
    if before:
        text.append(f"{'as left' if sheet.stage == 'as-found' else 'as found'}: {'  '.join(before[:8])}\n")
    if row.limit is not None:
        text.append(
            f"limit from {row.limit.source}, revision {sheet.job.revision}{'  ' + row.limit.note if row.limit.note else ''}\n"
        )
    elif not one.derive:
        text.append("no limit is entered for this model: F7 enters one\n")
    if one.caution:
        text.append(f"CAUTION {one.caution}\n", style="bold")
    text.append(f"{one.datum}  ({gauges.get(one.gauge) or one.gauge or 'no gauge'})")
    return text


def _first_line(text: Text, keying: Keying, cell: Cell, one: Any, place: str) -> None:
    if keying.asking is not Asking.value:
        held = f" {cell.text} to {keying.held}" if keying.held else ""
        text.append(
            f"{one.label} {place}{held}: {keying.asking.value}? {keying.buffer}▏  Enter  Esc\n", style="bold reverse"
        )
    elif cell.state is State.refused:
        text.append(f"{one.label} {place}: {cell.why}\n", style="bold reverse")
    elif keying.buffer and len(keying.buffer) > 6:
        text.append(f"{one.label} {place}: {keying.buffer[-200:]}▏\n")
    else:
        text.append(f"{one.label} {place}  ", style="bold")
