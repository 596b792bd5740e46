"""Measuring as ratios within one run: the machine is shared and noisy, a ratio of medians taken in turn holds."""

from __future__ import annotations

import statistics
import subprocess
import sys
import time
from collections.abc import Callable
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
TABLE = ROOT / ".benchmarks.tsv"


def in_turn(ours: Callable[[int], object], theirs: Callable[[int], object], times: int) -> tuple[float, float, float]:
    """Median seconds of both, run A B A B, and the median of the ratios pair by pair."""
    a, b = [], []
    for n in range(times):
        begun = time.perf_counter()
        ours(n)
        a.append(time.perf_counter() - begun)
        begun = time.perf_counter()
        theirs(n)
        b.append(time.perf_counter() - begun)
    return statistics.median(a), statistics.median(b), statistics.median(x / y for x, y in zip(a, b, strict=True))


def process(arguments: list[str]) -> Callable[[int], object]:
    """A run of the interpreter with these arguments, timed whole."""

    def run(_: int) -> object:
        return subprocess.run([sys.executable, *arguments], capture_output=True, check=True, cwd=ROOT)

    return run


def note(what: str, ours: float, yardstick: str, theirs: float, ratio: float, bound: str) -> None:
    """A row for the table of benchmarks, on the terminal and in a file that is not kept."""
    row = f"{what}\t{ours * 1000:.2f} ms\t{yardstick}\t{theirs * 1000:.2f} ms\t{ratio:.2f}\t{bound}"
    print("\n" + row.replace("\t", " | "))
    with TABLE.open("a", encoding="utf-8") as table:
        table.write(row + "\n")
