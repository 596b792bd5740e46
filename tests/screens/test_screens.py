"""The screens as a person uses them: by keys, at 80 x 24 and 120 x 40."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from store import jobs, limit_sheets, notes, readings, records
from store.records import Record
from tests import shop
from tests.screens.support import opened, settled, text_of, until
from tui.theme import THEMES, contrast
from tui.widgets.keying import Asking
from tui.widgets.sheet import ReadingSheet


@pytest.fixture
def path(record: Record, tmp_path: Path) -> Path:
    """The small shop, closed."""
    shop.fill(record, tmp_path)
    record.close()
    return record.path


async def keys(pilot: Any, *pressed: str) -> None:
    """Press keys one by one and let everything settle."""
    for key in pressed:
        await pilot.press(key)
    await settled(pilot)


async def typed(pilot: Any, text: str) -> None:
    """Type a text, a character a key."""
    named = {" ": "space", ".": "full_stop", "-": "minus", ",": "comma", "/": "slash"}
    for character in text:
        await pilot.press(named.get(character, character))
    await settled(pilot)


async def written(pilot: Any) -> None:
    """Wait until the writer has answered everything."""
    await until(pilot, lambda: pilot.app.screen.waiting == 0)
    await settled(pilot)


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_a_core_goes_through(path: Path, size: tuple[int, int]) -> None:
    """Take in, readings, a correction, as left: by keys alone."""
    async with opened(path, size) as pilot:
        assert "F2 takes in a core" in text_of(pilot)
        await keys(pilot, "f2")
        await typed(pilot, "ks100")
        await keys(pilot, "enter")
        await typed(pilot, "88213")
        assert "KS-100  starter" in text_of(pilot)
        await keys(pilot, "ctrl+s")
        screen = pilot.app.screen
        assert "1001 > as found   KS-100 starter  serial 88213" in text_of(pilot)
        await typed(pilot, "p")
        for value in ("44.1", "44.12", "44.09", "44.1", "0.04", "11.4", "11.2", "11.5", "9.2"):
            await typed(pilot, value)
            await keys(pilot, "enter")
        await written(pilot)
        shown = text_of(pilot)
        assert "OUT" in next(line for line in shown.splitlines() if line.strip().startswith("brush length"))
        sheet = screen.query_one(ReadingSheet)
        row = next(n for n, r in enumerate(sheet.keying.rows) if r.name == "brush-length")
        sheet.keying.go(row, 3)
        await typed(pilot, "9.6")
        await keys(pilot, "enter")
        assert sheet.keying.asking is Asking.correction
        assert "why the reading is corrected" in text_of(pilot)
        await typed(pilot, "read the wrong brush")
        await keys(pilot, "enter")
        await written(pilot)
        assert "OUT" not in next(
            line for line in text_of(pilot).splitlines() if line.strip().startswith("brush length")
        )
        await keys(pilot, "f2")
        assert "as left" in text_of(pilot).splitlines()[0]
        assert "as found: " in text_of(pilot) or "≥ 42.5 mm" in text_of(pilot)
    record = records.open(path)
    kept = readings.of_job(record, "1001", corrected=True)
    record.close()
    assert [r.typed.text for r in kept if r.characteristic == "brush-length"] == ["11.4", "11.2", "11.5", "9.2", "9.6"]
    assert kept[-1].why == "read the wrong brush"


async def test_a_refused_value_stays_with_its_reason(path: Path) -> None:
    """Nothing typed is lost: the value stays in its cell, the reason stands below, the next value goes on."""
    async with opened(path) as pilot:
        pilot.app.record and jobs.take_in(pilot.app.record, model="KS-100", serial="1")
        pilot.app.go("job", "1001")
        await settled(pilot)
        await typed(pilot, "p1,234")
        await keys(pilot, "enter")
        await written(pilot)
        sheet = pilot.app.screen.query_one(ReadingSheet)
        cell = sheet.keying.rows[1].cells[0]
        assert (cell.text, cell.state.value) == ("1,234", "refused")
        assert "1,234: " in text_of(pilot)
        assert "may be 1.234 or 1234" in text_of(pilot)
        sheet.keying.go(1, 0)
        await keys(pilot, "right", "left")
        assert "may be 1.234 or 1234" in text_of(pilot)


async def test_a_missing_limit_is_entered_in_place(path: Path) -> None:
    """ctrl+l on a row: the limit goes into a new revision and the job is judged by it."""
    async with opened(path, (100, 40)) as pilot:
        jobs.take_in(pilot.app.record, model="KG-200", serial="1")
        pilot.app.go("job", "1001")
        await settled(pilot)
        screen = pilot.app.screen
        names = [row.characteristic.name for row in screen.sheet.rows]
        screen.query_one(ReadingSheet).keying.go(names.index("brush-length"), 0)
        await typed(pilot, "9.2")
        await keys(pilot, "enter", "ctrl+l")
        assert "brush length, model KG-200" in text_of(pilot)
        form = pilot.app.screen
        for name, value in (("low", "9.5"), ("source", "torn book, page 3")):
            form.query_one(f"#{name}").value = value
        await keys(pilot, "ctrl+s")
        record = pilot.app.record
        sheet = limit_sheets.sheet(record, "KG-200")
        assert sheet is not None
        assert [(x.characteristic, x.low, x.source) for x in sheet.limits] == [
            ("brush-length", "9.5", "torn book, page 3")
        ]
        assert jobs.find(record, "1001").revision == 1


async def test_two_screens_see_each_other(path: Path) -> None:
    """What one screen writes the other shows within a second, without a key pressed there."""
    record = records.open(path)
    tag = shop.core(record).tag
    async with opened(path) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        readings.add(record, tag, "as-found", "commutator-runout", "0.04")
        await until(pilot, lambda: "0.04" in text_of(pilot), 1.5)
    record.close()


MOST_LINES = 12  # each key and answer: the line left, the line reached, the line answered


async def test_a_saved_reading_repaints_one_line(path: Path) -> None:
    """Of a sheet of many rows only the lines that changed are painted for a key or an answer."""
    record = records.open(path)
    tag = shop.core(record, model="KG-200").tag
    record.close()
    async with opened(path, (80, 60)) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        sheet = pilot.app.screen.query_one(ReadingSheet)
        assert len(sheet.lines) > 60
        sheet.painted = 0
        await pilot.press("p")
        await written(pilot)
        assert sheet.painted <= MOST_LINES


HOSTILE = "[/] [bold]x[/bold] 😀 שלום مرحبا \\ {{x}} #set $y$ <b> " + "long " * 1990


async def test_hostile_text_on_every_screen(path: Path) -> None:
    """Markup, emoji, right-to-left and ten thousand characters in every field that takes text: drawn as they stand."""
    text = HOSTILE[:9_900]
    record = records.open(path)
    job = jobs.take_in(record, model="KS-100", serial="1", customer=text, application=text, complaint=text)
    notes.add(record, job.tag, text)
    readings.add(record, job.tag, "as-found", "growler-short", f"fail {text}", note=text)
    readings.add(record, job.tag, "as-found", "commutator-runout", f"not measured {text}")
    limit_sheets.enter(
        record, "KS-100", [limit_sheets.LimitEntry("shaft-runout", text, high="0.08", note=text)], why=text
    )
    jobs.move_to_revision(record, job.tag)
    record.close()
    async with opened(path) as pilot:
        for place in ("limits", "gauges"):
            await pilot.app.run_action(f"go('{place}')")
            await settled(pilot)
            await keys(pilot, "f1", "escape", "escape")
        pilot.app.go("job", job.tag)
        await settled(pilot)
        for key in ("f7", "f8", "f8", "f2"):
            await keys(pilot, key)
            assert text_of(pilot)
        pilot.app.go("report", job.tag)
        await settled(pilot)
        assert "[/] [bold]x[/bold]" in text_of(pilot) or "TOLERANCE" in text_of(pilot)
    from store.reports import gather, pdf

    record = records.open(path)
    assert pdf.draw(gather.draft(record, job.tag))[:5] == b"%PDF-"
    record.close()


@pytest.mark.parametrize("name", THEMES)
def test_contrast_of_the_themes(name: str) -> None:
    """WCAG 2.1, 1.4.3 (AA): every tone of text has at least 4.5 : 1 on every ground that it stands on."""
    theme = THEMES[name]
    tones = {"foreground": theme.foreground, **theme.variables}
    grounds = {"background": theme.background, "panel": theme.panel, "cell": theme.variables["cell"]}
    for tone in ("foreground", "quiet", "brass", "loud", "doubt"):
        for ground, colour in grounds.items():
            assert contrast(str(tones[tone]), str(colour)) >= 4.5, (tone, ground)
    assert contrast(theme.variables["brass-ink"], theme.variables["brass"]) >= 4.5
