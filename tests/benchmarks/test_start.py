"""Starting: help beside click alone, the first screen beside importing what it is built on."""

from __future__ import annotations

import os
import statistics
import time
from pathlib import Path

from tests.benchmarks.measure import in_turn, note, process
from tests.screens.support import Terminal

FULL = os.environ.get("WEARLINE_FULL") == "1"
TIMES = 15 if FULL else 7


def test_help() -> None:
    """`wearline --help` takes at most 1.5 times as long as importing click."""
    a, b, ratio = in_turn(process(["-m", "tui", "--help"]), process(["-c", "import click"]), TIMES)
    note("wearline --help", a, "python -c 'import click'", b, ratio, "at most 1.5")
    assert ratio <= 1.5


def test_first_screen(demo_record_path: Path) -> None:
    """The list of a record of 300 jobs is there within 1.3 times importing textual.app and sqlmodel; the frame earlier."""
    bare = process(["-c", "import textual.app, sqlmodel"])
    ratios, ours, theirs, frames = [], [], [], []
    for n in range(TIMES):
        begun = time.perf_counter()
        screen = Terminal(["--record", str(demo_record_path), "--as", "AB"])
        try:
            screen.until("search tag")
            frames.append(time.perf_counter() - begun)
            screen.until("strip and measure")
            ours.append(time.perf_counter() - begun)
        finally:
            screen.kill()
        begun = time.perf_counter()
        bare(n)
        theirs.append(time.perf_counter() - begun)
        ratios.append(ours[-1] / theirs[-1])
    ratio = statistics.median(ratios)
    note(
        "first frame",
        statistics.median(frames),
        "",
        statistics.median(theirs),
        statistics.median(frames) / statistics.median(theirs),
        "before the store",
    )
    note(
        "first usable screen, 340 jobs",
        statistics.median(ours),
        "import textual.app, sqlmodel",
        statistics.median(theirs),
        ratio,
        "at most 1.3",
    )
    assert statistics.median(frames) < statistics.median(theirs)
    assert ratio <= 1.3
