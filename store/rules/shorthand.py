"""What a bench writes short: a small list that ships; the shop changes it and adds to it."""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Mapping

SHIPPED: dict[str, str] = {
    "alt": "alternator", "arm": "armature", "assy": "assembly", "batt": "battery", "brg": "bearing", "brk": "broken",
    "brs": "brushes", "bsh": "bushing", "burnt": "burned", "comm": "commutator", "cust": "customer", "drv": "drive",
    "fld": "field", "gen": "generator", "gnd": "ground", "grnd": "ground", "grwl": "growler", "hsg": "housing",
    "insul": "insulation", "pnn": "pinion", "reg": "regulator", "repl": "replaced", "sol": "solenoid", "spr": "spring",
    "strt": "starter", "term": "terminal", "wdg": "winding",
}  # fmt: skip


def together(own: Mapping[str, str]) -> dict[str, str]:
    """The shipped list with the shop's own lines over it; an empty long word takes a shipped line out."""
    merged = {**SHIPPED, **own}
    return {short: long for short, long in merged.items() if long}


def groups(lines: Mapping[str, str]) -> dict[str, tuple[str, ...]]:
    """For each word of the list the others that mean the same: the long word and its shorts find each other.

    >>> groups({"comm": "commutator"})
    {'comm': ('commutator',), 'commutator': ('comm',)}
    """
    shorts: dict[str, list[str]] = defaultdict(list)
    for short, long in lines.items():
        shorts[long].append(short)
    made: dict[str, set[str]] = defaultdict(set)
    for long, known in shorts.items():
        same = {long, *known}
        for word in same:
            made[word] |= same - {word}
    return {word: tuple(sorted(same)) for word, same in made.items()}
