"""The cross-check on a record: candidates, paths by name, conflicts, evidence, models, fits, sizes, fitted parts."""

from __future__ import annotations

from pathlib import Path

import pytest

from store import jobs, parts
from store.errors import NotFound, Refused
from store.parts import by_size, checking, fitting, numbers, statements
from store.parts.answers import Check
from store.records import Record
from store.rules.attributes import Fits
from store.rules.interchange import Trust
from store.rules.numbers import How
from tests import part_lists
from tests.conftest import Clock


@pytest.fixture
def lists(record: Record, tmp_path: Path) -> Record:
    """A record with the hand-made lists."""
    part_lists.fill(record, tmp_path)
    return record


def led_to(answer: Check) -> list[str]:
    return [led.number.number for led in answer.leads_to]


@pytest.mark.parametrize(
    ("typed", "first", "how"),
    [
        ("br100", "BR-100", How.exact),
        ("BR-1OO", "BR-100", How.look_alike),
        ("8R-I00", "BR-100", How.look_alike),
        ("7710", "00-7710", How.exact),
        ("DR-9?L", "DR-90L", How.unreadable),
        ("KS-1?0", "KS-100", How.unreadable),
        ("SBU-1", "SUB-1", How.one_slip),
        ("KS-10", "KS-100", How.one_slip),
    ],
)
def test_candidates_nearest_first(lists: Record, typed: str, first: str, how: How) -> None:
    """The same number, a look-alike, a worn plate, one slip; models take part."""
    found = checking.check(lists, typed).candidates
    assert (found[0].number, found[0].how) == (first, how)


def test_a_chain_of_four_by_name_and_source(lists: Record) -> None:
    """Every step says from, to, source and date; the substitute ends its path; the trust is that of the weakest step."""
    answer = checking.check(lists, "BR-100")
    assert led_to(answer) == ["BR-101", "BR-102", "BR-103", "BR-104", "00-7710", "SUB-1"]
    assert [way.says for way in answer.leads_to[1].path] == [
        "BR-100 of Alder superseded by BR-101 of Alder (List 1, 2019-01-01)",
        "BR-101 of Alder superseded by BR-102 of Alder (List 1, 2019-01-01)",
    ]
    assert [led.trust for led in answer.leads_to] == [Trust.dated] * 4 + [Trust.undated, Trust.caveat]
    assert answer.leads_to[5].path[-1].caveat == "shorten the lead"


def test_a_loop_and_a_contradiction_show_both_sources(lists: Record) -> None:
    """Nothing is settled in silence; the steps are disputed."""
    loop = checking.check(lists, "LP-1")
    assert led_to(loop) == ["LP-2", "LP-3"]
    assert [c.what for c in loop.conflicts] == ["supersession runs in a circle"]
    assert len(loop.conflicts[0].says) == 3
    against = checking.check(lists, "XB-1")
    assert [c.says for c in against.conflicts] == [
        (
            "XA-1 of Alder superseded by XB-1 of Birch (List 1, 2019-01-01)",
            "XB-1 of Birch superseded by XA-1 of Alder (List 2, 2022-01-01)",
        )
    ]
    assert [led.trust for led in against.leads_to] == [Trust.disputed]


def test_a_kit_holds_its_parts(lists: Record) -> None:
    """One way."""
    assert led_to(checking.check(lists, "kit 9")) == ["BR-104", "XA-1"]
    assert "KIT-9" not in led_to(checking.check(lists, "XA-1"))


def test_do_not_use_is_said(lists: Record) -> None:
    """As a path that was stopped, as a warning when it is asked itself, and as a conflict with the list that joins it."""
    answer = checking.check(lists, "DR-90")
    assert led_to(answer) == []
    assert [(s.number.number, s.says) for s in answer.stopped] == [
        ("BAD-1", "do not use BAD-1 of Elm (own bench, 2024-03-01); cracks at the neck")
    ]
    assert [c.what for c in answer.conflicts] == ["one says use it, another says do not"]
    assert checking.check(lists, "BAD-1").warnings == (
        "do not use BAD-1 of Elm (own bench, 2024-03-01); cracks at the neck",
    )


def test_the_twin_is_a_candidate_and_is_not_led_to(lists: Record) -> None:
    """One letter apart: shown as one slip away, and no path leads there."""
    answer = checking.check(lists, "DR-90L")
    assert [(c.number, c.how) for c in answer.candidates] == [("DR-90L", How.exact), ("DR-90", How.one_slip)]
    assert led_to(answer) == []


