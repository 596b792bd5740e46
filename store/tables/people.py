"""Who works in the shop, and the shop's own settings."""

from __future__ import annotations

from sqlmodel import Field, SQLModel


class PersonRow(SQLModel, table=True):
    """One person; `may` holds the rights that are granted, separated by semicolons (bench, inspect, own)."""

    __tablename__ = "person"

    id: int | None = Field(default=None, primary_key=True)
    initials: str = Field(unique=True)
    name: str
    may: str = "bench"
    pin: str | None = None
    active: bool = True


class SettingRow(SQLModel, table=True):
    """One named setting of the shop, kept as typed."""

    __tablename__ = "setting"

    name: str = Field(primary_key=True)
    value: str
