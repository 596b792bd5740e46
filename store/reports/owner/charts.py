"""The charts of the owner's report as numbers between 0 and 1, x to the right and y up; the template makes lines of them."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from store.rules.recurrence import Mean
from store.rules.survival import Step, marks

Place = tuple[float, float]
_ROUND = (0.005, 0.01, 0.02, 0.05, 0.1, 0.2, 0.5, 1.0, 2.0, 5.0, 10.0)
_MOST_LINES = 5


def returns(steps: Sequence[Step], at_risk: Sequence[tuple[int, int]], longest: float) -> dict[str, Any] | None:
    """The share returned over the days, its band, and the numbers at risk; None without a return."""
    if not steps:
        return None
    curve = [(s.days, 1 - s.stays, 1 - s.high, 1 - s.low) for s in steps]
    return _drawn(curve, longest, [(day, str(n)) for day, n in at_risk], most=1.0, is_share=True)


def repeats(means: Sequence[Mean], longest: float) -> dict[str, Any] | None:
    """The mean number of comebacks a unit over the days; None where no unit came back."""
    if not means:
        return None
    longest = max(longest, means[-1].days)
    curve = [(m.days, m.mean, m.low, m.high) for m in means]
    return _drawn(curve, longest, [(day, "") for day in marks(longest)], most=None, is_share=False)


def scale(highest: float) -> tuple[float, list[tuple[float, str]]]:
    """The upper end of a scale of shares from 0, and its marks with their places on it."""
    step = _step(highest)
    count = max(1, -int(-highest // step))
    top = min(1.0, step * count)
    return top, [(_cut(n * step / top), f"{n * step:.0%}") for n in range(count + 1) if n * step <= top + 1e-9]


def _drawn(
    curve: Sequence[tuple[float, float, float, float]], longest: float, days: Sequence[tuple[int, str]],
    *, most: float | None, is_share: bool,
) -> dict[str, Any]:  # fmt: skip
    longest = max(longest, 1.0)
    highest = max(high for *_, high in curve)
    step = _step(highest)
    top = step * max(1, -int(-highest // step))
    if most is not None:
        top = min(top, most)

    def stairs(which: int) -> list[Place]:
        places, y = [(0.0, 0.0)], 0.0
        for point in curve:
            x = _cut(point[0] / longest)
            places += [(x, y), (x, y := _cut(point[which] / top))]
        return [*places, (1.0, y)]

    places = len(f"{100 * step if is_share else step:g}".partition(".")[2])
    return {
        "line": stairs(1),
        "band": [*stairs(2), *reversed(stairs(3))],
        "x": [(_cut(day / longest), str(day), below) for day, below in days],
        "y": [
            (_cut(n * step / top), f"{n * step:.{places}%}" if is_share else f"{n * step:.{places}f}")
            for n in range(int(top / step + 1e-9) + 1)
        ],
    }


def _step(highest: float) -> float:
    return next((step for step in _ROUND if highest / step <= _MOST_LINES), highest / _MOST_LINES)


def _cut(place: float) -> float:
    """To four places: a tenth of a hair, and the same bytes wherever it is reckoned."""
    return round(place, 4)
