"""The plan on the Job screen: what is proposed and why, accepted, done, and never mistaken for a reading."""

from __future__ import annotations

from pathlib import Path

import pytest

from store import plans, readings, records, shop
from store.readings import Entry
from store.records import Record
from tests import shop as small
from tests.screens.support import opened, settled, text_of, until


@pytest.fixture
def tag(record: Record, tmp_path: Path) -> str:
    """A core whose commutator has one cut left in it, and no shaft runout."""
    small.fill(record, tmp_path)
    shop.put(record, "polish", "0.02 mm")
    tag = small.core(record).tag
    readings.add_all(record, tag, [Entry("commutator-diameter", "42.64")] * 4)
    readings.add(record, tag, "as-found", "commutator-runout", "0.12")
    readings.add_all(record, tag, [Entry("brush-length", "13")] * 4)
    record.close()
    return tag


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_a_line_is_explained_accepted_and_done(record: Record, tag: str, size: tuple[int, int]) -> None:
    """The last cut is said with its numbers; the size is called a prediction; Enter accepts it, Enter again ends it."""
    async with opened(record.path, size) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await pilot.press("f5")
        await until(pilot, lambda: "turn-last-cut" in text_of(pilot))
        shown = " ".join(text_of(pilot).split())
        assert "D - r - 2g - p = 42.64 - 0.12 - 2 x 0 - 0.02 = 42.5 mm" in shown
        assert "predicted, not measured: commutator-diameter 42.5 mm" in shown
        assert "accept all" in shown
        assert "shaft's runout is not measured" in shown
        await pilot.press("enter")
        await until(pilot, lambda: "rework list" in text_of(pilot))
        await settled(pilot)
        while "turn-last-cut" not in str(pilot.app.screen.query_one("JobPlan Listing").item.cells):
            await pilot.press("down")
        await pilot.press("enter")
        await settled(pilot)
        await pilot.press("ctrl+s")
        await until(pilot, lambda: "done" in text_of(pilot))
    again = records.open(record.path)
    (entry,) = plans.listing(again, tag)
    assert (entry.line.action, entry.outcome) == ("turn-last-cut", "done")
    assert {r.stage for r in readings.of_job(again, tag)} == {"as-found"}
    again.close()


async def test_all_that_asks_for_work_by_one_key(record: Record, tag: str) -> None:
    """Brushes that are kept do not come into the list."""
    async with opened(record.path, (100, 30)) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await pilot.press("f5")
        await until(pilot, lambda: "turn-last-cut" in text_of(pilot))
        await pilot.press("a")
        await until(pilot, lambda: "rework list" in text_of(pilot))
    again = records.open(record.path)
    assert [entry.line.action for entry in plans.listing(again, tag)] == ["turn-last-cut"]
    again.close()


@pytest.mark.parametrize(
    ("diameter", "action", "size"), [("42.62", "replace", "42.48"), ("42.64", "turn-last-cut", "42.5")]
)
async def test_undersize_is_called_before_any_cut(
    record: Record, tmp_path: Path, diameter: str, action: str, size: str
) -> None:
    """Replace, and 0.02 mm larger the last cut; the size is called a prediction on the screen."""
    small.fill(record, tmp_path)
    shop.put(record, "polish", "0.02 mm")
    tag = small.core(record).tag
    readings.add_all(record, tag, [Entry("commutator-diameter", diameter)] * 4)
    readings.add(record, tag, "as-found", "commutator-runout", "0.12")
    record.close()
    async with opened(record.path, (100, 30)) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await pilot.press("f5")
        await until(pilot, lambda: action in text_of(pilot))
        shown = " ".join(text_of(pilot).split())
        assert "sizes are predictions" in shown
        assert f"predicted, not measured: commutator-diameter {size} mm" in shown


async def test_a_runout_larger_than_the_diameter_is_one_line_on_the_screen(record: Record, tag: str) -> None:
    """The plan cannot be; the line above the keys says why."""
    again = records.open(record.path)
    readings.add(again, tag, "as-found", "commutator-runout", "60", why="typed so")
    again.close()
    async with opened(record.path, (120, 30)) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await pilot.press("f5")
        await until(pilot, lambda: "is one of them a slip?" in text_of(pilot))
