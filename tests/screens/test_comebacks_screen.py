"""The Comebacks screen: the planted fault in one sentence, and the jobs behind it."""

from __future__ import annotations

import json
import shutil
from pathlib import Path

import pytest
from textual.widgets import Input

from store.comeback_groups import KINDS
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


async def test_the_owners_report_is_saved_and_printed(
    demo_record_path: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """F5 asks for a name and refuses another ending in the form; F6 says where the file is when nothing prints."""
    monkeypatch.setattr("store.reports.printing.shutil.which", lambda name: None)
    monkeypatch.setattr("tempfile.gettempdir", lambda: str(tmp_path))
    path = tmp_path / "demo.wearline"
    shutil.copyfile(demo_record_path, path)
    async with opened(path, (80, 24), "OV") as pilot:
        await keys(pilot, "f8")
        await until(pilot, lambda: "CS-4417" in text_of(pilot))
        for name in ("save", "print"):
            assert name in text_of(pilot).splitlines()[-1]
        pilot.app.screen.since = "2025-01-01"
        await keys(pilot, "f5")
        file = pilot.app.screen.query_one("#file", Input)
        file.value = str(tmp_path / "owner.doc")
        await keys(pilot, "ctrl+s")
        assert "saved as .pdf or .json" in text_of(pilot)
        file.value = str(tmp_path / "owner.json")
        await keys(pilot, "ctrl+s")
        await until(pilot, (tmp_path / "owner.json").exists)
        saved = json.loads((tmp_path / "owner.json").read_text())
        assert saved["since"] == "2025-01-01"
        assert {g["by"] for g in saved["groups"]} == set(KINDS)
        await settled(pilot)
        await keys(pilot, "f6")
        await until(pilot, lambda: list(tmp_path.glob("comebacks-*.pdf")) != [])
        await settled(pilot)
        assert "the report is saved as" in " ".join(text_of(pilot).split())
