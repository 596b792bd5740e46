"""The pictures of the README, exported from the real screens on the demo record: `python -m tests.screens.pictures`."""

from __future__ import annotations

import asyncio
import re
import shutil
import tempfile
from pathlib import Path

from textual.widgets import Input

from store import demonstration, jobs, records
from tests.screens.support import opened, settled
from tui.widgets.sheet import ReadingSheet

WORN_PLATE = "KS-?4?"
FOLDER = Path(__file__).resolve().parents[2] / "tests" / "screens" / "pictures"


def wanted(path: Path) -> dict[str, tuple[str, ...]]:
    """Picture by name: the place and what it is opened with."""
    record = records.open(path)
    worn = max(jobs.listing(record), key=lambda line: line.out).tag
    record.close()
    return {
        "bench": (),
        "sheet": ("job", worn),
        "plan": ("job", worn, "as-found", "", "plan"),
        "release": ("release",),
        "limits": ("limits",),
        "parts": ("parts",),
        "comebacks": ("comebacks",),
    }


async def draw() -> None:
    """Export each picture as SVG."""
    FOLDER.mkdir(exist_ok=True)
    with tempfile.TemporaryDirectory() as folder:
        made = Path(folder) / "demo.wearline"
        demonstration.make(made)
        for name, place in wanted(made).items():
            path = Path(folder) / f"{name}.wearline"
            shutil.copyfile(made, path)
            async with opened(path, (124, 34), "ET") as pilot:
                if place:
                    pilot.app.go(*place)
                    await settled(pilot)
                if name == "sheet":
                    sheet = pilot.app.screen.query_one(ReadingSheet)
                    row = next(n for n, face in enumerate(sheet.faces) if face.verdict == "out")
                    sheet.stand(row)
                    await settled(pilot)
                if name == "parts":
                    pilot.app.screen.query_one("#ask", Input).value = WORN_PLATE
                    await settled(pilot)
                picture = re.sub(
                    r"@font-face \{.*?\}", "", pilot.app.export_screenshot(title="Wearline"), flags=re.DOTALL
                )
                picture = picture.replace("<text ", '<text xml:space="preserve" ')  # columns stay where they are
                (FOLDER / f"{name}.svg").write_text(picture, encoding="utf-8")  # no font from the network


if __name__ == "__main__":
    asyncio.run(draw())
