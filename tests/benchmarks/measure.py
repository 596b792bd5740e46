"""Measuring as ratios within one run: the machine is shared and noisy, a ratio of medians taken in turn holds."""

from __future__ import annotations

import json
import statistics
import subprocess
import sys
import time
from collections.abc import Callable
from concurrent.futures import ProcessPoolExecutor
from fractions import Fraction
from multiprocessing import get_context
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


def note_held(what: str, ours: float, bound: float, slow: float, said: str) -> None:
    """A row for what is bound in seconds: beside it the fixed piece of work as it went in this run; the ratio is to the bound."""
    note(what, ours, "a fixed piece of work", slow * WORK_SECONDS, ours / slow / bound, said)


def _work() -> int:
    """A fixed piece of work like ours: exact numbers, texts, tables by key; some ten milliseconds."""
    seen: dict[str, Fraction] = {}
    for n in range(1, 3000):
        seen[json.dumps([n, f"{n / 7:.3f}"])] = Fraction(n, 7 + n % 13) * Fraction(3, 1000)
    return sum(value.denominator for value in seen.values())


WORK_SECONDS = 0.0190
"""What `_work` takes on the machine that the figures in DEVELOPERS.md come from, when it is quiet."""


def pace(processes: int = 1) -> float:
    """How many times slower than that machine, quiet, this one is now; at least 1.

    Bounds in seconds are held times this: a ratio to a fixed piece of work done in the same run. With `processes` above 1
    as many do it at once, for what works on as many cores.
    """
    if processes == 1:
        return max(1.0, _timed(None) / WORK_SECONDS)
    with ProcessPoolExecutor(processes, mp_context=get_context("spawn")) as pool:
        list(pool.map(_timed, range(processes)))  # started and warm
        return max(1.0, statistics.mean(pool.map(_timed, range(processes))) / WORK_SECONDS)


def _timed(_: object) -> float:
    took = []
    for _ in range(15):
        begun = time.perf_counter()
        _work()
        took.append(time.perf_counter() - begun)
    return statistics.median(took)