def test_a_number_of_several_makers_starts_from_each(lists: Record) -> None:
    """Both are the number asked; a relation needs to know which."""
    answer = checking.check(lists, "5512")
    assert [(c.number, c.maker) for c in answer.followed] == [("5512", "Alder"), ("5512", "Birch")]
    with pytest.raises(Refused, match="may be 5512 of Alder, 5512 of Birch; say which maker"):
        numbers.relate(lists, "5512", "same-as", "BR-100")


def test_a_slip_is_offered_and_not_followed(lists: Record) -> None:
    """It may be the other rotation: the user chooses."""
    answer = checking.check(lists, "BR-10")
    assert {c.how for c in answer.candidates} == {How.one_slip}
    assert answer.followed == ()
    chosen = checking.check_candidate(lists, answer.candidates[0])
    assert chosen.followed == (answer.candidates[0],)


def test_any_number_that_leads_to_a_model_finds_it(lists: Record) -> None:
    """A customer's number, the model's own, one typed by look-alikes; a part number leads to none."""
    assert parts.models_for(lists, "old7") == ("KS-100",)
    assert parts.models_for(lists, "KS 100") == ("KS-100",)
    assert parts.models_for(lists, "K5-IOO") == ("KS-100",)
    assert parts.models_for(lists, "BR-100") == ()


def test_from_a_worn_plate_to_the_parts(lists: Record) -> None:
    """Two characters unreadable: the model, and what lists say goes on it."""
    answer = checking.check(lists, "O?D-?")
    assert answer.models == ("KS-100",)
    assert [(p.position, p.number.number, p.source) for p in answer.parts] == [
        ("brushes", "BR-100", "List 1"),
        ("drive", "DR-90", "List 1"),
    ]


@pytest.mark.parametrize(
    ("number", "verdict", "says"),
    [
        ("DR-90", Fits.fits, ("fits: rotation, teeth, pitch agree", "listed for KS-100 by List 1")),
        ("DR-90L", Fits.does_not_fit, ("does not fit: rotation is ccw, the model's is cw from drive end",)),
        ("BR-103", Fits.not_proved, ("not proved", "in place of a part that is listed for KS-100 by List 1")),
        ("XA-1", Fits.not_proved, ("not proved", "listed for KS-120, not for KS-100")),
    ],
)
def test_does_it_go_on_a_model(lists: Record, number: str, verdict: Fits, says: tuple[str, ...]) -> None:
    """By attributes, rotation turned round with its viewpoint; by lists, itself or in place of a listed part."""
    answer = checking.check(lists, number, on="ks100")
    assert answer.on is not None
    assert answer.on.verdict is verdict
    assert all(part in answer.on.says for part in says)


def test_what_nobody_knows_is_not_proved(lists: Record) -> None:
    """An unknown number on a model; an unknown model is refused."""
    answer = checking.check(lists, "QQQ-777", on="KS-100")
    assert answer.candidates == ()
    assert answer.on is not None
    assert answer.on.verdict is Fits.not_proved
    with pytest.raises(NotFound, match="no model 'KS-999'"):
        checking.check(lists, "BR-100", on="KS-999")


def test_bench_evidence_counts_jobs_and_comebacks(lists: Record, clock: Clock) -> None:
    """Fitted on two jobs, one of which came back; the interval says how little that is; a unit not ours does not count."""
    for serial in ("1", "2", "3"):
        tag = jobs.take_in(lists, model="KS-100", serial=serial).tag
        fitting.fit(lists, tag, "br 101" if serial == "1" else "BR-101", maker="" if serial == "1" else "Alder")
        with lists.change("released") as change:
            from store.tables.jobs import JobRow

            change.update(JobRow, jobs.find(lists, tag, change.conn).id, outcome="released", ended=change.at)
    clock.move(days=40)
    jobs.take_in(lists, model="KS-100", serial="2")
    other = jobs.take_in(lists, model="KS-100", serial="3")
    jobs.set_comeback_outcome(lists, other.tag, "not-ours")
    led = checking.check(lists, "BR-100").leads_to[0]
    assert (led.number.number, led.evidence.fitted, led.evidence.came_back) == ("BR-101", 3, 1)
    low, high = led.evidence.interval
    assert low < 1 / 3 < high


def test_fitting_keeps_what_was_printed_and_what_the_check_said(lists: Record) -> None:
    """A part that nothing speaks against goes in; lot and supplier stay with it."""
    tag = jobs.take_in(lists, model="KS-100", serial="5").tag
    made = fitting.fit(lists, tag, "dr 90", lot="L7", supplier="Northgate", position="drive end", quantity=1)
    assert (made.number, made.lot, made.supplier, made.position, made.by) == (
        "dr 90",
        "L7",
        "Northgate",
        "drive end",
        "shop",
    )
    assert made.checked.startswith("fits: rotation, teeth, pitch agree")
    assert fitting.of_job(lists, tag) == (made,)


