"""The command line: exit codes, one line a refusal, JSON as the contract has it, and an example for every command."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path
from typing import Any

import click
import pytest

from store.records import Record
from tests import shop
from tui.commands import COMMANDS, cli

ROOT = Path(__file__).resolve().parents[2]


def run(*arguments: str, **env: str) -> subprocess.CompletedProcess[str]:
    """The command as a process."""
    import os

    return subprocess.run(
        [sys.executable, "-m", "tui", *arguments],
        capture_output=True,
        text=True,
        check=False,
        cwd=ROOT,
        env={**os.environ, **env},
    )


@pytest.fixture
def path(record: Record, tmp_path: Path) -> str:
    """The small shop with one core."""
    shop.fill(record, tmp_path)
    shop.core(record)
    record.close()
    return str(record.path)


def test_a_core_goes_through(path: str, tmp_path: Path) -> None:
    """Take in, read, judge, note, report, by command alone."""
    made = run("job", "new", "--model", "ks 100", "--serial", "99", "--record", path)
    assert (made.returncode, made.stdout.strip()) == (0, "1002")
    read = run("--record", path, "read", "1002", "brush-length", "11.4", "11.2", "11.5", "9.2", "--gauge", "CAL-1")
    assert read.returncode == 0
    assert (
        "brush length: out; brush 4 is 9.20 mm" in read.stdout
        or "brush length: out; brush 4 is 9.2 mm, 0.3 under the 9.5 minimum" in read.stdout
    )
    judged = json.loads(run("judge", "1002", "--json", "--record", path).stdout)
    assert set(judged) == {"tag", "model", "revision", "stages"}
    verdict = next(v for v in judged["stages"]["as-found"]["verdicts"] if v["characteristic"] == "brush-length")
    assert set(verdict) == {
        "characteristic", "component", "statistic", "value", "unit", "low", "high", "verdict", "because", "rule", "probability",
        "wear_used", "count", "expected", "worst_at", "source",
    }  # fmt: skip
    assert (verdict["value"], verdict["low"], verdict["verdict"], verdict["worst_at"]) == ("9.2", "9.5", "out", "4")
    out = tmp_path / "report.pdf"
    assert run("report", "1002", "-o", str(out), "--record", path).returncode == 0
    assert out.read_bytes()[:5] == b"%PDF-"


@pytest.mark.parametrize(
    ("arguments", "said"),
    [
        (("job", "show", "777"), "no job with the tag '777'"),
        (("judge", "777"), "no job with the tag '777'"),
        (("read", "1001", "brush-length", "1,234"), "may be 1.234 or 1234"),
        (("read", "1001", "brush-lenght", "11"), "did you mean brush-length"),
        (("read", "1001", "brush-length", "11", "--gauge", "XX-9"), "no gauge 'XX-9'"),
        (("--as", "NOBODY", "read", "1001", "brush-length", "11"), "no person with the initials 'NOBODY'"),
        (("job", "new", "--model", "KS-999", "--serial", "1"), "no model 'KS-999'"),
        (("job", "new", "--model", "KS-100", "--serial", "1", "--tag", "1001"), "the tag 1001 is taken"),
        (("job", "new", "--model", "KS-100", "--serial", "1", "--hours", "-5"), "is not a number of hours"),
        (("load", "/nowhere/x.csv"), "cannot be read"),
        (("save", "nothing", "x.csv"), "no kind of file 'nothing'"),
        (("shop", "set", "warranty", "1"), "did you mean warranty_days"),
        (("report", "1001", "-o", "x.doc"), "a report is saved as"),
        (("limits", "show", "KS-100", "--revision", "9"), "no revision of the sheet of KS-100 '9'"),
    ],
)
def test_refusals_are_one_line_and_exit_1(path: str, arguments: tuple[str, ...], said: str) -> None:
    """One line on stderr beginning `wearline:`; nothing on stdout."""
    done = run(*arguments, WEARLINE_RECORD=path)
    assert done.returncode == 1
    assert said in done.stderr
    assert done.stderr.startswith("wearline: ")
    assert done.stderr.count("\n") == 1
    assert done.stdout == ""


def test_wrong_usage_exits_2(path: str) -> None:
    """An option that there is not, a missing argument."""
    assert run("judge", WEARLINE_RECORD=path).returncode == 2
    assert run("job", "new", "--colour", "red", WEARLINE_RECORD=path).returncode == 2


def test_what_is_no_record_is_refused(tmp_path: Path) -> None:
    """A text file for a record."""
    text = tmp_path / "x.wearline"
    text.write_text("hello " * 1000)
    done = run("job", "list", WEARLINE_RECORD=str(text))
    assert (done.returncode, done.stderr) == (1, f"wearline: {text} is not a record of Wearline\n")


def test_a_load_of_bad_lines_names_them_all(path: str, tmp_path: Path) -> None:
    """Several bad lines: a line for the whole, then one each."""
    bad = tmp_path / "people.csv"
    bad.write_text("initials,name,may\nA B,Abe,bench\nCD,Cid,fly\n")
    done = run("load", str(bad), WEARLINE_RECORD=path)
    assert done.returncode == 1
    assert done.stderr.splitlines()[0] == "wearline: 2 bad lines, nothing was written"
    assert len(done.stderr.splitlines()) == 3


def every(command: click.Command, name: tuple[str, ...] = ()) -> list[tuple[tuple[str, ...], click.Command]]:
    """All commands below one, with their names."""
    if not isinstance(command, click.Group):
        return [(name, command)]
    context = click.Context(command)
    found: list[tuple[tuple[str, ...], click.Command]] = []
    for child in command.list_commands(context):
        made = command.get_command(context, child)
        assert made is not None, child
        found += every(made, (*name, child))
    return found


@pytest.mark.parametrize(("name", "command"), [(" ".join(n), c) for n, c in every(cli)])
def test_every_command_has_help_and_an_example(name: str, command: click.Command) -> None:
    """`--help` says what a command does and shows it done."""
    assert command.help
    assert command.epilog is not None
    assert command.epilog.startswith(f"Example: wearline {name}")


def test_every_command_is_in_the_readme() -> None:
    """The table of the README names every group of commands."""
    readme = (ROOT / "README.md").read_text(encoding="utf-8")
    assert [name for name in COMMANDS if f"`wearline {name}" not in readme] == []


def test_stored_text_cannot_steer_the_terminal(path: str) -> None:
    """Control characters in a complaint come out as spaces."""
    run("job", "new", "--model", "KS-100", "--serial", "5", "--complaint", "a\x1b[31mred\x07", WEARLINE_RECORD=path)
    shown: Any = run("job", "show", "1002", WEARLINE_RECORD=path).stdout
    assert "\x1b" not in shown
    assert "\x07" not in shown
