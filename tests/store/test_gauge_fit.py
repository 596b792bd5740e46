"""A gauge that is coarse for a tolerance is warned of in plan and report, and enters no verdict."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest

from store import plans, readings
from store.records import Record
from store.reports import gather
from store.rules.certainty import Certainty, coarse
from store.rules.limits import Limit, tolerance
from tests import shop as small

F = Fraction


@pytest.mark.parametrize(
    ("resolution", "expanded", "said"),
    [
        ("0.01", "0.0125", ""),
        ("0.0101", None, "its resolution of 0.0101 mm is over a tenth of the tolerance of 0.1 mm"),
        (None, "0.0126", "the tolerance of 0.1 mm is 4.0 times 2 U, under 4"),
        ("0.02", "0.05", "a tenth of the tolerance of 0.1 mm; the tolerance of 0.1 mm is 1.0 times 2 U, under 4"),
        (None, None, ""),
    ],
)
def test_both_sides_of_a_tenth_and_of_four(resolution: str | None, expanded: str | None, said: str) -> None:
    """Resolution to a tenth of the tolerance, tolerance to four times 2 U: common practice, no source."""
    known = Certainty(resolution and F(resolution), expanded and F(expanded), F(2), None, "mm")  # type: ignore[arg-type]
    found = coarse(known, F("0.1"), "mm")
    assert found.endswith(said)
    assert bool(found) == bool(said)


def test_other_units_and_quantities() -> None:
    """An inch gauge is brought to the limit's unit; one of another quantity says nothing."""
    assert "0.0254 mm is over" in coarse(Certainty(F("0.001"), unit="in"), F("0.2"), "mm")
    assert coarse(Certainty(F(1), unit="V"), F("0.2"), "mm") == ""


def test_what_a_tolerance_is() -> None:
    """End to end, or new size to limit; a limit with one end alone has none."""
    assert tolerance(Limit("mm", low=F(1), high=F(3))) == 2
    assert tolerance(Limit("mm", new=F(14), low=F("9.5"))) == F("4.5")
    assert tolerance(Limit("mm", new=F(0), high=F(2))) == 2
    assert tolerance(Limit("mm", high=F(2))) is None


def test_warned_of_in_plan_and_report(record: Record, tmp_path: Path) -> None:
    """End play 0.1 to 0.3 by a caliper with U 0.03: 3.3 times 2 U. The verdict is what it was."""
    small.fill(record, tmp_path)
    tag = small.core(record).tag
    readings.add(record, tag, "as-found", "end-play", "0.2", gauge="CAL-1")
    said = "gauge CAL-1 is coarse for this limit: the tolerance of 0.2 mm is 3.3 times 2 U, under 4"
    assert f"armature end play: {said}" in plans.compute(record, tag).remarks
    (one,) = [c for c in gather.draft(record, tag).characteristics if c.name == "end-play"]
    found = one.at("as-found")
    assert found is not None
    assert (found.verdict, found.remarks) == ("in", (said,))
