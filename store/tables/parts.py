"""Part numbers: what they are, how they stand to each other, what they fit, and what was fitted."""

from __future__ import annotations

from sqlalchemy import CheckConstraint, Index
from sqlmodel import Field, SQLModel


class NumberRow(SQLModel, table=True):
    """One number of one maker, as printed; `key` and `folded` are made from it (see store.rules.numbers).

    A model that takes part in the lists has a row of its own here, found through its comparing key.
    """

    __tablename__ = "part_number"
    __table_args__ = (
        Index("one_number_a_maker", "number", "maker", unique=True),
        Index("part_number_folded", "folded"),
    )

    id: int | None = Field(default=None, primary_key=True)
    number: str
    maker: str = ""
    key: str
    folded: str
    kind: str = ""
    description: str = ""
    status: str = ""


class RelationRow(SQLModel, table=True):
    """What a list states of one number to another; `to_id` is empty only for a do-not-use of the number itself."""

    __tablename__ = "relation"
    __table_args__ = (
        CheckConstraint(
            "relation IN ('superseded-by','interchanges-with','same-as','substitute','holds','do-not-use')",
            name="relation_is_known",
        ),
        CheckConstraint("to_id IS NOT NULL OR relation = 'do-not-use'", name="relation_leads_somewhere"),
        CheckConstraint("to_id IS NULL OR to_id <> from_id", name="relation_is_not_to_itself"),
        Index("relation_onward", "from_id", "relation"),
        Index("relation_back", "to_id", "relation"),
    )

    id: int | None = Field(default=None, primary_key=True)
    from_id: int = Field(foreign_key="part_number.id")
    relation: str
    to_id: int | None = Field(default=None, foreign_key="part_number.id")
    caveat: str = ""
    source: str = ""
    dated: str = ""


class FitRow(SQLModel, table=True):
    """On whose word a number goes on a model, where, and how many."""

    __tablename__ = "fit"

    id: int | None = Field(default=None, primary_key=True)
    number_id: int = Field(foreign_key="part_number.id", index=True)
    model_id: int = Field(foreign_key="model.id", index=True)
    position: str = ""
    quantity: int | None = None
    source: str = ""


class PartSizeRow(SQLModel, table=True):
    """One size of a number: exact text in `unit`; `millionths` of the base unit (nanometres) is made from it, to search by."""

    __tablename__ = "part_size"
    __table_args__ = (Index("part_size_near", "name", "millionths"),)

    id: int | None = Field(default=None, primary_key=True)
    number_id: int = Field(foreign_key="part_number.id", index=True)
    name: str
    value: str
    unit: str
    millionths: int


class PartAttributeRow(SQLModel, table=True):
    """One attribute of a number or of a model."""

    __tablename__ = "part_attribute"
    __table_args__ = (
        CheckConstraint("(number_id IS NULL) <> (model_id IS NULL)", name="attribute_of_number_or_model"),
    )

    id: int | None = Field(default=None, primary_key=True)
    number_id: int | None = Field(default=None, foreign_key="part_number.id", index=True)
    model_id: int | None = Field(default=None, foreign_key="model.id", index=True)
    name: str
    value: str


class FittedRow(SQLModel, table=True):
    """A part fitted on a job: the number as printed on it, whether or not a list knows it; `key` is its comparing key.

    `checked` keeps what the cross-check said at that moment, `why` the reason given where it spoke against.
    """

    __tablename__ = "fitted"

    id: int | None = Field(default=None, primary_key=True)
    job_id: int = Field(foreign_key="job.id", index=True)
    number: str
    key: str = Field(index=True)
    maker: str = ""
    lot: str = Field(default="", index=True)
    supplier: str = Field(default="", index=True)
    position: str = ""
    quantity: int = 1
    by: str = ""
    at: str
    checked: str = ""
    why: str = ""
