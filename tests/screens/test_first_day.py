"""An empty record, as on the first day: everything needed is entered on the screens, and what is wrong is said."""

from __future__ import annotations

from pathlib import Path

import pytest
from textual import events

from store import jobs, people, readings, records
from store.records import Record
from tests import shop
from tests.screens.support import opened, settled, text_of, until
from tests.screens.test_screens import keys, typed, written
from tui.app import Wearline
from tui.screens.standing import Standing
from tui.widgets.key_line import KeyLine

NAMED = {"\n": "enter", "\b": "backspace", ".": "full_stop", " ": "space"}


async def test_the_first_core(record: Record) -> None:
    """From nothing: the model is entered while taking in, the job opens, a test is one key, the limit is entered in place."""
    record.close()
    async with opened(record.path) as pilot:
        assert "F2 takes in a core" in text_of(pilot)
        await keys(pilot, "f2")
        await typed(pilot, "X-1")
        assert "F5 enters it as a new model" in text_of(pilot)
        await keys(pilot, "ctrl+s")
        assert "no model 'X-1'" in text_of(pilot).splitlines()[-2]
        await keys(pilot, "f5")
        await typed(pilot, "starter")
        await keys(pilot, "ctrl+s", "enter")
        await typed(pilot, "77")
        await keys(pilot, "ctrl+s")
        assert "X-1 starter  serial 77" in text_of(pilot)
        await typed(pilot, "p")
        await written(pilot)
        assert "pass" in text_of(pilot)
    again = records.open(record.path)
    assert [(line.model, line.serial) for line in jobs.listing(again)] == [("X-1", "77")]
    again.close()


async def test_the_first_person(record: Record) -> None:
    """F4, F2: a person is entered and chosen, and the top line says who works here."""
    record.close()
    async with opened(record.path) as pilot:
        await keys(pilot, "f4", "f2")
        await typed(pilot, "AB")
        await keys(pilot, "enter")
        await typed(pilot, "Ada Birch")
        await keys(pilot, "ctrl+s", "enter")
        assert text_of(pilot).splitlines()[0].endswith("AB")
        assert [p.name for p in people.listing(pilot.app.record)] == ["Ada Birch"]


async def test_an_empty_bench_says_the_next_step(record: Record) -> None:
    """First the person; who works here being said, the core; a search that finds nothing names the way out of it."""
    record.close()
    async with opened(record.path) as pilot:
        await until(pilot, lambda: "F4 enters the first person" in text_of(pilot))
        await keys(pilot, "f4", "f2")
        await typed(pilot, "AB")
        await keys(pilot, "enter")
        await typed(pilot, "Ada Birch")
        await keys(pilot, "ctrl+s", "enter")
        await until(pilot, lambda: "no job here; F2 takes in a core" in text_of(pilot))
        await typed(pilot, "12")
        await until(pilot, lambda: "Esc empties the search" in text_of(pilot))
        await keys(pilot, "escape")
        await until(pilot, lambda: "no job here; F2 takes in a core" in text_of(pilot))


async def test_keys_before_the_record_is_open(record: Record) -> None:
    """F2 works from the first frame on; what is typed there waits for the record."""
    record.close()
    app = Wearline(record.path, debug=True)
    async with app.run_test(size=(80, 24)) as pilot:
        await pilot.press("f2")
        for character in "x1":
            await pilot.press(character)
        while app.record is None:
            await pilot.pause(0.01)
        await settled(pilot)
        assert "no model 'x1'" in text_of(pilot)


async def test_readings_before_the_sheet_is_there(
    record: Record, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """A job opened and typed into before the record is open: every key is taken in its turn."""
    shop.fill(record, tmp_path)
    tag = shop.core(record).tag
    record.close()
    app = Wearline(record.path, debug=True)
    with monkeypatch.context() as held:
        held.setattr(app, "open_record", lambda: None)
        async with app.run_test(size=(80, 24)) as pilot:
            app.go("job", tag)
            await pilot.pause()
            for key in "p44.1|44.12|4 4\b\b\b44.09|".replace("|", "\n"):
                await pilot.press(NAMED.get(key, key))
            await pilot.press("f2", "f2")
            held.undo()
            app.open_record()
            while app.record is None:
                await pilot.pause(0.01)
            await settled(pilot)
            await written(pilot)
            texts = [r.typed.text for r in readings.of_job(app.record, tag)]
    assert texts == ["pass", "44.1", "44.12", "44.09"]


async def test_enter_opens_what_was_typed(record: Record, tmp_path: Path) -> None:
    """A tag and Enter in one burst, as from a scanner: that job opens, not the one that was on top."""
    shop.fill(record, tmp_path)
    tags = [shop.core(record, str(n)).tag for n in range(5)]
    record.close()
    async with opened(record.path) as pilot:
        for key in (*tags[0], "enter"):
            pilot.app.post_message(events.Key(key, None if key == "enter" else key))
        await until(pilot, lambda: hasattr(pilot.app.screen, "tag"))
        assert pilot.app.screen.tag == tags[0]


async def test_a_fault_in_the_program_is_said_and_does_not_end_it(record: Record) -> None:
    """Something unforeseen in a question: one line above the keys, and the screens go on."""
    record.close()
    async with opened(record.path) as pilot:
        pilot.app.shows_faults = False
        screen: Standing = pilot.app.screen
        screen.ask("odd", lambda: 1 // 0, lambda answer: None)
        await settled(pilot)
        assert "a fault in the program, not in what you did (ZeroDivisionError" in text_of(pilot)


async def test_what_is_said_goes_again(record: Record) -> None:
    """A message takes lines of its own above the keys, whatever it holds; an empty one gives them back."""
    record.close()
    async with opened(record.path) as pilot:
        line = pilot.app.screen.query_one(KeyLine)
        pilot.app.notify("[/] [b]x " + "word " * 500, severity="error")
        await settled(pilot)
        assert line.size.height == line.lines + 4
        assert "[/] [b]x word" in text_of(pilot)
        line.say("")
        await settled(pilot)
        assert line.size.height == line.lines
