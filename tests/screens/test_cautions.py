"""The caution of a test under power is on the screen, or on the terminal, before its first value goes in on a job."""

from __future__ import annotations

from pathlib import Path

import pytest
from click.testing import CliRunner
from textual import events
from textual.geometry import Size

from store import cautions, files, readings, records
from store.records import Record
from tests import shop as small
from tests.screens.support import opened, settled, text_of, until
from tui.commands import cli
from tui.screens.job_explained import cautions_shown
from tui.screens.job_sheet import JobSheet
from tui.widgets.sheet import ReadingSheet

LIMITS = """model,characteristic,stage,unit,new,low,high,count,source
KR-1,no-load-voltage,both,V,,11,12,,own
KR-1,no-load-current,both,A,,,90,,own
KR-1,stall-voltage,both,V,,5,7,,own
KR-1,stall-current,both,A,,,500,,own
"""


@pytest.fixture
def tag(record: Record, tmp_path: Path) -> str:
    """A starter whose sheet asks for two running tests, each with a caution of its own."""
    (tmp_path / "models.csv").write_text("model,kind\nKR-1,starter\n")
    (tmp_path / "limits.csv").write_text(LIMITS)
    files.load(record, [tmp_path / "models.csv", tmp_path / "limits.csv"])
    return small.core(record, "1", "KR-1").tag


def kept(path: Path, tag: str) -> dict[str, str]:
    """What is in the record."""
    record = records.open(path)
    found = {r.characteristic: r.typed.text for r in readings.of_job(record, tag)}
    record.close()
    return found


async def test_a_burst_does_not_run_past_a_caution(record: Record, tag: str) -> None:
    """Four values in one paste: the two under the caution that was on the screen go in, the others wait in their cells."""
    record.close()
    async with opened(record.path) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await until(pilot, lambda: "a series motor runs away" in text_of(pilot))
        pilot.app.screen.query_one(ReadingSheet).post_message(events.Paste("11.5\n80\n6.6\n400\n"))
        await settled(pilot)
        assert kept(record.path, tag) == {"no-load-voltage": "11.5", "no-load-current": "80"}
        shown = " ".join(text_of(pilot).split())
        assert "6.6!" in shown
        assert "400!" in shown
        assert "CAUTION Very high current and torque" in shown
        sheet = pilot.app.screen.query_one(ReadingSheet)
        for row, value in ((2, "6.6"), (3, "400")):
            sheet.stand(row)
            await settled(pilot)
            await pilot.press(*value, "enter")
            await settled(pilot)
    assert kept(record.path, tag) == {
        "no-load-voltage": "11.5", "no-load-current": "80", "stall-voltage": "6.6", "stall-current": "400",
    }  # fmt: skip


async def test_typed_by_hand_nothing_is_held_up(record: Record, tag: str) -> None:
    """Each caution has been painted when its row is reached, and the keys go on."""
    record.close()
    async with opened(record.path) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        for text in ("11.5", "80", "6.6", "400"):
            await pilot.press(*text, "enter")
            await pilot.pause(0.05)
        await settled(pilot)
    assert len(kept(record.path, tag)) == 4


async def test_a_caution_that_was_seen_is_not_asked_for_again(record: Record, tag: str) -> None:
    """This job has a stall reading: a burst into the other one goes in at once."""
    readings.add(record, tag, "as-found", "stall-voltage", "6.6")
    record.close()
    async with opened(record.path) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        await until(pilot, lambda: "a series motor runs away" in text_of(pilot))
        pilot.app.screen.query_one(ReadingSheet).post_message(events.Paste("11.5\n80\n400\n"))
        await settled(pilot)
    assert len(kept(record.path, tag)) == 4


async def test_a_reason_not_to_measure_needs_none(record: Record, tag: str) -> None:
    """Nothing is put under power by saying why it is not."""
    record.close()
    async with opened(record.path) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        pane = pilot.app.screen.query_one(JobSheet)
        pane.cautioned.clear()
        assert pane._caution_unseen(2, "6.6").startswith("Very high current")
        assert pane._caution_unseen(2, "not measured no brake") == ""


def test_where_there_is_little_room_as_much_as_fits_will_do() -> None:
    """Whole, or cut short by the room alone; the first words elsewhere are not enough."""
    long = "Very high current and torque: a few seconds only. Secure the brake arm."
    assert cautions_shown({long}, f"head\nCAUTION  {long}", Size(80, 8)) == {long}
    assert cautions_shown({long}, "head\nCAUTION  Very high current and torque…", Size(40, 3)) == {long}
    assert cautions_shown({long}, "head\nCAUTION  Very high current and torque…", Size(80, 8)) == set()
    assert cautions_shown({long, ""}, "head", Size(80, 8)) == set()


def test_by_command_it_comes_before_the_first_value(record: Record, tag: str) -> None:
    """On stderr, once for each caution on a job; other readings have none."""
    path = str(record.path)

    def read(*arguments: str) -> tuple[int, str, str]:
        done = CliRunner().invoke(cli, ["read", tag, *arguments, "--record", path])
        return done.exit_code, done.stdout, done.stderr

    code, said, warned = read("no-load-voltage", "11.5")
    assert (code, said.startswith("no-load voltage: in")) == (0, True)
    assert warned.startswith("CAUTION  Never above the specified volts: a series motor runs away")
    assert read("no-load-current", "80")[2] == ""
    assert read("stall-current", "400")[2].startswith("CAUTION  Very high current")
    assert read("stall-voltage", "6.6", "--json")[2] == ""
    assert read("brush-length", "12")[2] == ""


def test_who_sits_at_a_terminal_says_that_it_was_read(
    record: Record, tag: str, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Answered with no: nothing is written."""
    from tui.commands import read as command

    class Terminal:
        @staticmethod
        def isatty() -> bool:
            return True

    class Sys:
        stdin = stderr = Terminal

    monkeypatch.setattr(command, "sys", Sys)
    arguments = ["read", tag, "stall-current", "400", "--record", str(record.path)]
    refused = CliRunner().invoke(cli, arguments, input="n\n")
    assert refused.exit_code == 1
    assert readings.of_job(record, tag) == ()
    assert CliRunner().invoke(cli, arguments, input="y\n").exit_code == 0
    assert len(readings.of_job(record, tag)) == 1
    assert cautions.first(record, tag, "stall-torque") == ""
