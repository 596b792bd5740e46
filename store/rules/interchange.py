"""What a part number leads to: relations that are typed, directed, sourced and dated, and the paths along them.

    superseded-by       one way: the new one replaces the old in all uses, the old may not replace the new
    interchanges-with   both ways, without selection or alteration
    same-as             both ways: another maker's number for the same thing
    substitute          one way, with restrictions; always the last step of a path
    holds               one way: a kit and what is in it; always the last step of a path
    do-not-use          with a number: not that one in place of this; without: not this one at all

(MIL-STD-280A tells interchangeable, replacement and substitute items apart.) A path carries one caveat at the most.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from enum import StrEnum
from typing import Protocol

MOST_NUMBERS = 500
ROOM = 40  # statements looked at on one level, for each number that may be walked: dense families hold many a pair


class Relation(StrEnum):
    """How one number stands to another."""

    superseded_by = "superseded-by"
    interchanges_with = "interchanges-with"
    same_as = "same-as"
    substitute = "substitute"
    holds = "holds"
    do_not_use = "do-not-use"


TWO_WAY = frozenset({Relation.interchanges_with, Relation.same_as})
LAST = frozenset({Relation.substitute, Relation.holds})


class Trust(StrEnum):
    """On whose word a step stands, weakest first; a path is worth its weakest step."""

    disputed = "disputed"
    no_source = "no source"
    caveat = "caveat"
    undated = "undated source"
    dated = "dated source"


_ORDER = {trust: place for place, trust in enumerate(Trust)}
_RELATIONS = {relation: place for place, relation in enumerate(Relation)}


@dataclass(frozen=True, slots=True)
class Stated:
    """One line of a list, as stated: numbers by key; `to` is None only for a do-not-use of the number itself."""

    id: int
    of: int
    relation: Relation
    to: int | None
    caveat: str = ""
    source: str = ""
    dated: str = ""


@dataclass(frozen=True, slots=True)
class Step:
    """A statement as it is walked: from one number to the other; against its writing only where it holds both ways."""

    stated: Stated
    start: int
    end: int


@dataclass(frozen=True, slots=True)
class Answer:
    """A number that is led to, by the shortest path with the fewest caveats; the better source among equals."""

    number: int
    path: tuple[Step, ...]


@dataclass(frozen=True, slots=True)
class Stopped:
    """A number that a path reached and may not use, the path to it, and the statement that says so."""

    number: int
    path: tuple[Step, ...]
    says: Stated


@dataclass(frozen=True, slots=True)
class Walk:
    """All that numbers lead to, nearest first. `seen` are all statements met; `bounded`: there is more than was walked."""

    answers: tuple[Answer, ...]
    stopped: tuple[Stopped, ...]
    seen: tuple[Stated, ...]
    bounded: bool


class Lists(Protocol):
    """Where statements are looked up, a whole level of numbers at once."""

    def onward(self, numbers: Sequence[int], most: int, ends: int) -> tuple[Sequence[Stated], bool]:
        """What is stated of these numbers, but do-not-use, and the two-way statements that name them.

        At most about `most` statements and about `ends` different numbers in them; second: whether more were left.
        """

    def barred(self, numbers: Sequence[int]) -> Sequence[Stated]:
        """The do-not-use statements of these numbers."""


def step_trust(stated: Stated, disputed: Iterable[int] = ()) -> Trust:
    """How far one statement is to be trusted; `disputed` are the keys of statements that another contradicts."""
    if stated.id in disputed:
        return Trust.disputed
    if not stated.source:
        return Trust.no_source
    if stated.caveat or stated.relation is Relation.substitute:
        return Trust.caveat
    return Trust.dated if stated.dated else Trust.undated


def path_trust(path: Sequence[Step], disputed: Iterable[int] = ()) -> Trust:
    """The trust of a path: that of its weakest step. Raises ValueError for a path without steps."""
    return min((step_trust(step.stated, disputed) for step in path), key=_ORDER.__getitem__)


def walk(starts: Sequence[int], lists: Lists, most: int = MOST_NUMBERS) -> Walk:
    """Everything that `starts` lead to, breadth first, at most `most` numbers.

    What goes beyond that is not walked, and the walk says that it was bounded.
    A one-way relation is walked one way only; a substitute or what a kit holds ends its path; a second caveat is never
    crossed; a do-not-use stops a path and is reported. Loops end, as no number is walked from twice in the same state.
    """
    return _Walking(starts, lists, most).run()


_CLEAN, _CAVEAT, _LAST = range(3)
_State = tuple[int, int]


class _Walking:
    """The walk under way. A state is a number and how it was reached: cleanly, past a caveat, or by a last step."""

    def __init__(self, starts: Sequence[int], lists: Lists, most: int) -> None:
        self.starts, self.lists, self.most = tuple(dict.fromkeys(starts)), lists, most
        self.came: dict[_State, tuple[Step, _State] | None] = {(start, _CLEAN): None for start in self.starts}
        self.best: dict[int, int] = dict.fromkeys(self.starts, _CLEAN)
        self.seen: dict[int, Stated] = {}
        self.bars: dict[int, list[Stated]] = {}
        self.stopped: dict[int, Stopped] = {}
        self.bounded = False

    def run(self) -> Walk:
        frontier: list[_State] = list(self.came)
        self._learn_bars(self.starts)
        while frontier and not self.bounded:
            frontier = self._level(frontier)
        found = [number for number in self.best if number not in self.starts]
        answers = [Answer(number, self._path((number, self.best[number]))) for number in found]
        answers.sort(key=lambda answer: (self.best[answer.number], len(answer.path)))
        stopped = tuple(stop for number, stop in self.stopped.items() if number not in self.best)
        return Walk(tuple(answers), stopped, tuple(self.seen.values()), self.bounded)

    def _level(self, frontier: list[_State]) -> list[_State]:
        ways: dict[int, list[_State]] = {}
        for state in frontier:
            ways.setdefault(state[0], []).append(state)
        stated, cut = self.lists.onward(list(ways), ROOM * self.most, len(ways) + self.most + 1)
        self.bounded |= cut
        steps = [step for one in stated for step in _steps(one, ways)]
        self.seen.update((one.id, one) for one in stated)
        steps.sort(key=_preference)
        self._learn_bars(list(dict.fromkeys(step.end for step in steps)))
        reached: list[_State] = []
        for step in steps:
            made = (self._take(state, step) for state in ways[step.start])
            reached.extend(state for state in made if state is not None)
        return [state for state in reached if state[1] != _LAST]

    def _take(self, state: _State, step: Step) -> _State | None:
        """The state that a step makes, None where it may not be taken or leads to nothing new."""
        mode = state[1]
        careful = bool(step.stated.caveat) or step.stated.relation is Relation.substitute
        if careful and mode == _CAVEAT:
            return None
        made = (step.end, _LAST if step.stated.relation in LAST else _CAVEAT if careful else mode)
        if made[1] >= self.best.get(step.end, _LAST + 1):
            return None
        bar = self._bar(step)
        if bar is not None:
            self.stopped.setdefault(step.end, Stopped(step.end, (*self._path(state), step), bar))
            return None
        if step.end not in self.best and len(self.best) - len(self.starts) >= self.most:
            self.bounded = True
            return None
        self.came[made] = (step, state)
        self.best[step.end] = made[1]
        return made

    def _bar(self, step: Step) -> Stated | None:
        """The statement that forbids to end up at the step's end, None where none does."""
        for says in self.bars.get(step.end, ()):
            if says.to is None:
                return says
        for number in (step.start, *self.starts):
            for says in self.bars.get(number, ()):
                if says.to == step.end:
                    return says
        return None

    def _learn_bars(self, numbers: Sequence[int]) -> None:
        unknown = [number for number in numbers if number not in self.bars]
        if not unknown:
            return
        for number in unknown:
            self.bars[number] = []
        for says in self.lists.barred(unknown):
            self.bars[says.of].append(says)
            self.seen[says.id] = says

    def _path(self, state: _State) -> tuple[Step, ...]:
        steps = []
        while (came := self.came[state]) is not None:
            step, state = came
            steps.append(step)
        return tuple(reversed(steps))


def _preference(step: Step) -> tuple[int, int, int]:
    return -_ORDER[step_trust(step.stated)], _RELATIONS[step.stated.relation], step.stated.id


def _steps(stated: Stated, ways: dict[int, list[_State]]) -> Iterable[Step]:
    if stated.to is None or stated.relation is Relation.do_not_use:
        return
    if stated.of in ways:
        yield Step(stated, stated.of, stated.to)
    if stated.relation in TWO_WAY and stated.to in ways:
        yield Step(stated, stated.to, stated.of)
