"""Lists that contradict each other: shown with both sources."""

from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st

from store.rules.conflicts import Clash, conflicts, disputed
from store.rules.interchange import Relation, Stated

SUPERSEDED, BOTH, SAME, SUBSTITUTE, HOLDS, BARRED = Relation


def line(n: int, of: int, relation: Relation, to: int | None, source: str = "List 1", caveat: str = "") -> Stated:
    return Stated(n, of, relation, to, caveat, source, "")


def clashes(*seen: Stated, reached: tuple[int, ...] = ()) -> list[tuple[Clash, set[int]]]:
    return [(found.clash, {one.id for one in found.says}) for found in conflicts(seen, reached)]


def test_a_loop_of_supersession_is_shown_whole() -> None:
    """The circle itself, without what leads into it or out of it."""
    seen = [
        line(0, 9, SUPERSEDED, 1),
        line(1, 1, SUPERSEDED, 2),
        line(2, 2, SUPERSEDED, 3),
        line(3, 3, SUPERSEDED, 1),
        line(4, 3, SUPERSEDED, 8),
    ]
    assert clashes(*seen) == [(Clash.loop, {1, 2, 3})]


def test_two_lists_that_contradict() -> None:
    """One says A replaces B, the other that B replaces A: both sources are shown, both are disputed."""
    seen = [line(1, 1, SUPERSEDED, 2, "List 1"), line(2, 2, SUPERSEDED, 1, "List 2")]
    assert clashes(*seen) == [(Clash.each_other, {1, 2})]
    assert disputed(conflicts(seen)) == {1, 2}


def test_two_successors_of_different_lists() -> None:
    """They clash unless one leads to the other, or the same list names both (one was split into two)."""
    apart = [line(1, 1, SUPERSEDED, 2, "List 1"), line(2, 1, SUPERSEDED, 3, "List 2")]
    assert clashes(*apart) == [(Clash.successors, {1, 2})]
    assert clashes(*apart, line(3, 2, SUPERSEDED, 3)) == []
    assert clashes(line(1, 1, SUPERSEDED, 2), line(2, 1, SUPERSEDED, 3)) == []


def test_use_it_and_do_not_use_it() -> None:
    """A pair that one list joins and another forbids; a number that is barred altogether though a list leads to it."""
    assert clashes(line(1, 1, SUPERSEDED, 2), line(2, 1, BARRED, 2, "Own bench")) == [(Clash.forbidden, {1, 2})]
    assert clashes(line(1, 1, SUPERSEDED, 2), line(2, 2, BARRED, None, "Own bench")) == [(Clash.forbidden, {1, 2})]
    assert clashes(line(1, 1, SUPERSEDED, 2), line(2, 3, BARRED, 2)) == []


def test_a_bar_by_a_number_on_the_way_is_a_conflict() -> None:
    """2 is led to and says not 3; 3 is led to as well."""
    seen = [line(1, 1, SAME, 2), line(2, 1, SAME, 3), line(3, 2, BARRED, 3)]
    assert clashes(*seen, reached=(1, 2, 3)) == [(Clash.forbidden, {3})]


def test_one_way_or_both_ways() -> None:
    """The both-ways statement is the one not to rely on."""
    found = conflicts([line(1, 1, SUPERSEDED, 2), line(2, 2, BOTH, 1, "List 2")])
    assert [one.clash for one in found] == [Clash.direction]
    assert disputed(found) == {2}


def test_with_and_without_a_caveat() -> None:
    """One list says substitute with a caveat, another says the same part."""
    found = conflicts([line(1, 1, SUBSTITUTE, 2, "List 1", "ream it"), line(2, 1, SAME, 2, "List 2")])
    assert [one.clash for one in found] == [Clash.caveat]
    assert disputed(found) == {2}


def test_lists_that_agree_do_not_clash() -> None:
    """The same statement of two lists, a kit, a chain."""
    assert (
        clashes(
            line(1, 1, SUPERSEDED, 2),
            line(2, 1, SUPERSEDED, 2, "List 2"),
            line(3, 2, SUPERSEDED, 3),
            line(4, 3, HOLDS, 4),
        )
        == []
    )


@given(
    st.lists(
        st.tuples(st.integers(0, 6), st.sampled_from(Relation), st.integers(0, 6)).filter(lambda s: s[0] != s[2]),
        max_size=25,
    )
)
def test_every_circle_of_supersession_is_found(stated: list[tuple[int, Relation, int]]) -> None:
    """There is a loop among the conflicts exactly where some number supersedes itself in the end."""
    seen = [line(n, *one) for n, one in enumerate(stated)]
    onward: dict[int, set[int]] = {}
    for of, relation, to in stated:
        if relation is SUPERSEDED:
            onward.setdefault(of, set()).add(to)

    def reaches(start: int) -> set[int]:
        found: set[int] = set()
        wave = set(onward.get(start, ()))
        while wave:
            found |= wave
            wave = {to for number in wave for to in onward.get(number, ())} - found
        return found

    loops = [found for found in conflicts(seen) if found.clash in {Clash.loop, Clash.each_other}]
    assert bool(loops) == any(number in reaches(number) for number in onward)
    for found in loops:
        ends = [(one.of, one.to) for one in found.says]
        assert all(a[1] == b[0] for a, b in zip(ends, [*ends[1:], ends[0]], strict=True))
