"""The rework list of a job: lines of the plan that were accepted, and what came of them."""

from __future__ import annotations

from sqlalchemy import CheckConstraint
from sqlmodel import Field, SQLModel


class ReworkRow(SQLModel, table=True):
    """One accepted line. `predicted` is JSON, a list of [characteristic, exact size, unit]; predictions are no readings."""

    __tablename__ = "rework_line"
    __table_args__ = (CheckConstraint("outcome IN ('open','done','declined')", name="outcome_is_known"),)

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id", index=True)
    component: str
    action: str
    because: str
    formula: str = ""
    predicted: str = "[]"
    at: str
    by: str
    outcome: str = "open"
    note: str = ""
    ended: str | None = None
    ended_by: str = ""
