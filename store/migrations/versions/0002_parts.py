"""Parts: numbers, relations between them, what they fit, sizes, attributes, and what was fitted."""

from __future__ import annotations

from alembic import op

revision = "0002"
down_revision = "0001"

TABLES = (
    """CREATE TABLE part_number (
    id INTEGER NOT NULL,
    number VARCHAR NOT NULL,
    maker VARCHAR NOT NULL,
    "key" VARCHAR NOT NULL,
    folded VARCHAR NOT NULL,
    kind VARCHAR NOT NULL,
    description VARCHAR NOT NULL,
    status VARCHAR NOT NULL,
    PRIMARY KEY (id)
)""",
    "CREATE UNIQUE INDEX one_number_a_maker ON part_number (number, maker)",
    "CREATE INDEX part_number_folded ON part_number (folded)",
    """CREATE TABLE relation (
    id INTEGER NOT NULL,
    from_id INTEGER NOT NULL,
    relation VARCHAR NOT NULL,
    to_id INTEGER,
    caveat VARCHAR NOT NULL,
    source VARCHAR NOT NULL,
    dated VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT relation_is_known CHECK (relation IN ('superseded-by','interchanges-with','same-as','substitute','holds','do-not-use')),
    CONSTRAINT relation_leads_somewhere CHECK (to_id IS NOT NULL OR relation = 'do-not-use'),
    CONSTRAINT relation_is_not_to_itself CHECK (to_id IS NULL OR to_id <> from_id),
    FOREIGN KEY(from_id) REFERENCES part_number (id),
    FOREIGN KEY(to_id) REFERENCES part_number (id)
)""",
    "CREATE INDEX relation_back ON relation (to_id, relation)",
    "CREATE INDEX relation_onward ON relation (from_id, relation)",
    """CREATE TABLE fit (
    id INTEGER NOT NULL,
    number_id INTEGER NOT NULL,
    model_id INTEGER NOT NULL,
    position VARCHAR NOT NULL,
    quantity INTEGER,
    source VARCHAR NOT NULL,
    PRIMARY KEY (id),
    FOREIGN KEY(number_id) REFERENCES part_number (id),
    FOREIGN KEY(model_id) REFERENCES model (id)
)""",
    "CREATE INDEX ix_fit_model_id ON fit (model_id)",
    "CREATE INDEX ix_fit_number_id ON fit (number_id)",
    """CREATE TABLE part_size (
    id INTEGER NOT NULL,
    number_id INTEGER NOT NULL,
    name VARCHAR NOT NULL,
    value VARCHAR NOT NULL,
    unit VARCHAR NOT NULL,
    millionths INTEGER NOT NULL,
    PRIMARY KEY (id),
    FOREIGN KEY(number_id) REFERENCES part_number (id)
)""",
    "CREATE INDEX ix_part_size_number_id ON part_size (number_id)",
    "CREATE INDEX part_size_near ON part_size (name, millionths)",
    """CREATE TABLE part_attribute (
    id INTEGER NOT NULL,
    number_id INTEGER,
    model_id INTEGER,
    name VARCHAR NOT NULL,
    value VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT attribute_of_number_or_model CHECK ((number_id IS NULL) <> (model_id IS NULL)),
    FOREIGN KEY(number_id) REFERENCES part_number (id),
    FOREIGN KEY(model_id) REFERENCES model (id)
)""",
    "CREATE INDEX ix_part_attribute_model_id ON part_attribute (model_id)",
    "CREATE INDEX ix_part_attribute_number_id ON part_attribute (number_id)",
    """CREATE TABLE fitted (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    number VARCHAR NOT NULL,
    "key" VARCHAR NOT NULL,
    maker VARCHAR NOT NULL,
    lot VARCHAR NOT NULL,
    supplier VARCHAR NOT NULL,
    position VARCHAR NOT NULL,
    quantity INTEGER NOT NULL,
    "by" VARCHAR NOT NULL,
    at VARCHAR NOT NULL,
    checked VARCHAR NOT NULL,
    why VARCHAR NOT NULL,
    PRIMARY KEY (id),
    FOREIGN KEY(job_id) REFERENCES job (id)
)""",
    "CREATE INDEX ix_fitted_job_id ON fitted (job_id)",
    'CREATE INDEX ix_fitted_key ON fitted ("key")',
    "CREATE INDEX ix_fitted_lot ON fitted (lot)",
    "CREATE INDEX ix_fitted_supplier ON fitted (supplier)",
)


def upgrade() -> None:
    """Make the tables of the cross-check and of fitted parts."""
    for statement in TABLES:
        op.execute(statement)
