"""The measured rows for the template: every cell as text with its lines broken, and the height of the row where it is known.

Numbers come apart at the decimal mark, so that the template can align them.
"""

from __future__ import annotations

from typing import Any

from store.errors import brief
from store.reports import strip, wear_rule, wording
from store.reports.characters import breakable
from store.reports.contents import WearRule
from store.reports.figures import is_number, split
from store.reports.line_breaks import width_mm
from store.reports.pen import Block, Pen, highest, stacked, tall

LABEL_MM, LIMIT_MM, CELL_MM, VERDICT_MM, RULE_MM = 43.0, 23.0, 20.0, 16.5, 38.0
COLUMNS_MM = (LABEL_MM, LIMIT_MM, CELL_MM, VERDICT_MM, CELL_MM, VERDICT_MM)
TOP_MM, BOTTOM_MM, RIGHT_MM, SAYS_TOP_MM = 1.2, 1.4, 1.2, 0.9
"""Insets of a cell; the template has the same."""

FIGURE_PT, SAYS_PT, UNIT_PT, TINY_PT, POSITION_PT = 8.5, 7.5, 7.5, 6.6, 5.6
_GAP_MM = 1.6
_DRAWN_MM, _ABOVE_GAUGE_MM = 2.4 + wear_rule.HEIGHT_MM, 0.9
_TOGETHER_MM = 90.0


def group(pen: Pen, one: wording.Group, line_mm: float) -> dict[str, Any]:
    """The rows of a component under its name."""
    name = pen.line(brief(one.component, 80), line_mm) if one.component.casefold() != "running tests" else ""
    return {"component": name, "rows": [row(pen, r, line_mm) for r in one.rows]}


def row(pen: Pen, one: wording.Row, line_mm: float) -> dict[str, Any]:
    """One row. `height` and `says-height` are millimeters with their insets, or None: the typesetter measures."""
    label, datum = _label(pen, one), pen.block(one.datum, LABEL_MM - RIGHT_MM, TINY_PT)
    quiet = pen.block("\n".join(one.limit_quiet), LIMIT_MM - RIGHT_MM, TINY_PT)
    gauge = pen.block(one.gauge, line_mm - sum(COLUMNS_MM), TINY_PT)
    found, left = _cell(pen, one.found), _cell(pen, one.left)
    says = [
        (weight, pen.block(text, sum(COLUMNS_MM) - RIGHT_MM, SAYS_PT, bold=weight == "loud"))
        for weight, text in one.says
    ]
    told = None if one.strips else stacked(*(block.height_mm for _, block in says))
    height = highest(
        stacked(label.height_mm, _of(datum)),
        stacked(tall(len(one.limits), FIGURE_PT), _of(quiet)),
        *(height for cell in (found, left) if cell for height in cell.pop("heights")),
        *(() if one.says else (_rule_height(one, gauge),)),
    )
    if one.says and height is not None and told is not None:
        # The rule's cell spans both rows; the second makes room for what it needs more.
        rule = _rule_height(one, gauge)
        told = None if rule is None else max(told, rule - height - SAYS_TOP_MM)
    return {
        "label": label.text,
        "unit": pen.whole(one.unit, LABEL_MM),
        "datum": datum.text,
        "limits": [(word, [breakable(pen.seen(part), 10) for part in split(size)]) for word, size in one.limits],
        "limit-quiet": quiet.text,
        "found": found,
        "left": left,
        "rule": None if one.rule is None else _rule(pen, one.rule),
        "gauge": gauge.text,
        "says": [(weight, block.text) for weight, block in says],
        "strips": [{"words": strip.words(made, stage), "drawing": strip.svg(made)} for stage, made in one.strips],
        "height": _inset(height, TOP_MM + (0.0 if one.says else BOTTOM_MM)),
        "says-height": _inset(told, SAYS_TOP_MM + BOTTOM_MM),
        "together": (height or 0.0) + (told or 0.0) < _TOGETHER_MM if height and told is not None else _is_short(one),
    }


