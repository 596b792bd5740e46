"""Whether the gauges of a row are fine enough for its limit: a warning beside the verdict, never part of it."""

from __future__ import annotations

from collections.abc import Iterator

from sqlalchemy import Connection

from store import gauges
from store.records import Record
from store.rules import certainty, limits
from store.sheets import SheetRow


def said(record: Record, conn: Connection, row: SheetRow) -> Iterator[str]:
    """A sentence for each gauge that is coarse for the tolerance, by its calibration when it was last used here."""
    tolerance = None if row.limit is None else limits.tolerance(row.limit.limit)
    if row.limit is None or tolerance is None or row.limit.limit.unit in {"", "%"}:
        return
    last = {r.gauge: r.at for r in sorted(filter(None, row.readings), key=lambda r: r.at) if r.gauge}
    for name, at in sorted(last.items()):
        why = certainty.coarse(gauges.find(record, name, conn).certainty_at(at), tolerance, row.limit.limit.unit)
        if why:
            yield f"gauge {name} is coarse for this limit: {why}"
