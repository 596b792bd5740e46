"""Slips and corrections."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from rapidfuzz.distance import OSA

from store.rules.spelling import (
    SIGNATURE_BITS_A_SLIP,
    Neighbour,
    allowed_slips,
    corrections,
    is_common_slip,
    liking,
    signature,
    slips_of,
)

WORDS = st.text(alphabet="abcdez019é", min_size=1, max_size=9)


@given(WORDS, WORDS)
def test_the_signature_loses_nothing(a: str, b: str) -> None:
    """Words so many slips apart never differ in more signature bits than that allows."""
    apart = (signature(a) ^ signature(b)).bit_count()
    assert apart <= SIGNATURE_BITS_A_SLIP * OSA.distance(a, b)
    assert signature(a) < 2**64


@pytest.mark.parametrize(
    ("word", "slips"),
    [("ok", 0), ("arm", 1), ("solenoi", 1), ("solenoid", 2), ("km2", 0), ("km22", 1), ("km22104567", 1)],
)
def test_allowed_slips(word: str, slips: int) -> None:
    """Short words take none, longer ones one and two, numbers one."""
    assert slips == allowed_slips(word)


@pytest.mark.parametrize(
    ("a", "b", "common"),
    [
        ("recieve", "receive", True), ("comutator", "commutator", True), ("brusshes", "brushes", True),
        ("solinoid", "solenoid", False), ("abcd", "dbca", False), ("brush", "brush", False), ("a", "ab", False),
    ],
)  # fmt: skip
def test_common_slips(a: str, b: str, common: bool) -> None:
    """Swapped neighbours and doubled or single letters are the common slips, either way round."""
    assert common is is_common_slip(a, b) is is_common_slip(b, a)


def test_frequent_neighbours_win() -> None:
    """At equal distance the more frequent word is likelier; one far less frequent than the asked word is none."""
    near = [Neighbour("torn", 3, 1), Neighbour("worn", 900, 1), Neighbour("horn", 1, 1)]
    assert [n.word for n in corrections("wworn", 0, near, 4, 0.3)] == ["worn"]
    assert corrections("worm", 500, near, 4, 0.3) == []


def test_a_known_word_is_never_corrected() -> None:
    """The trade's own word stays; a word that is not may be corrected to it though it is as frequent."""
    known = frozenset({"bushing"})
    assert corrections("bushing", 1, [Neighbour("bushng", 900, 1)], 4, 0.3, known) == []
    assert [n.word for n in corrections("bushng", 20, [Neighbour("bushing", 2, 1)], 4, 0.3, known)] == ["bushing"]


def test_rare_neighbours_are_slips() -> None:
    """Asked right, rare words nearby are slips of it; frequent ones and known ones are words of their own."""
    near = [Neighbour("wron", 2, 1), Neighbour("torn", 400, 1), Neighbour("worm", 1, 1)]
    assert [n.word for n in slips_of("worn", 1000, near, 9, frozenset({"worm"}))] == ["wron"]


def test_liking_prefers_the_same_consonants() -> None:
    """A slip in a vowel is likelier than one in a consonant."""
    assert liking("solinoid", Neighbour("solenoid", 10, 1)) > liking("solinoid", Neighbour("solinoit", 10, 1))