@pytest.mark.parametrize(
    ("number", "why"),
    [
        ("DR-90L", "does not fit: rotation is ccw"),
        ("BAD-1", "do not use"),
        ("XA-1", "listed for KS-120, not for KS-100"),
    ],
)
def test_a_mismatch_wants_a_reason(lists: Record, number: str, why: str) -> None:
    """Refused without one and nothing written; with one it is kept beside what the check said."""
    tag = jobs.take_in(lists, model="KS-100", serial="5").tag
    with pytest.raises(Refused, match=why):
        fitting.fit(lists, tag, number)
    assert fitting.of_job(lists, tag) == ()
    made = fitting.fit(lists, tag, number, why="the customer turns it round")
    assert made.why == "the customer turns it round"
    assert why in made.checked


def test_a_number_that_no_list_knows_is_fitted_and_says_so(lists: Record) -> None:
    """A shop without lists can still record its parts."""
    tag = jobs.take_in(lists, model="KS-100", serial="5").tag
    assert fitting.fit(lists, tag, "ZZ 9/1").checked == "not checked: no list knows this number"


def test_what_cannot_be_fitted_is_refused(lists: Record) -> None:
    """No number, no pieces, an ended job, an unknown one; taking off asks why and stays in the chain."""
    tag = jobs.take_in(lists, model="KS-100", serial="5").tag
    with pytest.raises(Refused, match="the number is empty"):
        fitting.fit(lists, tag, " ")
    with pytest.raises(Refused, match="0 is not a number of pieces"):
        fitting.fit(lists, tag, "DR-90", quantity=0)
    with pytest.raises(NotFound):
        fitting.fit(lists, "9999", "DR-90")
    made = fitting.fit(lists, tag, "DR-90")
    with pytest.raises(Refused, match="say why"):
        fitting.take_off(lists, tag, made.id, " ")
    fitting.take_off(lists, tag, made.id, "wrong shelf")
    assert fitting.of_job(lists, tag) == ()


def test_what_goes_on_a_job(lists: Record) -> None:
    """The listed parts of its model, with what speaks for and against, and whether they are in."""
    tag = jobs.take_in(lists, model="KS-100", serial="5").tag
    fitting.fit(lists, tag, "DR-90")
    assert [(w.number.number, w.position, w.fitted, w.is_mismatch) for w in fitting.wanted(lists, tag)] == [
        ("BR-100", "brushes", False, False),
        ("DR-90", "drive", True, False),
    ]


def test_by_size_ranked_with_both_systems(lists: Record) -> None:
    """The nearest first by the worst size; the inch part is marked; beyond the tolerance nothing is found."""
    answer = by_size.search(lists, "brush", {"width": "8", "thickness": "16"}, "0.1")
    assert [(m.number.number, round(m.worst, 3)) for m in answer.matches] == [("SUB-1", 0.5), ("BR-100", 0.625)]
    assert answer.matches[1].warnings == ("width: an inch brush in a metric holder may not fit: 0.062 mm under",)
    assert [m.number.number for m in by_size.search(lists, "brush", {"width": "8"}, "0.01").matches] == ["SUB-1"]
    assert by_size.search(lists, "bushing", {"width": "8"}).matches == ()


def test_a_bushing_by_its_seats(lists: Record) -> None:
    """From housing bore and journal; asked by its own worn sizes a caution is said."""
    answer = by_size.search(lists, "bushings", {"housing-bore": "16.00", "journal": "12.50"}, "0.06")
    assert [m.number.number for m in answer.matches] == ["XA-1", "XB-1"]
    assert answer.matches[0].warnings == (
        "housing-bore: 0.050 mm tight in the housing",
        "journal: 0.050 mm running clearance on the journal",
    )
    assert not any("worn bushing" in caution for caution in answer.cautions)
    assert any("worn bushing" in c for c in by_size.search(lists, "bushing", {"id": "12.6"}).cautions)


def test_words_find_numbers(lists: Record) -> None:
    """Words of the description, the kind or the maker, all of them; a percent sign is a percent sign."""
    assert [n.number for n in by_size.words(lists, "drive rotation")] == ["DR-90L"]
    assert [n.number for n in by_size.words(lists, "birch bushing")] == ["XB-1", "5512"]
    assert by_size.words(lists, "100%") == ()


