"""Does a part go on a model, attribute by attribute."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.attributes import Fits, State, attribute_name, compare, must_match, rotation

KS_100 = {"rotation": "cw", "viewed-from": "drive end", "volts": "12", "teeth": "9", "pitch": "8/10"}


@pytest.mark.parametrize(
    ("typed", "seen_from_drive_end"),
    [
        ("cw", "cw"),
        ("CCW from drive end", "ccw"),
        ("ccw from commutator end", "cw"),
        ("cw viewed from the commutator end", "ccw"),
        ("clockwise, from opposite end", "ccw"),
        ("both from commutator end", "both"),
        ("cw from drive-end", "cw"),
        ("cw, opposite drive end", "ccw"),
        ("ccw engine, from flywheel", None),
        ("round and round", None),
        ("", None),
    ],
)
def test_a_rotation_is_turned_round_with_its_viewpoint(typed: str, seen_from_drive_end: str | None) -> None:
    """What is seen from the other end is turned round; an engine's rotation is not converted at a guess."""
    assert rotation(typed) == seen_from_drive_end


@pytest.mark.parametrize(
    ("part", "verdict", "states"),
    [
        ({"rotation": "cw", "volts": "12 V", "teeth": "9", "pitch": "8/10"}, Fits.fits, "agrees agrees agrees agrees"),
        ({"rotation": "ccw", "viewed-from": "commutator", "volts": "12", "teeth": "9", "pitch": "8/10"}, Fits.fits, "agrees agrees agrees agrees"),
        ({"rotation": "ccw", "volts": "12", "teeth": "9", "pitch": "8/10"}, Fits.does_not_fit, "differs agrees agrees agrees"),
        ({"rotation": "cw", "volts": "24", "teeth": "9", "pitch": "8/10"}, Fits.does_not_fit, "agrees differs agrees agrees"),
        ({"rotation": "cw", "volts": "12", "teeth": "9", "pitch": "module 3"}, Fits.does_not_fit, "agrees agrees agrees differs"),
        ({"rotation": "cw", "volts": "12", "teeth": "9"}, Fits.not_proved, "agrees agrees agrees unknown"),
        ({"volts": "24"}, Fits.does_not_fit, "unknown differs unknown unknown"),
        ({}, Fits.not_proved, "unknown unknown unknown unknown"),
    ],
)  # fmt: skip
def test_the_verdict_over_all_attributes(part: dict[str, str], verdict: Fits, states: str) -> None:
    """One difference rules out; one unknown leaves it not proved; all agreeing fits."""
    found = compare("starter", part, KS_100)
    assert found.verdict is verdict
    assert " ".join(one.state for one in found.attributes) == states
    assert found.because.startswith(verdict)


def test_the_sentence_says_what_differs_and_what_nobody_states() -> None:
    """The verdict in words."""
    found = compare("drive", {"rotation": "ccw", "teeth": "9"}, KS_100)
    assert (
        found.because == "does not fit: rotation is ccw, the model's is cw from drive end; pitch known on one side only"
    )
    assert found.silent == ("pinion-diameter", "splines", "bore", "travel")
    agreed = compare("drive", {"rotation": "cw", "teeth": "9", "pitch": "8/10"}, KS_100)
    assert (
        agreed.because
        == "fits: rotation, teeth, pitch agree; stated on neither side: pinion-diameter, splines, bore, travel"
    )
    nothing = compare("gasket", {}, {})
    assert (nothing.verdict, nothing.because) == (Fits.not_proved, "not proved: no attribute that must match is stated")


@pytest.mark.parametrize(
    ("one", "other", "state"),
    [
        ("12.7 mm", "0.5 in", State.agrees),
        ("12.5 mm", "0.5 in", State.differs),
        ("1/2 in", "12.7mm", State.agrees),
        ("12", "12 V", State.agrees),
        ("12 V", "12 mm", State.differs),
        ("M10 stud", "m10  STUD", State.agrees),
        ("1/0 in", "1/0 in", State.agrees),
        ("open", "closed", State.differs),
    ],
)
def test_values_are_compared_as_sizes_where_they_are_sizes(one: str, other: str, state: State) -> None:
    """Units are converted exactly; words apart from case and spaces."""
    (found,) = compare("starter", {"pilot": one}, {"pilot": other}).attributes
    assert found.state is state


def test_a_further_attribute_that_differs_leaves_it_not_proved() -> None:
    """What need not match is shown, and asks for a look."""
    found = compare("drive", {"rotation": "cw", "colour": "grey"}, {"rotation": "cw", "colour": "black"})
    assert found.verdict is Fits.not_proved
    assert [(one.name, one.must) for one in found.attributes] == [("rotation", True), ("colour", False)]


def test_names_and_kinds_as_people_write_them() -> None:
    """Usual names are made one; a kind is known by any of its words."""
    assert attribute_name(" Pinion Diameter ") == "pinion-diameter"
    assert attribute_name("Voltage") == "volts"
    assert must_match("Brush sets") == must_match("brush")
    assert must_match("gasket") == ()


VALUES = st.dictionaries(
    st.sampled_from(["rotation", "volts", "teeth", "pitch", "colour"]), st.text(max_size=8), max_size=5
)


@given(VALUES, VALUES)
def test_never_fits_with_a_difference_or_without_proof(part: dict[str, str], model: dict[str, str]) -> None:
    """Whatever is typed: fits only where something that must match agrees and nothing differs or is unknown."""
    found = compare("starter", part, model)
    must = [one.state for one in found.attributes if one.must]
    if found.verdict is Fits.fits:
        assert must
        assert set(must) == {State.agrees}
    if State.differs in must:
        assert found.verdict is Fits.does_not_fit
