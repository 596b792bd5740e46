"""The cross-check at the size of a shop's list and a hundred times more: loading, candidates, whole checks, a hub.

    WEARLINE_FULL=1 pytest -s tests/benchmarks/test_parts.py     10,000, 100,000 and 1,000,000 numbers, figures held

Without it the small lists only, and what must hold there: costs that do not grow with the list. Bounds are held in time of
the processor, which a busy machine does not stretch; the wall clock stands beside it in the table.
"""

from __future__ import annotations

import json
import os
import random
import sqlite3
import statistics
import subprocess
import sys
import time
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

import pytest

from store import records
from store.parts import candidates, checking
from store.records import Record
from store.rules.numbers import asked
from tests.benchmarks import part_lists
from tests.benchmarks.measure import ROOT, note, note_held, pace

FULL = os.environ.get("WEARLINE_FULL") == "1"
COUNTS = (10_000, 100_000, 1_000_000) if FULL else (2_000, 20_000)
HUB = 100_000 if FULL else 5_000
ASKED = 600 if FULL else 200
WARM = 50


@dataclass
class Loaded:
    """Records by how many numbers they hold, with what loading cost."""

    paths: dict[int, Path]
    cost: dict[int, dict[str, float]]


@pytest.fixture(scope="module")
def loaded(tmp_path_factory: pytest.TempPathFactory) -> Loaded:
    """Lists of every length, loaded each in a process of its own; the longest has the hub."""
    folder = tmp_path_factory.mktemp("lists")
    found = Loaded({}, {})
    for count in COUNTS:
        paths = part_lists.write(folder, count, HUB if count == COUNTS[-1] else 0)
        record = folder / f"{count}.wearline"
        command = [sys.executable, "-m", "tests.benchmarks.load_parts", str(record), *map(str, paths)]
        done = subprocess.run(command, capture_output=True, check=True, text=True, cwd=ROOT)
        found.paths[count], found.cost[count] = record, json.loads(done.stdout)
    return found


def bare(source: Path, target: Path) -> tuple[float, float]:
    """Seconds, and seconds of the processor, of one executemany a table, of the very rows, into the same indexes, in one transaction."""
    target.unlink(missing_ok=True)
    given = sqlite3.connect(source)
    made = given.execute(
        "SELECT sql FROM sqlite_master WHERE tbl_name IN ('part_number','relation') AND type IN ('table','index') "
        "AND sql IS NOT NULL ORDER BY type DESC"
    ).fetchall()
    tables = {name: given.execute(f"SELECT * FROM {name}").fetchall() for name in ("part_number", "relation")}
    given.close()
    raw = sqlite3.connect(target, isolation_level=None)
    for pragma in ("journal_mode=WAL", "synchronous=FULL", "cache_size=-32000", "temp_store=MEMORY"):
        raw.execute(f"PRAGMA {pragma}")
    for (sql,) in made:
        raw.execute(sql)
    begun, worked = time.perf_counter(), time.process_time()
    raw.execute("BEGIN IMMEDIATE")
    for name, rows in tables.items():
        raw.executemany(f"INSERT INTO {name} VALUES({','.join('?' * len(rows[0]))})", rows)
    raw.execute("COMMIT")
    seconds, cpu = time.perf_counter() - begun, time.process_time() - worked
    raw.close()
    return seconds, cpu


def test_loading_costs_little_more_than_bare_inserts(loaded: Loaded, tmp_path: Path) -> None:
    """Validation, resolved numbers, named errors and the audit digest: at most 2.5 times bare executemany at a million.

    Under 1 GiB, with progress told, and no dearer by the line however long the list. Small lists have the start of a load
    against them: their ratio is in the table and not held.
    """
    for count in COUNTS:
        cost = loaded.cost[count]
        theirs, worked = bare(loaded.paths[count], tmp_path / "bare.db")
        ratio = cost["cpu"] / worked
        what = f"load {count:,} numbers, {count * 3 // 2:,} relations ({cost['memory']:.0f} MiB)"
        note(f"{what}, wall", cost["seconds"], "bare executemany", theirs, cost["seconds"] / theirs, "")
        note(f"{what}, processor", cost["cpu"], "bare executemany", worked, ratio, "2.5 at 1,000,000")
        assert cost["memory"] < 1024
        assert cost["told"] >= 2 + count // 8192
        if count == 1_000_000:
            assert ratio <= 2.5
    most, least = COUNTS[-1], COUNTS[0]
    assert loaded.cost[most]["cpu"] <= 1.5 * loaded.cost[least]["cpu"] * most / least


