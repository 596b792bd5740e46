"""The report as plain lists and objects for the template; nothing is left to it but where things stand on the page."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from store.errors import brief
from store.reports import drawn_rows, sections, wear_rule, wording
from store.reports.characters import in_print
from store.reports.contents import Place, Report, WearRule
from store.reports.figures import instant
from store.reports.pen import Pen, Seen, highest

WIDTHS_MM = {"a4": 178.0, "letter": 183.9}
"""What is left of each paper's width between margins of 16 mm."""

PAPERS = {"a4": "a4", "letter": "us-letter"}
_PAIR_PT, _TABLE_PT = 8.5, 8.0
_PAIR_INSET_MM, _TABLE_INSET_MM, _TABLE_RIGHT_MM = 1.7, 2.0, 2.0
_TOGETHER = 1_000


def of(report: Report, seen: Seen = in_print) -> dict[str, Any]:
    """Everything the template draws, ready for JSON."""
    pen, line_mm = Pen(seen), WIDTHS_MM[report.paper]
    sources = wording.Sources()
    measured = wording.groups(report, sources, running=False)
    running = wording.groups(report, sources, running=True)
    half_mm = (line_mm - 8) / 2 - 21
    drawn_key = _key() if any(row.rule for group in measured for row in group.rows) else []
    return {
        "document": _document(pen, report),
        "paper": PAPERS[report.paper],
        "head": {
            "shop": pen.line(brief(report.shop.name, 44), 60),
            "unit": pen.line(unit_line(report), 60),
            "number": pen.line(brief(report.title, 40), 60),
        },
        "foot": pen.line(f"audit chain {report.audit_head[:16]}" if report.audit_head else "no audit chain", 100),
        "title": sections.title(report),
        "number": pen.block(report.title, 80, 13).text,
        "shop": {"name": pen.line(report.shop.name, line_mm), "address": _address(pen, report)},
        "notices": [pen.whole(line, line_mm) for line in sections.notices(report)],
        "identity": _pairs(pen, sections.identity(report), half_mm),
        "visit": _pairs(pen, sections.visit(report), half_mm),
        "complaint": pen.whole(report.complaint, line_mm),
        "standing": _pairs(pen, sections.standing(report), line_mm - 21, bold=True),
        "findings": _table(pen, sections.findings(report), line_mm),
        "columns": [*drawn_rows.COLUMNS_MM, line_mm - sum(drawn_rows.COLUMNS_MM)],
        "key": drawn_key,
        "measured": [drawn_rows.group(pen, group, line_mm) for group in measured],
        "running": [drawn_rows.group(pen, group, line_mm) for group in running],
        "diagnosis": [pen.whole(line, line_mm) for line in report.diagnosis],
        "tables": [_table(pen, table, line_mm) for table in sections.tables(report, sources)],
        "decision": [pen.whole(line, line_mm) for line in sections.decision(report)],
        "cautions": [pen.whole(line, line_mm) for line in report.cautions],
        "people": _pairs(pen, sections.people(report), line_mm - 24),
        "to-sign": report.signature is not None,
        "promise": list(sections.PROMISE),
        "end": pen.line(brief(sections.end(report), 80), line_mm),
    }


def unit_line(report: Report) -> str:
    """Which unit this is, for the head of every page; long names are cut there, whole in the report."""
    unit = report.unit
    return f"{brief(unit.model, 24)}  serial {brief(unit.serial, 24)}  tag {brief(report.tag, 20)}"


def _document(pen: Pen, report: Report) -> dict[str, Any]:
    issued, unit = instant(report.issued), report.unit
    return {
        "title": pen.line(f"{sections.title(report)} {brief(report.title, 200)}", 1_000),
        "author": pen.line(brief(report.shop.name, 200), 1_000),
        "description": pen.line(f"{unit.kind} {brief(unit.model)}, serial {brief(unit.serial)}", 1_000),
        "keywords": ["tolerance report", pen.line(brief(report.tag), 1_000)],
        "date": {
            "year": issued.year, "month": issued.month, "day": issued.day,
            "hour": issued.hour, "minute": issued.minute, "second": issued.second,
        },
    }  # fmt: skip


def _address(pen: Pen, report: Report) -> str:
    return pen.line(", ".join(report.shop.address.splitlines()), WIDTHS_MM[report.paper])


def _pairs(pen: Pen, ledger: sections.Ledger, mm: float, *, bold: bool = False) -> list[dict[str, Any]]:
    """Label and value lines, with the height of each line in millimeters or None."""
    made = []
    for label, value in ledger:
        block = pen.block(value, mm, _PAIR_PT, bold=bold)
        height = None if block.height_mm is None else round(block.height_mm + _PAIR_INSET_MM, 3)
        made.append({"label": label, "value": block.text, "height": height})
    return made


def _table(pen: Pen, table: wording.Table, line_mm: float) -> dict[str, Any]:
    total = sum(table.widths)
    widths = [round(line_mm * share / total, 2) for share in table.widths]
    rows = []
    for row in table.rows:
        blocks = [pen.block(text, mm - _TABLE_RIGHT_MM, _TABLE_PT) for text, mm in zip(row, widths, strict=True)]
        height = highest(*(block.height_mm for block in blocks))
        rows.append(
            {
                "cells": [block.text for block in blocks],
                "height": None if height is None else round(height + _TABLE_INSET_MM, 3),
                "together": sum(map(len, row)) < _TOGETHER,
            }
        )
    return {"title": table.title, "heads": table.heads, "widths": widths, "rows": rows, "note": table.note}


def _key() -> list[tuple[str, str]]:
    """Each mark of the wear rule alone, with what it means."""
    mark, far = 0.07, Place(2.0, "")
    bare = WearRule((0.0, 1.0), (), None)
    return [
        (wear_rule.svg(replace(bare, new=Place(mark, ""))), "new size"),
        (wear_rule.svg(replace(bare, limits=(Place(mark, ""), far))), "limit"),
        (wear_rule.svg(replace(bare, guards=((0.03, 0.11),))), "guard band"),
        (wear_rule.svg(replace(bare, inside=(0.15, 1.0))), "beyond the limit"),
        (wear_rule.svg(replace(bare, ticks=(mark,))), "reading"),
        (wear_rule.svg(replace(bare, faint=(mark,))), "reading of the other stage"),
        (wear_rule.svg(replace(bare, judged=mark)), "the value that is judged"),
    ]