def test_entered_and_edited_on_screen(lists: Record) -> None:
    """A number, a relation, a fit, a size, an attribute; each can be refused in one line and each is in the chain."""
    made = numbers.enter(lists, "NEW-1", "drive", maker="Fir")
    assert (made.number, made.key) == ("NEW-1", "NEW1")
    with pytest.raises(Refused, match="there already"):
        numbers.enter(lists, "NEW-1", "drive", maker="Fir")
    with pytest.raises(Refused, match="to itself"):
        numbers.relate(lists, "NEW-1", "same-as", "NEW-1")
    with pytest.raises(Refused, match="no relation"):
        numbers.relate(lists, "NEW-1", "replaces", "DR-90")
    with pytest.raises(Refused, match="leads to a number"):
        numbers.relate(lists, "NEW-1", "same-as")
    with pytest.raises(NotFound, match="no number 'NOPE'"):
        numbers.relate(lists, "NEW-1", "same-as", "NOPE")
    relation = numbers.relate(lists, "NEW-1", "interchanges-with", "DR-90", source="own bench", dated="2026-11-02")
    assert led_to(checking.check(lists, "DR-90")) == ["NEW-1"]
    numbers.say_fits(lists, "NEW-1", "KS-100", position="drive", quantity=1, source="own bench")
    numbers.say_size(lists, "NEW-1", "bore", "14", "mm")
    numbers.say_attribute(lists, "Rotation", "cw", number="NEW-1")
    numbers.say_attribute(lists, "grounding", "frame", model="KS-100")
    answer = checking.check(lists, "NEW-1", on="KS-100")
    assert answer.on is not None
    assert answer.on.verdict is Fits.not_proved
    edited = numbers.edit(lists, made, kind="drive", description="nine teeth", status="current")
    assert (edited.description, edited.status) == ("nine teeth", "current")
    with pytest.raises(Refused, match="say why"):
        statements.withdraw(lists, "relation", relation, "")
    assert [(s.kind, s.says) for s in statements.stated_of(lists, made)] == [
        ("relation", "NEW-1 of Fir interchanges with DR-90 of Alder (own bench, 2026-11-02)"),
        ("fits", "goes on KS-100, drive x1 (own bench)"),
        ("size", "id 14 mm"),
        ("attribute", "rotation: cw"),
    ]
    statements.withdraw(lists, "relation", relation, "tried, does not mesh")
    assert led_to(checking.check(lists, "DR-90")) == []


def test_a_model_takes_part_in_relations(lists: Record) -> None:
    """A unit number is superseded like a part number; the model gets a number of its own when a list names it."""
    numbers.relate(lists, "KS-120", "superseded-by", "KS-100", source="maker's bulletin", dated="2025-01-01")
    assert parts.models_for(lists, "KS-120") == ("KS-120", "KS-100")
    assert parts.models_for(lists, "KS-100") == ("KS-100",)


def test_a_core_is_taken_in_by_any_number_that_leads_to_its_model(lists: Record) -> None:
    """A customer's number; of two models that it leads to the nearer; what leads nowhere is refused with what is near."""
    numbers.relate(lists, "KS-100", "superseded-by", "KS-120", source="maker's bulletin", dated="2025-01-01")
    assert jobs.take_in(lists, model="old 7", serial="9").model == "KS-100"
    assert parts.model_meant(lists, "old 7").says == ("OLD-7 same as KS-100 (customer's list, 2022-05-01)",)
    assert parts.model_meant(lists, "ks120").says == ()
    with pytest.raises(NotFound, match="no model 'KS-10'; did you mean KS-100"):
        jobs.take_in(lists, model="KS-10", serial="9")
    with pytest.raises(NotFound, match="no model 'BR-100'"):
        jobs.take_in(lists, model="BR-100", serial="9")


def test_a_check_asks_as_often_however_large_the_family(lists: Record) -> None:
    """Statements are counted: they go by the levels of the walk, not by the numbers in it."""
    from store.sqlite.engine import driver

    def asked() -> int:
        seen: list[str] = []
        with lists.read() as conn:
            raw = driver(conn)
        raw.set_trace_callback(seen.append)
        checking.check(lists, "DR-90")
        raw.set_trace_callback(None)
        return len(seen)

    numbers.relate(lists, "DR-90", "interchanges-with", "DR-90L")
    asked()  # the models are read into memory once
    before = asked()
    for n in range(30):
        numbers.enter(lists, f"EQ-{n}00", "drive")
        numbers.relate(lists, "DR-90", "interchanges-with", f"EQ-{n}00")
    assert asked() == before
    assert before < 25
