"""Keying into a sheet: every character in its cell, in order, whatever mixes with it."""

from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st

from tui.widgets.keying import BACKSPACE, ENTER, ESCAPE, TAB, Asking, Cell, Keying, Row, State, Submitted


def sheet(*widths: int, test: bool = False) -> Keying:
    """A sheet with so many cells in each row."""
    rows = [Row(f"row-{n}", [Cell(str(c + 1)) for c in range(width)], test) for n, width in enumerate(widths)]
    return Keying(rows)


def feed(keying: Keying, text: str) -> list[Submitted]:
    """Type a string; line ends are Enter, tabs are Tab."""
    made: list[Submitted] = []
    for character in text:
        if character in "\r\n":
            made += keying.press(ENTER)
        elif character == "\t":
            made += keying.press(TAB)
        elif character == "\b":
            keying.press(BACKSPACE)
        else:
            made += keying.type(character)
    return made


@given(st.lists(st.from_regex(r"[1-9][0-9]{0,3}(\.[0-9]{1,3})?", fullmatch=True), min_size=1, max_size=120), st.data())
def test_a_burst_fills_cells_in_order(values: list[str], data: st.DataObject) -> None:
    """Any values, any terminators, slips rubbed out on the way: each value in the next cell, unaltered."""
    widths: list[int] = []
    while sum(widths) < len(values):
        widths.append(data.draw(st.integers(1, 9)))
    keying = sheet(*widths)
    typed = ""
    for value in values:
        slip = data.draw(st.sampled_from(["", "7\b", "9.\b\b"]))
        typed += slip + value + data.draw(st.sampled_from("\r\n\t"))
    made = feed(keying, typed)
    places = [(row, column) for row, width in enumerate(widths) for column in range(width)]
    assert [(s.row, s.column, s.text) for s in made] == [
        (*place, value) for place, value in zip(places, values, strict=False)
    ]


def test_pasted_lines_are_typed() -> None:
    """A paste with any line ends is as many readings."""
    keying = sheet(4)
    assert [s.text for s in keying.paste("11.4\r\n11.2\n11.5\t9.2\n")] == ["11.4", "11.2", "11.5", "9.2"]


def test_what_finds_no_place_is_kept_aside() -> None:
    """More values than cells: none is lost, none overwrites another."""
    keying = sheet(2)
    made = feed(keying, "1\n2\n3\n4\n")
    assert [s.text for s in made] == ["1", "2"]
    assert keying.aside == ["3", "4"]


def test_arrows_lead_back_into_a_full_sheet() -> None:
    """When every cell is filled the cursor is nowhere; an arrow brings it back."""
    keying = sheet(2)
    feed(keying, "1\n2\n")
    assert keying.at is None
    keying.press("up")
    assert keying.at == (0, 0)


def test_a_stray_enter_writes_nothing() -> None:
    """Enter without a value is no reading."""
    assert feed(sheet(3), "\n\n") == []


def test_tests_take_one_key() -> None:
    """p passes at once; f waits for what failed."""
    keying = sheet(1, 1, 1, test=True)
    assert [s.text for s in feed(keying, "p")] == ["pass"]
    assert [s.text for s in feed(keying, "fbars 4-5\n")] == ["fail bars 4-5"]
    assert [s.text for s in feed(keying, "f\n")] == ["fail"]


def test_typing_over_a_reading_asks_why() -> None:
    """A correction carries its reason; a figure is no reason but a gauge that goes on sending, and is kept aside."""
    keying = sheet(2)
    feed(keying, "11.4\n")
    keying.answered(0, 0, State.accepted, "11.4")
    keying.go(0, 0)
    assert feed(keying, "11.2\n") == []
    assert keying.asking is Asking.correction
    assert feed(keying, "11.9\n") == []
    assert keying.aside == ["11.9"]
    assert feed(keying, "wrong brush\n") == [Submitted(0, 0, "11.2", "wrong brush")]
    assert keying.asking.name == "value"


def test_escape_leaves_a_correction() -> None:
    """Esc drops the question and leaves the reading as it was."""
    keying = sheet(1)
    feed(keying, "11.4\n")
    keying.answered(0, 0, State.accepted, "11.4")
    keying.go(0, 0)
    feed(keying, "11.2\n")
    keying.press(ESCAPE)
    assert (keying.asking, keying.rows[0].cells[0].text) == (Asking.value, "11.4")


def test_not_measured_asks_why() -> None:
    """The reason is part of the reading."""
    keying = sheet(1)
    keying.ask_not_measured()
    assert feed(keying, "\n") == []
    assert feed(keying, "no growler here\n") == [Submitted(0, 0, "not measured no growler here")]


def test_a_refused_value_stays_in_its_cell() -> None:
    """What was refused is still there with the reason, and may be typed over without another."""
    keying = sheet(2)
    feed(keying, "1,234\n")
    keying.answered(0, 0, State.refused, "1,234", "ambiguous")
    assert (keying.rows[0].cells[0].text, keying.rows[0].cells[0].why) == ("1,234", "ambiguous")
    keying.go(0, 0)
    assert feed(keying, "1.234\n") == [Submitted(0, 0, "1.234")]


def test_a_finished_sheet_can_be_gone_back_into() -> None:
    """By the mouse as by an arrow: the cursor stands on the cell that was meant."""
    keying = sheet(2, 1)
    feed(keying, "1\n2\n3\n")
    assert keying.at is None
    keying.go(1, 0)
    assert keying.at == (1, 0)
