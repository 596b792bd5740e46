"""The wear rule as a drawing: a scale from new size to the limit with the readings on it, in print and in characters.

In print: the guard band is shaded, what lies beyond a limit is hatched, a reading is a tick up from the scale, one of the
other stage a faint and shorter tick, and the judged value has a pointer below. What lies off the scale is an arrowhead.
"""

from __future__ import annotations

from collections.abc import Iterable

from store.reports.contents import WearRule

WIDTH_MM, HEIGHT_MM, MARGIN_MM = 38.0, 4.2, 1.0
_LONG = WIDTH_MM - 2 * MARGIN_MM
_TOP, _BASE, _HATCH = 0.2, 2.5, 0.8
_INK, _QUIET, _FAINT, _SHADE, _BRASS = "#1a1a1a", "#666", "#9e9e9e", "#d1d1d1", "#8a6a1f"


def svg(rule: WearRule) -> str:
    """The rule as SVG without its inscriptions, 38 mm wide, the scale between margins of 1 mm."""
    start, end = (_x(at) for at in rule.inside)
    tenths = [start + (end - start) * n / 10 for n in range(11)]
    seen = [at for at in rule.ticks if 0 <= at <= 1]
    parts = [
        *(_box(_x(a), _x(b)) for a, b in rule.guards),
        _path([*_hatched(_x(0), start), *_hatched(end, _x(1)), *_upright(tenths, _BASE - 0.65)], _QUIET, 0.1),
        _path([f"M{_x(0):.2f} {_BASE}H{_x(1):.2f}"], _INK, 0.14),
        _path(_upright(map(_x, rule.faint), _BASE - 1.4), _FAINT, 0.18),
        _path(_upright([_x(rule.new.at)] if rule.new else [], _TOP), _BRASS, 0.2),
        _path(_upright(map(_x, seen), _BASE - 1.85), _INK, 0.22),
        _path((f"M{_x(place.at):.2f} {_TOP - 0.2}V{_BASE + 0.5}" for place in rule.limits), _INK, 0.4),
        *_off_scale(rule.ticks),
        "" if rule.judged is None else _pointer(_x(rule.judged)),
    ]
    size = f'width="{WIDTH_MM}mm" height="{HEIGHT_MM}mm" viewBox="0 0 {WIDTH_MM} {HEIGHT_MM}"'
    return f'<svg xmlns="http://www.w3.org/2000/svg" {size}>{"".join(parts)}</svg>'


def inscriptions(rule: WearRule) -> tuple[tuple[float, str], ...]:
    """What is written above the rule, each at its place: the limits, and the new size where it would not run into one."""
    made = [(place.at, place.text) for place in rule.limits]
    if rule.new is not None and all(abs(at - rule.new.at) > 0.3 for at, _ in made):
        made.insert(0, (rule.new.at, rule.new.text))
    return tuple(made)


def characters(rule: WearRule, columns: int) -> str:
    """The rule in ASCII: `-` scale, `~` guard band, `x` beyond, `.` other stage, `'` reading, `^` judged, `|` limit, `N` new.

    What is named later in that list hides what is named before it; `<` and `>` at the ends are readings off the scale.
    """
    drawn = ["-"] * columns

    def at(place: float) -> int:
        return min(columns - 1, max(0, round(place * (columns - 1))))

    def stretch(start: float, end: float, mark: str) -> None:
        for n in range(at(start), at(end) + 1):
            drawn[n] = mark

    if rule.inside[0] > 0:
        stretch(0, rule.inside[0], "x")
    if rule.inside[1] < 1:
        stretch(rule.inside[1], 1, "x")
    for a, b in rule.guards:
        stretch(a, b, "~")
    for mark, places in (
        (".", rule.faint), ("'", rule.ticks), ("^", () if rule.judged is None else (rule.judged,)),
        ("|", [place.at for place in rule.limits]), ("N", [rule.new.at] if rule.new else []),
    ):  # fmt: skip
        for place in places:
            drawn[at(place)] = mark
    return _judged_seen(rule, drawn, at(rule.judged) if rule.judged is not None else None)


def _judged_seen(rule: WearRule, drawn: list[str], judged: int | None) -> str:
    """The judged value is never hidden: on a limit it is `!`; off the scale it is an arrowhead."""
    if judged is not None and rule.judged is not None:
        if rule.judged < 0 or rule.judged > 1:
            drawn[judged] = "<" if rule.judged < 0 else ">"
        elif drawn[judged] == "|":
            drawn[judged] = "!"
        else:
            drawn[judged] = "^"
    return "".join(drawn)


def _x(place: float) -> float:
    return MARGIN_MM + min(1.0, max(0.0, place)) * _LONG


def _upright(places: Iterable[float], to: float) -> list[str]:
    return [f"M{x:.2f} {_BASE}V{to:.2f}" for x in places]


def _hatched(start: float, end: float) -> list[str]:
    """Slanting lines over a stretch, cut off at its ends."""
    high = _BASE - _TOP
    made = []
    for n in range(1, int((end - start + high) / _HATCH) + 1):
        low = start + n * _HATCH
        foot = (low, _BASE) if low <= end else (end, _BASE - (low - end))
        head = (low - high, _TOP) if low - high >= start else (start, _BASE - (low - start))
        made.append(f"M{foot[0]:.2f} {foot[1]:.2f}L{head[0]:.2f} {head[1]:.2f}")
    return made if end - start > 0.3 else []


def _path(strokes: Iterable[str], ink: str, wide: float) -> str:
    drawn = "".join(strokes)
    return f'<path d="{drawn}" fill="none" stroke="{ink}" stroke-width="{wide}"/>' if drawn else ""


def _box(start: float, end: float) -> str:
    return f'<path d="M{start:.2f} {_TOP}H{end:.2f}V{_BASE}H{start:.2f}z" fill="{_SHADE}"/>'


def _pointer(x: float) -> str:
    return f'<path d="M{x:.2f} {_BASE + 0.4}l.8 1.3h-1.6z" fill="{_INK}"/>'


def _off_scale(ticks: Iterable[float]) -> list[str]:
    made = []
    taken = tuple(ticks)
    if any(at < 0 for at in taken):
        made.append(f'<path d="M0 {_BASE - 1.1}l1 -.5v1z" fill="{_INK}"/>')
    if any(at > 1 for at in taken):
        made.append(f'<path d="M{WIDTH_MM} {_BASE - 1.1}l-1 -.5v1z" fill="{_INK}"/>')
    return made
