"""What cannot be is one clear line on the screen, and what was typed stays."""

from __future__ import annotations

from pathlib import Path

import pytest
from textual.widgets import Input

from store import files, jobs, readings, records
from store.records import Record
from tests import shop as small
from tests.screens.support import opened, settled, text_of, until
from tests.screens.test_screens import keys, typed

LIMITS = """model,characteristic,stage,unit,low,high,count,source
KR-1,{name},both,{unit},{low},{high},{count},own
"""


@pytest.mark.parametrize(
    ("name", "unit", "ends", "text", "said"),
    [
        (
            "winding-temperature",
            "degC",
            ("10", "40"),
            "-240",
            "nothing at the bench is so cold; is the temperature a slip?",
        ),
        ("commutator-runout", "mm", ("", "0.05"), "-0.1", "a length is not below zero"),
        ("bar-to-bar", "%", ("", "10"), "-5", "a voltage is not below zero"),
        ("end-play", "mm", ("0.1", "0.3"), "nan", "nan"),
    ],
)
@pytest.mark.parametrize("size", [(80, 24), (120, 40)])
async def test_in_a_cell(
    record: Record,
    tmp_path: Path,
    name: str,
    unit: str,
    ends: tuple[str, str],
    text: str,
    said: str,
    size: tuple[int, int],
) -> None:
    """Refused in its cell, with the reason below; nothing is in the record."""
    (tmp_path / "models.csv").write_text("model,kind,bars\nKR-1,starter,9\n")
    sheet = LIMITS.format(name=name, unit=unit, low=ends[0], high=ends[1], count="")
    (tmp_path / "limits.csv").write_text(sheet)
    files.load(record, [tmp_path / "models.csv", tmp_path / "limits.csv"])
    tag = small.core(record, "1", "KR-1").tag
    record.close()
    async with opened(record.path, size) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await typed(pilot, text)
        await keys(pilot, "enter")
        await until(pilot, lambda: said in " ".join(text_of(pilot).split()))
        assert f"{text}!" in text_of(pilot)
    again = records.open(record.path)
    assert readings.of_job(again, tag) == ()
    again.close()


@pytest.mark.parametrize(
    ("field", "said"), [("hours", "'-5' is not a number of hours"), ("starts", "'-5' is not a number of starts")]
)
async def test_negative_hours_and_starts(record: Record, tmp_path: Path, field: str, said: str) -> None:
    """A core is not taken in with them; mended, it is, with what was typed."""
    small.fill(record, tmp_path)
    record.close()
    async with opened(record.path) as pilot:
        await keys(pilot, "f2")
        for name, text in (("model", "KS-100"), ("serial", "77"), (field, "-5")):
            pilot.app.screen.query_one(f"#{name}", Input).value = text
        await keys(pilot, "ctrl+s")
        assert said in text_of(pilot)
        pilot.app.screen.query_one(f"#{field}", Input).value = "1200"
        await keys(pilot, "ctrl+s")
        await settled(pilot)
    again = records.open(record.path)
    (line,) = jobs.listing(again)
    assert getattr(jobs.find(again, line.tag), field) == "1200"
    again.close()
