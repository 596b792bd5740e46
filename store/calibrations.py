"""Calibrating a gauge: later readings are as sure as it says, and what it touched is judged anew."""

from __future__ import annotations

from store import gauges, judgements
from store.gauges import Gauge
from store.records import Record


def enter(
    record: Record, name: str, *, expanded_uncertainty: str = "", k: str = "2", calibrated: str = "", due: str = "",
    result: str = "good", note: str = "",
) -> Gauge:  # fmt: skip
    """Enter a calibration of a gauge, of today unless `calibrated` says when. Raises Refused, NotFound."""
    gauge = gauges.find(record, name)
    on = calibrated or record.now()[:10]
    with record.change("gauge calibrated", gauge.name) as change:
        gauges.calibrate_in(change, gauge.id, gauge.name, gauge.unit, expanded_uncertainty, k, on, due, result, note)
        record.forget(change.conn, "gauges")
        judgements.rebuild_by_gauge(record, change.conn, gauge.id)
    return gauges.find(record, name)
