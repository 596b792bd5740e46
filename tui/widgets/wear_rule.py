"""The wear rule in characters: new size at the left, limit, guard band, what lies beyond, and the readings on it.

It reads in twenty columns and without colour: each part has a mark of its own.
"""

from __future__ import annotations

from store.rules.wear import WearRule

SCALE, BEYOND, GUARD, NEW, LIMIT = "─", "╌", "░", "├", "┃"
TICK, FAINT, JUDGED, OFF_LEFT, OFF_RIGHT = "│", "·", "◆", "◂", "▸"
LEGEND = f"{NEW} new  {LIMIT} limit  {GUARD} cannot tell  {BEYOND} beyond  {TICK} reading  {JUDGED} judged"


def draw(rule: WearRule, width: int) -> str:
    """The rule in so many columns, at least eight."""
    width = max(8, width)

    def column(place: float) -> int:
        return round(place * (width - 1))

    first, last = column(rule.inside[0]), column(rule.inside[1])
    cells = [SCALE if first <= n <= last else BEYOND for n in range(width)]
    for begin, end in rule.guards:
        for n in range(max(0, column(begin)), min(width - 1, column(end)) + 1):
            cells[n] = GUARD
    if rule.new is not None and 0 <= column(rule.new[0]) < width:
        cells[column(rule.new[0])] = NEW
    for place, _ in rule.ends:
        cells[min(width - 1, max(0, column(place)))] = LIMIT
    for places, mark in ((rule.faint, FAINT), (rule.ticks, TICK), ((rule.judged,), JUDGED)):
        for place_or_none in places:
            if place_or_none is not None:
                _put(cells, column(place_or_none), mark, is_judged=mark is JUDGED)
    return "".join(cells)


def _put(cells: list[str], at: int, mark: str, *, is_judged: bool) -> None:
    if at < 0:
        cells[0] = OFF_LEFT
    elif at >= len(cells):
        cells[-1] = OFF_RIGHT
    elif is_judged or cells[at] not in {LIMIT, NEW}:
        cells[at] = mark
