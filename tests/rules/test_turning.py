"""The ladder of decisions where a limit is met exactly, a depth is unknown, or slots are at their limit."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.commutator import cuts_left
from store.rules.turning import Action, Found, advise

F = Fraction
TURNED = Found(
    "mm", F("44.10"), F("0.12"), F("0.45"), F(0), F(0), F("42.50"), True, F("0.05"), F("0.20"), F("0.02"), F("0.08")
)  # fmt: skip


def test_a_cut_predicts_diameter_and_worst_slot() -> None:
    """D 44.10, r 0.12, u 0.45: 43.98 and 0.27 for any shape; what a round one would keep, 0.33, is said and not promised."""
    (line,) = advise(TURNED)
    assert line.action is Action.turn
    assert dict(line.predicted) == {"commutator-diameter": F("43.98"), "undercut-depth": F("0.27")}
    assert "0.27 mm, the bound for any shape; 0.33 if it is round and only off its centre" in line.formula


@pytest.mark.parametrize(
    ("least", "passes", "actions"),
    [
        ("0.27", True, [Action.turn]),
        ("0.27", False, [Action.turn, Action.re_undercut]),
        ("0.2701", True, [Action.turn, Action.re_undercut]),
        ("0.2699", False, [Action.turn]),
    ],
)
def test_slots_on_both_sides_of_their_limit(least: str, passes: bool, actions: list[Action]) -> None:
    """Equal passes or fails as the sheet has it."""
    found = replace(TURNED, least_undercut=F(least), least_undercut_passes=passes)
    assert [line.action for line in advise(found)] == actions


def test_runout_on_both_sides_of_its_limit() -> None:
    """Inside its limit and sound: not turned."""
    assert advise(replace(TURNED, runout=F("0.05")))[0].action is Action.leave
    assert advise(replace(TURNED, runout=F("0.05"), most_runout_passes=False))[0].action is Action.turn
    assert advise(replace(TURNED, runout=F("0.0501")))[0].action is Action.turn


def test_no_promise_over_a_defect_of_unknown_depth() -> None:
    """A burned bar whose depth nobody measured: no size is predicted, and it is asked for."""
    (line,) = advise(replace(TURNED, surface_failed=True, defect=None))
    assert (line.action, line.predicted) == (Action.turn, ())
    assert "measure it first" in line.because
    (line,) = advise(replace(TURNED, surface_failed=True, defect=None, runout=F("0.01")))
    assert (line.action, line.predicted) == (Action.polish, ())
    assert "not measured" in line.because


def test_slots_are_gone_without_a_limit() -> None:
    """No limit of the undercut: it is only asked for where nothing would be left."""
    assert [a.action for a in advise(replace(TURNED, least_undercut=None))] == [Action.turn]
    gone = advise(replace(TURNED, least_undercut=None, undercut=F("0.18")))
    assert [a.action for a in gone] == [Action.turn, Action.re_undercut]
    assert dict(gone[1].predicted) == {"undercut-depth": 0}


def test_what_a_predicted_size_rests_on_is_said() -> None:
    """D - r is a bound only if the true smallest diameter was read, and the line says so; not where no size is predicted."""
    (line,) = advise(replace(TURNED, stations=4))
    assert "holds if the smallest diameter there is was among the 4 read" in line.because
    (line,) = advise(TURNED)
    assert "holds if the one diameter read is the smallest there is" in line.because
    (line,) = advise(replace(TURNED, surface_failed=True, defect=None))
    assert "holds if" not in line.because


def test_a_defect_without_a_runout_predicts_nothing() -> None:
    """The cut must take out a runout that nobody read: no size is promised, and it is asked for."""
    (line,) = advise(replace(TURNED, runout=None, defect=F("0.05")))
    assert (line.action, line.predicted) == (Action.turn, ())
    assert "the runout is not measured" in line.because
    assert line.formula.startswith("at most ")


def test_a_limit_that_fails_at_its_own_size_leaves_a_cut_less() -> None:
    """43.0 with cuts of 0.25 to 42.5: two where equal passes, one where it fails; and the last cut is called one earlier."""
    assert cuts_left(F(43), F("42.5"), F("0.25")) == 2
    assert cuts_left(F(43), F("42.5"), F("0.25"), equal_passes=False) == 1
    assert cuts_left(F("42.5"), F("42.5"), F("0.25"), equal_passes=False) == 0
    twice = replace(TURNED, diameter=F("42.74"))
    assert advise(twice)[0].action is Action.turn
    assert advise(replace(twice, lowest_passes=False))[0].action is Action.turn_last_cut


def test_a_shaft_at_its_limit_goes_by_its_wording() -> None:
    """Equal passes, or fails and is straightened first; without a diameter too."""
    at_limit = replace(TURNED, shaft_runout=F("0.08"))
    assert advise(at_limit)[0].action is Action.turn
    fails = replace(at_limit, most_shaft_runout_passes=False)
    assert [line.action for line in advise(fails)] == [Action.straighten_shaft_first]
    assert [line.action for line in advise(replace(fails, diameter=None))] == [Action.straighten_shaft_first]


def test_without_a_diameter_slots_speak_for_themselves() -> None:
    """Too shallow as found: re-undercut, whatever the diameter; deep enough: nothing is said."""
    assert [line.action for line in advise(replace(TURNED, diameter=None, undercut=F("0.19")))] == [Action.re_undercut]
    assert advise(replace(TURNED, diameter=None)) == ()


def test_out_of_shape_is_a_reason_of_its_own() -> None:
    """Inside its runout limit and out of an ovality limit: it is turned, and the reason is said."""
    lines = advise(replace(TURNED, runout=F("0.02"), out_of_shape="its ovality is 0.08 mm"))
    assert lines[0].action is Action.turn
    assert lines[0].because.startswith("its ovality is 0.08 mm")


def test_slots_that_may_not_be_cut_again_end_it() -> None:
    """No turning is advised whose worst slot could not be mended after it, and no leaving where it is too shallow now."""
    shallow = replace(TURNED, undercut=F("0.30"), may_undercut=False)
    (line,) = advise(shallow)
    assert (line.action, line.predicted) == (Action.not_to_be_turned, ())
    assert line.because.startswith("it runs out 0.12 over 0.05 mm; after the cut the worst slot would be 0.12")
    (line,) = advise(replace(shallow, undercut=F("0.19"), runout=F("0.01")))
    assert line.action is Action.not_to_be_turned


SIZES = st.fractions(F(0), F(1), max_denominator=1000)


@given(
    diameter=st.fractions(F(43), F(45), max_denominator=1000), runout=SIZES, undercut=SIZES,
    defect=st.none() | SIZES, polish=SIZES, failed=st.booleans(), may_turn=st.booleans(), may_undercut=st.booleans(),
)  # fmt: skip
def test_no_advice_leads_under_the_limit(
    diameter: Fraction, runout: Fraction, undercut: Fraction, defect: Fraction | None, polish: Fraction, failed: bool,
    may_turn: bool, may_undercut: bool,
) -> None:  # fmt: skip
    """What is turned stays in size; what must not be turned or undercut is not; a re-undercut is said with its reason."""
    found = replace(
        TURNED, diameter=diameter, runout=runout, undercut=undercut, defect=defect, polish=polish, surface_failed=failed,
        may_turn=may_turn, may_undercut=may_undercut,
    )  # fmt: skip
    lines = advise(found)
    actions = {line.action for line in lines}
    assert lines
    for line in lines:
        size = dict(line.predicted).get("commutator-diameter")
        if line.action in {Action.turn, Action.turn_last_cut} and size is not None:
            assert F("42.50") <= size <= diameter - runout
    assert may_turn or not actions & {Action.turn, Action.turn_last_cut}
    assert may_undercut or Action.re_undercut not in actions
    if Action.turn in actions:
        assert Action.turn_last_cut not in actions
