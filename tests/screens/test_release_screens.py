"""The inspector's screens: what stands in the way, a concession, the signature; the record verified."""

from __future__ import annotations

from pathlib import Path

from store import people, records, releases
from store.records import Record
from tests import shop
from tests.screens.support import opened, settled, text_of, until
from tests.screens.test_screens import keys, typed
from tests.store.test_releases import GOOD, measure


def waiting(record: Record, folder: Path) -> str:
    """A core measured as left by AB, its end play out."""
    shop.fill(record, folder)
    people.add(record, "AB", "Ada Birch")
    people.add(record.acting("AB"), "MW", "Mara Wend", "inspect")
    tag = shop.core(record.acting("AB")).tag
    measure(record.acting("AB"), tag, {**GOOD, "end-play": ["0.35"]})
    record.close()
    return tag


async def test_the_inspector_concedes_and_signs(record: Record, tmp_path: Path) -> None:
    """What is in the way is said, conceded with a reason, and the report is issued."""
    tag = waiting(record, tmp_path)
    async with opened(record.path, (100, 30), "MW") as pilot:
        await keys(pilot, "f10")
        await until(pilot, lambda: f"{tag}: 1 in the way" in text_of(pilot))
        assert "0.05 over the 0.30 maximum" in text_of(pilot)
        await keys(pilot, "f2")
        await keys(pilot, "ctrl+s")
        assert "is not released" in text_of(pilot)
        await keys(pilot, "escape", "enter", "f3")
        await typed(pilot, "owner agrees")
        await keys(pilot, "ctrl+s")
        await until(pilot, lambda: f"{tag}: nothing stands in the way" in text_of(pilot))
        await keys(pilot, "f2")
        await keys(pilot, "ctrl+s")
        await until(pilot, lambda: "WL-000001" in text_of(pilot))
    again = records.open(record.path)
    (issued,) = releases.of_job(again, tag)
    again.close()
    assert (issued.number, issued.by) == ("WL-000001", "MW")


async def test_the_record_is_verified_on_screen(record: Record, tmp_path: Path) -> None:
    """F2 on the Record screen says what was verified."""
    waiting(record, tmp_path)
    async with opened(record.path, (100, 30), "MW") as pilot:
        await keys(pilot, "f12")
        assert "head of the chain" in text_of(pilot)
        await keys(pilot, "f2")
        await until(pilot, lambda: "verified: " in text_of(pilot))
        await settled(pilot)


async def test_the_first_that_waits_is_under_the_cursor(demo: Record) -> None:
    """Opened from the bench, the inspector stands on the first unit to inspect, not on one that has ended."""
    path = demo.path
    demo.close()
    async with opened(path, acting="MW") as pilot:
        pilot.app.go("release")
        await settled(pilot)
        await until(pilot, lambda: pilot.app.screen._line() is not None)
        assert pilot.app.screen._line().stands == "to inspect"
