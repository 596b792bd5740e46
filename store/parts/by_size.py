"""Parts by their sizes, and by words."""

from __future__ import annotations

import re
from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from json import dumps

from sqlalchemy import Connection

from store.errors import Refused
from store.parts import evidence, numbers
from store.parts.evidence import Evidence
from store.parts.numbers import Number
from store.records import Record
from store.rules import sizes
from store.rules.sizes import Difference, Size
from store.sqlite.engine import rows

MOST = 50
_MOST_LOOKED_AT = 5000


@dataclass(frozen=True, slots=True)
class SizeMatch:
    """A part whose sizes lie within the tolerance: `worst` is the greatest share of the tolerance that one takes, 0 to 1."""

    number: Number
    differences: tuple[Difference, ...]
    worst: float
    evidence: Evidence

    @property
    def warnings(self) -> tuple[str, ...]:
        """What to look at before it is used."""
        return tuple(f"{one.asked.name}: {one.warning}" for one in self.differences if one.warning)


@dataclass(frozen=True, slots=True)
class BySize:
    """The answer to a search by size, best first. `cautions` hold for the search as a whole; `more`: some were left off."""

    kind: str
    asked: tuple[Size, ...]
    within: Size
    matches: tuple[SizeMatch, ...]
    cautions: tuple[str, ...]
    more: bool


def search(record: Record, kind: str, asked: Mapping[str, str], within: str | None = None, most: int = MOST) -> BySize:
    """Parts of a kind with these sizes, `{"width": "8", "length": "5/8 in"}`, mm where no unit is typed.

    A bushing is asked for by `housing-bore` and `journal`: its outside is held against the one, its bore against the other.
    Ranked by the worst difference as a share of the tolerance. Raises Refused (no size, not a size, no tolerance).
    """
    if not asked:
        raise Refused("say at least one size: width=8 or od=5/8in")
    wanted = tuple(sizes.size(name, text) for name, text in asked.items())
    tolerance = sizes.tolerance(within)
    with record.read() as conn:
        found = _within(conn, wanted, tolerance)
        named = [one for one in numbers.by_ids(conn, found) if is_of_kind(one.kind, kind)]
        listed = _sizes_of(conn, [one.id for one in named])
        came_of = evidence.of_numbers(conn, [one.id for one in named])
    matches = []
    for number in named:
        differences = sizes.differences(number.kind, wanted, listed[number.id], tolerance)
        worst = sizes.worst(differences)
        if worst is not None:
            matches.append(SizeMatch(number, differences, worst, came_of.get(number.id, evidence.NONE)))
    matches.sort(key=lambda match: (match.worst, match.number.number, match.number.maker))
    more = len(matches) > most or len(found) >= _MOST_LOOKED_AT
    return BySize(kind, wanted, tolerance, tuple(matches[:most]), _cautions(kind, wanted), more)


_SIZE_TYPED = re.compile(r"([^\s=]+)\s*=\s*([^=]*?)(?=\s+[^\s=]+\s*=|\s*$)")


def search_typed(record: Record, text: str) -> BySize:
    """A search as typed in one line: `brush width=8 length=5/8 in within=0.2`. Raises Refused as `search` does."""
    named = dict(_SIZE_TYPED.findall(text))
    first = _SIZE_TYPED.search(text)
    kind = text[: first.start()].strip() if first else ""
    within = named.pop("within", None)
    return search(record, kind, {name: value for name, value in named.items() if value}, within)


def is_of_kind(kind: str, asked: str) -> bool:
    """Whether a part's kind is the one asked: every word of it, singular or plural (`brush` finds `brush set`)."""
    have = {_singular(word) for word in kind.casefold().replace("-", " ").split()}
    return all(_singular(word) in have for word in asked.casefold().replace("-", " ").split())


def _singular(word: str) -> str:
    if word.endswith(("shes", "sses", "xes")):
        return word[:-2]
    return word[:-1] if word.endswith("s") and not word.endswith("ss") else word


def _within(conn: Connection, wanted: Sequence[Size], within: Size) -> list[int]:
    """Numbers that have every size within its window."""
    parts, values = [], []
    for one in wanted:
        low, high = sizes.window(one, within)
        parts.append("SELECT number_id FROM part_size WHERE name = ? AND millionths BETWEEN ? AND ?")
        values += [sizes.listed_name(one.name), low, high]
    sql = f"{' INTERSECT '.join(parts)} LIMIT ?"
    return [r[0] for r in rows(conn, sql, (*values, _MOST_LOOKED_AT))]


def _sizes_of(conn: Connection, ids: Sequence[int]) -> dict[int, dict[str, Size]]:
    found: dict[int, dict[str, Size]] = {which: {} for which in ids}
    sql = "SELECT s.number_id, s.name, s.value, s.unit FROM json_each(?) k CROSS JOIN part_size s ON s.number_id = k.value"
    for which, name, value, unit in rows(conn, sql, (dumps(list(ids)),)):
        made = sizes.size(name, value, unit)
        found[which].setdefault(made.name, made)
    return found


def sizes_of(record: Record, number: int) -> tuple[Size, ...]:
    """The sizes that are listed for a number, by name."""
    with record.read() as conn:
        found = _sizes_of(conn, [number])[number]
    return tuple(found[name] for name in sorted(found))


def _cautions(kind: str, wanted: Sequence[Size]) -> tuple[str, ...]:
    names = {one.name for one in wanted}
    made = ["sizes alike prove nothing yet: compare grade, lead, chamfer and material before it goes in"]
    if is_of_kind(kind, "bushing") and names & {"id", "od"} and not names & set(sizes.SEATS):
        made.append("a worn bushing misleads: measure the housing bore and the journal (housing-bore=, journal=)")
    if is_of_kind(kind, "brush"):
        made.append("an inch brush in a metric holder sticks or rattles: look at the nominals side by side")
    return tuple(made)


def words(record: Record, text: str, most: int = MOST) -> tuple[Number, ...]:
    """Numbers whose number, maker, kind or description holds every word of `text`, plurals apart, in the order of the lists.

    At most `most`; a list is read through until so many are found.
    """
    asked = text.split()[:6]
    if not asked:
        return ()
    like = " AND ".join(
        "(description LIKE ? ESCAPE '\\' OR kind LIKE ? ESCAPE '\\' OR number LIKE ? ESCAPE '\\' OR maker LIKE ? ESCAPE '\\')"
        for _ in asked
    )
    values = []
    for word in asked:
        escaped = _singular(word.casefold()).replace("\\", "\\\\").replace("%", "\\%").replace("_", "\\_")
        values += [f"%{escaped}%"] * 4
    sql = f"SELECT id, number, maker, key, kind, description, status FROM part_number WHERE {like} ORDER BY id LIMIT ?"  # noqa: S608
    with record.read() as conn:
        return tuple(Number(*r) for r in rows(conn, sql, (*values, most)))
