"""The search over every text, on a real file."""

from __future__ import annotations

import threading
from pathlib import Path

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from store import findings, jobs, notes, records, search, shorthand
from store.errors import NotFound, Refused
from store.records import Record
from store.search import Answer, index, snapshot
from store.sqlite.engine import driver, rows
from tests import shop
from tests.conftest import Clock


@pytest.fixture
def job(record: Record, tmp_path: Path) -> str:
    """A job in the small shop."""
    shop.fill(record, tmp_path)
    return shop.core(record).tag


def found(answer: Answer) -> list[str]:
    """The texts of an answer."""
    return [hit.text for hit in answer.hits]


def test_either_side_may_slip(record: Record, job: str) -> None:
    """A slip in the note is found by the right word, a slip in the query is corrected, and both are said."""
    notes.add(record, job, "solinoid contcts pitted")
    for _ in range(6):
        notes.add(record, job, "solenoid replaced")
    assert "solinoid contcts pitted" in found(search.find(record, "solenoid contacts"))
    answer = search.find(record, "soleniod")
    assert answer.corrected == {"soleniod": ("solenoid",)}
    assert len(answer.hits) == 7


def test_corrections_can_be_refused(record: Record, job: str) -> None:
    """Refused by word, for all, or by quotes, a correction is not made."""
    notes.add(record, job, "solenoid replaced")
    refusals = (
        search.find(record, "soleniod", as_typed=frozenset({"soleniod"})),
        search.find(record, "soleniod", as_typed=True),
        search.find(record, '"soleniod"'),
    )
    for answer in refusals:
        assert (answer.corrected, answer.hits) == ({}, ())


def test_every_kind_of_text(record: Record, job: str) -> None:
    """Complaints, findings and remarks of readings are found as notes are, each saying what it is."""
    from store import readings

    findings.add(record, job, "solenoid", "contacts burned", mechanism="overheating", note="disc turned")
    readings.add(record, job, "as-found", "brush-length", "11.4", note="worn on a slant")
    said = {w: {hit.where for hit in search.find(record, w).hits} for w in ("cranks", "overheating", "slant")}
    assert {"cranks": {"complaint"}, "overheating": {"finding"}, "slant": {"reading"}} == said


def test_part_remarks(record: Record, job: str) -> None:
    """What was fitted is found by its number's comparing key, and by lot."""
    with record.write() as conn:
        driver(conn).execute(
            "INSERT INTO fitted(job_id, number, key, maker, lot, supplier, position, quantity, by, at, checked, why) "
            "VALUES (1, 'BR-0447/2', 'BR04472', '', 'L77', '', '', 1, 'shop', '2026-11-02T08:00:00Z', '', 'no other there')"
        )
    for asked in ("br04472", "BR 0447", "l77", "no other"):
        assert [hit.where for hit in search.find(record, asked).hits] == ["part"]


@pytest.mark.parametrize("asked", ["12345678", "123-45678", "0123.45678", "123/45678"])
def test_numbers_in_notes(record: Record, job: str, asked: str) -> None:
    """A number in a note is found however it is written on either side."""
    notes.add(record, job, "used 123-45678 instead")
    notes.add(record, job, "used 12345678 instead")
    assert len(search.find(record, asked).hits) == 2


def test_order(record: Record, job: str, clock: Clock) -> None:
    """All words before some, exact before corrected, near before far, recent before old."""
    texts = [
        "armature worn", "contacts replaced", "pitted contacts on the armature", "armature and then many other things all of which were pitted",
        "armture pitted", "pitted armature", "pitted armature",
    ]  # fmt: skip
    for text in texts:
        clock.move(days=1)
        notes.add(record, job, text)
    answer = search.find(record, "pitted armature")
    assert [texts[5], texts[6], texts[2], texts[3], texts[4], texts[0]] == found(answer)
    assert answer.hits[0].at > answer.hits[1].at


