"""Limit sheets: a model's wear limits in numbered revisions, each limit with its source."""

from __future__ import annotations

from sqlalchemy import CheckConstraint, UniqueConstraint
from sqlmodel import Field, SQLModel


class RevisionRow(SQLModel, table=True):
    """One revision of a model's limit sheet. Its limits never change once it stands; a change is a new revision."""

    __tablename__ = "revision"
    __table_args__ = (
        UniqueConstraint("model_id", "number", name="one_revision_a_number"),
        CheckConstraint("decision IN ('simple','guarded-1.65u','guarded-U')", name="decision_is_known"),
    )

    id: int | None = Field(default=None, primary_key=True)
    model_id: int = Field(foreign_key="model.id")
    number: int
    decision: str
    at: str
    by: str
    why: str = ""


class LimitRow(SQLModel, table=True):
    """One wear limit. Sizes are exact decimal or fraction text in `unit`."""

    __tablename__ = "wear_limit"
    __table_args__ = (
        UniqueConstraint("revision_id", "characteristic_id", "stage", name="one_limit_a_stage"),
        CheckConstraint("stage IN ('as-found','as-left','both')", name="stage_is_known"),
        CheckConstraint("at_limit IN ('pass','fail')", name="at_limit_is_known"),
    )

    id: int | None = Field(default=None, primary_key=True)
    revision_id: int = Field(foreign_key="revision.id")
    characteristic_id: int = Field(foreign_key="characteristic.id")
    stage: str = "both"
    unit: str = ""
    new: str | None = None
    low: str | None = None
    high: str | None = None
    at_limit: str = "pass"
    count: int | None = None
    source: str
    note: str = ""
