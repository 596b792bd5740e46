"""The power goes in the middle of a burst: what the screen showed as accepted is in the record, and the record is sound."""

from __future__ import annotations

import os
import random
import sqlite3
from pathlib import Path

import pytest

from store import files, jobs, judgements, readings, records
from store.catalogue import catalogue
from store.records import Record
from tests.screens.support import Terminal
from tui.widgets.sheet import CELL, LIMIT, NAME

FULL = os.environ.get("WEARLINE_FULL") == "1"
TIMES = 50 if FULL else 5
ROWS = ("commutator-diameter", "undercut-depth", "brush-length", "brush-side-clearance", "brush-spring-force")


def asked_job(record: Record, folder: Path) -> str:
    """A job with five rows of four readings."""
    lines = [
        f"KS-1,{name},{unit},0.1,4,own sheet" for name, unit in zip(ROWS, ("mm", "mm", "mm", "mm", "N"), strict=True)
    ]
    (folder / "models.csv").write_text("model,kind\nKS-1,starter\n")
    (folder / "limits.csv").write_text("model,characteristic,unit,low,count,source\n" + "\n".join(lines) + "\n")
    files.load(record, [folder / "models.csv", folder / "limits.csv"])
    return jobs.take_in(record, model="KS-1", serial="1").tag


def shown_as_accepted(screen: Terminal, labels: dict[str, str]) -> list[tuple[str, str]]:
    """Characteristic and text of every cell that stands on the screen without the mark of one being written."""
    found = []
    for line in screen.screen.display:
        name = labels.get(line[: NAME - 1].strip())
        if name is None:
            continue
        for n in range(4):
            begin = NAME + LIMIT + n * CELL
            text, mark = line[begin : begin + CELL - 2].strip(), line[begin + CELL - 2]
            if text[:1].isdigit() and mark in " ◂":
                found.append((name, text))
    return found


@pytest.mark.parametrize("seed", range(TIMES))
def test_killed_in_a_burst(record: Record, tmp_path: Path, seed: int) -> None:
    """SIGKILL at a random moment of a burst: accepted readings stand, integrity is ok, judgements agree with the readings."""
    tag = asked_job(record, tmp_path)
    labels = {c.label[: NAME - 1]: c.name for c in catalogue(record).all if c.name in ROWS}
    record.close()
    draw = random.Random(seed)
    sent = [f"{draw.randint(1, 9)}.{n:02d}" for n in range(20)]
    screen = Terminal(["--record", str(record.path)])
    try:
        screen.until(tag)
        screen.send(b"\r")
        screen.until("serial 1")
        begun = draw.randint(1, 20)
        screen.send("".join(f"{text}\r" for text in sent[:begun]).encode())
        screen.read(draw.uniform(0, 0.25))
        for text in sent[begun:]:
            screen.send(f"{text}\r".encode())
            if draw.random() < 0.1:
                break
    finally:
        screen.kill()
    seen = shown_as_accepted(screen, labels)

    raw = sqlite3.connect(record.path)
    assert raw.execute("PRAGMA integrity_check").fetchone() == ("ok",)
    raw.close()
    again = records.open(record.path)
    kept = readings.of_job(again, tag)
    in_record = [(r.characteristic, r.typed.text) for r in kept]
    assert [pair for pair in seen if pair not in in_record] == []
    assert [r.typed.text for r in kept] == sent[: len(kept)]
    job = jobs.find(again, tag)
    before = judgements.of_job(again, job, "as-found")
    with again.write() as conn:
        judgements.rebuild(again, conn, job)
    assert judgements.of_job(again, job, "as-found") == before
    again.close()
