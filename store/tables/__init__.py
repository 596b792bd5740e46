"""The tables of the record, one module an area. Nothing outside `store` sees a row; it is handed values."""

from __future__ import annotations

from store.tables import audit, gauges, jobs, limits, models, notes, parts, people, readings, releases, rework, search

__all__ = [
    "audit",
    "gauges",
    "jobs",
    "limits",
    "models",
    "notes",
    "parts",
    "people",
    "readings",
    "releases",
    "rework",
    "search",
]
