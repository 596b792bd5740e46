"""What the search over notes keeps in the record: the shop's shorthand, and the log of texts changed."""

from __future__ import annotations

from sqlmodel import Field, SQLModel


class ShorthandRow(SQLModel, table=True):
    """What the shop writes short. An empty long word takes a shipped line out."""

    __tablename__ = "shorthand"

    short: str = Field(primary_key=True)
    long: str


class TextChangeRow(SQLModel, table=True):
    """A row of `origin` whose text was changed or deleted; written by triggers, read by the index of the search."""

    __tablename__ = "text_change"

    id: int | None = Field(default=None, primary_key=True)
    origin: str
    row: int
