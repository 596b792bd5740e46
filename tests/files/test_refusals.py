"""Files that cannot be loaded: every bad line named with its column and why, and nothing written."""

from __future__ import annotations

from pathlib import Path

import pytest

from store import audit, files
from store.errors import FileRefused
from store.records import Record
from tests import shop

LIMITS = "model,characteristic,unit,low,high,source\n"


def head(record: Record) -> str:
    with record.read() as conn:
        return audit.head(conn)


@pytest.mark.parametrize(
    ("name", "text", "said"),
    [
        (
            "limits.csv",
            LIMITS + "KS-100,brush-length,mm,9,5,x\n",
            "limits.csv:2 low: brush-length: low 9 is above high 5",
        ),
        (
            "limits.csv",
            LIMITS + "KS-100,brush-length,N,9,,x\n",
            "limits.csv:2 unit: brush-length: N is not a unit of length",
        ),
        (
            "limits.csv",
            LIMITS + "KS-100,brush-lenght,mm,9,,x\n",
            "limits.csv:2 characteristic: no characteristic 'brush-lenght'; did you mean brush-length",
        ),
        ("limits.csv", LIMITS + "KS-999,brush-length,mm,9,,x\n", "limits.csv:2 model: no model 'KS-999'"),
        (
            "limits.csv",
            LIMITS + "KS-100,brush-length,mm,9,,x\nKS-100,brush-length,mm,9,,x\n",
            "limits.csv:3 characteristic: brush-length both stands in line 2 already",
        ),
        ("limits.csv", LIMITS + "KS-100,brush-length,mm,,,x\n", "a limit has a low end, a high end or both"),
        (
            "limits.csv",
            LIMITS + "KS-100,brush-length,mm,9,,\n",
            "limits.csv:2 source: nothing is written here, and it is needed",
        ),
        (
            "limits.csv",
            LIMITS + "KS-100,brush-length,mm,abc,,x\n",
            "limits.csv:2 low: brush-length: low: 'abc' is no reading",
        ),
        (
            "limits.csv",
            LIMITS + "KS-100,brush-length,mm,9\n",
            "limits.csv:2 high: 4 cells where the header has 6; is the file cut off?",
        ),
        (
            "limits.csv",
            LIMITS + 'KS-100,brush-length,mm,9,,"x\n',
            "a quote is opened and never closed; is the file cut off?",
        ),
        (
            "limits.csv",
            "model,characteristic,unit,lowest,source\nKS-100,brush-length,mm,9,x\n",
            "limits.csv:1 lowest: no such column in limits",
        ),
        ("limits.csv", "model,model,characteristic,unit,source\n", "limits.csv:1 model: the column is there twice"),
        ("what.csv", "a,b,c\n1,2,3\n", "no kind of file has these columns"),
        ("empty.csv", "", "the file is empty"),
        (
            "jobs.csv",
            "tag,model,serial,taken_in\n1,KS-100,5,yesterday\n",
            "jobs.csv:2 taken_in: 'yesterday' is no date",
        ),
        (
            "jobs.csv",
            "tag,model,serial,taken_in,outcome\n1,KS-100,5,2026-01-01,gone\n",
            "jobs.csv:2 outcome: 'gone' is no outcome",
        ),
        (
            "jobs.csv",
            "tag,model,serial,taken_in,earlier_tag\n1,KS-100,5,2026-01-01,77\n",
            "jobs.csv:2 earlier_tag: no job with the tag '77'",
        ),
        (
            "readings.csv",
            "tag,stage,characteristic,value\n77,as-found,brush-length,11\n",
            "readings.csv:2 tag: no job with the tag '77'",
        ),
        (
            "gauges.csv",
            "gauge,kind,unit,resolution,expanded_uncertainty\nG9,caliper,furlong,0.01,0.03\n",
            "gauges.csv:2 unit: 'furlong' is no unit",
        ),
        ("models.csv", "model,kind\nKS-777,pump\n", "models.csv:2 kind: 'pump' is no kind of machine"),
        ("models.csv", "model,kind,bars\nKS-777,starter,-4\n", "models.csv:2 bars: '-4' is not a whole number"),
        (
            "people.csv",
            "initials,name,may\nXY,Xe Ypsilon,fly\n",
            "people.csv:2 may: 'fly' is not something a person may do",
        ),
        ("shop.csv", "name,value\npolish,much\n", "shop.csv:2 value: polish:"),
    ],
)
def test_bad_files(record: Record, tmp_path: Path, name: str, text: str, said: str) -> None:
    """One clear line with file, line and column; the record is as it was."""
    shop.fill(record, tmp_path)
    before = head(record)
    path = tmp_path / "in" / name
    path.parent.mkdir()
    path.write_text(text, encoding="utf-8")
    with pytest.raises(FileRefused) as caught:
        files.load(record, [path])
    assert any(said in str(line) for line in caught.value.lines), [str(line) for line in caught.value.lines]
    assert head(record) == before


def test_wrong_encoding_and_endless_lines(record: Record, tmp_path: Path) -> None:
    """Latin-1, UTF-16, a NUL byte, a line of a hundred megabytes: named by line, and not read on."""
    shop.fill(record, tmp_path)
    before = head(record)
    path = tmp_path / "limits.csv"
    path.write_bytes(LIMITS.encode() + "KS-100,brush-length,mm,9,,Prüfblatt\n".encode("latin-1"))
    with pytest.raises(FileRefused, match=r"limits.csv:2: not UTF-8 after"):
        files.load(record, [path])
    path.write_bytes((LIMITS + "x\n").encode("utf-16"))
    with pytest.raises(FileRefused, match=r"not UTF-8|NUL"):
        files.load(record, [path])
    path.write_bytes(LIMITS.encode() + b"KS-100,brush-length,mm,9,," + b"x" * 100_000_000)
    with pytest.raises(FileRefused, match="longer than 1,000,000 bytes"):
        files.load(record, [path])
    assert head(record) == before


def test_all_bad_lines_are_named_and_good_files_wait(record: Record, tmp_path: Path) -> None:
    """Ten bad lines among a thousand and a good file beside them: all ten named, nothing of either written."""
    shop.fill(record, tmp_path)
    before = head(record)
    lines = ["tag,model,serial,taken_in"]
    lines += [f"{n},KS-100,{n},{'never' if n % 100 == 7 else '2026-01-02'}" for n in range(1, 1001)]
    bad, good = tmp_path / "jobs.csv", tmp_path / "people.csv"
    bad.write_text("\n".join(lines) + "\n")
    good.write_text("initials,name\nZZ,Zed Zander\n")
    with pytest.raises(FileRefused) as caught:
        files.load(record, [bad, good])
    assert [line.line for line in caught.value.lines] == [n * 100 + 8 for n in range(10)]
    assert head(record) == before


def test_check_only_reports(record: Record, tmp_path: Path) -> None:
    """--check says what would be loaded and loads nothing."""
    shop.fill(record, tmp_path)
    before = head(record)
    path = tmp_path / "people.csv"
    path.write_text("initials,name\nZZ,Zed Zander\n")
    assert [(d.kind, d.lines) for d in files.load(record, [path], check=True)] == [("people", 1)]
    assert head(record) == before
