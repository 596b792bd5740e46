"""The Parts screen and the parts of a job, by keys, at 80 x 24 and wider."""

from __future__ import annotations

from pathlib import Path

import pytest
from textual.widgets import Input

from store import jobs, records
from store.parts import fitting, numbers
from store.records import Record
from tests import part_lists
from tests.screens.support import opened, settled, text_of
from tests.screens.test_screens import keys, typed


@pytest.fixture
def path(record: Record, tmp_path: Path) -> Path:
    """The hand-made lists and one core, closed."""
    part_lists.fill(record, tmp_path)
    jobs.take_in(record, model="KS-100", serial="5", tag="77")
    record.close()
    return record.path


async def ask(pilot: object, text: str) -> str:
    """Put a text into the box and give what stands on the screen then."""
    await settled(pilot)
    pilot.app.screen.query_one("#ask", Input).value = text  # type: ignore[attr-defined]
    for _ in range(3):
        await settled(pilot)
    return text_of(pilot)


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_from_a_worn_plate_to_the_parts_and_why(path: Path, size: tuple[int, int]) -> None:
    """Two unreadable characters: the number, the step to the model with its source, and what goes on it, on whose word."""
    async with opened(path, size) as pilot:
        await keys(pilot, "f6")
        assert "Parts" in text_of(pilot).splitlines()[0]
        shown = await ask(pilot, "O?D-?")
        assert "OLD-7" in shown
        assert "←same as→ KS-100" in shown
        assert "customer's list, 2022-05-01  dated source" in shown
        if size[1] < 40:
            await keys(pilot, "pagedown")
            shown += text_of(pilot)
        assert "goes on KS-100" in shown
        assert "BR-100 Alder" in shown
        assert "List 1  not fitted here yet" in shown


async def test_the_path_is_drawn_with_direction_source_and_caveat(path: Path) -> None:
    """Step by step; the substitute's caveat and its lower trust are words."""
    async with opened(path, (120, 50)) as pilot:
        pilot.app.go("parts")
        shown = await ask(pilot, "br101")
        lines = [line.rstrip() for line in shown.splitlines()]
        first = next(n for n, line in enumerate(lines) if "─superseded by→ BR-102" in line)
        assert lines[first : first + 8] == [
            "    ─superseded by→ BR-102 Alder  brush set",
            "        List 1, 2019-01-01  dated source  not fitted here yet",
            "      ─superseded by→ BR-103 Alder  brush set",
            "          List 1, 2020-01-01  dated source  not fitted here yet",
            "        ─superseded by→ BR-104 Alder  brush set",
            "            List 1, 2021-01-01  dated source  not fitted here yet",
            "          ←same as→ 00-7710 Birch  brush set",
            "              List 3, undated  undated source  not fitted here yet",
        ]
        assert "      ─substitute→ SUB-1 Birch  brush set" in lines
        assert "          List 2, 2020-01-01  CAVEAT shorten the lead  caveat  not fitted here yet" in lines
        assert "CONFLICT  supersession runs in a circle" in await ask(pilot, "LP-1")
        shown = await ask(pilot, "DR-90")
        assert "NOT BAD-1: do not use BAD-1 of Elm" in shown


async def test_held_against_a_model(path: Path) -> None:
    """Any number that leads to the model; attribute by attribute, in words; arrows go to the twin."""
    async with opened(path, (120, 40)) as pilot:
        pilot.app.go("parts", "DR-90")
        await settled(pilot)
        await keys(pilot, "f3")
        await typed(pilot, "old 7")
        await keys(pilot, "ctrl+s")
        for _ in range(3):
            await settled(pilot)
        assert "on KS-100: fits: rotation, teeth, pitch agree" in text_of(pilot)
        assert "Parts > on KS-100" in text_of(pilot).splitlines()[0]
        await keys(pilot, "down")
        await settled(pilot)
        assert "on KS-100: does not fit: rotation is ccw" in text_of(pilot)
        assert "differs" in text_of(pilot)


