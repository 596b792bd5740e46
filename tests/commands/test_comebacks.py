"""The review of comebacks by command: the owner's report as a file and on paper, text of eighty columns, refusals."""

from __future__ import annotations

import json
from io import BytesIO
from pathlib import Path

import pypdf
import pytest
from click.testing import CliRunner, Result

from store.records import Record
from tests import shop
from tui.commands import cli


def run(*arguments: str) -> Result:
    """The command in this process; a refusal is its exit code and a line."""
    return CliRunner().invoke(cli, arguments)


@pytest.fixture
def demo_path(demo: Record) -> str:
    """The demo record, closed."""
    demo.close()
    return str(demo.path)


@pytest.fixture
def empty_path(record: Record) -> str:
    """A record without a job, closed."""
    record.close()
    return str(record.path)


def words(file: Path) -> str:
    """All text of a PDF, white space folded."""
    return " ".join(" ".join(page.extract_text() for page in pypdf.PdfReader(BytesIO(file.read_bytes())).pages).split())


def test_the_report_holds_every_kind_or_the_one_asked_for(demo_path: str, tmp_path: Path) -> None:
    """Without --by each kind of group is in the PDF; with it that kind alone. Period and outcomes are those asked for."""
    every, lots = tmp_path / "every.pdf", tmp_path / "lots.PDF"
    asked = ["--since", "2024-06-01", "--until", "2026-11-27", "--count", "part", "--record", demo_path]
    assert run("comebacks", "-o", str(every), *asked).output.strip() == str(every)
    assert run("comebacks", "--by", "lot", "-o", str(lots), *asked).exit_code == 0
    for kind in ("model", "part", "supplier", "lot", "assembler", "finding"):
        assert f"By {kind}" in words(every)
        assert (f"By {kind}" in words(lots)) is (kind == "lot")
    for said in ("2024-06-01", "2026-11-27", "CS-4417"):
        assert said in words(lots)
    assert "workmanship" not in words(lots)


def test_text_keeps_to_eighty_columns(demo_path: str, tmp_path: Path) -> None:
    """The text says the same as the PDF's first page, names the jobs behind, and no line is wider than 80."""
    file = tmp_path / "comebacks.txt"
    assert run("comebacks", "--until", "2026-11-27", "-o", str(file), "--record", demo_path).exit_code == 0
    lines = file.read_text().splitlines()
    assert max(map(len, lines)) <= 80
    text = " ".join(" ".join(lines).split())
    for said in (
        "Hollow Lane Rebuilders",
        "lot CS-4417: more than the rest",
        "false alarms allowed: 10%",
        "jobs 1242,",
    ):
        assert said in text
    shown = run("comebacks", "--by", "lot", "--record", demo_path).output.splitlines()
    assert max(map(len, shown)) <= 80


def test_json_and_csv_stay_as_they_were(demo_path: str, tmp_path: Path) -> None:
    """The file holds what --json prints."""
    file = tmp_path / "lots.json"
    assert run("comebacks", "--by", "lot", "-o", str(file), "--record", demo_path).exit_code == 0
    printed = json.loads(run("comebacks", "--by", "lot", "--json", "--record", demo_path).output)
    assert json.loads(file.read_text()) == printed
    assert set(printed["words"][0]) == {"word", "back", "of_back", "other", "of_other"}


def test_where_nothing_prints_the_file_is_named(
    demo_path: str, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    """Without `lp`: one line that says so and where the report is; the file is a PDF."""
    monkeypatch.setattr("store.reports.printing.shutil.which", lambda name: None)
    monkeypatch.setattr("tempfile.gettempdir", lambda: str(tmp_path))
    refused = run("comebacks", "--print", "--record", demo_path)
    assert refused.exit_code == 1
    assert "has no `lp` to print with; the report is saved as" in str(refused.exception or refused.output)
    (saved,) = tmp_path.glob("comebacks-*.pdf")
    assert saved.read_bytes().startswith(b"%PDF-")


@pytest.mark.parametrize("ending", ["pdf", "txt", "csv", "json"])
def test_an_empty_record_has_words(empty_path: str, tmp_path: Path, ending: str) -> None:
    """Nothing was ever released: every kind of file is written, and says so where it has words."""
    file = tmp_path / f"empty.{ending}"
    assert run("comebacks", "-o", str(file), "--record", empty_path).exit_code == 0
    if ending in ("pdf", "txt"):
        said = words(file) if ending == "pdf" else file.read_text()
        assert "nothing was released in this period" in said


def test_two_comebacks_in_all(record: Record, tmp_path: Path) -> None:
    """Counts and words, no ranking, in text and PDF."""
    from store import files

    shop.fill(record, tmp_path)
    jobs = tmp_path / "jobs.csv"
    jobs.write_text(
        "tag,model,serial,taken_in,outcome,ended,earlier_tag,comeback_outcome\n"
        "R1,KS-100,S1,2026-01-01,released,2026-01-10,,\nR2,KS-100,S2,2026-01-01,released,2026-01-10,,\n"
        "C1,KS-100,S1,2026-02-01,open,,R1,part\nC2,KS-100,S2,2026-03-01,open,,R2,part\n"
    )
    files.load(record, [jobs])
    record.close()
    for ending in ("pdf", "txt"):
        file = tmp_path / f"two.{ending}"
        assert run("comebacks", "-o", str(file), "--record", str(record.path)).exit_code == 0
        said = words(file) if ending == "pdf" else " ".join(file.read_text().split())
        assert "every release came back" in said
        assert "too few to rank anything" in said


def test_another_ending_is_refused(empty_path: str, tmp_path: Path) -> None:
    """The refusal names the endings there are; nothing is written."""
    file = tmp_path / "review.doc"
    refused = run("comebacks", "-o", str(file), "--record", empty_path)
    assert refused.exit_code == 1
    assert ".pdf, .txt, .csv or .json" in str(refused.exception or refused.output)
    assert not file.exists()