def test_phrase_and_minus(record: Record, job: str) -> None:
    """A phrase must stand as it is, a word with a minus must not, either anywhere in the note."""
    for text in ("disc burned right through", "burned disc", "the burned disc, welded"):
        notes.add(record, job, text)
    assert {"burned disc", "the burned disc, welded"} == set(found(search.find(record, '"burned disc"')))
    assert found(search.find(record, '"burned disc" -welded')) == ["burned disc"]
    assert found(search.find(record, 'disc -"burned disc"')) == ["disc burned right through"]


def test_marks(record: Record, job: str) -> None:
    """What was found is marked in the text: corrected words, phrases whole, joined numbers whole."""
    text = "Solinoid KM-2210: contact disc burnt"
    notes.add(record, job, text)
    (hit,) = search.find(record, 'solinoid km2210 "contact disc" burned').hits
    assert [text[start:end] for start, end in hit.marks] == ["Solinoid", "KM-2210", "contact disc", "burnt"]


def test_filters(record: Record, job: str, clock: Clock) -> None:
    """By model, date, person, kind, stage, verdict and comeback; typed in the text or given."""
    from store import readings

    other = jobs.take_in(record, model="KA-300", serial="7", complaint="noisy").tag
    notes.add(record, job, "first armature")
    clock.move(days=40)
    notes.add(record, other, "second armature")
    readings.add(record, job, "as-found", "brush-length", "2")

    def tags(**filters: str) -> list[str]:
        return [hit.tag for hit in search.find(record, "armature", filters=filters).hits]

    assert [other, job] == tags()
    assert [job] == tags(model="ks100") == tags(until="2026-11") == tags(stage="as-found") == tags(verdict="out")
    assert [other] == tags(since="2026-12-01") == tags(model="KA-300")
    assert [] == tags(comeback="yes") == tags(by="CN") == tags(**{"in": "complaint"}) == tags(verdict="in doubt")
    assert [other, job] == tags(comeback="no") == tags(stage="open") == tags(by="shop") == tags(**{"in": "notes"})
    assert found(search.find(record, "armature until:2026-11")) == ["first armature"]


def test_filters_that_cannot_be(record: Record, job: str) -> None:
    """A value that cannot be is refused in one line that says what can."""
    for name, value in (("since", "x"), ("stage", "x"), ("verdict", "x"), ("comeback", "x"), ("in", "x")):
        with pytest.raises(Refused, match="x"):
            search.find(record, "armature", filters={name: value})
    with pytest.raises(NotFound):
        search.find(record, "armature", filters={"model": "KX-9"})


def test_as_one_types(record: Record, job: str) -> None:
    """The word being typed is found by its beginning, a finished one only as a word."""
    notes.add(record, job, "commutator burned")
    assert found(search.find(record, "burned commut", typing=True)) == ["commutator burned"]
    assert found(search.find(record, "commut", as_typed=True)) == []


def test_shorthand(record: Record, job: str) -> None:
    """Short finds long and long finds short; the shop's list can be added to and cut."""
    notes.add(record, job, "comm burned")
    notes.add(record, job, "zq cracked")
    assert found(search.find(record, "commutator")) == ["comm burned"]
    shorthand.enter(record, "zq", "quadrant")
    assert found(search.find(record, "quadrant")) == ["zq cracked"]
    shorthand.drop(record, "comm")
    assert found(search.find(record, "commutator")) == []
    shorthand.drop(record, "zq")
    with pytest.raises(NotFound):
        shorthand.drop(record, "zq")
    with pytest.raises(Refused):
        shorthand.enter(record, "two words", "one")


