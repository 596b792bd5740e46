"""Finding a note again on the screen, and findings offered as one types."""

from __future__ import annotations

from pathlib import Path
from typing import Any

import pytest

from store import findings, notes, records
from store.records import Record
from tests import shop
from tests.screens.support import opened, settled, text_of
from tests.screens.test_screens import keys, typed
from tui.screens.notes import Notes


@pytest.fixture
def path(record: Record, tmp_path: Path) -> Path:
    """Two jobs with notes, closed."""
    shop.fill(record, tmp_path)
    first, second = shop.core(record), shop.core(record, "99")
    notes.add(record, first.tag, "solenoid contacts burned [/] disc turned over")
    notes.add(record, first.tag, "bushing pressed in")
    notes.add(record, second.tag, "brushes worn short")
    record.close()
    return record.path


async def asked(pilot: Any, text: str) -> str:
    """The screen after this was typed on the notes screen."""
    await keys(pilot, "f7")
    assert isinstance(pilot.app.screen, Notes)
    await typed(pilot, text)
    return text_of(pilot)


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_a_slip_finds_the_note_and_opens_it(path: Path, size: tuple[int, int]) -> None:
    """Typed with slips the note is found, the corrections are shown, and Enter lands on it in its job."""
    async with opened(path, size) as pilot:
        shown = await asked(pilot, "solinoid contcts")
        assert "solenoid contacts burned [/] disc turned over" in shown
        assert "1 hit" in shown
        assert "→ solenoid" in shown
        assert "→ contacts" in shown
        await keys(pilot, "enter")
        await settled(pilot)
        shown = text_of(pilot)
        assert "1001 > notes   KS-100 starter" in shown
        assert "> " in shown
        assert "solenoid contacts burned [/] disc turned over" in shown


async def test_corrections_can_be_refused(path: Path) -> None:
    """F2 refuses the corrections and has them again."""
    async with opened(path) as pilot:
        await asked(pilot, "solinoid")
        await keys(pilot, "f2")
        assert "nothing found" in text_of(pilot)
        await keys(pilot, "f2")
        assert "disc turned over" in text_of(pilot)


async def test_filters(path: Path) -> None:
    """A filter is asked for in a form, shown, and a value that cannot be is said."""
    async with opened(path) as pilot:
        await asked(pilot, "worn")
        await keys(pilot, "f3")
        await typed(pilot, "KA-300")
        await keys(pilot, "ctrl+s")
        shown = text_of(pilot)
        assert "only: model KA-300" in shown
        assert "nothing found" in shown
        await typed(pilot, " since")
        pilot.app.screen.query_one("#ask").value = "worn since:x"
        await settled(pilot)
        assert "since is a date such as" in text_of(pilot)


async def test_a_note_written_elsewhere_is_found(path: Path) -> None:
    """A note that another program wrote is found in the next search."""
    async with opened(path) as pilot:
        await asked(pilot, "magnet")
        other = records.open(path)
        notes.add(other, "1002", "magnet cracked")
        other.close()
        await typed(pilot, " cracked")
        assert "magnet cracked" in text_of(pilot)


async def test_a_finding_is_offered_and_taken_with_one_key(path: Path) -> None:
    """What is typed looks like a finding; F2 takes it, and it is not offered again."""
    async with opened(path) as pilot:
        await keys(pilot, "enter", "f7")
        await typed(pilot, "sol contcts burnt")
        assert "looks like: solenoid: contacts burned" in text_of(pilot)
        await keys(pilot, "f2")
        shown = text_of(pilot)
        assert "solenoid: contacts burned, overheating" in shown
        assert "looks like" not in shown
        assert "sol contcts burnt" in shown
        tag = pilot.app.screen.tag
    record = records.open(path)
    assert [(f.component, f.mode) for f in findings.of_job(record, tag)] == [("solenoid", "contacts burned")]
    record.close()
