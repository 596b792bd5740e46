"""Gauges and their calibrations."""

from __future__ import annotations

from sqlalchemy import CheckConstraint
from sqlmodel import Field, SQLModel


class GaugeRow(SQLModel, table=True):
    """One gauge. `unit` is what its readings are in when none is typed; `repeatability` comes from a gauge study."""

    __tablename__ = "gauge"

    id: int | None = Field(default=None, primary_key=True)
    name: str = Field(unique=True)
    kind: str
    unit: str = ""
    resolution: str | None = None
    repeatability: str | None = None
    note: str = ""
    retired: bool = False


class CalibrationRow(SQLModel, table=True):
    """One calibration of a gauge: expanded uncertainty and coverage factor in the gauge's unit, and when the next is due."""

    __tablename__ = "calibration"
    __table_args__ = (CheckConstraint("result IN ('good','bad')", name="result_is_known"),)

    id: int | None = Field(default=None, primary_key=True)
    gauge_id: int = Field(foreign_key="gauge.id", index=True)
    calibrated: str | None = None
    due: str | None = None
    expanded_uncertainty: str | None = None
    k: str | None = None
    result: str = "good"
    by: str = ""
    note: str = ""