async def test_sizes_and_words_in_the_same_box(path: Path) -> None:
    """Sizes with a tolerance, inch and metric side by side; words of a description; a refusal is said in the answer."""
    async with opened(path, (120, 40)) as pilot:
        pilot.app.go("parts")
        shown = await ask(pilot, "brush width=8 thickness=16 within=0.1")
        assert "width 0.3125 in = 7.938 mm" in shown
        await keys(pilot, "down")
        await settled(pilot)
        assert "an inch brush in a metric holder may not fit: 0.062 mm under" in text_of(pilot)
        shown = await ask(pilot, "drives rotation")
        assert "DR-90L" in shown
        assert "'wide' is no reading" in await ask(pilot, "brush width=wide")
        assert "nothing like" in await ask(pilot, "QQQ-777")


async def test_edited_on_screen(path: Path) -> None:
    """A number entered, related, and the statement taken back with a reason."""
    async with opened(path, (120, 40)) as pilot:
        pilot.app.go("parts", "NEW-1")
        await settled(pilot)
        await keys(pilot, "f2")
        await typed(pilot, "Fir")
        await keys(pilot, "enter")
        await typed(pilot, "drive")
        await keys(pilot, "ctrl+s")
        await settled(pilot)
        assert "NEW-1            Fir" in text_of(pilot)
        await keys(pilot, "f4")
        await typed(pilot, "same-as")
        await keys(pilot, "enter")
        await typed(pilot, "nope")
        await keys(pilot, "ctrl+s")
        assert "no number 'nope'" in text_of(pilot)
        await keys(pilot, "backspace", "backspace", "backspace", "backspace")
        await typed(pilot, "DR-90")
        await keys(pilot, "ctrl+s")
        for _ in range(3):
            await settled(pilot)
        assert "←same as→ DR-90 Alder" in text_of(pilot)
        assert "no source  no source" in text_of(pilot)
        await keys(pilot, "f9", "enter")
        await typed(pilot, "tried")
        await keys(pilot, "ctrl+s")
        for _ in range(3):
            await settled(pilot)
        assert "No list leads on from here" in text_of(pilot)
    record = records.open(path)
    made = numbers.find(record, "NEW-1")
    record.close()
    assert (made.maker, made.kind) == ("Fir", "drive")


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_parts_of_a_job(path: Path, size: tuple[int, int]) -> None:
    """What goes on the model, Enter fits it with its lot; a twin is refused until a reason is typed, and nothing typed is lost."""
    async with opened(path, size) as pilot:
        pilot.app.go("job", "77")
        await settled(pilot)
        await keys(pilot, "f6")
        assert "goes on KS-100, by the lists" in text_of(pilot)
        await keys(pilot, "down", "enter")
        await typed(pilot, "L7")
        await keys(pilot, "ctrl+s")
        await settled(pilot)
        assert "✓ drive" in text_of(pilot)
        await keys(pilot, "f2")
        await typed(pilot, "DR-90L")
        await keys(pilot, "ctrl+s")
        assert "does not fit: rotation is ccw" in " ".join(text_of(pilot).split())
        for _ in range(6):
            await keys(pilot, "enter")
        await typed(pilot, "by order")
        await keys(pilot, "enter")
        await settled(pilot)
        assert "fitted" in text_of(pilot)
        await keys(pilot, "escape")
    record = records.open(path)
    kept = [(one.number, one.lot, one.why) for one in fitting.of_job(record, "77")]
    record.close()
    assert kept == [("DR-90", "L7", ""), ("DR-90L", "", "by order")]


async def test_a_core_taken_in_by_a_customers_number(path: Path) -> None:
    """The step that leads to the model is shown before the core is taken in."""
    async with opened(path) as pilot:
        await keys(pilot, "f2")
        await typed(pilot, "old7")
        await keys(pilot, "enter")
        await typed(pilot, "9")
        assert "OLD-7 same as KS-100" in text_of(pilot)
        await keys(pilot, "ctrl+s")
        assert "KS-100 starter  serial 9" in text_of(pilot)
