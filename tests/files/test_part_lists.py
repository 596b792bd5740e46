"""Files of numbers, relations, fits, sizes, attributes and fitted parts: what they refuse, and that nothing is written then."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path

import pytest

from store import audit, files, jobs
from store.errors import FileRefused
from store.records import Record
from store.sqlite.engine import rows
from tests import part_lists

FULL = os.environ.get("WEARLINE_FULL") == "1"
Write = Callable[[str, str], Path]
NUMBERS = "number,kind,maker\n"
RELATIONS = "from_number,relation,to_number\n"


def head(record: Record) -> str:
    with record.read() as conn:
        return audit.head(conn)


@pytest.fixture
def lists(record: Record, tmp_path: Path) -> Record:
    """A record with the hand-made lists."""
    part_lists.fill(record, tmp_path)
    return record


@pytest.mark.parametrize(
    ("name", "text", "said"),
    [
        ("numbers.csv", NUMBERS + f"{'7' * 300},brush,\n", "numbers.csv:2 number: the number '77"),
        ("numbers.csv", NUMBERS + "A-1,brush,\n,brush,\n", "numbers.csv:3 number: the number is empty"),
        ("numbers.csv", NUMBERS + "--,brush,\n", "numbers.csv:2 number: the number '--' holds no letter and no figure"),
        ("numbers.csv", NUMBERS + "A-1,,\n", "numbers.csv:2 kind: nothing is written here, and it is needed"),
        ("numbers.csv", NUMBERS + "A-1,brush,Fir\nA-1,brush,Fir\n", "numbers.csv:3 number: the number A-1 of Fir stands in this file already"),
        ("numbers.csv", NUMBERS + "BR-100,drive,Alder\n", "numbers.csv:2 number: the number BR-100 of Alder is there already, and differs"),
        ("numbers.csv", NUMBERS + f"A-1,brush,{'x' * 90}\n", "numbers.csv:2 maker: 90 characters; at most 80"),
        ("relations.csv", RELATIONS + "BR-100,same-as,br100\n", "relations.csv:2 to_number: a number cannot be related to itself"),
        ("relations.csv", RELATIONS + "BR-100,same-as,\n", "relations.csv:2 to_number: same-as leads to a number"),
        ("relations.csv", RELATIONS + "BR-100,replaces,BR-101\n", "relations.csv:2 relation: 'replaces' is no relation; one of superseded-by"),
        ("relations.csv", RELATIONS + "BR-100,same-as,NOPE\n", "relations.csv:2 to_number: no number 'NOPE'"),
        ("relations.csv", RELATIONS + ",same-as,BR-100\n", "relations.csv:2 from_number: nothing is written here, and it is needed"),
        ("relations.csv", RELATIONS + "5512,same-as,BR-100\n", "relations.csv:2 from_number: 5512 may be 5512 of Alder, 5512 of Birch"),
        ("relations.csv", "from_number,relation,to_number,dated\nBR-100,same-as,BR-101,soon\n", "relations.csv:2 dated: 'soon' is no date"),
        ("fits.csv", "number,model,quantity\nBR-100,KS-999,1\n", "fits.csv:2 model: no model 'KS-999'"),
        ("fits.csv", "number,model,quantity\nBR-100,KS-100,few\n", "fits.csv:2 quantity: 'few' is not a number of pieces"),
        ("sizes.csv", "number,name,value,unit\nBR-100,width,wide,mm\n", "sizes.csv:2 value:"),
        ("sizes.csv", "number,name,value,unit\nBR-100,width,8,furlong\n", "sizes.csv:2 unit: 'furlong' is no unit"),
        ("attributes.csv", "number,model,name,value\nBR-100,KS-100,volts,12\n", "attributes.csv:2 number: an attribute belongs"),
        ("fitted.csv", "tag,number\n9999,BR-100\n", "fitted.csv:2 tag: no job with the tag '9999'"),
    ],
)  # fmt: skip
def test_a_bad_line_is_named_and_nothing_is_written(
    lists: Record, write: Write, name: str, text: str, said: str
) -> None:
    """File, line, column, and why, in words."""
    before = head(lists)
    with pytest.raises(FileRefused) as refused:
        files.load(lists, [write(name, text)])
    assert str(refused.value.lines[0]).startswith(said)
    assert head(lists) == before


def test_the_header_tells_attributes_from_settings(lists: Record, write: Write) -> None:
    """Attributes have the column of a number or of a model; without it the file is one of the shop's settings."""
    assert files.kind_of(write("a.csv", "name,value\n")).name == "shop"
    assert files.kind_of(write("b.csv", "model,name,value\n")).name == "attributes"
    assert files.kind_of(write("c.csv", "number,name,value,unit\n")).name == "sizes"


