"""The parts of a report as plain lists and objects for the template: every text made printable, every word able to break.

Numbers come apart at the decimal mark, so that the template can align them. Nothing is left for the template to decide
but where things stand on the page.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from store.errors import brief
from store.reports import sections, wording
from store.reports.characters import breakable, in_print, one_line
from store.reports.contents import Report, WearRule
from store.reports.figures import instant, is_number, split

WIDTHS_MM = {"a4": 178.0, "letter": 183.9}
"""What is left of each paper's width between margins of 16 mm."""

_LABEL_MM, _LIMIT_MM, _CELL_MM, _RULE_MM = 43.0, 23.0, 18.5, 36.0
_MM_A_LETTER = 2.0
_RUNNING = "running tests"
_TOGETHER = 700
"""A row of more characters than this may be parted by the end of a page."""

Seen = Callable[[str], str]


def of(report: Report, seen: Seen = in_print) -> dict[str, Any]:
    """Everything the template draws, ready for JSON."""
    pen = _Pen(seen, WIDTHS_MM[report.paper])
    sources = wording.Sources()
    measured = wording.groups(report, sources, running=False)
    running = wording.groups(report, sources, running=True)
    issued = instant(report.issued)
    return {
        "document": {
            "title": pen.line(f"{sections.title(report)} {report.title}"),
            "author": pen.line(brief(report.shop.name, 200)),
            "description": pen.line(
                f"{report.unit.kind} {brief(report.unit.model)}, serial {brief(report.unit.serial)}"
            ),
            "keywords": ["tolerance report", pen.line(brief(report.tag))],
            "date": {
                "year": issued.year,
                "month": issued.month,
                "day": issued.day,
                "hour": issued.hour,
                "minute": issued.minute,
                "second": issued.second,
            },
        },  # fmt: skip
        "paper": {"a4": "a4", "letter": "us-letter"}[report.paper],
        "head": {
            "shop": pen.line(brief(report.shop.name, 44)),
            "unit": pen.line(unit_line(report)),
            "number": pen.line(brief(report.title, 40)),
        },
        "foot": pen.line(f"audit chain {report.audit_head[:16]}" if report.audit_head else "no audit chain"),
        "title": sections.title(report),
        "number": pen.text(report.title, 60),
        "shop": {"name": pen.line(report.shop.name), "address": pen.line(report.shop.address.replace("\n", ", "))},
        "notices": [pen.text(line, 170) for line in sections.notices(report)],
        "identity": pen.pairs(sections.identity(report), 60),
        "visit": pen.pairs(sections.visit(report), 60),
        "complaint": pen.text(report.complaint, 170),
        "standing": pen.pairs(sections.standing(report), 150),
        "findings": pen.table(sections.findings(report)),
        "measured": [pen.group(group) for group in measured],
        "running": [pen.group(group) for group in running],
        "diagnosis": [pen.text(line, 170) for line in report.diagnosis],
        "tables": [pen.table(table) for table in sections.tables(report, sources)],
        "decision": [pen.text(line, 170) for line in sections.decision(report)],
        "cautions": [pen.text(line, 170) for line in report.cautions],
        "people": pen.pairs(sections.people(report), 150),
        "to-sign": report.signature is not None,
        "promise": list(sections.PROMISE),
        "end": pen.line(brief(sections.end(report), 80)),
    }


def unit_line(report: Report) -> str:
    """Which unit this is, for the head of every page; long names are cut there, whole in the report."""
    unit = report.unit
    return f"{brief(unit.model, 24)}  serial {brief(unit.serial, 24)}  tag {brief(report.tag, 20)}"


class _Pen:
    """Writes the parts of one report: `seen` makes text printable, `line_mm` is the width of the page."""

    def __init__(self, seen: Seen, line_mm: float) -> None:
        self.seen, self.line_mm = seen, line_mm

    def text(self, text: str, mm: float) -> str:
        """Text for a place `mm` wide."""
        return breakable(self.seen(text), max(4, int(mm / _MM_A_LETTER)))

    def line(self, text: str) -> str:
        """Text on one line as wide as the page, as far as that goes."""
        return self.text(one_line(text), self.line_mm)

    def pairs(self, ledger: sections.Ledger, mm: float) -> list[tuple[str, str]]:
        return [(label, self.text(value, mm)) for label, value in ledger]

    def table(self, table: wording.Table) -> dict[str, Any]:
        total = sum(table.widths)
        widths = [self.line_mm * share / total - 2 for share in table.widths]
        rows = [
            {
                "cells": [self.text(cell, mm) for cell, mm in zip(row, widths, strict=True)],
                "together": sum(map(len, row)) < _TOGETHER,
            }
            for row in table.rows
        ]
        return {
            "title": table.title, "heads": table.heads, "widths": table.widths, "rows": rows, "note": table.note,
        }  # fmt: skip

    def group(self, group: wording.Group) -> dict[str, Any]:
        return {
            "component": self.text(group.component, self.line_mm) if group.component.casefold() != _RUNNING else "",
            "rows": [self.row(row) for row in group.rows],
        }

    def row(self, row: wording.Row) -> dict[str, Any]:
        drawn = {
            "label": self.text(row.label, _LABEL_MM),
            "unit": self.seen(row.unit),
            "limits": [(word, [self.text(part, _LIMIT_MM) for part in split(size)]) for word, size in row.limits],
            "limit-quiet": [self.text(line, _LIMIT_MM) for line in row.limit_quiet],
            "datum": self.text(row.datum, _LABEL_MM),
            "gauge": self.text(row.gauge, _RULE_MM),
            "found": self.cell(row.found),
            "left": self.cell(row.left),
            "rule": self.rule(row.rule),
            "says": [(verdict, self.text(line, self.line_mm)) for verdict, line in row.says],
        }
        return {**drawn, "together": _length(drawn) < _TOGETHER * 2}

    def cell(self, cell: wording.Cell | None) -> dict[str, Any] | None:
        if cell is None:
            return None
        return {
            "number": is_number(cell.value),
            "value": [self.text(part, _CELL_MM) for part in split(cell.value)],
            "detail": self.text(cell.detail, _CELL_MM),
            "verdict": cell.verdict,
            "quiet": [self.text(line, _CELL_MM) for line in cell.quiet],
            "readings": [(self.text(p, _CELL_MM), self.text(figure, _CELL_MM)) for p, figure in cell.readings],
        }

    def rule(self, rule: WearRule | None) -> dict[str, Any] | None:
        if rule is None:
            return None
        return {
            "inside": rule.inside,
            "limits": [{"at": place.at, "text": self.seen(brief(place.text, 12))} for place in rule.limits],
            "new": None if rule.new is None else {"at": rule.new.at, "text": self.seen(brief(rule.new.text, 12))},
            "guards": rule.guards,
            "ticks": rule.ticks,
            "faint": rule.faint,
            "judged": rule.judged,
        }


def _length(drawn: Any) -> int:
    """How many characters there are in all of it."""
    if isinstance(drawn, str):
        return len(drawn)
    if isinstance(drawn, dict):
        return sum(map(_length, drawn.values()))
    if isinstance(drawn, (list, tuple)):
        return sum(map(_length, drawn))
    return 0
