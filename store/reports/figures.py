"""How the computed figures and the moments of a report are written: never better than they are."""

from __future__ import annotations

import math
import re
from datetime import UTC, datetime

_NUMBER = re.compile(r"([+-]?\d+)(?:\.(\d+))?\Z")
_MOMENT = re.compile(r"(\d{4}-\d{2}-\d{2})[T ](\d{2}:\d{2})(?::\d{2}(?:\.\d+)?)?(Z|[+-]\d{2}:?\d{2})?\Z")


def split(shown: str) -> tuple[str, str]:
    """A shown number as what stands before the decimal mark and what follows it, the mark included; others whole."""
    found = _NUMBER.match(shown)
    if found is None:
        return shown, ""
    return found[1], f".{found[2]}" if found[2] else ""


def is_number(shown: str) -> bool:
    """Whether a shown figure can stand in a column aligned on the decimal mark."""
    return _NUMBER.match(shown) is not None


def probability(share: float) -> str:
    """A probability of conformity in per cent, cut to one decimal: 94.96 % is not yet 95 %."""
    per_cent = share * 100
    if per_cent >= 99.9:
        return "> 99.9 %"
    if per_cent < 0.1:
        return "< 0.1 %"
    return f"{math.floor(per_cent * 10 + 1e-9) / 10:.1f} %"


def wear_used(share: float) -> str:
    """Wear used in whole per cent; close to the limit with as many decimals as it takes to see on which side it is."""
    per_cent = share * 100
    for places in range(4):
        text = f"{per_cent:.{places}f}"
        if share == 1 or float(text) != 100:
            return f"{text} %"
    return "just under 100 %" if share < 1 else "just over 100 %"


def moment(text: str) -> str:
    """A moment as printed, `2026-03-02 14:05 UTC`; a date and what is no moment as it stands."""
    found = _MOMENT.match(text)
    if found is None:
        return text
    zone = "UTC" if found[3] == "Z" else found[3] or ""
    return f"{found[1]} {found[2]} {zone}".rstrip()


def day(text: str) -> str:
    """The date of a moment, in the zone in which it was said."""
    found = _MOMENT.match(text)
    return found[1] if found else text


def instant(text: str) -> datetime:
    """A moment as a time in UTC, to date the PDF; a date is its midnight. Raises ValueError where it is no moment."""
    made = datetime.fromisoformat(text.replace("Z", "+00:00"))
    return made.replace(tzinfo=UTC) if made.tzinfo is None else made.astimezone(UTC)
