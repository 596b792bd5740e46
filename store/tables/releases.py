"""Concessions, and the reports that ended a job: frozen, numbered, never changed."""

from __future__ import annotations

from sqlalchemy import CheckConstraint
from sqlmodel import Field, SQLModel


class ConcessionRow(SQLModel, table=True):
    """A named person accepts a stated departure of one characteristic of a job, with a reason."""

    __tablename__ = "concession"

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id", index=True)
    characteristic_id: int = Field(foreign_key="characteristic.id")
    departure: str
    because: str
    by: str
    at: str


class ReleaseRow(SQLModel, table=True):
    """One issued report. `report` is its canonical JSON, `digest` the SHA-256 of that text, `head` the head of the audit
    chain before it was issued; `amends_id` names the report whose place it takes.
    """

    __tablename__ = "release"
    __table_args__ = (CheckConstraint("outcome IN ('released','scrapped','returned')", name="outcome_is_known"),)

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id", index=True)
    number: str = Field(unique=True)
    outcome: str
    at: str
    by: str
    why: str = ""
    amends_id: int | None = Field(default=None, foreign_key="release.id", unique=True)
    head: str
    digest: str
    report: str
