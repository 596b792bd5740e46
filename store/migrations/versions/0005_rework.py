"""The rework list."""

from __future__ import annotations

from alembic import op

revision = "0005"
down_revision = "0004"

TABLES = (
    """CREATE TABLE rework_line (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    component VARCHAR NOT NULL,
    action VARCHAR NOT NULL,
    because VARCHAR NOT NULL,
    formula VARCHAR NOT NULL,
    predicted VARCHAR NOT NULL,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    outcome VARCHAR NOT NULL,
    note VARCHAR NOT NULL,
    ended VARCHAR,
    ended_by VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT outcome_is_known CHECK (outcome IN ('open','done','declined')),
    FOREIGN KEY(job_id) REFERENCES job (id)
)""",
    "CREATE INDEX ix_rework_line_job_id ON rework_line (job_id)",
)


def upgrade() -> None:
    """Make the table."""
    for statement in TABLES:
        op.execute(statement)
