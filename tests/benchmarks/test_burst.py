"""A gauge's burst through a real pseudo-terminal, until every reading is durable; beside the same keys into a bare input."""

from __future__ import annotations

import sqlite3
import time
from pathlib import Path

from store.records import Record
from tests.benchmarks.measure import note
from tests.screens.support import Terminal, terminal
from tests.screens.test_burst import long_job, values

COUNT = 500
MOST = 1.5


def test_a_burst_of_five_hundred(record: Record, tmp_path: Path) -> None:
    """Verdicts, audit, commits and repainting included; held by a bound of our own, since the design gives none."""
    tag = long_job(record, tmp_path)
    record.close()
    sent = "".join(f"{text}\r" for text in values(COUNT, 7)).encode()
    watcher = sqlite3.connect(record.path)
    with terminal(["--record", str(record.path)]) as screen:
        screen.until(tag)
        screen.send(b"\r")
        screen.until("serial 1")
        begun = time.perf_counter()
        screen.send(sent)
        while watcher.execute("SELECT count(*) FROM reading").fetchone()[0] < COUNT:
            screen.read(0.01)
        took = time.perf_counter() - begun
        screen.close()
    watcher.close()
    bare = Terminal([str(COUNT)], module="tests.benchmarks.bare_input")
    bare.until("ready")
    begun = time.perf_counter()
    bare.send(sent)
    bare.until("all lines came")
    plain = time.perf_counter() - begun
    bare.kill()
    note(
        f"burst of {COUNT} through a terminal",
        took,
        "the same keys into a bare input",
        plain,
        took / plain,
        f"at most {MOST}",
    )
    assert took <= MOST * plain
