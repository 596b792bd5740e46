"""Printing on a real CUPS queue that writes to a file; without one, the words that say where the file is."""

from __future__ import annotations

import os
import shutil
import subprocess
import time
from collections.abc import Iterator
from pathlib import Path

import pytest

from store import people, releases
from store.errors import Refused
from store.records import Record
from store.reports import issue
from tests import shop as small
from tests.store.test_releases import GOOD, measure


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
    for issued in day:
        assert "wearline-test" in issue.print_out(record, issued.tag, "wearline-test", tmp_path)
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
