"""What stands below the sheet when there is little room."""

from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st
from textual.geometry import Size

from tui.screens.job_explained import Said, laid_out
from tui.theme import GRAPHITE

TONES = {**GRAPHITE.variables}


def test_what_is_most_needed_stays() -> None:
    """Three lines of room: the three of the lowest rank, in the order given."""
    said = [Said(0, "head"), Said(5, "source"), Said(2, "verdict"), Said(3, "CAUTION")]
    assert laid_out(said, Size(40, 3), TONES).plain.split() == ["head", "verdict", "CAUTION"]


def test_lines_to_spare_go_to_long_texts() -> None:
    """A text that needs two lines gets them where there is room; else it ends in an ellipsis."""
    long = Said(0, "a sentence that needs more than one line here")
    assert laid_out([long, Said(1, "b")], Size(30, 3), TONES).plain.splitlines() == [
        "a sentence that needs more",
        "than one line here",
        "b",
    ]
    assert laid_out([long, Said(1, "b")], Size(30, 2), TONES).plain.splitlines() == ["a sentence that needs more…", "b"]


@given(
    st.lists(st.tuples(st.integers(0, 9), st.text(max_size=300)), max_size=12), st.integers(20, 200), st.integers(1, 12)
)
def test_it_never_takes_more_room(texts: list[tuple[int, str]], width: int, height: int) -> None:
    """Whatever is said: no more lines than there are."""
    drawn = laid_out([Said(rank, text) for rank, text in texts], Size(width, height), TONES)
    assert len(drawn.plain.splitlines()) <= height


def test_a_caution_is_read_whole_before_the_first_value() -> None:
    """Before a job has a reading the caution takes the lines that it needs, even where little room is; then one line."""
    words = "a series motor runs away: clamp it and guard the pinion"
    first = [Said(0, "head"), Said(2, "verdict"), Said(5, "source"), Said(1, words, is_whole=True), Said(6, "datum")]
    lines = laid_out(first, Size(20, 4), TONES).plain.splitlines()
    assert lines[0] == "head"
    assert " ".join(lines[1:]) == words
    after = [Said(0, "head"), Said(2, "verdict"), Said(5, "source"), Said(3, words), Said(6, "datum")]
    assert len(laid_out(after, Size(20, 4), TONES).plain.splitlines()) == 4
