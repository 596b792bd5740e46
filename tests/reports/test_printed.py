"""The printed report, read back by another library: the checklist, PDF/A's marks, the attachment, and the same bytes."""

from __future__ import annotations

import json
from io import BytesIO
from pathlib import Path
from typing import Any

import pypdf
import pytest

from store import people, readings, releases, shop
from store.records import Record
from store.reports import canonical, gather, issue, pdf, text
from tests import shop as small
from tests.store.test_releases import GOOD, measure


@pytest.fixture
def released(record: Record, tmp_path: Path) -> str:
    """A released job with a correction, a concession and a gauge."""
    small.fill(record, tmp_path)
    shop.put(record, "shop", "Hollow Lane Rebuilders")
    shop.put(record, "address", "4 Hollow Lane, Marrowby")
    people.add(record, "AB", "Ada Birch")
    people.add(record.acting("AB"), "MW", "Mara Wend", "inspect")
    bench = record.acting("AB")
    tag = small.core(bench).tag
    readings.add(bench, tag, "as-found", "end-play", "0.2", gauge="CAL-1")
    readings.add(bench, tag, "as-found", "end-play", "0.4", why="wrong gauge zero", gauge="CAL-1")
    measure(bench, tag, {name: texts for name, texts in GOOD.items() if name != "end-play"})
    measure(bench, tag, {"end-play": ["0.35"]}, "CAL-1")
    releases.concede(record.acting("MW"), tag, "end-play", "owner agrees")
    releases.release(record.acting("MW"), tag)
    return tag


def pages(data: bytes) -> str:
    """All text of a PDF, white space folded."""
    return " ".join(" ".join(page.extract_text() for page in pypdf.PdfReader(BytesIO(data)).pages).split())


# ISO/IEC 17025:2017, 7.8.2.1 (a to p, as far as they concern such a report), read in a public summary
CHECKLIST = (
    ("a title", "Tolerance report"), ("b laboratory", "Hollow Lane Rebuilders"), ("c location", "4 Hollow Lane, Marrowby"),
    ("d unique number", "WL-000001"), ("d pages", "page 1 of"), ("d end", "end of report WL-000001"),
    ("g item", "88213"), ("g model", "KS-100"), ("h received", "2026-11-02"), ("j issued", "issued"),
    ("m results with units", "13.8"), ("m as left", "as left"), ("l relates to this unit", "this unit"),
    ("n departures", "owner agrees"), ("o who authorised", "Mara Wend"), ("measured by", "Ada Birch"),
    ("7.8.6 decision rule", "1.65 u"), ("limit with source", "Sheet 12, rev B"), ("gauge with calibration", "2026-01-10"),
    ("correction", "wrong gauge zero"), ("caution", "electrically safe"),
)  # fmt: skip


@pytest.mark.parametrize(("item", "words"), CHECKLIST)
def test_the_checklist(record: Record, released: str, item: str, words: str) -> None:
    """Each item of the checklist stands in the PDF and in the text file."""
    report, frozen = releases.standing(record, released)
    assert words.lower() in pages(pdf.draw(report, frozen)).lower(), item
    assert words.lower() in " ".join(text.write(report).split()).lower(), item


def test_marks_of_pdf_a(record: Record, released: str) -> None:
    """PDF/A's own marks as far as pypdf sees them: identifier, embedded fonts, no encryption, the attachment's relation."""
    reader = pypdf.PdfReader(BytesIO(issue.save(record, released, record.path.with_name("r.pdf")).read_bytes()))
    assert not reader.is_encrypted
    metadata = reader.xmp_metadata
    assert metadata is not None
    xml = metadata.stream.get_data().decode()
    assert "pdfaid:part" in xml
    for page in reader.pages:
        resources: Any = page["/Resources"]
        for font in resources.get("/Font", {}).values():
            inner = font.get_object()["/DescendantFonts"][0].get_object()
            assert any(key in inner["/FontDescriptor"].get_object() for key in ("/FontFile2", "/FontFile3"))
    root: Any = reader.trailer["/Root"]
    (spec,) = [entry.get_object() for entry in root["/AF"]]
    assert spec["/AFRelationship"] == "/Data"


def test_the_attachment_is_the_frozen_record(record: Record, released: str) -> None:
    """The JSON in the PDF is what was frozen, exact values as strings, and reads back as the same report."""
    report, frozen = releases.standing(record, released)
    reader = pypdf.PdfReader(BytesIO(pdf.draw(report, frozen)))
    ((attached,),) = reader.attachments.values()
    assert attached.decode() == frozen
    assert canonical.from_json(attached.decode()) == report
    assert json.loads(attached)["report"]["number"] == "WL-000001"


def test_the_same_bytes_each_time(record: Record, released: str) -> None:
    """PDF, text and JSON of a released and of an open job: twice the same."""
    open_tag = small.core(record.acting("AB"), "9").tag
    for tag in (released, open_tag):
        report, frozen = releases.standing(record, tag)
        assert pdf.draw(report, frozen) == pdf.draw(report, frozen)
        assert text.write(report) == text.write(report)
        assert canonical.to_json(report) == canonical.to_json(canonical.from_json(canonical.to_json(report)))


def test_text_keeps_to_eighty_columns(record: Record, released: str) -> None:
    """Pages are parted by form feeds; no line is wider than 80."""
    written = text.write(releases.standing(record, released)[0])
    sheets = written.split("\f")
    assert len(sheets) >= 2
    assert all(len(line) <= 80 for sheet in sheets for line in sheet.splitlines())
    assert all(f"page {n} of {len(sheets)}" in sheet for n, sheet in enumerate(sheets, start=1))


def test_a_draft_says_so_on_every_page(record: Record, tmp_path: Path) -> None:
    """Nobody can take a draft for evidence."""
    small.fill(record, tmp_path)
    report = gather.draft(record, small.core(record).tag)
    for page in pypdf.PdfReader(BytesIO(pdf.draw(report))).pages:
        assert "draft" in page.extract_text().lower()
