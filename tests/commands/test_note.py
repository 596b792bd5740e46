"""The commands for notes."""

from __future__ import annotations

import json
from pathlib import Path

import pytest

from store.records import Record
from tests import shop
from tests.commands.test_commands import run


@pytest.fixture
def path(record: Record, tmp_path: Path) -> str:
    """The small shop with one core, closed."""
    shop.fill(record, tmp_path)
    shop.core(record)
    record.close()
    return str(record.path)


def test_a_note_is_added_and_found(path: str) -> None:
    """A note is found by slips on either side; the JSON has the keys of the contract and no others."""
    added = run("note", "add", "1001", "sol contcts burnt", WEARLINE_RECORD=path)
    assert added.returncode == 0
    assert "looks like: solenoid: contacts burned" in added.stderr
    answer = json.loads(run("note", "find", "solinoid", "contacts", "--json", WEARLINE_RECORD=path).stdout)
    assert set(answer) == {"asked", "corrected", "hits"}
    assert answer["asked"] == "solinoid contacts"
    assert [set(hit) for hit in answer["hits"]] == [{"tag", "at", "by", "where", "text"}]
    assert answer["hits"][0]["text"] == "sol contcts burnt"
    answer = json.loads(run("note", "find", "burntt", "--json", WEARLINE_RECORD=path).stdout)
    assert answer["corrected"] == {"burntt": ["burnt"]}


def test_filters_and_limit(path: str) -> None:
    """Model, since and limit hold; what cannot be is refused in one line."""
    for text in ("armature one", "armature two"):
        run("note", "add", "1001", text, WEARLINE_RECORD=path)

    def hits(*options: str) -> int:
        return len(json.loads(run("note", "find", "armature", "--json", *options, WEARLINE_RECORD=path).stdout)["hits"])

    assert (hits(), hits("--limit", "1"), hits("--model", "KA-300"), hits("--model", "ks100")) == (2, 1, 0, 2)
    assert (hits("--since", "2099"), hits("--comeback", "yes"), hits("--in", "notes")) == (0, 0, 2)
    refused = run("note", "find", "armature", "--since", "yesterday", WEARLINE_RECORD=path)
    assert (refused.returncode, refused.stderr.count("\n")) == (1, 1)
    assert "since is a date such as" in refused.stderr


def test_a_query_without_a_word(path: str) -> None:
    """Nothing to look for is said in one line, not an error."""
    for asked in ('"', "*", "😀"):
        done = run("note", "find", asked, WEARLINE_RECORD=path)
        assert (done.returncode, done.stderr, done.stdout) == (0, "type a word to look for\n", "")


def test_a_finding_is_taken_and_found(path: str) -> None:
    """A finding is entered by command and found by the search."""
    assert run("note", "finding", "1001", "solenoid", "contacts burned", WEARLINE_RECORD=path).returncode == 0
    found = json.loads(run("note", "find", "contacts", "--json", WEARLINE_RECORD=path).stdout)["hits"]
    assert [(hit["where"], hit["text"]) for hit in found] == [("finding", "solenoid: contacts burned")]
    assert run("note", "finding", "1001", "", "x", WEARLINE_RECORD=path).returncode == 1


def test_shorthand(path: str) -> None:
    """A line is entered, shown, and dropped; half a line is wrong usage."""
    assert run("note", "shorthand", "hm", "hammer", WEARLINE_RECORD=path).returncode == 0
    assert json.loads(run("note", "shorthand", "--json", WEARLINE_RECORD=path).stdout)["hm"] == "hammer"
    assert run("note", "shorthand", "hm", "--drop", WEARLINE_RECORD=path).returncode == 0
    assert "hm" not in json.loads(run("note", "shorthand", "--json", WEARLINE_RECORD=path).stdout)
    assert run("note", "shorthand", "hm", WEARLINE_RECORD=path).returncode == 2


def test_the_index_is_made_and_compared(path: str) -> None:
    """`note index` makes it, `--check` compares it, `verify` passes."""
    assert run("note", "index", WEARLINE_RECORD=path).stdout == "1 texts\n"
    assert run("note", "index", "--check", WEARLINE_RECORD=path).stdout == "the search index agrees with the record\n"
    assert run("verify", WEARLINE_RECORD=path).returncode == 0


def test_text_cannot_steer_the_terminal(path: str) -> None:
    """Control characters in a note come out as spaces."""
    run("note", "add", "1001", "magnet \x1b[31mred\x07", WEARLINE_RECORD=path)
    shown = run("note", "find", "magnet", WEARLINE_RECORD=path).stdout
    assert "\x1b" not in shown
    assert "\x07" not in shown
