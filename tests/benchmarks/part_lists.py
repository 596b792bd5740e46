"""Invented lists of part numbers of any length, with families, a hub, and known bad lines; same seed, same files."""

from __future__ import annotations

import csv
import random
from collections.abc import Iterator
from pathlib import Path

MAKERS = ("Alder", "Birch", "Cedar", "Dogwood", "Elm", "Fir")
KINDS = ("brush set", "bushing", "drive", "solenoid", "armature", "starter")
RELATIONS = (
    "superseded-by", "superseded-by", "superseded-by", "interchanges-with", "interchanges-with", "interchanges-with",
    "interchanges-with", "same-as", "same-as", "substitute", "holds", "do-not-use",
)  # fmt: skip
LETTERS = "ABCDEFGHJKLMNPRSTUVWXYZ"
FAMILY = 60
HUB = "HUB-1"
Numbers = list[tuple[str, str]]


def numbers(count: int, seed: int = 5) -> Numbers:
    """So many (number, maker), no two alike."""
    chance = random.Random(seed)
    made: dict[tuple[str, str], None] = {}
    while len(made) < count:
        figures = chance.randrange(100_000, 1_000_000)
        suffix = chance.choice(("", "", "A", "L", "R"))
        made[f"{chance.choice(LETTERS)}{chance.choice(LETTERS)}-{figures}{suffix}", chance.choice(MAKERS)] = None
    return list(made)


def write(folder: Path, count: int, hub: int = 0) -> tuple[Path, Path]:
    """Files of `count` numbers and one and a half times as many relations; the last `hub` numbers interchange with HUB-1."""
    chance = random.Random(count)
    known = numbers(count)
    first, second = folder / f"numbers-{count}.csv", folder / f"relations-{count}.csv"
    with first.open("w", encoding="utf-8", newline="") as out:
        lines = csv.writer(out)
        lines.writerow(("number", "maker", "kind", "description", "status"))
        lines.writerows((n, maker, chance.choice(KINDS), "for frame 4 housings", "") for n, maker in known)
        if hub:
            lines.writerow((HUB, "Alder", "bushing", "fits everywhere", ""))
    with second.open("w", encoding="utf-8", newline="") as out:
        lines = csv.writer(out)
        lines.writerow(("from_number", "from_maker", "relation", "to_number", "to_maker", "caveat", "source", "dated"))
        lines.writerows(_relations(known, count * 3 // 2 - hub, chance))
        lines.writerows(
            (HUB, "Alder", "interchanges-with", *one, "", "List 99", "2024-01-01") for one in known[len(known) - hub :]
        )
    return first, second


def _relations(known: Numbers, count: int, chance: random.Random) -> Iterator[tuple[str, ...]]:
    for _ in range(count):
        a = chance.randrange(len(known))
        b = min((a // FAMILY) * FAMILY + chance.randrange(FAMILY), len(known) - 1)
        if a == b:
            b = a - 1 if a else 1
        relation = chance.choice(RELATIONS)
        caveat = "shim needed" if relation == "substitute" else ""
        dated = f"20{chance.randrange(10, 26)}-0{chance.randrange(1, 10)}-1{chance.randrange(10)}"
        yield (*known[a], relation, *known[b], caveat, f"List {chance.randrange(40)}", dated)


def slipped(number: str, chance: random.Random) -> str:
    """One figure mistyped."""
    place = chance.randrange(3, len(number))
    return number[:place] + chance.choice("0123456789") + number[place + 1 :]


def look_alike(number: str) -> str:
    """Every character that has one replaced by its look-alike."""
    return number.translate(str.maketrans("01582", "OISBZ"))


def worn(number: str, chance: random.Random) -> str:
    """Two characters that cannot be read."""
    places = chance.sample([n for n, c in enumerate(number) if c.isalnum()], 2)
    return "".join("?" if n in places else c for n, c in enumerate(number))
