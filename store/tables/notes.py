"""Notes and findings of a job."""

from __future__ import annotations

from sqlmodel import Field, SQLModel


class NoteRow(SQLModel, table=True):
    """One timed note, by whom."""

    __tablename__ = "note"

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id", index=True)
    at: str
    by: str
    text: str


class FindingRow(SQLModel, table=True):
    """What was found wrong: component, mode, mechanism and cause are kept apart (as ISO 14224 keeps them)."""

    __tablename__ = "finding"

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id", index=True)
    component: str
    mode: str
    mechanism: str = ""
    cause: str = ""
    note: str = ""
    at: str
    by: str