def test_a_new_note_from_elsewhere(record: Record, job: str) -> None:
    """What another program writes, changes or deletes is so in the next search."""
    search.find(record, "anything")
    other = records.open(record.path)
    notes.add(other, job, "magnet loose")
    assert found(search.find(record, "magnet")) == ["magnet loose"]
    with other.write() as conn:
        driver(conn).execute("UPDATE note SET text = 'magnet tight' WHERE text = 'magnet loose'")
    assert found(search.find(record, "magnet")) == ["magnet tight"]
    with other.write() as conn:
        driver(conn).execute("DELETE FROM note")
    assert found(search.find(record, "magnet")) == []
    notes.add(other, job, "magnet cracked")
    assert found(search.find(record, "magnet")) == ["magnet cracked"]
    assert search.differences(record) == []
    other.close()


def _filled(record: Record, job: str, count: int = 2500) -> None:
    from tests.benchmarks.notes import texts

    with record.write() as conn:
        driver(conn).executemany(
            "INSERT INTO note(job_id, at, by, text) VALUES (1, '2026-10-01T00:00:00Z', 'AB', ?)",
            ((text,) for text in texts(5, count)),
        )


ASKED = ("contacts burned", "comutator", "km-1234", "armature -field", '"contacts burned"', "plunger stcking housing")


def test_the_index_loses_nothing(record: Record, job: str) -> None:
    """Deleted and made anew, read from its file, or brought up to date bit by bit: the same answers."""
    _filled(record, job)
    first = [search.find(record, asked) for asked in ASKED]
    kept = index.file_of(record)
    assert kept.exists()
    assert any(answer.hits for answer in first)
    record.cache.clear()
    assert first == [search.find(record, asked) for asked in ASKED]
    kept.unlink()
    record.cache.clear()
    assert first == [search.find(record, asked) for asked in ASKED]
    search.rebuild(record)
    assert first == [search.find(record, asked) for asked in ASKED]


def test_changes_leave_the_same_index_as_building(record: Record, job: str) -> None:
    """After changes and deletions the index gives the answers of a new one, and `differences` finds none."""
    _filled(record, job)
    search.find(record, "contacts")
    with record.write() as conn:
        raw = driver(conn)
        raw.execute("DELETE FROM note WHERE id % 7 = 0")
        raw.execute("UPDATE note SET text = text || ' fixd again' WHERE id % 11 = 0")
        raw.execute("INSERT INTO note(job_id, at, by, text) SELECT 1, at, by, text FROM note WHERE id % 13 = 0")
    changed = [search.find(record, asked) for asked in (*ASKED, "fixed again")]
    assert search.differences(record) == []
    search.rebuild(record)
    assert changed == [search.find(record, asked) for asked in (*ASKED, "fixed again")]


def test_differences_are_found(record: Record, job: str) -> None:
    """An index that lacks a text, holds one too many, or points elsewhere is told from the record's."""
    _filled(record, job, 200)
    search.find(record, "contacts")
    known: index.Index = record.cache["search"]
    known.shelf.take_off(5)
    assert "1 texts of the record are not in the search index" in search.differences(record)
    search.rebuild(record)
    known = record.cache["search"]
    known.postings.texts[3] += 1
    assert search.differences(record) == ["words of the search index point to other texts than those of the record"]


def test_a_kept_index_that_differs_is_mended(record: Record, job: str) -> None:
    """An index file that is whole and says otherwise than the rows is found out and made anew."""
    _filled(record, job)
    before = search.find(record, "contacts")
    assert search.mend(record) == []
    known: index.Index = record.cache.pop("search")
    known.shelf.take_off(before.hits[0].row)
    with record.read() as conn:
        from store.search import sources

        snapshot.save(known, index.file_of(record), sources.head(conn))
    assert search.mend(record) == ["1 texts of the record are not in the search index"]
    record.cache.clear()
    assert search.find(record, "contacts") == before
    assert search.mend(record) == []


