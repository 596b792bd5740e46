"""Typed queries."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.errors import Refused
from store.rules.queries import MOST_WORDS, parse

HOSTILE = st.text(alphabet="ab -\"*:()^NOT\\'%_0.😀\x00\n", max_size=80) | st.text(max_size=200)


@given(HOSTILE, st.booleans())
def test_anything_may_be_typed(text: str, typing: bool) -> None:
    """Whatever is typed is understood, unless a filter is given twice; there are never more words than are looked for."""
    try:
        query = parse(text, typing=typing)
    except Refused:
        return
    assert len(query.terms) <= MOST_WORDS
    assert all(term.word for term in query.terms)


def test_phrases_and_minus() -> None:
    """Quotes hold a phrase together, a minus leaves out, a quoted word is taken as typed."""
    query = parse('worn "burned disc" -welded -"new battery" "solinoid"')
    assert [(t.word, t.literal) for t in query.terms] == [("worn", False), ("solinoid", True)]
    assert query.phrases == (("burned", "disc"),)
    assert query.excluded == ("welded",)
    assert query.excluded_phrases == (("new", "battery"),)


def test_filters() -> None:
    """Filters are taken out of the words; an unknown name is words; the same one with two values is refused."""
    query = parse("worn model:KS-100 by:AB foo:bar")
    assert query.filters == {"model": "KS-100", "by": "AB"}
    assert [t.word for t in query.terms] == ["worn", "foo", "bar"]
    with pytest.raises(Refused, match="given twice"):
        parse("worn by:AB by:CN")


def test_numbers() -> None:
    """A part number is one word by its comparing key; one typed with a space is looked for joined, too."""
    assert [t.word for t in parse("0123-45678").terms] == ["12345678"]
    assert [t.joined for t in parse("KM 2210").terms] == [("km2210",), ("km2210",)]


def test_the_word_being_typed() -> None:
    """Only the last word is unfinished, only while typing, and no longer after a space."""
    assert [t.unfinished for t in parse("worn sol", typing=True).terms] == [False, True]
    assert [t.unfinished for t in parse("worn sol ", typing=True).terms] == [False, False]
    assert [t.unfinished for t in parse("worn sol").terms] == [False, False]


def test_too_much() -> None:
    """A long text is cut, and that is said."""
    query = parse(" ".join(f"word{chr(97 + n % 26)}{chr(97 + n // 26)}" for n in range(600)))
    assert len(query.terms) == MOST_WORDS
    assert "only the first" in query.left_out


@pytest.mark.parametrize(
    ("typed", "literal"), [("12.34", True), ("0,05mm", True), ("12-34", False), ("1234", False), ("KM-12.5", False)]
)
def test_a_size_is_looked_for_as_it_is(typed: str, literal: bool) -> None:
    """A figure with a decimal mark is not respelled; a part number may be."""
    assert {term.literal for term in parse(typed).terms} == {literal}
