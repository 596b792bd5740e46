"""Readings (append-only) and the judgements derived from them."""

from __future__ import annotations

from sqlalchemy import CheckConstraint, Index, text
from sqlmodel import Field, SQLModel


class ReadingRow(SQLModel, table=True):
    """One typed value of one characteristic at one position at one stage.

    Rows are never updated or deleted (triggers refuse both). Each index costs a page of every durable write, so there is
    no more than one that is always written; a gauge's readings are found by a scan, which a recall can wait for.
    `corrects_id` names the reading that this one replaces;
    `why` says for what reason. `value` is exact decimal or fraction text in `unit`; None for marks.
    """

    __tablename__ = "reading"
    __table_args__ = (
        CheckConstraint("stage IN ('as-found','as-left')", name="stage_is_known"),
        Index("reading_of_job", "job_id", "stage", "characteristic_id"),
        Index("reading_corrected_once", "corrects_id", unique=True, sqlite_where=text("corrects_id IS NOT NULL")),
    )

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id")
    stage: str
    characteristic_id: int = Field(foreign_key="characteristic.id")
    position: str
    typed: str
    mark: str
    value: str | None = None
    unit: str = ""
    places: int = 0
    detail: str = ""
    gauge_id: int | None = Field(default=None, foreign_key="gauge.id")
    at: str
    by: str
    note: str = ""
    corrects_id: int | None = Field(default=None, foreign_key="reading.id")
    why: str = ""


class JudgementRow(SQLModel, table=True):
    """The judgement of one characteristic at one stage of one job; derived, can be rebuilt from the readings.

    `size` is the judged value in the characteristic's own unit, for charts and reviews; `kept` holds the exact judgement.
    """

    __tablename__ = "judgement"
    __table_args__ = {"sqlite_with_rowid": False}

    job_id: int = Field(foreign_key="job.id", primary_key=True)
    stage: str = Field(primary_key=True)
    characteristic_id: int = Field(foreign_key="characteristic.id", primary_key=True)
    limit_id: int | None = Field(default=None, foreign_key="wear_limit.id")
    verdict: str
    size: float | None = None
    kept: str
