"""What a number leads to: hand-made lists with known answers, and what must hold of any lists."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules import interchange
from store.rules.interchange import LAST, TWO_WAY, Relation, Stated, Trust, Walk, path_trust, step_trust, walk

SUPERSEDED, BOTH, SAME, SUBSTITUTE, HOLDS, BARRED = Relation


class Given:
    """Lists in memory; the order of what they give is that of their writing."""

    def __init__(self, stated: Sequence[Stated]) -> None:
        self.stated = stated

    def onward(self, numbers: Sequence[int], most: int, ends: int) -> tuple[Sequence[Stated], bool]:
        wanted = set(numbers)
        found = [
            one for one in self.stated
            if one.relation is not BARRED and (one.of in wanted or (one.relation in TWO_WAY and one.to in wanted))
        ]  # fmt: skip
        return found[:most], len(found) > most

    def barred(self, numbers: Sequence[int]) -> Sequence[Stated]:
        return [one for one in self.stated if one.relation is BARRED and one.of in set(numbers)]


def lists(*lines: tuple[int, Relation, int | None] | tuple[int, Relation, int | None, str]) -> Given:
    """Lists from lines (of, relation, to, caveat), all from one dated source."""
    return Given(
        [
            Stated(n, line[0], line[1], line[2], line[3] if len(line) > 3 else "", "List 1", "2024-01-01")
            for n, line in enumerate(lines)
        ]
    )


def led_to(found: Walk) -> list[int]:
    return [answer.number for answer in found.answers]


def test_a_chain_of_four_supersessions() -> None:
    """The first leads to all four after it, step by step; the last leads nowhere, the old never replaces the new."""
    chain = lists(*((n, SUPERSEDED, n + 1) for n in range(1, 5)))
    found = walk([1], chain)
    assert led_to(found) == [2, 3, 4, 5]
    assert [(step.start, step.end) for step in found.answers[-1].path] == [(1, 2), (2, 3), (3, 4), (4, 5)]
    assert led_to(walk([5], chain)) == []
    assert led_to(walk([3], chain)) == [4, 5]


def test_a_loop_ends_and_leads_round() -> None:
    """A circle of three is walked once."""
    found = walk([1], lists((1, SUPERSEDED, 2), (2, SUPERSEDED, 3), (3, SUPERSEDED, 1)))
    assert led_to(found) == [2, 3]


def test_both_ways_is_walked_both_ways() -> None:
    """Interchange and another maker's number hold from either side."""
    found = lists((1, BOTH, 2), (3, SAME, 2))
    assert led_to(walk([1], found)) == [2, 3]
    assert led_to(walk([3], found)) == [2, 1]
    assert [step.start for step in walk([3], found).answers[1].path] == [3, 2]


def test_a_substitute_in_the_middle_of_a_chain_ends_it() -> None:
    """1 leads to 2 and to the substitute 3, never to what replaces 3; 3 asked for itself goes on."""
    found = lists((1, SUPERSEDED, 2), (2, SUBSTITUTE, 3, "shorten the lead"), (3, SUPERSEDED, 4))
    assert led_to(walk([1], found)) == [2, 3]
    assert led_to(walk([3], found)) == [4]
    assert path_trust(walk([1], found).answers[1].path) is Trust.caveat


def test_a_kit_leads_to_what_it_holds_and_no_further() -> None:
    """Superseded by a kit: the kit and its parts are shown; a part does not lead to the kit nor to its other parts."""
    found = lists((1, SUPERSEDED, 9), (9, HOLDS, 10), (9, HOLDS, 11), (10, SUPERSEDED, 12))
    assert led_to(walk([1], found)) == [9, 10, 11]
    assert led_to(walk([11], found)) == []


def test_the_reverse_rotation_twin_is_not_led_to() -> None:
    """Its number differs by a letter, and no list leads from one to the other."""
    assert led_to(walk([1], lists((1, SAME, 3), (2, SAME, 4)))) == [3]


def test_do_not_use_stops_a_path_and_says_why() -> None:
    """A number that is barred altogether is not led to, nor what lies behind it; the statement is handed out."""
    found = walk([1], lists((1, SUPERSEDED, 2), (2, SUPERSEDED, 3), (2, BARRED, None, "cracks at the neck")))
    assert led_to(found) == []
    assert [(stop.number, stop.says.caveat) for stop in found.stopped] == [(2, "cracks at the neck")]


def test_do_not_use_in_place_of_another_bars_just_that() -> None:
    """`Not 3 for 1`: 3 is barred from 1, by any way; 2 may still use it."""
    found = lists((1, BOTH, 2), (2, BOTH, 3), (1, BARRED, 3))
    assert led_to(walk([1], found)) == [2]
    assert [stop.number for stop in walk([1], found).stopped] == [3]
    assert led_to(walk([2], found)) == [1, 3]


def test_a_barred_number_that_is_asked_still_leads_on() -> None:
    """What is bad wants replacing."""
    assert led_to(walk([1], lists((1, BARRED, None), (1, SUPERSEDED, 2)))) == [2]


def test_a_caveat_is_crossed_once() -> None:
    """Past one caveat a path may go on; a second is never crossed; a clean way is preferred though it is longer."""
    found = lists((1, SUPERSEDED, 2, "new connector"), (2, SUPERSEDED, 3), (3, SUPERSEDED, 4, "new pilot"))
    assert led_to(walk([1], found)) == [2, 3]
    longer = lists((1, SUPERSEDED, 2, "shim"), (1, SAME, 5), (5, SAME, 2))
    path = next(answer.path for answer in walk([1], longer).answers if answer.number == 2)
    assert [step.end for step in path] == [5, 2]


