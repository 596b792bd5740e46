"""`wearline gauges study FILE`: the published study, what is kept, and files that cannot be one."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest
from click.testing import CliRunner, Result

from store import gauges, readings, records, sheets, verify
from store.records import Record
from tests import shop
from tests.conftest import Writer
from tui.commands import cli

# Cano, Moguerza, Redchuk, Six Sigma with R (2012), ch. 5: 3 operators x 3 parts x 3 runs (read)
PUBLISHED = {
    "op1": ((1.27, 0.90, 1.09), (1.12, 1.09, 1.15), (1.73, 1.28, 1.77)),
    "op2": ((1.34, 1.32, 1.27), (1.24, 1.00, 1.14), (1.64, 1.65, 1.77)),
    "op3": ((1.09, 1.26, 1.09), (1.48, 1.15, 1.15), (1.64, 1.44, 1.68)),
}
STUDY = "part,person,value\n" + "".join(
    f"P{part},{person},{value}\n"
    for person, of in PUBLISHED.items()
    for part, runs in enumerate(of, 1)
    for value in runs
)


@pytest.fixture
def path(record: Record, tmp_path: Path) -> str:
    """The small shop."""
    shop.fill(record, tmp_path)
    return str(record.path)


def run(*arguments: str) -> Result:
    return CliRunner().invoke(cli, ["gauges", "study", *arguments])


def answer(*arguments: str) -> Any:
    done = run(*arguments, "--json")
    assert done.exit_code == 0, done.output
    return json.loads(done.stdout)


def test_the_published_study_from_a_file(path: str, write: Writer) -> None:
    """The components as printed; shares of the study variation; the pooled interaction and its alpha are said."""
    found = answer(str(write("study.csv", STUDY)), "--record", path)
    assert found["gauge"] == pytest.approx(0.14792656, abs=5e-9)
    assert found["repeatability"] == pytest.approx(0.14597518, abs=5e-9)
    assert found["study_variation"]["part"] == pytest.approx(0.25365123 / found["total"], abs=1e-7)
    assert (found["interaction_pooled"], found["alpha"]) == (True, 0.05)
    said = run(str(write("study.csv", STUDY)), "--record", path).output
    assert "3 parts x 3 people x 3 repeats, mm" in said
    assert "is pooled into repeatability (alpha 0.05)" in said


def test_says_which_limit_it_can_judge(path: str, write: Writer) -> None:
    """End play, 0.1 to 0.3 mm, is too fine for this gauge; a diameter from 45 to 42.5 is barely not."""
    file = str(write("study.csv", STUDY))
    held = answer(file, "--model", "KS-100", "--characteristic", "end-play", "--record", path)["against"]
    assert (held["verdict"], held["tolerance"]) == ("cannot", "0.2")
    assert held["share"] == pytest.approx(6 * 0.14792656 / 0.2, rel=1e-6)
    held = answer(file, "--model", "KS-100", "--characteristic", "commutator-diameter", "--record", path)["against"]
    assert (held["verdict"], held["tolerance"]) == ("cannot", "2.5")
    fine = STUDY.replace("0.", "10.0").replace("1.", "10.00")
    assert answer(str(write("fine.csv", fine)), "--record", path)["gauge"] < 0.05


def test_keeping_it_counts_in_every_verdict(path: str, write: Writer, record: Record) -> None:
    """What was in with the calibration alone is in doubt with the study's repeatability; the record still verifies."""
    tag = shop.core(record).tag
    readings.add(record, tag, "as-found", "end-play", "0.25", gauge="CAL-1")
    before = sheets.sheet(record, tag, "as-found").row("end-play").verdict
    done = run(str(write("study.csv", STUDY)), "--gauge", "CAL-1", "--keep", "--record", path)
    assert done.exit_code == 0, done.output
    with_study = records.open(record.path)
    assert gauges.find(with_study, "CAL-1").repeatability == "0.145975184"
    after = sheets.sheet(with_study, tag, "as-found").row("end-play").verdict
    with_study.close()
    assert (before.value, after.value) == ("in", "in doubt")
    assert verify.verify(record).wrong is None


@pytest.mark.parametrize(
    ("text", "why"),
    [
        ("part,person\nA,B\n", "lacks value"),
        ("part,person,value,day\nA,B,1,2\n", "'day' is no column"),
        ("part,person,value\nA,B,eleven\n", "study.csv:2 value"),
        ("part,person,value\nA,B,1\nA,C,1\nB,B,1\n", "part B was not measured by C"),
        ("part,person,value\nA,B,1\n", "at least two parts"),
    ],
    ids=["column lacks", "unknown column", "no number", "gap", "too few"],
)
def test_files_that_are_no_study(path: str, write: Writer, text: str, why: str) -> None:
    """One clear line each."""
    from store.errors import Refused

    done = run(str(write("study.csv", text)), "--record", path)
    assert done.exit_code == 1
    assert isinstance(done.exception, Refused)
    assert why in str(done.exception)
