"""The audit chain: every change, who, when, from what to what."""

from __future__ import annotations

from sqlmodel import Field, SQLModel


class AuditRow(SQLModel, table=True):
    """One entry. `changes` is canonical JSON; `hash` covers this entry and, through `previous`, all before it."""

    __tablename__ = "audit"

    id: int | None = Field(default=None, primary_key=True)
    at: str
    by: str
    action: str
    subject: str
    changes: str
    previous: str
    hash: str