@pytest.mark.parametrize("harm", ["cut", "flip", "text", "empty", "other record"])
def test_a_damaged_file_is_left_aside(record: Record, job: str, harm: str) -> None:
    """A file cut short, changed, of another kind, or of a state that the record no longer has is made anew."""
    _filled(record, job)
    before = search.find(record, "contacts")
    kept = index.file_of(record)
    content = kept.read_bytes()
    middle = len(content) // 2
    match harm:
        case "cut":
            kept.write_bytes(content[:-10])
        case "flip":
            kept.write_bytes(content[:middle] + bytes([content[middle] ^ 1]) + content[middle + 1 :])
        case "text":
            kept.write_text("not an index\n")
        case "empty":
            kept.write_bytes(b"")
        case _:
            kept.write_bytes(content.replace(b'"head": [', b'"head": [9', 1))
    with record.read() as conn:
        assert snapshot.load(kept, conn) is None
    record.cache.clear()
    assert before == search.find(record, "contacts")


def test_a_file_that_cannot_be_written(record: Record, job: str) -> None:
    """Where the file cannot be written the search works all the same."""
    _filled(record, job)
    index.file_of(record).mkdir()
    assert search.find(record, "contacts").hits
    assert [p for p in record.path.parent.iterdir() if p.name.endswith(".part")] == []


def test_searching_while_writing(record: Record, job: str) -> None:
    """Threads that search while others write see no text twice and, at the end, every one."""
    _filled(record, job, 300)
    faults: list[BaseException] = []

    def write() -> None:
        own = records.open(record.path)
        for n in range(30):
            notes.add(own, job, f"qqzz number{n}")
        own.close()

    def ask() -> None:
        try:
            for _ in range(40):
                hits = search.find(record, "qqzz").hits
                assert len({hit.row for hit in hits}) == len(hits)
        except BaseException as fault:
            faults.append(fault)

    threads = [threading.Thread(target=work) for work in (write, ask, ask)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert faults == []
    assert len(search.find(record, "qqzz").hits) == 30
    assert search.differences(record) == []


HOSTILE = [
    "", '"', '""', "-", "--", '-"', "*", "a", "e*", "NOT", "NOT NOT", "AND OR NEAR(", "text:foo", "^solenoid", "😀", "😀 solenoid",
    "a" * 5000, "solenoid " * 600, '"' * 5000, "-" * 5000, "\x00\x01", "' OR 1=1 --", "%_", "[/]", "\ud800", "solenoid\nburned", "\u200b",
]  # fmt: skip


@pytest.mark.parametrize("asked", HOSTILE, ids=lambda text: ascii(text[:12]))
def test_hostile_queries(demo: Record, asked: str) -> None:
    """Whatever is asked is answered, with hits or with one clear line (how fast: tests/benchmarks)."""
    answer = search.find(demo, asked, typing=True)
    assert answer.hits or answer.said or answer.asked.strip()


@settings(suppress_health_check=[HealthCheck.function_scoped_fixture], max_examples=60, deadline=None)
@given(asked=st.text(max_size=60), typing=st.booleans())
def test_anything_is_answered(demo: Record, asked: str, typing: bool) -> None:
    """No text gives an error that is not a refusal."""
    try:
        answer = search.find(demo, asked, typing=typing)
    except Refused:
        return
    for hit in answer.hits:
        assert all(0 <= start < end <= len(hit.text) for start, end in hit.marks)


def test_the_record_is_not_read_whole(record: Record, job: str) -> None:
    """Once the index stands, a search without news asks the record a fixed few statements, whatever it holds."""
    _filled(record, job, 500)
    search.find(record, "contacts")
    asked: list[str] = []
    with record.read() as conn:
        raw = driver(conn)
    raw.set_trace_callback(asked.append)
    search.find(record, "contacts burned")
    raw.set_trace_callback(None)
    statements = [sql for sql in asked if sql.lstrip().startswith("SELECT")]
    assert len(statements) <= 4, statements
    with record.read() as conn:
        assert rows(conn, "SELECT count(*) FROM text_change") == [(0,)]