Question = Callable[[str], object]


@pytest.fixture
def shelf(loaded: Loaded) -> Iterator[dict[int, Record]]:
    """The records, open."""
    opened = {count: records.open(path) for count, path in loaded.paths.items()}
    yield opened
    for record in opened.values():
        record.close()


def percentiles(question: Question, typed: Sequence[str]) -> tuple[float, float, float]:
    """Median and 95th percentile of the processor's milliseconds, and the latter by the wall clock, after warm-up."""
    for text in typed[:WARM]:
        question(text)
    worked, taken = [], []
    for text in typed[WARM:]:
        begun, cpu = time.perf_counter(), time.process_time()
        question(text)
        worked.append((time.process_time() - cpu) * 1000)
        taken.append((time.perf_counter() - begun) * 1000)
    place = int(len(taken) * 0.95)
    return statistics.median(worked), sorted(worked)[place], sorted(taken)[place]


def questions(record: Record) -> dict[str, tuple[Question, float]]:
    """What is asked, and in how many milliseconds at the 95th percentile it is to be answered."""

    def exact(text: str) -> object:
        with record.read() as conn:
            found = candidates.exact(record, conn, asked(text))
        assert found
        return found

    def find(text: str) -> object:
        with record.read() as conn:
            return candidates.find(record, conn, asked(text))

    return {
        "exact": (exact, 1.0),
        "look-alike": (find, 5.0),
        "slip": (find, 5.0),
        "two unreadable": (find, 5.0),
        "whole check": (lambda text: checking.check(record, text), 25.0),
    }


def typed_as(count: int) -> dict[str, list[str]]:
    """How numbers of the list are typed, by question."""
    chance = random.Random(9)
    apart_from_hub = count - (HUB + part_lists.FAMILY if count == COUNTS[-1] else 0)
    known = [number for number, _ in part_lists.numbers(count)[:apart_from_hub]]
    drawn = [chance.choice(known) for _ in range(ASKED)]
    return {
        "exact": drawn,
        "look-alike": [part_lists.look_alike(one) for one in drawn],
        "slip": [part_lists.slipped(one, chance) for one in drawn],
        "two unreadable": [part_lists.worn(one, chance) for one in drawn],
        "whole check": drawn,
    }


def test_answers_do_not_wait_for_the_list_to_end(shelf: dict[int, Record]) -> None:
    """Candidates and whole checks by length of list; absolute figures are held in the long form, growth in both."""
    medians: dict[str, list[float]] = {}
    for count, record in shelf.items():
        typed = typed_as(count)
        for name, (question, bound) in questions(record).items():
            median, tail, wall = percentiles(question, typed[name])
            slow = pace()
            medians.setdefault(name, []).append(median)
            said = f"{bound:g} ms at 1,000,000 (wall {wall:.2f} ms)"
            note_held(f"{name}, {count:,} numbers, p95", tail / 1000, bound / 1000, slow, said)
            if FULL:
                assert tail <= bound * slow, name
    for name, of_lengths in medians.items():
        assert of_lengths[-1] <= 4 * of_lengths[0] + 0.5, name


def test_what_is_slipped_or_worn_is_found(shelf: dict[int, Record]) -> None:
    """Among the candidates, in the longest list, every time: speed must not come of looking less."""
    count = COUNTS[-1]
    record, typed = shelf[count], typed_as(count)
    for name in ("look-alike", "slip", "two unreadable"):
        missed = []
        for meant, text in list(zip(typed["exact"], typed[name], strict=True))[:100]:
            with record.read() as conn:
                found = candidates.find(record, conn, asked(text), most=400)
            if meant not in {one.number for one in found}:
                missed.append((meant, text))
        assert missed == [], name


def test_a_hub_is_cut_and_says_so(shelf: dict[int, Record]) -> None:
    """A number with very many equivalents: answered within 100 ms, with the first few hundred and a word about the rest."""
    record = shelf[COUNTS[-1]]
    member = part_lists.numbers(COUNTS[-1])[-7][0]
    for text in (part_lists.HUB, member):
        slow = pace()
        _, tail, wall = percentiles(lambda asked: checking.check(record, asked), [text] * (WARM + 40))
        note_held(
            f"hub of {HUB:,}, asked {text}, p95", tail / 1000, 0.1, slow, f"100 ms at 100,000 (wall {wall:.1f} ms)"
        )
        answer = checking.check(record, text)
        assert answer.bounded
        assert len(answer.leads_to) == 500
        if FULL:
            assert tail <= 100 * slow
