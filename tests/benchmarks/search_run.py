"""One measured run of the search in a process of its own: `python -m tests.benchmarks.search_run RECORD`.

Reads the index from its file (or builds it), warms up, asks queries of one to five words with a slip in each, and prints
one JSON object: milliseconds, mebibytes, seconds.
"""

from __future__ import annotations

import json
import random
import sys
import time
from pathlib import Path
from typing import Any

QUERIES = 100
FUZZY = 3


def peak_mib() -> float:
    """The most memory this process has held, in MiB."""
    for line in Path("/proc/self/status").read_text().splitlines():
        if line.startswith("VmHWM"):
            return int(line.split()[1]) / 1024
    return 0.0


def percentile(times: list[float], share: float) -> float:
    """The time in milliseconds under which that share of the times lies."""
    ordered = sorted(times)
    return round(1000 * ordered[min(len(ordered) - 1, int(share * len(ordered)))], 2)


def measure(path: Path) -> dict[str, Any]:
    """All figures of the search itself."""
    from store import records, search
    from store.search import index
    from store.sqlite.engine import rows
    from tests.benchmarks.notes import queries

    record = records.open(path)
    kept = index.file_of(record)
    said: dict[str, Any] = {"had_file": kept.exists()}
    began = time.perf_counter()
    search.find(record, "solenoid")
    said["first_search_seconds"] = round(time.perf_counter() - began, 2)
    said["file_mib"] = round(kept.stat().st_size / 2**20, 1) if kept.exists() else 0
    with record.read() as conn:
        ((count,),) = rows(conn, "SELECT max(id) FROM note")
        rng = random.Random(3)
        some = [rng.randrange(1, count + 1) for _ in range(3000)]
        texts = [rows(conn, "SELECT text FROM note WHERE id = ?", (n,))[0][0] for n in some]
    said["notes"] = count
    said["words"] = len(record.cache["search"].lexicon)
    all_times: list[float] = []
    for words in range(1, 6):
        times, empty = [], 0
        for n, (_, asked) in enumerate(queries(words, texts, words, QUERIES + 10)):
            began = time.perf_counter()
            answer = search.find(record, asked)
            if n >= 10:
                times.append(time.perf_counter() - began)
                empty += not answer.hits
        all_times += times
        said[f"words_{words}"] = {"p50": percentile(times, 0.5), "p95": percentile(times, 0.95), "without_hits": empty}
    said["p50"], said["p95"], said["worst"] = (
        percentile(all_times, 0.5),
        percentile(all_times, 0.95),
        percentile(all_times, 1),
    )
    said["peak_mib"] = round(peak_mib())
    record.close()
    return said


def beside(path: Path) -> dict[str, Any]:
    """Two plain ways over the same notes: FTS5 asked with the right spelling, and rapidfuzz over every text."""
    import sqlite3

    from rapidfuzz import fuzz, process

    from tests.benchmarks.notes import queries

    raw = sqlite3.connect(path)
    every = [text for (text,) in raw.execute("SELECT text FROM note ORDER BY id")]
    raw.close()
    fts = sqlite3.connect(":memory:")
    fts.execute("CREATE VIRTUAL TABLE t USING fts5(text, columnsize=0)")
    began = time.perf_counter()
    fts.executemany("INSERT INTO t(rowid, text) VALUES (?, ?)", enumerate(every, 1))
    fts.execute("INSERT INTO t(t) VALUES ('optimize')")
    said: dict[str, Any] = {"fts5_build_seconds": round(time.perf_counter() - began, 1)}
    rng = random.Random(3)
    texts = [rng.choice(every) for _ in range(3000)]
    for name, order in (("fts5_newest", "rowid DESC"), ("fts5_rank", "rank")):
        times = []
        for words in range(1, 6):
            for right, _ in queries(words, texts, words, QUERIES if order != "rank" else 20):
                match = " ".join(f'"{word}"' for word in right.split())
                began = time.perf_counter()
                fts.execute(f"SELECT rowid, text FROM t WHERE t MATCH ? ORDER BY {order} LIMIT 50", (match,)).fetchall()
                times.append(time.perf_counter() - began)
        said[name] = {"p50": percentile(times, 0.5), "p95": percentile(times, 0.95)}
    times = []
    for _, asked in queries(3, texts, 3, FUZZY):
        began = time.perf_counter()
        process.extract(asked, every, scorer=fuzz.token_set_ratio, processor=None, score_cutoff=50, limit=50)
        times.append(time.perf_counter() - began)
    said["rapidfuzz_over_all"] = {"p50": percentile(times, 0.5), "worst": percentile(times, 1)}
    return said


if __name__ == "__main__":
    what = beside if "--beside" in sys.argv else measure
    print(json.dumps(what(Path(sys.argv[1]))))
