"""`wearline plan`: the JSON of the contract, acceptance, and refusals in one line."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest
from click.testing import CliRunner, Result

from store import readings, shop
from store.errors import Refused
from store.readings import Entry
from store.records import Record
from tests import shop as small
from tui.commands import cli


@pytest.fixture
def path(record: Record, tmp_path: Path) -> str:
    """A core, tag 1001, to be turned for the last time."""
    small.fill(record, tmp_path)
    shop.put(record, "polish", "0.02 mm")
    tag = small.core(record).tag
    readings.add_all(record, tag, [Entry("commutator-diameter", "42.64")] * 4)
    readings.add(record, tag, "as-found", "commutator-runout", "0.12")
    return str(record.path)


def run(*arguments: str) -> Result:
    return CliRunner().invoke(cli, ["plan", "1001", *arguments])


def answer(*arguments: str) -> Any:
    done = run(*arguments, "--json")
    assert done.exit_code == 0, done.output
    return json.loads(done.stdout)


def test_lines_as_the_contract_has_them(path: str) -> None:
    """Component, action, why, formula, predictions by name with their unit; nothing is accepted yet."""
    found = answer("--record", path)
    (line,) = found["lines"]
    assert (found["tag"], line["component"], line["action"]) == ("1001", "commutator", "turn-last-cut")
    assert line["formula"].startswith("D - r - 2g - p = 42.64 - 0.12 - 2 x 0 - 0.02 = 42.5 mm")
    assert line["predicted"] == {"commutator-diameter": {"value": "42.5", "unit": "mm"}}
    assert found["rework"] == []


def test_accepted_done_and_held_against_what_was_left(path: str, record: Record) -> None:
    """The list says what came of it; a size other than predicted is marked."""
    entry = answer("--accept", "1", "--record", path)["rework"][0]
    assert (entry["action"], entry["outcome"]) == ("turn-last-cut", "open")
    readings.add_all(record, "1001", [Entry("commutator-diameter", "42.44", "as-left", gauge="MIC-1")] * 4)
    entry = answer("--done", str(entry["id"]), "--note", "took more", "--record", path)["rework"][0]
    assert (entry["outcome"], entry["note"]) == ("done", "took more")
    assert [h["beyond"] for h in entry["held"]] == [True]
    said = run("--record", path).output
    assert "predicted, not measured: commutator-diameter 42.5 mm" in said
    assert "0.06 apart, beyond the gauge's uncertainty" in said


@pytest.mark.parametrize(
    ("arguments", "why"),
    [
        (("--accept", "7"), "has no line 7"),
        (("--done", "7"), "has no line 7"),
        (("--accept", "1", "--decline", "1"), "say why"),
    ],
)
def test_refusals(path: str, arguments: tuple[str, ...], why: str) -> None:
    """One line each."""
    done = run(*arguments, "--record", path)
    assert done.exit_code == 1
    assert isinstance(done.exception, Refused)
    assert why in str(done.exception)


def test_a_prediction_enters_no_verdict(path: str) -> None:
    """Accepted and done, yet as left nothing is measured."""
    answer("--accept-all", "--record", path)
    answer("--done", "1", "--record", path)
    judged = json.loads(CliRunner().invoke(cli, ["judge", "1001", "--json", "--record", path]).stdout)
    assert judged["stages"]["as-left"]["standing"]["in"] == 0
    diameter = [v for v in judged["stages"]["as-left"]["verdicts"] if v["characteristic"] == "commutator-diameter"]
    assert [(v["verdict"], v["value"], v["count"]) for v in diameter] == [("not measured", None, 0)]
