"""What a sheet looks like: the store's rows as the cells and faces that the reading sheet draws."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import replace
from typing import Any

from store.rules.wear import WearRule
from tui.widgets.keying import Cell, Row, State
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
            Cell(place, in_cell(reading), State.accepted)
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


def in_cell(reading: Any) -> str:
    """A reading in its cell: as typed; a mark by its word alone, the lines below tell the rest."""
    mark = reading.typed.mark.value
    if mark == "number":
        return str(reading.typed.text)
    return str({"not measured": "n.m.", "cannot judge": "n.j."}.get(mark, mark))


def shown(reading: Any) -> str:
    """A reading in full: as typed; a mark by its word with what was said."""
    return in_cell(reading) + (f" {reading.typed.detail}" if reading.typed.detail else "")


def faces(sheet: Any, questions: Mapping[Which, str]) -> list[Face]:
    """The faces of all rows, each first of its component with the heading."""
    return [face(sheet, n, questions) for n in range(len(sheet.rows))]


def face(sheet: Any, n: int, questions: Mapping[Which, str]) -> Face:
    """What row `n` says beside its cells; `questions` are asked of some of its positions."""
    row = sheet.rows[n]
    group = row.characteristic.component
    opens = n == 0 or sheet.rows[n - 1].characteristic.component != group
    judgement = row.judged.judgement if row.judged else None
    return Face(
        label=row.characteristic.label,
        limit=limit(row),
        short_limit=limit(row, short=True),
        verdict=verdict(row),
        group=group if opens else "",
        derived=_derived(row),
        worst=judgement.worst_at if judgement else "",
        rule=rule(row),
        asked=frozenset(which[2] for which in questions if which[:2] == (sheet.stage, row.characteristic.name)),
    )


def limit(row: Any, *, short: bool = False) -> str:
    """The limit: `≥ 9.5 mm`, `≤ 0.05 mm`, `0.1-0.3 mm`, `pass`; its unit where there is none. `short` leaves the unit out."""
    if row.limit is None:
        return "" if row.characteristic.derive or not row.characteristic.unit else str(row.characteristic.unit)
    low, high, unit = row.limit.low, row.limit.high, "" if short else f" {row.limit.unit}"
    if low is not None and high is not None:
        return f"{low}-{high}{unit}"
    if low is None and high is None:
        return "pass"
    return f"≥ {low}{unit}" if low is not None else f"≤ {high}{unit}"


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
    """The wear rule of a row, with the readings there are; None where there is no size to draw."""
    if row.limit is None:
        return None
    from store.reports.gather import sizes
    from store.rules.wear import wear_rule as make

    exact, judgement = row.limit.limit, row.judged.judgement if row.judged else None
    if exact.low is None and exact.high is None:
        return None
    faint = sizes(row.other, exact.unit)
    if judgement is None or judgement.value is None:
        return make(exact, sizes(row.readings, exact.unit), faint=faint)
    values = sizes(row.readings, exact.unit) or [judgement.value]
    return make(exact, values, judgement.value, judgement.variance, faint)


def with_judged(sheet: Any, n: int, judged: Any) -> Any:
    """The sheet with a new judgement in row `n`; the full rows follow with the next reading of the sheet."""
    changed = list(sheet.rows)
    changed[n] = replace(changed[n], judged=judged)
    return replace(sheet, rows=tuple(changed))
