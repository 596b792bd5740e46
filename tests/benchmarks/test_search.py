"""Searching notes: times from query to the first fifty hits, beside two plain ways over the same notes in the same run.

Small by default; WEARLINE_FULL=1 runs 10,000, 100,000 and 1,000,000 notes (some five minutes).
"""

from __future__ import annotations

import json
import os
import subprocess
import sys
import time
from pathlib import Path
from typing import Any

import pytest

from store import records, search
from tests.benchmarks import notes
from tests.benchmarks.measure import ROOT, note, pace

FULL = os.environ.get("WEARLINE_FULL") == "1"
SIZES = (10_000, 100_000, 1_000_000) if FULL else (10_000,)
MOST_P95_MS = 50.0
MOST_MIB = 500
MOST_HOSTILE_SECONDS = 0.2


@pytest.fixture(scope="module", params=SIZES)
def path(request: pytest.FixtureRequest, tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A record with so many notes."""
    made: Path = tmp_path_factory.mktemp("notes") / f"{request.param}.wearline"
    notes.record(made, request.param).close()
    return made


def _run(path: Path, *options: str) -> dict[str, Any]:
    """One run in a process of its own, with its figures noted."""
    done = subprocess.run(
        [sys.executable, "-m", "tests.benchmarks.search_run", str(path), *options],
        capture_output=True, check=True, text=True, cwd=ROOT,
    )  # fmt: skip
    said: dict[str, Any] = json.loads(done.stdout)
    print(f"\nsearch {path.stem} {' '.join(options)}\t{json.dumps(said)}")
    return said


def test_search(path: Path) -> None:
    """Built from the rows and read from its file, the index answers queries of one to five words, each with a slip, within
    50 ms at the 95th percentile in less than 500 MiB; FTS5 with the right spelling and rapidfuzz over all stand beside.
    """
    path.with_name(path.name + ".words").unlink(missing_ok=True)
    built, loaded, plain = _run(path), _run(path), _run(path, "--beside")
    slow, p95 = pace(), min(built["p95"], loaded["p95"])  # the better of two runs: other work on the machine only adds
    right = plain["fts5_rank"]["p95"]
    what = f"search {loaded['notes']:,} notes, p95 ({max(built['peak_mib'], loaded['peak_mib'])} MiB)"
    note(
        what, p95 / 1000, "FTS5 by rank, spelt right, p95", right / 1000, p95 / right, f"{MOST_P95_MS} ms at 1,000,000"
    )
    assert p95 <= MOST_P95_MS * slow
    assert max(built["peak_mib"], loaded["peak_mib"]) <= MOST_MIB
    assert loaded["had_file"]
    assert loaded["first_search_seconds"] < built["first_search_seconds"]
    assert loaded["p95"] < plain["rapidfuzz_over_all"]["p50"]


HOSTILE = (
    "a", "e*", "NOT", "-a", '"' * 5000, "a" * 5000, "aeiou " * 1000, " ".join(f"solenoi{c} contact{c}" for c in "abcdefghij"),
    '"armature armature armature"', "-armature -contacts -solenoid brush", "KM-1 KM-12 KM-123 KM-1234", "x y z q w e r t u i o p",
    " ".join(f"commutatr{c}qu" for c in "abcdefghijkl"),
)  # fmt: skip


def test_hostile(path: Path) -> None:
    """Whatever is asked is answered within a fifth of a second, measured as the better of two times from nothing kept."""
    record = records.open(path)
    search.find(record, "warm up")
    slow = pace()
    for asked in HOSTILE:
        times = []
        for _ in range(2):
            record.cache["search"].lexicon.count(0, 0)  # forgets what was kept of the time before
            begun = time.perf_counter()
            search.find(record, asked, typing=True)
            times.append(time.perf_counter() - begun)
        print(f"\n{asked[:20]!r}: {1000 * min(times):.1f} ms", end="")
        assert min(times) < MOST_HOSTILE_SECONDS * slow
    record.close()


def test_a_new_note_costs_little(path: Path) -> None:
    """With a new note before each, searches stay within the same bound."""
    record = records.open(path)
    search.find(record, "warm up")
    times = []
    for n in range(20):
        with record.write() as conn:
            conn.exec_driver_sql(
                "INSERT INTO note(job_id, at, by, text) VALUES (1, '2026-06-01T00:00:00Z', 'AB', ?)",
                (f"zqzqxjqzqx new{n} note",),
            )
        begun = time.perf_counter()
        assert len(search.find(record, "zqzqxjqzqx").hits) == n + 1
        times.append(time.perf_counter() - begun)
    assert 1000 * sorted(times)[18] <= MOST_P95_MS * pace()
    record.close()
