"""The ladder of decisions where a limit is met exactly, a depth is unknown, or slots are at their limit."""

from __future__ import annotations

from dataclasses import replace
from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.commutator import Action, Found, advise

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
