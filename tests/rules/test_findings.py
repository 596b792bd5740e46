"""Findings that a note speaks of."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.findings import MOST_OFFERED, VOCABULARY, Finding, offered


@pytest.mark.parametrize(
    ("note", "component", "mode"),
    [
        ("sol contcts burnt", "solenoid", "contacts burned"),
        ("solinoid contacts pitted", "solenoid", "contacts burned"),
        ("bushng at drive end eggd, pressed new one", "bushings", "egged"),
        ("drive slips cold, holds warm", "drive", "slipping"),
        ("brushs worn to the lead on one side", "brushes", "worn short"),
        ("arm grounded at the riser", "armature winding", "grounded"),
        ("diode plate replaced, two shorted", "diode", "shorted"),
        ("plunger sticking", "solenoid", "plunger sticking"),
        ("high mica all round the comm", "commutator", "high mica"),
    ],
)
def test_looks_like(note: str, component: str, mode: str) -> None:
    """A clause that names a component and what is wrong with it is understood, slips and shorthand too."""
    assert (component, mode) in {(f.component, f.mode) for f in offered(note)}


@pytest.mark.parametrize(
    "note", ["", "growler ok", "armature not grounded", "customer collects friday", "comm turned, undercut"]
)
def test_nothing_is_forced(note: str) -> None:
    """What is well, denied or not spoken of is not offered."""
    assert offered(note) == ()


def test_two_clauses() -> None:
    """Each clause may speak of its own finding, and the words of one are not mixed with the other's."""
    found = {(f.component, f.mode) for f in offered("grwler ok, comm burnt, solinoid contcts pitted")}
    assert {("commutator", "burned bars"), ("solenoid", "contacts burned")} == found


def test_own_findings() -> None:
    """The shop's own findings are offered as well, and its usual mechanism and cause are taken over."""
    own = (Finding("solenoid", "contacts burned", "electrical", "overload"), Finding("tag", "soaked", "oil", "leak"))
    assert (
        offered("sol contacts burnt", own)[0].mechanism,
        offered("sol contacts burnt", own)[0].cause,
    ) == ("electrical", "overload")
    assert [(f.component, f.mode) for f in offered("tag soaked", own)] == [("tag", "soaked")]


@pytest.mark.parametrize("finding", VOCABULARY, ids=lambda f: f"{f.component}-{f.mode}")
def test_every_finding_can_be_offered(finding: Finding) -> None:
    """Named by one of its names and one of its words, every finding of the vocabulary is among those that score."""
    name, says = sorted(finding.names)[0], sorted(finding.says)[0]
    known = offered(f"{finding.component} {name} {finding.mode} {says}")
    assert (finding.component, finding.mode) in {(f.component, f.mode) for f in known}


@given(st.text(max_size=200))
def test_any_text(text: str) -> None:
    """Whatever is typed, a few offers or none."""
    assert len(offered(text)) <= MOST_OFFERED
