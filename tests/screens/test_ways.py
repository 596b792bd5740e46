"""The ways through the screens: keys at the bottom, finding by name, panes, questions, revisions, no colour."""

from __future__ import annotations

import shutil
from pathlib import Path
from typing import Any

import pytest
from textual import events

from store import jobs, limit_sheets, readings, records
from store.records import Record
from tests import shop
from tests.screens.support import Terminal, opened, settled, text_of, until
from tests.screens.test_screens import keys, typed, written
from tui.screens.places import PANES, PLACES, load, load_pane
from tui.screens.standing import Standing
from tui.widgets.key_line import KeyLine
from tui.widgets.sheet import CELL, ReadingSheet


@pytest.fixture
def path(record: Record, tmp_path: Path) -> Path:
    """The small shop with one core taken in, closed."""
    shop.fill(record, tmp_path)
    shop.core(record)
    record.close()
    return record.path


async def at_row(pilot: Any, name: str, column: int = 0) -> ReadingSheet:
    """The job with its cursor on a row."""
    pilot.app.go("job", "1001")
    await settled(pilot)
    sheet: ReadingSheet = pilot.app.screen.query_one(ReadingSheet)
    sheet.keying.go(next(n for n, row in enumerate(sheet.keying.rows) if row.name == name), column)
    return sheet


@pytest.mark.parametrize("name", [name for name, place in PLACES.items() if not place.needs_more])
@pytest.mark.parametrize("size", [(80, 24), (120, 40), (200, 60)])
async def test_every_place_names_its_keys_and_explains_itself(path: Path, name: str, size: tuple[int, int]) -> None:
    """On every screen the bottom line holds whole keys only and F1 among them; F1 says what the screen is for."""
    async with opened(path, size) as pilot:
        await pilot.app.run_action(f"go('{name}')")
        await settled(pilot)
        screen = pilot.app.screen
        line = screen.query_one(KeyLine)
        laid = line.fitting(size[0] - 2)
        assert len(laid) <= line.lines
        assert all(sum(len(f"{k.key} {k.words}") + 2 for k in keys) - 2 <= size[0] - 2 for keys in laid)
        assert laid[-1][-1].key == "F1"
        await keys(pilot, "f1")
        assert screen.EXPLAINS[:30] in text_of(pilot)


async def test_any_place_is_found_by_name(path: Path) -> None:
    """ctrl+p, a few letters, Enter: the place is open; an action of the screen is found the same way."""
    async with opened(path) as pilot:
        await keys(pilot, "ctrl+p")
        await typed(pilot, "gaug")
        await keys(pilot, "enter")
        assert isinstance(pilot.app.screen, load("gauges"))
        await keys(pilot, "ctrl+p")
        await typed(pilot, "new gauge")
        await keys(pilot, "enter")
        assert "A new gauge" in text_of(pilot)


async def test_a_click_on_a_key_is_the_key(path: Path) -> None:
    """The bottom line works by mouse."""
    async with opened(path) as pilot:
        line = pilot.app.screen.query_one(KeyLine)
        y, begin, _, key = next(span for span in line.spans if span[3].words == "take in")
        await pilot.click(KeyLine, offset=(begin, y))
        await settled(pilot)
        assert key.key == "F2"
        assert "take in a core" in text_of(pilot)


def test_every_place_and_pane_is_there() -> None:
    """Each name in the lists of places and panes leads to a class; a pane can be shown."""
    assert all(issubclass(load(name), Standing) for name in PLACES)
    assert all(callable(load_pane(name).show) for name in PANES)
    assert len({pane.key for pane in PANES.values()}) == len(PANES)


async def test_panes_come_and_go_however_fast_the_keys(path: Path) -> None:
    """A pane's key leads there and back; what was asked for last is in front."""
    async with opened(path) as pilot:
        pilot.app.go("job", "1001")
        await settled(pilot)
        for key in ("f7", "f7", "f7", "f8", "f7"):
            await pilot.press(key)
        await settled(pilot)
        assert "1001 > notes" in text_of(pilot)
        await keys(pilot, "escape")
        assert "1001 > as found" in text_of(pilot)


async def test_a_slip_is_asked_about_and_answered_later(path: Path) -> None:
    """An inch among millimetres is accepted and flagged; ctrl+y keeps in the record that it was looked at again."""
    async with opened(path) as pilot:
        sheet = await at_row(pilot, "brush-length")
        await typed(pilot, "0.448")
        await keys(pilot, "enter")
        await typed(pilot, "11.2")
        await keys(pilot, "enter")
        await written(pilot)
        assert "0.448?" in text_of(pilot)
        assert "? 1 to look at again" in text_of(pilot)
        await keys(pilot, "ctrl+y")
        assert "inches typed as millimetres" in text_of(pilot)
        await keys(pilot, "ctrl+y")
        await written(pilot)
        assert "0.448?" not in text_of(pilot)
        assert sheet.keying.cell is not None
    record = records.open(path)
    kept = readings.of_job(record, "1001")
    record.close()
    assert [(r.typed.text, r.why) for r in kept] == [("11.2", ""), ("0.448", "looked again: it is right")]


