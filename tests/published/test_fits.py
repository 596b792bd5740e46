"""Fits against printed tables: TM 5-6115-457-34 Table 1-1, and textbook ISO 286 fits."""

from __future__ import annotations

import json
from fractions import Fraction
from io import BytesIO
from pathlib import Path

import pypdf
import pytest
from click.testing import CliRunner

from store import files, jobs, readings, sheets, verdicts
from store.records import Record
from store.reports import gather, pdf
from store.rules import derived, iso_fits
from store.rules.limits import Measured
from store.rules.quantities import Quantity
from store.rules.readings import parse
from tests.screens.support import opened, settled, text_of

# TM 5-6115-457-34 Table 1-1, starting motor, inches (read in the source). L loose, T tight: tight is below zero.
TABLE = """model,characteristic,unit,new,low,high,count,source
TM-457,commutator-end-bore,in,0.6270,,0.6320,1,TM 5-6115-457-34 Table 1-1
TM-457,commutator-end-journal,in,0.6230,0.6200,,1,TM 5-6115-457-34 Table 1-1
TM-457,commutator-end-clearance,in,,0.0010,0.0040,,TM 5-6115-457-34 Table 1-1
TM-457,center-bore,in,0.8760,,0.8780,1,TM 5-6115-457-34 Table 1-1
TM-457,center-journal,in,0.8700,0.8670,,1,TM 5-6115-457-34 Table 1-1
TM-457,center-clearance,in,,0.0020,0.0080,,TM 5-6115-457-34 Table 1-1
TM-457,bushing-housing-fit,in,,-0.0050,-0.0030,,TM 5-6115-457-34 Table 1-1
"""
WORN = {"center-bore": "0.8780", "center-journal": "0.8670"}


@pytest.fixture
def worn(record: Record, tmp_path: Path) -> str:
    """The table as a limits file, the worn pair as readings."""
    (tmp_path / "models.csv").write_text("model,kind\nTM-457,starter\n")
    (tmp_path / "limits.csv").write_text(TABLE)
    files.load(record, [tmp_path / "models.csv", tmp_path / "limits.csv"])
    tag = jobs.take_in(record, model="TM-457", serial="1").tag
    for name, text in WORN.items():
        readings.add(record, tag, "as-found", name, text)
    return tag


def test_both_parts_in_the_fit_out(record: Record, worn: str) -> None:
    """Bearing 0.8780 and shaft 0.8670 sit at their wear limits and pass; their fit is 0.0110 loose and fails."""
    found = {
        v["characteristic"]: v
        for v in verdicts.as_json([sheets.sheet(record, worn, "as-found")])["stages"]["as-found"]["verdicts"]
    }
    assert (found["center-bore"]["verdict"], found["center-journal"]["verdict"]) == ("in", "in")
    fit = found["center-clearance"]
    assert (fit["verdict"], fit["value"], fit["unit"]) == ("out", "0.011", "in")
    assert "0.0110 in, 0.0030 over the 0.0080 maximum" in fit["because"]


def test_the_same_by_command_and_in_the_pdf(record: Record, worn: str) -> None:
    """JSON of the command and text of the PDF say what the sheet says."""
    from tui.commands import cli

    done = CliRunner().invoke(
        cli, ["judge", worn, "--stage", "as-found", "--json", "--record", str(record.path)], catch_exceptions=False
    )
    said = {v["characteristic"]: v["verdict"] for v in json.loads(done.output)["stages"]["as-found"]["verdicts"]}
    assert (said["center-bore"], said["center-journal"], said["center-clearance"]) == ("in", "in", "out")
    text = "".join(page.extract_text() for page in pypdf.PdfReader(BytesIO(pdf.draw(gather.draft(record, worn)))).pages)
    assert "0.0110" in text
    assert "0.0030 over the 0.0080 maximum" in " ".join(text.split())


async def test_the_same_on_the_screen(record: Record, worn: str) -> None:
    """The sheet shows the two parts in and the fit out."""
    record.close()
    async with opened(record.path, (120, 40)) as pilot:
        pilot.app.go("job", worn)
        await settled(pilot)
        lines = {line[:26].strip(): line for line in text_of(pilot).splitlines()}
        assert " in " in lines["centre bushing bore"]
        assert " in " in lines["centre journal diameter"]
        assert "0.0110 in" in lines["centre running clearance"]
        assert "OUT" in lines["centre running clearance"]


def _clearances(bores: list[str], journals: list[str], unit: str) -> tuple[Fraction, Fraction]:
    """The tightest and the loosest fit of parts within their limits."""
    sizes = {
        name: [Measured(str(n), parse(text, Quantity.length, unit)) for n, text in enumerate(texts)]
        for name, texts in (("b", bores), ("j", journals))
    }
    loose = derived.judge("clearance b j", sizes, None).value
    assert loose is not None
    tight = min(m.typed.value for m in sizes["b"] if m.typed.value is not None) - max(
        m.typed.value for m in sizes["j"] if m.typed.value is not None
    )
    return tight, loose


@pytest.mark.parametrize(
    ("bores", "journals", "unit", "tight", "loose"),
    [
        # TM 5-6115-457-34 Table 1-1: fits of new parts, read in the source
        (["0.6260", "0.6270"], ["0.6230", "0.6250"], "in", "0.0010", "0.0040"),
        (["0.8740", "0.8760"], ["0.8700", "0.8720"], "in", "0.0020", "0.0060"),
        (["0.9990", "1.0000"], ["1.0030", "1.0040"], "in", "-0.0050", "-0.0030"),
        # Bhandari, Design of Machine Elements, ch. 3: 20H6/e7 and 20H7/s6, read in a secondary text
        (["20.013", "20.000"], ["19.960", "19.939"], "mm", "0.040", "0.074"),
        (["20.021", "20.000"], ["20.048", "20.035"], "mm", "-0.048", "-0.014"),
        # ISO 286: 12H7 +18/0, 12f7 -16/-34 um, read in a secondary text
        (["12.018", "12.000"], ["11.984", "11.966"], "mm", "0.016", "0.052"),
    ],
)
def test_fits_as_printed(bores: list[str], journals: list[str], unit: str, tight: str, loose: str) -> None:
    """The tightest and loosest fit of the printed sizes are those that are printed."""
    assert _clearances(bores, journals, unit) == (Fraction(tight), Fraction(loose))


@pytest.mark.parametrize(
    ("low", "high", "is_hole", "name"),
    [
        ("20.000", "20.013", True, "20H6"),
        ("20.000", "20.021", True, "20H7"),
        ("19.939", "19.960", False, "20e7"),
        ("20.035", "20.048", False, "20s6"),
        ("12.000", "12.018", True, "12H7"),
        ("11.966", "11.984", False, "12f7"),
        ("20.000", "20.022", True, ""),
        ("19.939", "19.960", True, ""),
    ],
)
def test_iso_286_names(low: str, high: str, is_hole: bool, name: str) -> None:
    """Bhandari, Design of Machine Elements, ch. 3 (20 mm pairs) and ISO 286 (12 mm pairs), in secondary texts; else no name."""
    assert iso_fits.named(Fraction(low), Fraction(high), is_hole=is_hole) == name