def _label(pen: Pen, one: wording.Row) -> Block:
    """The label, with room for the unit after it on its last line."""
    block = pen.block(one.label, LABEL_MM - RIGHT_MM, FIGURE_PT)
    if block.height_mm is None or not one.unit.isascii():
        return Block(block.text, None)
    last = block.text.rpartition("\n")[2]
    over = width_mm(last, FIGURE_PT) + width_mm(f"  {one.unit}", FIGURE_PT) > LABEL_MM - RIGHT_MM
    return Block(block.text, None) if over else block


def _cell(pen: Pen, cell: wording.Cell | None) -> dict[str, Any] | None:
    """A result; `heights` are those of its two columns."""
    if cell is None:
        return None
    quiet = pen.block("\n".join(cell.quiet), VERDICT_MM, TINY_PT)
    readings, known = _readings(pen, cell.readings)
    figure = f"{cell.value} {cell.detail}".strip()
    fits = (
        figure.isascii()
        and figure.isprintable()
        and width_mm(f"0000{figure}", FIGURE_PT, bold=True) < CELL_MM - RIGHT_MM
    )
    value = stacked(tall(1, FIGURE_PT) if fits else None, tall(len(readings), TINY_PT) if known else None)
    return {
        "number": is_number(cell.value),
        "value": [breakable(pen.seen(part), 9) for part in split(cell.value)],
        "detail": pen.block(cell.detail, CELL_MM - RIGHT_MM, SAYS_PT).text if not fits else cell.detail,
        "verdict": cell.verdict,
        "quiet": quiet.text,
        "readings": readings,
        "heights": (value, stacked(tall(1, FIGURE_PT), _of(quiet))),
    }


def _readings(pen: Pen, readings: tuple[tuple[str, str], ...]) -> tuple[list[list[tuple[str, str]]], bool]:
    """Readings on as many lines as they need, and whether they are sure to fit on them."""
    lines: list[list[tuple[str, str]]] = []
    used, known, room = 0.0, True, CELL_MM - RIGHT_MM
    for position, figure in readings:
        if f"{position}{figure}".isascii() and f"{position}{figure}".isprintable():
            wide = width_mm(f"{position} ", POSITION_PT) * bool(position) + width_mm(figure, TINY_PT)
        else:
            wide = room if figure != "–" else 2.0
            known = known and figure == "–"
        known = known and wide * 1.01 <= room
        if not lines or used + _GAP_MM + wide > room:
            lines.append([])
            used = 0.0
        lines[-1].append((breakable(pen.seen(position), 8), breakable(pen.seen(figure), 9)))
        used += wide + (_GAP_MM if used else 0.0)
    return lines, known


def _rule(pen: Pen, rule: WearRule) -> dict[str, Any]:
    words = [(at, pen.seen(brief(text, 12))) for at, text in wear_rule.inscriptions(rule)]
    return {"drawing": wear_rule.svg(rule), "words": words}


def _rule_height(one: wording.Row, gauge: Block) -> float | None:
    if gauge.height_mm is None:
        return None
    return (_DRAWN_MM if one.rule else 0.0) + (_ABOVE_GAUGE_MM + gauge.height_mm if one.gauge else 0.0)


def _of(block: Block) -> float | None:
    return block.height_mm if block.text else 0.0


def _inset(height: float | None, inset: float) -> float | None:
    return None if height is None else round(height + inset, 3)


def _is_short(one: wording.Row) -> bool:
    """Whether a row of unknown height is short enough to be kept on one page."""
    cells = [cell for cell in (one.found, one.left) if cell]
    said = sum(len(text) for _, text in one.says) + len(one.label) + len(one.datum) + len(one.gauge)
    return said + sum(len(p) + len(f) + 4 for cell in cells for p, f in cell.readings) < 1_000
