"""Verdicts in the form in which they leave the program: the contract of `judge --json` and of the report's attachment."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from store.rules import quantities
from store.sheets import Sheet, SheetRow


def as_json(sheets: Sequence[Sheet]) -> dict[str, Any]:
    """`{tag, model, revision, stages: {stage: {standing, verdicts}}}`; sizes are exact decimal strings with their unit."""
    job = sheets[0].job
    return {
        "tag": job.tag,
        "model": job.model,
        "revision": job.revision,
        "stages": {
            sheet.stage: {"standing": sheet.standing, "verdicts": [of_row(r) for r in sheet.rows if r.is_expected]}
            for sheet in sheets
        },
    }


def of_row(row: SheetRow) -> dict[str, Any]:
    """One row of a sheet as the contract has it; a computed figure is a number, None where it is not known."""
    limit, judged = row.limit, row.judged
    judgement = judged.judgement if judged else None
    value = judgement.value if judgement else None
    return {
        "characteristic": row.characteristic.name,
        "component": row.characteristic.component,
        "statistic": row.characteristic.statistic.value,
        "value": None if value is None else quantities.plain(value),
        "unit": (judgement.unit if judgement else "") or (limit.unit if limit else row.characteristic.unit),
        "low": limit.low if limit else None,
        "high": limit.high if limit else None,
        "verdict": row.verdict.value,
        "because": judged.because if judged else "no reading",
        "rule": judgement.rule if judgement else (limit.limit.rule.value if limit else None),
        "probability": judgement.probability if judgement else None,
        "wear_used": judgement.wear_used if judgement else None,
        "count": judgement.count if judgement else 0,
        "expected": judgement.expected if judgement else (limit.limit.expected if limit else len(row.positions)),
        "worst_at": judgement.worst_at if judgement else "",
        "source": limit.source if limit else None,
    }