def test_the_better_source_is_preferred_among_equals() -> None:
    """Of two statements of the same step the dated one is shown."""
    bare = Stated(1, 1, SUPERSEDED, 2)
    dated = Stated(2, 1, SUPERSEDED, 2, "", "List 2", "2024-01-01")
    assert walk([1], Given([bare, dated])).answers[0].path[0].stated is dated


@pytest.mark.parametrize(
    ("stated", "trust"),
    [
        (Stated(1, 1, SUPERSEDED, 2, "", "List 1", "2024-01-01"), Trust.dated),
        (Stated(1, 1, SUPERSEDED, 2, "", "List 1"), Trust.undated),
        (Stated(1, 1, SUPERSEDED, 2, "shim", "List 1", "2024-01-01"), Trust.caveat),
        (Stated(1, 1, SUBSTITUTE, 2, "", "List 1", "2024-01-01"), Trust.caveat),
        (Stated(1, 1, SUPERSEDED, 2, "", "", "2024-01-01"), Trust.no_source),
        (Stated(7, 1, SUPERSEDED, 2, "", "List 1", "2024-01-01"), Trust.disputed),
    ],
)
def test_on_whose_word(stated: Stated, trust: Trust) -> None:
    """No source, a caveat, no date: each is worth less; what is disputed is worth least."""
    assert step_trust(stated, {7}) is trust


def test_a_hub_is_bounded_and_says_so() -> None:
    """More equivalents than may be walked: so many are given, and that there are more."""
    found = walk([0], lists(*((0, BOTH, n) for n in range(1, 200))), most=50)
    assert len(found.answers) == 50
    assert found.bounded
    assert not walk([0], lists(*((0, BOTH, n) for n in range(1, 50))), most=50).bounded


NUMBER = st.integers(0, 7)
STATED = st.tuples(NUMBER, st.sampled_from(Relation), NUMBER, st.sampled_from(["", "", "caveat"])).filter(
    lambda s: s[0] != s[2]
)
LINES = st.lists(STATED, max_size=18)


def build(lines: Sequence[tuple[int, Relation, int, str]]) -> Given:
    return Given(
        [Stated(n, of, relation, to, caveat, "List", "") for n, (of, relation, to, caveat) in enumerate(lines)]
    )


@given(LINES, NUMBER)
def test_of_any_path(lines: list[tuple[int, Relation, int, str]], start: int) -> None:
    """Steps join; no second caveat; nothing after a substitute or a kit; no one-way statement backwards; nothing twice."""
    found = walk([start], build(lines))
    assert len(set(led_to(found))) == len(found.answers)
    for answer in found.answers:
        path = answer.path
        assert path[0].start == start
        assert path[-1].end == answer.number
        assert all(a.end == b.start for a, b in pairwise(path))
        assert sum(bool(s.stated.caveat) or s.stated.relation is SUBSTITUTE for s in path) <= 1
        assert not any(s.stated.relation in LAST for s in path[:-1])
        for step in path:
            assert (step.start, step.end) == (step.stated.of, step.stated.to) or step.stated.relation in TWO_WAY
        visited = [start, *(step.end for step in path)]
        assert len(set(visited)) == len(visited)


@given(LINES, STATED.filter(lambda s: s[1] is not BARRED), NUMBER)
def test_a_further_relation_takes_no_answer_away(
    lines: list[tuple[int, Relation, int, str]], more: tuple[int, Relation, int, str], start: int
) -> None:
    """Only a do-not-use removes what was found before."""
    before = set(led_to(walk([start], build(lines))))
    after = set(led_to(walk([start], build([*lines, more]))))
    assert before <= after


@given(LINES, NUMBER)
def test_every_answer_is_one_of_brute_force(lines: list[tuple[int, Relation, int, str]], start: int) -> None:
    """The same answers as trying every path without a repeated number, one by one."""
    assert set(led_to(walk([start], build(lines)))) == brute_force(build(lines).stated, start)


def brute_force(stated: Sequence[Stated], start: int) -> set[int]:
    """Every number at the end of some allowed path from `start`, by depth-first trial."""
    bars = {(one.of, one.to) for one in stated if one.relation is BARRED}
    found: set[int] = set()

    def go(at: int, visited: frozenset[int], caveats: int) -> None:
        for one in stated:
            ends = [one.to] if one.of == at else [one.of] if one.to == at and one.relation in TWO_WAY else []
            careful = bool(one.caveat) or one.relation is SUBSTITUTE
            for end in ends:
                if one.relation is BARRED or end is None or end in visited or caveats + careful > 1:
                    continue
                if (at, end) in bars or (start, end) in bars:
                    continue
                found.add(end)
                if one.relation not in LAST:
                    go(end, visited | {end}, caveats + careful)

    go(start, frozenset({start}), 0)
    return found


def test_relations_have_their_names() -> None:
    """The names of the files."""
    assert [r.value for r in Relation] == [
        "superseded-by",
        "interchanges-with",
        "same-as",
        "substitute",
        "holds",
        "do-not-use",
    ]
    assert interchange.MOST_NUMBERS == 500
