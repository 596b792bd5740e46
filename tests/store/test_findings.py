"""Findings of a job."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest

from store import findings
from store.errors import NotFound, Refused
from store.records import Record
from tests import shop


@pytest.fixture
def job(record: Record, tmp_path: Path) -> str:
    """A job in the small shop."""
    shop.fill(record, tmp_path)
    return shop.core(record).tag


def test_add_and_read(record: Record, job: str) -> None:
    """A finding is kept with who and when, component, mode, mechanism and cause apart."""
    made = findings.add(
        record, job, " solenoid ", "contacts burned", mechanism="overheating", cause="overload", note="disc"
    )
    assert findings.of_job(record, job) == (made,)
    assert (made.component, made.mode, made.mechanism, made.cause, made.note) == (
        "solenoid", "contacts burned", "overheating", "overload", "disc",
    )  # fmt: skip
    assert (made.at, made.by) == ("2026-11-02T08:00:00Z", "shop")


def test_refusals(record: Record, job: str) -> None:
    """No component, no mode, a text too long, no such job: refused, nothing is written."""
    for component, mode in (("", "worn"), ("drive", " ")):
        with pytest.raises(Refused, match="needs its"):
            findings.add(record, job, component, mode)
    with pytest.raises(Refused, match="at most"):
        findings.add(record, job, "drive", "worn", note="x" * 10_001)
    with pytest.raises(NotFound):
        findings.add(record, "777", "drive", "worn")
    assert findings.of_job(record, job) == ()


def test_offers_learn_from_the_shop(record: Record, job: str) -> None:
    """What the shop took before is offered with the mechanism and cause it gave, and its own findings are offered too."""
    assert findings.offers(record, "sol contcts burnt")[0].cause == ""
    findings.add(record, job, "solenoid", "contacts burned", mechanism="electrical", cause="overload")
    findings.add(record, job, "tag", "soaked")
    first = findings.offers(record, "sol contcts burnt")[0]
    assert (first.mechanism, first.cause) == ("electrical", "overload")
    assert [(f.component, f.mode) for f in findings.offers(record, "tag soaked through")] == [("tag", "soaked")]


def test_nothing_heavy_before_a_search() -> None:
    """The modules of the search, its screen and its commands load neither numpy nor rapidfuzz until something is asked."""
    program = (
        "import sys, store.search, store.findings, store.shorthand, tui.screens.notes, tui.screens.job_notes, tui.commands.note; "
        "print([m for m in ('numpy', 'rapidfuzz', 'scipy') if m in sys.modules])"
    )
    assert subprocess.run([sys.executable, "-c", program], capture_output=True, check=True).stdout == b"[]\n"
