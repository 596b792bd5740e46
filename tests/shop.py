"""A small invented shop for tests: one starter and one alternator with limits in both unit systems."""

from __future__ import annotations

from pathlib import Path

from store import files, jobs
from store.jobs import Job
from store.records import Record

MODELS = """model,kind,volts,rotation,bars,poles
KS-100,starter,12,cw,27,4
KA-300,alternator,28,cw,,
KG-200,generator,24,ccw,33,4
"""
LIMITS = """model,characteristic,stage,unit,new,low,high,at_limit,count,decision,source
KS-100,brush-length,both,mm,14,9.5,,pass,4,guarded-1.65u,"Sheet 12, rev B"
KS-100,commutator-diameter,both,mm,45,42.5,,pass,4,,"Sheet 12, rev B"
KS-100,commutator-runout,as-found,mm,,,0.05,pass,,,"Sheet 12, rev B"
KS-100,commutator-runout,as-left,mm,,,0.02,pass,,,"Sheet 12, rev B"
KS-100,growler-short,both,,,,,pass,,,"Sheet 12, rev B"
KS-100,end-play,both,mm,,0.1,0.3,pass,,,"Sheet 12, rev B"
KA-300,slip-ring-diameter,both,in,,0.767,,pass,2,simple,"Sheet 30"
"""
GAUGES = """gauge,kind,unit,resolution,expanded_uncertainty,k,calibrated,due
CAL-1,caliper,mm,0.01,0.03,2,2026-01-10,2027-01-10
MIC-1,outside micrometer,mm,0.01,0.004,2,2026-03-01,2026-09-01
"""


def fill(record: Record, folder: Path) -> None:
    """Load the small shop into a record, through the ordinary loaders."""
    paths = []
    for name, text in (("models", MODELS), ("limits", LIMITS), ("gauges", GAUGES)):
        path = folder / f"{name}.csv"
        path.write_text(text, encoding="utf-8")
        paths.append(path)
    files.load(record, paths)


def core(record: Record, serial: str = "88213", model: str = "KS-100") -> Job:
    """Take in a core."""
    return jobs.take_in(record, model=model, serial=serial, complaint="cranks slow")
