"""Printing on a real CUPS queue that writes to a file; without one, the words that say where the file is."""

from __future__ import annotations

import os
import shutil
import subprocess
import time
from collections.abc import Iterator
from pathlib import Path

import pypdf
import pytest
from click.testing import CliRunner

from store import people, releases
from store.errors import Refused
from store.records import Record
from store.reports import issue, saving
from store.reports.printing import HandedOver
from tests import shop as small
from tests.store.test_releases import GOOD, measure
from tui.commands import cli


@pytest.fixture
def released(record: Record, tmp_path: Path) -> list[str]:
    """Three jobs released today."""
    small.fill(record, tmp_path)
    people.add(record, "AB", "Ada Birch")
    people.add(record.acting("AB"), "MW", "Mara Wend", "inspect")
    tags = []
    for serial in ("1", "2", "3"):
        tag = small.core(record.acting("AB"), serial).tag
        measure(record.acting("AB"), tag, GOOD)
        releases.release(record.acting("MW"), tag)
        tags.append(tag)
    return tags


BACKEND = """#!/bin/sh
# the last step of a queue whose printer is a file; CUPS calls it with the job's file as the sixth argument
[ $# -eq 0 ] && { echo 'direct wearlinefile "a file" "a file"'; exit 0; }
cat "${6:--}" >>"${DEVICE_URI#wearlinefile:}"
"""


@pytest.fixture
def queue(tmp_path: Path) -> Iterator[Path]:
    """A CUPS queue `wearline-test` whose printer is a file; skipped with a reason where CUPS cannot be had."""
    if not (shutil.which("cupsd") and shutil.which("lpadmin")) or os.geteuid() != 0:
        pytest.skip("no CUPS daemon is installed, or not root to start one")
    backends = Path("/usr/lib/cups/backend")
    if not backends.is_dir():
        pytest.skip("this CUPS keeps its backends elsewhere")
    out, backend = Path("/var/spool/cups/wearline-test.out"), backends / "wearlinefile"
    out.unlink(missing_ok=True)
    backend.write_text(BACKEND)
    backend.chmod(0o700)
    daemon = subprocess.Popen([str(shutil.which("cupsd")), "-f"], stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    try:
        adding = ["lpadmin", "-p", "wearline-test", "-E", "-v", f"wearlinefile:{out}", "-m", "raw"]
        made = _tried(adding)
        if made.returncode != 0:
            pytest.skip(f"CUPS made no queue: {made.stderr.decode()[:100]}")
        yield out
    finally:
        subprocess.run(["lpadmin", "-x", "wearline-test"], capture_output=True, check=False)
        daemon.terminate()
        daemon.wait()
        backend.unlink()


def _tried(command: list[str]) -> subprocess.CompletedProcess[bytes]:
    """A command, tried until the daemon answers or ten seconds have gone."""
    done = subprocess.run(command, capture_output=True, check=False)
    for _ in range(50):
        if done.returncode == 0:
            break
        time.sleep(0.2)
        done = subprocess.run(command, capture_output=True, check=False)
    return done


def test_a_days_batch_goes_to_the_queue(record: Record, released: list[str], queue: Path, tmp_path: Path) -> None:
    """Each of the day's reports arrives at the printer as the bytes that were saved."""
    day = releases.on_day(record, record.now()[:10])
    assert [issued.tag for issued in day] == released
    told: list[tuple[str, int]] = []
    done = issue.print_day(record, record.now()[:10], "wearline-test", tmp_path, lambda *said: told.append(said))
    assert [one.queue for one in done] == ["wearline-test"] * len(released)
    assert told == [(f"printing, of {len(released)} reports", n) for n in range(1, len(released) + 1)]
    last = (tmp_path / f"{day[-1].number}.pdf").read_bytes()
    for _ in range(100):
        if queue.exists() and last in queue.read_bytes():
            break
        time.sleep(0.1)
    assert last in queue.read_bytes()


def test_without_a_printer_it_is_said_and_the_file_named(
    record: Record, released: list[str], tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """No `lp`: one line that says so and where the report is."""
    monkeypatch.setattr("store.reports.printing.shutil.which", lambda name: None)
    with pytest.raises(Refused, match="has no `lp` to print with; the report is saved as") as caught:
        issue.print_out(record, released[0], folder=tmp_path)
    assert (tmp_path / "WL-000001.pdf").exists()
    assert str(tmp_path) in str(caught.value)


def test_a_day_by_command(record: Record, released: list[str], tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    """`report --day` prints what was issued on that day; another day has nothing, and a job's tag does not go with it."""
    given: list[Path] = []

    def handed(file: Path, queue: str) -> HandedOver:
        given.append(file)
        return HandedOver(file, queue, "7")

    monkeypatch.setattr("store.reports.printing.hand_over", handed)
    record_path, day = str(record.path), record.now()[:10]
    numbers = [issued.number for issued in releases.on_day(record, day)]
    record.close()
    run = CliRunner()
    said = run.invoke(cli, ["report", "--day", day, "--print", "bench", "--record", record_path])
    assert said.exit_code == 0, said.output
    assert [file.stem for file in given] == numbers
    assert f"{len(released)} reports handed to the printer" in said.output
    said = run.invoke(cli, ["report", "--day", "2001-01-01", "--print", "--record", record_path])
    assert "no report was issued on 2001-01-01" in said.output
    assert run.invoke(cli, ["report", "1001", "--day", day, "--print", "--record", record_path]).exit_code == 2


def test_a_reprint_carries_the_text_that_was_frozen(record: Record, released: list[str], tmp_path: Path) -> None:
    """What is saved or printed later attaches the frozen text itself, not one that is written anew."""
    report, frozen = releases.standing(record, released[0])
    assert frozen is not None
    older = frozen.replace('"layout": 1', '"layout":  1')
    assert older != frozen
    made = saving.save(report, tmp_path / "a.pdf", older)
    ((attached,),) = pypdf.PdfReader(made).attachments.values()
    assert attached.decode() == older
    assert saving.save(report, tmp_path / "a.json", older).read_text() == older
    assert issue.save(record, released[0], tmp_path / "b.json").read_text() == frozen
