"""The words of the index, whichever way they came in."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from rapidfuzz.distance import OSA

from store.search import lexicon
from store.search.lexicon import Lexicon

WORDS = st.lists(st.text(alphabet="abcé1", min_size=1, max_size=6), min_size=1, max_size=25, unique=True)


def grown(parts: list[list[str]]) -> Lexicon:
    """A lexicon to which words came bit by bit, asked in between."""
    made = Lexicon()
    for words in parts:
        for word in words:
            made.count(made.number(word), 1)
        made.near("abc", 1)
        made.beginning("a", 5)
    return made


@pytest.mark.parametrize("few", [0, 1000])
@given(
    words=WORDS,
    cut=st.integers(0, 25),
    asked=st.text(alphabet="abcé1", min_size=1, max_size=6),
    slips=st.integers(1, 2),
)
def test_neighbours_and_beginnings(few: int, words: list[str], cut: int, asked: str, slips: int) -> None:
    """Sorted anew or put in one by one, all words within the slips are found and no others, and all beginnings."""
    with pytest.MonkeyPatch.context() as patch:
        patch.setattr(lexicon, "FEW", few)
        for made in (grown([words[:cut], words[cut:]]), Lexicon(words, np.ones(len(words), np.int32))):
            near = {word for word in words if word != asked and OSA.distance(word, asked) <= slips}
            assert {n.word for n in made.near(asked, slips)} == near
            longer = sorted(word for word in words if word.startswith(asked) and word != asked)
            assert made.beginning(asked, 99) == longer


def test_words_that_stand_nowhere(record_words: Lexicon) -> None:
    """A word whose last text went away is not handed out; it is again when a text comes."""
    record_words.count(record_words.number("brush"), -1)
    assert record_words.near("brsh", 1) == []
    assert record_words.beginning("br", 9) == ["broken"]
    record_words.count(record_words.number("brush"), 1)
    assert [n.word for n in record_words.near("brsh", 1)] == ["brush"]


@pytest.fixture
def record_words() -> Lexicon:
    """Two words, each in one text."""
    return grown([["brush", "broken"]])
