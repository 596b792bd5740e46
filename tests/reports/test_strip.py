"""The strip chart of bars in the report: in figures in the text, drawn in the PDF, from the readings of the report alone."""

from __future__ import annotations

from dataclasses import replace
from io import BytesIO
from pathlib import Path

import pypdf
import pytest

from store import files, readings
from store.readings import Entry
from store.records import Record
from store.reports import canonical, contents, gather, pdf, strip, text
from tests import shop as small

LIMITS = "model,characteristic,stage,unit,high,count,source\nKS-100,bar-to-bar,both,%,10,27,own\n"


@pytest.fixture
def report(record: Record, tmp_path: Path) -> contents.Report:
    """A core of 27 bars, bar 9 low, as found."""
    small.fill(record, tmp_path)
    (tmp_path / "bars.csv").write_text(LIMITS)
    files.load(record, [tmp_path / "bars.csv"])
    tag = small.core(record).tag
    readings.add_all(record, tag, [Entry("bar-to-bar", "40" if bar == 9 else "50") for bar in range(1, 28)])
    return gather.draft(record, tag)


def bars_of(report: contents.Report) -> contents.Result:
    """The result as found."""
    (one,) = [c for c in report.characteristics if c.name == "bar-to-bar"]
    found = one.at("as-found")
    assert found is not None
    return found


def test_the_pattern_is_a_remark_and_stands_in_the_json(report: contents.Report) -> None:
    """One sentence: pattern, median, furthest bar."""
    assert bars_of(report).remarks == (
        "one low at 9: a short is suspected there; median 50 mV, furthest bar 9, 20.0 %",
    )
    assert "a short is suspected there" in canonical.to_json(report)


def test_in_the_text_a_figure_a_bar(report: contents.Report) -> None:
    """4 is even, 0 the furthest low, in tens."""
    printed = text.write(report)
    assert "as found, bars 1 to 27: 4444444404 4444444444 4444444" in printed
    assert "one low at 9: a short is suspected there" in " ".join(printed.split())


def test_in_the_pdf_it_is_drawn(report: contents.Report) -> None:
    """The drawing has its words, and the loud ink for the bar beyond the limit."""
    made = strip.of(bars_of(report))
    assert made is not None
    drawn = strip.svg(made)
    assert drawn.count("<path") == 27 + 3
    assert drawn.count("#a4161a") == 1
    pages = pypdf.PdfReader(BytesIO(pdf.draw(report))).pages
    said = " ".join("".join(page.extract_text() for page in pages).split())
    assert "bars 1 to 27 from left to right, deviation from the median, dashed the limit of 10 %" in said
    assert "one low at 9: a short is suspected there" in said


def test_a_bar_that_was_not_read_is_a_gap(report: contents.Report) -> None:
    """Bars 4 to 6 left out: their places stay empty."""
    found = bars_of(report)
    kept = tuple(r for r in found.readings if r.position not in {"4", "5", "6"})
    made = strip.of(replace(found, readings=kept))
    assert made is not None
    assert strip.figures(made) == "444...4404 4444444444 4444444"


def test_a_report_issued_before_prints_as_it_was(report: contents.Report) -> None:
    """No remark, no chart: what was frozen before there were charts gets none."""
    assert strip.of(replace(bars_of(report), remarks=())) is None


def test_a_thousand_bars_still_print(record: Record, tmp_path: Path) -> None:
    """Long lines are broken, and nothing runs off the page."""
    (tmp_path / "models.csv").write_text("model,kind,bars\nKL-900,generator,1000\n")
    (tmp_path / "limits.csv").write_text("model,characteristic,unit,high,source\nKL-900,bar-to-bar,%,5,own sheet\n")
    files.load(record, [tmp_path / "models.csv", tmp_path / "limits.csv"])
    tag = small.core(record, "1", "KL-900").tag
    readings.add_all(record, tag, [Entry("bar-to-bar", str(50 + n % 3)) for n in range(1000)])
    made = gather.draft(record, tag)
    assert max(map(len, text.write(made).splitlines())) <= 100
    assert pdf.draw(made)
