"""The files of the invented shop as text, by name."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterable, Sequence

from tests.demo_shop import parts
from tests.demo_shop.life import Shop
from tests.demo_shop.sheets import GAUGES, MODELS, TESTS, Line, sheet

SHOP = (
    ("shop", "Hollow Lane Rebuilders"), ("address", "4 Hollow Lane, Marrowby"), ("warranty_days", "365"), ("polish", "0.02 mm"),
    ("decision", "guarded-1.65u"), ("false_discovery", "0.1"),
)  # fmt: skip
PEOPLE = (
    ("AB", "Ada Birch", "bench"), ("CN", "Cole Nash", "bench"), ("ET", "Etta Thorn", "bench;inspect"), ("MW", "Mara Wend", "inspect"),
    ("OV", "Otto Vale", "bench;inspect;own"),
)  # fmt: skip
INCH_PLACES = {3: 4, 2: 3, 1: 2, 0: 1}


def files() -> dict[str, str]:
    """Every file of the demo, name to text."""
    books = Shop().run()
    return {
        "shop.csv": _csv(("name", "value"), SHOP),
        "people.csv": _csv(("initials", "name", "may"), PEOPLE),
        "models.csv": _csv(
            ("model", "kind", "volts", "rotation", "viewed_from", "teeth", "bars", "poles", "may_turn", "may_undercut", "note"),
            (
                (m.number, m.kind, m.volts, m.rotation, "drive end", m.teeth, m.bars, m.poles, _yes(m.may_turn), _yes(m.may_turn), m.note)
                for m in MODELS
            ),
        ),
        "limits.csv": _csv(
            ("model", "characteristic", "stage", "unit", "new", "low", "high", "at_limit", "count", "decision", "source", "note"), _limits()
        ),
        "gauges.csv": _csv(("gauge", "kind", "unit", "resolution", "expanded_uncertainty", "k", "calibrated", "due", "note"), GAUGES),
        "jobs.csv": _csv(
            ("tag", "model", "serial", "taken_in", "customer", "application", "hours", "starts", "complaint", "by", "assembled_by",
             "outcome", "ended", "ended_by", "earlier_tag", "comeback_outcome"), books.jobs,
        ),
        "readings.csv": _csv(("tag", "stage", "characteristic", "value", "position", "unit", "gauge", "by", "at"), books.readings),
        "notes.csv": _csv(("tag", "text", "at", "by"), books.notes),
        "findings.csv": _csv(("tag", "component", "mode", "mechanism", "cause", "note"), books.findings),
        "numbers.csv": _csv(("number", "kind", "maker", "description", "status"), parts.numbers()),
        "relations.csv": _csv(
            ("from_number", "relation", "from_maker", "to_number", "to_maker", "caveat", "source", "dated"), parts.relations()
        ),
        "fits.csv": _csv(("number", "model", "maker", "position", "quantity", "source"), parts.fits()),
        "sizes.csv": _csv(("number", "name", "value", "unit", "maker"), parts.sizes()),
        "attributes.csv": _csv(("name", "value", "number", "maker", "model"), parts.attributes()),
        "fitted.csv": _csv(("tag", "number", "maker", "lot", "supplier", "position", "quantity", "by", "at"), books.fitted),
    }  # fmt: skip


def _limits() -> Iterable[tuple[object, ...]]:
    for number, model in enumerate(MODELS, start=1):
        if not model.limits:
            continue
        rule = "simple" if model.number == "KA-285" else ""
        if model.number == "KS-240":
            source = f"own limit, Hollow Lane sheet {number}, edition 2, page 3"
            yield (
                model.number,
                "bar-to-bar",
                "as-found",
                "%",
                "",
                "",
                "8",
                "pass",
                model.bars,
                rule,
                source,
                "deviation from the median",
            )
        for line in sheet(model):
            unit, new, low, high = _sizes(line, model.inch)
            at_limit = "fail" if line.characteristic == "brush-spring-force" else "pass"
            source = f"Hollow Lane sheet {number}, edition 2, page {1 + len(line.characteristic) % 3}"
            yield (
                model.number,
                line.characteristic,
                line.stage,
                unit,
                new,
                low,
                high,
                at_limit,
                line.count or "",
                rule,
                source,
                "",
            )


def _sizes(line: Line, inch: bool) -> tuple[str, str, str, str]:
    if line.characteristic in TESTS:
        return "", "", "", ""
    if inch and line.lengths:
        places = INCH_PLACES[line.places]
        return "in", *("" if v is None else f"{v / 25.4:.{places}f}" for v in (line.new, line.low, line.high))  # type: ignore[return-value]
    return line.unit, *("" if v is None else f"{v:.{line.places}f}" for v in (line.new, line.low, line.high))  # type: ignore[return-value]


def _yes(value: bool) -> str:
    return "yes" if value else "no"


def _csv(columns: Sequence[str], rows: Iterable[Sequence[object]]) -> str:
    out = io.StringIO()
    writer = csv.writer(out, lineterminator="\n")
    writer.writerow(columns)
    writer.writerows(["" if cell is None else cell for cell in row] for row in rows)
    return out.getvalue()
