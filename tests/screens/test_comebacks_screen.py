"""The Comebacks screen: the planted fault in one sentence, and the jobs behind it."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest

from tests.screens.support import opened, settled, text_of, until
from tests.screens.test_screens import keys


@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_the_bad_lot_and_its_jobs(demo_record_path: Path, tmp_path: Path, size: tuple[int, int]) -> None:
    """The lot stands on top with its sentence; Enter shows the jobs, Esc leads back, F2 looks at the next kind."""
    path = tmp_path / "demo.wearline"
    shutil.copyfile(demo_record_path, path)
    async with opened(path, size, "OV") as pilot:
        await keys(pilot, "f8")
        await until(pilot, lambda: "CS-4417" in text_of(pilot))
        assert "more than the rest" in text_of(pilot)
        assert "released" in text_of(pilot)
        await keys(pilot, "enter")
        await until(pilot, lambda: "came back: CS-4417" in text_of(pilot))
        await keys(pilot, "escape", "f2")
        await until(pilot, lambda: "Comebacks > by part" in text_of(pilot))
        await keys(pilot, "f3")
        await settled(pilot)
        assert "comebacks within a year" in text_of(pilot) or "too few" in text_of(pilot)