def test_the_same_list_twice_brings_no_number_twice(lists: Record, tmp_path: Path) -> None:
    """Numbers that say the very same are passed over."""
    with lists.read() as conn:
        before = rows(conn, "SELECT count(*) FROM part_number")
    files.load(lists, [tmp_path / "numbers.csv"])
    with lists.read() as conn:
        assert rows(conn, "SELECT count(*) FROM part_number") == before


def test_a_number_is_found_as_it_is_printed_elsewhere(lists: Record, write: Write) -> None:
    """Case, separators and leading zeros apart; a model by its own number, which then is a number too."""
    files.load(
        lists, [write("relations.csv", RELATIONS + "br 101,interchanges-with,7710\nks120,superseded-by,KS-100\n")]
    )
    with lists.read() as conn:
        sql = (
            "SELECT a.number, b.number FROM relation r JOIN part_number a ON a.id = r.from_id "
            "JOIN part_number b ON b.id = r.to_id ORDER BY r.id DESC LIMIT 2"
        )
        last = rows(conn, sql)
    assert last == [("KS-120", "KS-100"), ("BR-101", "00-7710")]


def test_every_kind_loads_again_as_it_was_saved(lists: Record, tmp_path: Path) -> None:
    """load(save(x)) is x, with a fitted part and its reason."""
    from store import records
    from store.parts import fitting

    jobs.take_in(lists, model="KS-100", serial="5", tag="77")
    fitting.fit(lists, "77", "DR-90L", lot="L1", supplier="Northgate", why="turned round, by order")
    kinds = ("models", "numbers", "relations", "fits", "sizes", "attributes", "jobs", "fitted")
    for kind in kinds:
        files.save(lists, kind, tmp_path / f"{kind}.csv")
    other = records.open(tmp_path / "other.wearline", create=True)
    files.load(other, [tmp_path / f"{kind}.csv" for kind in kinds])
    for kind in kinds:
        files.save(other, kind, tmp_path / "again.csv")
        assert (tmp_path / "again.csv").read_bytes() == (tmp_path / f"{kind}.csv").read_bytes(), kind
    other.close()


def test_a_long_list_has_all_its_indexes_again(record: Record, write: Write) -> None:
    """They are taken off while many rows go in, and stand afterwards, after a refusal too; the digests hold."""
    count = 25_000

    def indexes() -> list[tuple[str, str]]:
        with record.read() as conn:
            return rows(conn, "SELECT name, sql FROM sqlite_master WHERE type = 'index' ORDER BY name")

    before = indexes()
    good = NUMBERS + "".join(f"N-{n},brush,Fir\n" for n in range(count))
    with pytest.raises(FileRefused):
        files.load(record, [write("numbers.csv", good + ",brush,Fir\n")])
    assert indexes() == before
    files.load(record, [write("numbers.csv", good)])
    assert indexes() == before
    with record.read() as conn:
        assert rows(conn, "SELECT count(*) FROM part_number") == [(count,)]
        assert rows(conn, "PRAGMA integrity_check") == [("ok",)]
        kept = rows(conn, "SELECT * FROM part_number WHERE id <= 1000 ORDER BY id")
        (change,) = audit.entries(conn, "numbers.csv")[0].changes
    assert change["digests"][0] == audit.digest(kept)
    assert len(change["digests"]) == count // 1000


def test_ten_bad_lines_among_very_many_are_all_named(record: Record, write: Write) -> None:
    """A million lines in the long form: all ten by line, nothing written."""
    count = 1_000_000 if FULL else 30_000
    bad = sorted({7 + n * (count // 11) for n in range(10)})
    lines = [f"N-{n},brush,Fir\n" for n in range(count)]
    for place, wrong in zip(
        bad, (",brush,Fir", "N-1,brush,Fir", f"{'9' * 300},brush,Fir", "N-x,,Fir", "--,brush,Fir") * 2, strict=True
    ):
        lines[place] = wrong + "\n"
    with pytest.raises(FileRefused) as refused:
        files.load(record, [write("numbers.csv", NUMBERS + "".join(lines))])
    assert [line.line for line in refused.value.lines] == [place + 2 for place in bad]
    with record.read() as conn:
        assert rows(conn, "SELECT count(*) FROM part_number") == [(0,)]
