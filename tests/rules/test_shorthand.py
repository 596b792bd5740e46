"""Shorthand."""

from __future__ import annotations

from store.rules.shorthand import SHIPPED, groups, together
from store.rules.words import indexed


def test_own_lines_over_shipped() -> None:
    """The shop's line wins, an empty one takes a shipped one out, and the shipped list stays as it is."""
    made = together({"comm": "communicator", "sol": "", "hm": "hammer"})
    assert (made["comm"], made["hm"]) == ("communicator", "hammer")
    assert "sol" not in made
    assert SHIPPED["comm"] == "commutator"


def test_all_that_mean_the_same() -> None:
    """Two shorts of one long word find each other."""
    assert groups({"gnd": "ground", "grnd": "ground"}) == {
        "gnd": ("grnd", "ground"),
        "grnd": ("gnd", "ground"),
        "ground": ("gnd", "grnd"),
    }


def test_shipped_are_single_words() -> None:
    """Each shipped line is two words as they are compared."""
    for short, long in SHIPPED.items():
        assert [(short, 0)] == indexed(short)
        assert [(long, 0)] == indexed(long)
