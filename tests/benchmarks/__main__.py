"""Every benchmark in one command, and their table: `python -m tests.benchmarks`; WEARLINE_FULL=1 for full size.

The table goes to the terminal as Markdown, with the machine that it was taken on. Give test files or `-k` to run some.
"""

from __future__ import annotations

import os
import platform
import sqlite3
import subprocess
import sys
from pathlib import Path

from tests.benchmarks.measure import ROOT, TABLE

HEADS = ("what", "ours", "beside it in the same run", "that", "ratio", "bound")


def machine() -> str:
    """The machine in a line: processor, cores, Python, SQLite."""
    named = [line for line in Path("/proc/cpuinfo").read_text().splitlines() if line.startswith("model name")]
    processor = named[0].split(": ")[1] if named else platform.processor()
    return f"{processor}, {os.cpu_count()} cores, Python {platform.python_version()}, SQLite {sqlite3.sqlite_version}"


def main(asked: list[str]) -> int:
    """Run the benchmarks one after the other and print the table. Returns pytest's exit code."""
    TABLE.unlink(missing_ok=True)
    which = asked or ["tests/benchmarks"]
    done = subprocess.run(
        [sys.executable, "-m", "pytest", "-q", "-s", "-p", "no:randomly", *which], cwd=ROOT, check=False
    )
    if TABLE.exists():
        print(f"\n{machine()}\n")
        print("| " + " | ".join(HEADS) + " |\n|" + "---|" * len(HEADS))
        for row in TABLE.read_text(encoding="utf-8").splitlines():
            print("| " + " | ".join(row.split("\t")) + " |")
    return done.returncode


if __name__ == "__main__":
    raise SystemExit(main(sys.argv[1:]))
