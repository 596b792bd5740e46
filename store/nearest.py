"""The nearest known names to one that is not known, for a refusal that helps."""

from __future__ import annotations

from collections.abc import Sequence


def nearest(name: str, known: Sequence[str], most: int = 3) -> tuple[str, ...]:
    """Up to `most` of `known` that look like `name`, best first; may be empty."""
    from rapidfuzz import fuzz, process

    wanted = name[:200].casefold()
    found = process.extract(wanted, [k.casefold() for k in known], scorer=fuzz.WRatio, limit=most, score_cutoff=72)
    return tuple(known[index] for _, _, index in found)
