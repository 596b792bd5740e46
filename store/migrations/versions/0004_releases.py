"""Concessions and issued reports, which are only ever added to."""

from __future__ import annotations

from alembic import op

revision = "0004"
down_revision = "0003"

TABLES = (
    """CREATE TABLE concession (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    characteristic_id INTEGER NOT NULL,
    departure VARCHAR NOT NULL,
    because VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    at VARCHAR NOT NULL,
    PRIMARY KEY (id),
    FOREIGN KEY(job_id) REFERENCES job (id),
    FOREIGN KEY(characteristic_id) REFERENCES characteristic (id)
)""",
    "CREATE INDEX ix_concession_job_id ON concession (job_id)",
    """CREATE TABLE release (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    number VARCHAR NOT NULL,
    outcome VARCHAR NOT NULL,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    why VARCHAR NOT NULL,
    amends_id INTEGER,
    head VARCHAR NOT NULL,
    digest VARCHAR NOT NULL,
    report VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT outcome_is_known CHECK (outcome IN ('released','scrapped','returned')),
    FOREIGN KEY(job_id) REFERENCES job (id),
    UNIQUE (number),
    UNIQUE (amends_id),
    FOREIGN KEY(amends_id) REFERENCES release (id)
)""",
    "CREATE INDEX ix_release_job_id ON release (job_id)",
)

APPEND_ONLY = {
    "release": "an issued report is never changed; an amendment is a new one",
    "concession": "a concession is never changed",
}


def upgrade() -> None:
    """Make the two tables and the triggers that keep them."""
    for statement in TABLES:
        op.execute(statement)
    for table, why in APPEND_ONLY.items():
        for verb in ("UPDATE", "DELETE"):
            op.execute(
                f"CREATE TRIGGER {table}_keeps_on_{verb.lower()} BEFORE {verb} ON {table} "
                f"BEGIN SELECT RAISE(ABORT, '{why}'); END"
            )
