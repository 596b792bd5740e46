"""Where lists contradict each other or run in a circle: shown with both sources, never settled in silence."""

from __future__ import annotations

from collections.abc import Collection, Iterable, Sequence
from dataclasses import dataclass
from enum import StrEnum

from store.rules.interchange import TWO_WAY, Relation, Stated


class Clash(StrEnum):
    """What is wrong between statements."""

    loop = "supersession runs in a circle"
    each_other = "each is said to supersede the other"
    successors = "superseded by two numbers that do not lead to each other"
    forbidden = "one says use it, another says do not"
    direction = "one says one way only, another says both ways"
    caveat = "one states a caveat, another does not"


@dataclass(frozen=True, slots=True)
class Conflict:
    """Statements that cannot all hold; `disputed` are the keys of those not to be relied on."""

    clash: Clash
    says: tuple[Stated, ...]
    disputed: frozenset[int]


def conflicts(seen: Sequence[Stated], reached: Collection[int] = ()) -> tuple[Conflict, ...]:
    """Every conflict among the statements that a walk has seen.

    `reached` are the numbers led to: a do-not-use by any of them against another of them is a conflict, though it stopped
    no path.
    """
    found = [*_loops(seen), *_successors(seen), *_forbidden(seen, frozenset(reached)), *_pairs(seen)]
    return tuple(found)


def disputed(found: Iterable[Conflict]) -> frozenset[int]:
    """The keys of all statements that are not to be relied on."""
    return frozenset(key for conflict in found for key in conflict.disputed)


def _conflict(clash: Clash, says: Iterable[Stated], doubted: Iterable[Stated] | None = None) -> Conflict:
    whole = tuple(says)
    return Conflict(clash, whole, frozenset(one.id for one in (whole if doubted is None else doubted)))


def _loops(seen: Sequence[Stated]) -> Iterable[Conflict]:
    """One conflict a circle: numbers that only lead into one or out of one are peeled off first."""
    onward: dict[int, dict[int, Stated]] = {}
    for one in seen:
        if one.relation is Relation.superseded_by and one.to is not None:
            onward.setdefault(one.of, {}).setdefault(one.to, one)
    left = _on_circles(onward)
    done: set[int] = set()
    for first in sorted(left):
        trail: list[int] = []
        at = first
        while at not in trail and at not in done:
            trail.append(at)
            at = min(to for to in onward[at] if to in left)
        if at in trail:
            circle = trail[trail.index(at) :]
            says = [onward[a][b] for a, b in zip(circle, [*circle[1:], circle[0]], strict=True)]
            yield _conflict(Clash.each_other if len(circle) == 2 else Clash.loop, says)
        done.update(trail)


def _on_circles(onward: dict[int, dict[int, Stated]]) -> set[int]:
    left = set(onward)
    while True:
        entered = {to for number in left for to in onward[number] if to in left}
        staying = {number for number in left if number in entered and any(to in left for to in onward[number])}
        if staying == left:
            return left
        left = staying


def _successors(seen: Sequence[Stated]) -> Iterable[Conflict]:
    """Numbers superseded by several, on the word of different sources, that no other statement ties together."""
    of: dict[int, list[Stated]] = {}
    for one in seen:
        if one.relation is Relation.superseded_by and one.to is not None:
            of.setdefault(one.of, []).append(one)
    several = {number: says for number, says in of.items() if len({s.to for s in says}) > 1}
    if not several:
        return
    family = _families(one for one in seen if one.of not in several or one.relation is not Relation.superseded_by)
    for says in several.values():
        apart: dict[int, Stated] = {}
        for one in says:
            assert one.to is not None
            apart.setdefault(family.get(one.to, one.to), one)
        if len(apart) > 1 and len({one.source for one in apart.values()}) > 1:
            yield _conflict(Clash.successors, apart.values())


def _families(seen: Iterable[Stated]) -> dict[int, int]:
    """Each number with the least number that it is tied to by supersession or both ways."""
    parent: dict[int, int] = {}

    def root(number: int) -> int:
        while parent.setdefault(number, number) != number:
            parent[number] = parent[parent[number]]
            number = parent[number]
        return number

    for one in seen:
        if one.to is not None and (one.relation in TWO_WAY or one.relation is Relation.superseded_by):
            a, b = sorted((root(one.of), root(one.to)))
            parent[b] = a
    return {number: root(number) for number in list(parent)}


def _forbidden(seen: Sequence[Stated], reached: frozenset[int]) -> Iterable[Conflict]:
    bars = [one for one in seen if one.relation is Relation.do_not_use]
    if not bars:
        return
    uses: dict[int, list[Stated]] = {}
    for one in seen:
        if one.relation is not Relation.do_not_use and one.to is not None:
            uses.setdefault(one.to, []).append(one)
            if one.relation in TWO_WAY:
                uses.setdefault(one.of, []).append(one)
    for bar in bars:
        number = bar.of if bar.to is None else bar.to
        against = [one for one in uses.get(number, ()) if bar.to is None or bar.of in (one.of, one.to)]
        if against or (bar.to in reached and bar.of in reached):
            yield _conflict(Clash.forbidden, (bar, *against), against)


def _pairs(seen: Sequence[Stated]) -> Iterable[Conflict]:
    pairs: dict[tuple[int, int], list[Stated]] = {}
    for one in seen:
        if one.to is not None and one.relation not in {Relation.do_not_use, Relation.holds}:
            pairs.setdefault((min(one.of, one.to), max(one.of, one.to)), []).append(one)
    for says in pairs.values():
        if len(says) < 2:
            continue
        both = [one for one in says if one.relation in TWO_WAY]
        single = [one for one in says if one.relation is Relation.superseded_by]
        with_caveat = [one for one in says if one.caveat or one.relation is Relation.substitute]
        without = [one for one in says if one not in with_caveat]
        if both and single:
            yield _conflict(Clash.direction, (*both, *single), both)
        if with_caveat and without and {w.source for w in with_caveat} != {w.source for w in without}:
            yield _conflict(Clash.caveat, (*with_caveat, *without), without)
