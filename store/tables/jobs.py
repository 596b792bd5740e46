"""Jobs: one visit of one unit."""

from __future__ import annotations

from sqlalchemy import CheckConstraint
from sqlmodel import Field, SQLModel


class JobRow(SQLModel, table=True):
    """One visit; `tag` is the short number on the ticket. The limit revision it is judged by is pinned.

    `outcome` is open until the job ends; `from_history` marks an ending that was loaded, not signed here.
    """

    __tablename__ = "job"
    __table_args__ = (
        CheckConstraint("outcome IN ('open','released','scrapped','returned')", name="outcome_is_known"),
        CheckConstraint(
            "comeback_outcome IN ('','workmanship','part','wear','system','installation','wrong-part','no-fault','not-ours')",
            name="comeback_outcome_is_known",
        ),
    )

    id: int | None = Field(default=None, primary_key=True)
    tag: str = Field(unique=True)
    key: str = Field(index=True)
    unit_id: int = Field(foreign_key="unit.id", index=True)
    revision_id: int | None = Field(default=None, foreign_key="revision.id")
    customer: str = ""
    application: str = ""
    hours: str | None = None
    starts: str | None = None
    complaint: str = ""
    taken_in: str = Field(index=True)
    by: str = ""
    assembled_by: str = ""
    outcome: str = Field(default="open", index=True)
    ended: str | None = None
    ended_by: str = ""
    earlier_id: int | None = Field(default=None, foreign_key="job.id", index=True)
    comeback_outcome: str = ""
    from_history: bool = False
