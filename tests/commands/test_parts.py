"""The commands for parts: the JSON of the contract, exit codes, one line a refusal."""

from __future__ import annotations

import json
from pathlib import Path
from typing import Any

import pytest
from click.testing import CliRunner, Result

from store import jobs
from store.errors import Refused
from store.records import Record
from tests import part_lists
from tui.commands import cli


@pytest.fixture
def path(record: Record, tmp_path: Path) -> str:
    """The hand-made lists and one core."""
    part_lists.fill(record, tmp_path)
    jobs.take_in(record, model="KS-100", serial="5", tag="77")
    record.close()
    return str(record.path)


def run(*arguments: str) -> Result:
    return CliRunner().invoke(cli, arguments)


def answer(*arguments: str) -> Any:
    done = run(*arguments, "--json")
    assert done.exit_code == 0, done.output
    return json.loads(done.stdout)


def test_check_as_the_contract_has_it(path: str) -> None:
    """Candidates, paths with their steps, trust, evidence, conflicts; the model's attributes with their states."""
    found = answer("parts", "check", "br100", "--on", "KS-100", "--record", path)
    assert found["asked"] == "br100"
    assert {"number": "BR-100", "maker": "Alder", "how": "exact"}.items() <= found["candidates"][0].items()
    second = found["leads_to"][1]
    assert {
        "number": "BR-102",
        "maker": "Alder",
        "trust": "dated source",
        "fitted": 0,
        "came_back": 0,
    }.items() <= second.items()
    step = {
        "from": "BR-100",
        "relation": "superseded-by",
        "to": "BR-101",
        "source": "List 1",
        "caveat": "",
        "dated": "2019-01-01",
    }
    assert step.items() <= second["path"][0].items()
    assert found["conflicts"] == []
    twin = answer("parts", "check", "DR-90L", "--on", "KS-100", "--record", path)["on"]
    assert (twin["model"], twin["verdict"]) == ("KS-100", "does not fit")
    assert {"name": "rotation", "part": "ccw", "model": "cw from drive end", "state": "differs"}.items() <= twin[
        "attributes"
    ][0].items()
    assert "on" not in answer("parts", "check", "DR-90L", "--record", path)
    assert len(answer("parts", "check", "LP-1", "--record", path)["conflicts"]) == 1


def test_check_in_words(path: str) -> None:
    """A person reads the same: how it was found, each step, what is stopped, what contradicts, what goes on the model."""
    said = run("parts", "check", "O?D-?", "--record", path).stdout
    assert "OLD-7" in said
    assert "OLD-7 same as KS-100 (customer's list, 2022-05-01)" in said
    assert "brushes" in said
    assert (
        "NOT BAD-1: do not use BAD-1 of Elm (own bench, 2024-03-01); cracks at the neck"
        in run("parts", "check", "DR-90", "--record", path).stdout
    )
    assert "CONFLICT  each is said to supersede the other" in run("parts", "check", "XB-1", "--record", path).stdout
    assert "none is the very number" in run("parts", "check", "BR-10", "--record", path).stdout
    assert "no number like" in run("parts", "check", "QQQ-777", "--record", path).stdout


def test_size_ranks_and_warns(path: str) -> None:
    """Sizes as exact text, the tolerance as asked, the inch part marked."""
    found = answer("parts", "size", "brush", "width=8", "thickness=16 mm", "--within", "0.1", "--record", path)
    assert [m["number"] for m in found["matches"]] == ["SUB-1", "BR-100"]
    assert found["within"] == {"value": "0.1", "unit": "mm"}
    assert found["matches"][1]["sizes"][0] == {
        "name": "width", "value": "0.3125", "unit": "in", "over": "-0.0625",
        "warning": "an inch brush in a metric holder may not fit: 0.062 mm under",
    }  # fmt: skip
    said = run(
        "parts", "size", "bushing", "housing-bore=16", "journal=12.5", "--within", "0.06", "--record", path
    ).stdout
    assert "tight in the housing" in said
    assert "no drive is listed" in run("parts", "size", "drive", "bore=3", "--record", path).stdout


@pytest.mark.parametrize(
    ("arguments", "why"),
    [
        (("check", ""), "type a number"),
        (("check", "????"), "too little"),
        (("check", "BR-100", "--on", "KS-999"), "no model"),
        (("size", "brush", "width"), "NAME=VALUE"),
        (("size", "brush", "width=wide"), "wide"),
        (("size", "brush", "width=8", "--within", "0"), "above nothing"),
        (("fit", "77", "DR-90L"), "say why"),
        (("fit", "78", "DR-90"), "no job"),
        (("fit", "77", ""), "number is empty"),
    ],
)
def test_what_is_refused(path: str, arguments: tuple[str, ...], why: str) -> None:
    """One line that says why."""
    done = run("parts", *arguments, "--record", path)
    assert isinstance(done.exception, Refused)
    assert why in str(done.exception)
    assert "\n" not in str(done.exception)


def test_fit_with_and_without_a_reason(path: str) -> None:
    """What the check said and the reason stay with the part."""
    made = answer("parts", "fit", "77", "dr 90", "--lot", "L7", "--supplier", "Northgate", "--record", path)
    assert {
        "tag": "77",
        "number": "dr 90",
        "lot": "L7",
        "supplier": "Northgate",
        "quantity": 1,
        "why": "",
    }.items() <= made.items()
    forced = run("parts", "fit", "77", "DR-90L", "--because", "customer turns it round", "--record", path)
    assert (forced.exit_code, forced.stdout.startswith("77: DR-90L fitted; does not fit")) == (0, True)