async def test_what_came_twice_is_asked_about(path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """Two equal readings within a second: both are kept, the second is asked about."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        for character in "11.2\n11.2\n":
            await pilot.press({"\n": "enter", ".": "full_stop"}.get(character, character))
        await written(pilot)
        await keys(pilot, "left")
        assert "11.2 came twice within a second" in text_of(pilot)


async def test_the_wear_rule_stands_before_the_first_reading(path: Path) -> None:
    """On a wide screen every row with a limit has its scale; as left shows the readings as found as faint marks."""
    async with opened(path, (120, 40)) as pilot:
        await at_row(pilot, "brush-length")
        row = next(line for line in text_of(pilot).splitlines() if line.startswith(" brush length "))
        assert "├" in row
        assert "┃" in row
        await typed(pilot, "11.2")
        await keys(pilot, "enter", "f2")
        await written(pilot)
        row = next(line for line in text_of(pilot).splitlines() if line.startswith(" brush length "))
        assert "·" in row[row.index("├") : row.index("┃")]


async def test_the_mouse_puts_the_cursor_into_a_cell(path: Path) -> None:
    """A click on a cell is as good as the arrows, and what is typed goes there."""
    async with opened(path) as pilot:
        sheet = await at_row(pilot, "brush-length")
        row = next(n for n, face in enumerate(sheet.faces) if face.label == "commutator diameter")
        x = sum(sheet.left) + 2 * CELL + 3
        await pilot.click(ReadingSheet, offset=(x, sheet.line_of[row] - sheet.scroll_offset.y))
        await typed(pilot, "44.1")
        await keys(pilot, "enter")
        await written(pilot)
        cell = sheet.keying.rows[row].cells[2]
        assert (cell.text, cell.state.value) == ("44.1", "accepted")


@pytest.mark.parametrize("size", [(20, 6), (40, 12), (300, 90)])
async def test_odd_sizes_break_nothing(path: Path, size: tuple[int, int]) -> None:
    """Smaller than is usable or larger than any screen: it is drawn, and a reading still goes in."""
    async with opened(path, size) as pilot:
        await at_row(pilot, "brush-length")
        await typed(pilot, "11.2")
        await keys(pilot, "enter", "f7", "f8", "f1", "escape", "escape", "f2")
        await settled(pilot)
        assert [r.typed.text for r in readings.of_job(pilot.app.record, "1001")] == ["11.2"]


async def test_revisions_stand_side_by_side(path: Path) -> None:
    """What differs between revisions is marked by a sign, not by colour alone."""
    record = records.open(path)
    entry = limit_sheets.LimitEntry("brush-length", "Sheet 12, rev C", unit="mm", low="9.8")
    limit_sheets.enter(record, "KS-100", [entry], why="newer sheet")
    record.close()
    async with opened(path) as pilot:
        pilot.app.go("limits", "KS-100")
        await settled(pilot)
        await keys(pilot, "f2")
        shown = text_of(pilot)
        assert "revision 1" in shown
        line = next(line for line in shown.splitlines() if "brush length" in line and "≠" in line)
        assert "9.5 mm min" in line
        assert "9.8 mm min" in line


async def test_the_bench_groups_jobs_by_where_they_stand(path: Path) -> None:
    """Each open job stands under where it is and what is next."""
    record = records.open(path)
    jobs.take_in(record, model="KG-200", serial="7")
    readings.add(record, "1001", "as-found", "growler-short", "pass")
    record.close()
    async with opened(path) as pilot:
        lines = [line.strip() for line in text_of(pilot).splitlines()]
        taken, stripped = (
            next(n for n, line in enumerate(lines) if line.startswith(w)) for w in ("taken in  1", "stripped  1")
        )
        assert lines[taken + 1].startswith("1002")
        assert lines[stripped + 1].startswith("1001")


def test_no_colour_at_all(path: Path) -> None:
    """With NO_COLOR set nothing that the program draws has a colour; the cursor still shows, reversed."""
    screen = Terminal(["--record", str(path)], env={"NO_COLOR": "1"})
    try:
        screen.until("1001")
        screen.send(b"\r")
        screen.until("serial 88213")
        screen.read(0.3)
        drawn = [screen.screen.buffer[y][x] for y in range(24) for x in range(80)]
    finally:
        screen.kill()
    assert {(c.fg, c.bg) for c in drawn} == {("default", "default")}
    assert any(c.reverse for c in drawn)


def test_a_copy_of_the_demo_opens(demo_record_path: Path, tmp_path: Path) -> None:
    """A record of two years is listed in a real terminal."""
    path = tmp_path / "copy.wearline"
    shutil.copyfile(demo_record_path, path)
    screen = Terminal(["--record", str(path), "--as", "OV"])
    try:
        screen.until("to inspect")
    finally:
        screen.kill()


async def test_keys_right_after_the_stage_changes_go_to_the_new_stage(path: Path) -> None:
    """F2 in the middle of a burst, nothing awaited: before it as found, after it as left, each in its cell."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        sent = [*"11.2", "enter", *"11.3", "f2", "p", *"44.1", "enter", *"44.2", "enter"]
        for key in sent:
            pilot.app.post_message(events.Key(key, key if len(key) == 1 else None))
        await until(pilot, lambda: len(readings.of_job(pilot.app.record, "1001")) == 5)
        await written(pilot)
        kept = readings.of_job(pilot.app.record, "1001")
        found = [(r.characteristic, r.position, r.typed.text) for r in kept if r.stage == "as-found"]
        left = [r.typed.text for r in kept if r.stage == "as-left"]
    assert found == [("brush-length", "1", "11.2"), ("brush-length", "2", "11.3")]
    assert left == ["pass", "44.1", "44.2"]


async def test_a_correction_under_way_outlives_what_others_write(path: Path) -> None:
    """While the reason is being asked another program writes: the question and the new value stay."""
    async with opened(path) as pilot:
        sheet = await at_row(pilot, "brush-length")
        await typed(pilot, "11.2")
        await keys(pilot, "enter")
        await written(pilot)
        await keys(pilot, "left")
        await typed(pilot, "11.6")
        await keys(pilot, "enter")
        other = records.open(path)
        readings.add(other, "1001", "as-found", "commutator-runout", "0.04")
        other.close()
        pilot.app.screen.look_again()
        await settled(pilot)
        assert sheet.keying.held == "11.6"
        await typed(pilot, "wrong brush")
        await keys(pilot, "enter")
        await written(pilot)
        assert "0.04" in text_of(pilot)
        assert ("11.6", "wrong brush") in [(r.typed.text, r.why) for r in readings.of_job(pilot.app.record, "1001")]


async def test_a_refusal_after_the_job_was_left_is_said(path: Path) -> None:
    """A value that cannot be taken, and Esc before it is answered: the bench says what was refused and why."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        for key in [*"1,234", "enter", "escape"]:
            pilot.app.post_message(events.Key(key, key if len(key) == 1 else None))
        await until(pilot, lambda: "brush-length 1,234" in text_of(pilot))
        assert text_of(pilot).startswith(" Wearline  Bench")


async def test_leaving_a_job_with_a_refused_value_is_said(path: Path) -> None:
    """The cell says why a value was not taken; whoever leaves without mending it is told so once more at the bench."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        await typed(pilot, "1,234")
        await keys(pilot, "enter")
        await written(pilot)
        await keys(pilot, "escape")
        await until(pilot, lambda: "1001, brush-length 1,234" in text_of(pilot))
        assert text_of(pilot).startswith(" Wearline  Bench")


async def test_line_feeds_end_values_and_follow_others_in_vain(path: Path) -> None:
    """A gauge may end its values with LF, CR or CRLF: each value is in its own cell, none skipped."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        for text, ends in (
            ("11.4", ("ctrl+j",)),
            ("11.2", ("enter", "ctrl+j")),
            ("11.5", ("enter",)),
            ("11.1", ("ctrl+j",)),
        ):
            await typed(pilot, text)
            await keys(pilot, *ends)
        await written(pilot)
        found = readings.of_job(pilot.app.record, "1001")
        assert [(r.position, r.typed.text) for r in found if r.characteristic == "brush-length"] == [
            ("1", "11.4"), ("2", "11.2"), ("3", "11.5"), ("4", "11.1"),
        ]  # fmt: skip


async def test_from_the_sheet_to_what_stands_in_the_way(path: Path) -> None:
    """F10 opens the release at the job that one came from."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        await keys(pilot, "f10")
        await until(pilot, lambda: "1001: " in text_of(pilot))
        assert pilot.app.screen._line().tag == "1001"


async def test_the_way_out_is_always_named(path: Path) -> None:
    """At 80 columns not every key finds room; Esc and F1 do."""
    async with opened(path) as pilot:
        await at_row(pilot, "brush-length")
        last = text_of(pilot).splitlines()[-1]
        assert "Esc back" in last
        assert "F1 all keys" in last
