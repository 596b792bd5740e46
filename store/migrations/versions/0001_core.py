"""The core of the record: people, models, limits, gauges, jobs, readings, judgements, notes, findings, audit."""

from __future__ import annotations

from alembic import op

revision = "0001"
down_revision = None

TABLES = (
    """CREATE TABLE audit (
    id INTEGER NOT NULL,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    action VARCHAR NOT NULL,
    subject VARCHAR NOT NULL,
    changes VARCHAR NOT NULL,
    previous VARCHAR NOT NULL,
    hash VARCHAR NOT NULL,
    PRIMARY KEY (id)
)""",
    """CREATE TABLE characteristic (
    id INTEGER NOT NULL,
    name VARCHAR NOT NULL,
    component VARCHAR NOT NULL,
    label VARCHAR NOT NULL,
    machines VARCHAR NOT NULL,
    quantity VARCHAR NOT NULL,
    unit VARCHAR NOT NULL,
    statistic VARCHAR NOT NULL,
    derive VARCHAR NOT NULL,
    positions VARCHAR NOT NULL,
    noun VARCHAR NOT NULL,
    count INTEGER,
    direction VARCHAR NOT NULL,
    stages VARCHAR NOT NULL,
    gauge VARCHAR NOT NULL,
    datum VARCHAR NOT NULL,
    caution VARCHAR NOT NULL,
    place INTEGER NOT NULL,
    shipped BOOLEAN NOT NULL,
    PRIMARY KEY (id),
    UNIQUE (name)
)""",
    """CREATE TABLE gauge (
    id INTEGER NOT NULL,
    name VARCHAR NOT NULL,
    kind VARCHAR NOT NULL,
    unit VARCHAR NOT NULL,
    resolution VARCHAR,
    repeatability VARCHAR,
    note VARCHAR NOT NULL,
    retired BOOLEAN NOT NULL,
    PRIMARY KEY (id),
    UNIQUE (name)
)""",
    """CREATE TABLE model (
    id INTEGER NOT NULL,
    number VARCHAR NOT NULL,
    "key" VARCHAR NOT NULL,
    kind VARCHAR NOT NULL,
    volts VARCHAR NOT NULL,
    rotation VARCHAR NOT NULL,
    viewed_from VARCHAR NOT NULL,
    teeth INTEGER,
    bars INTEGER,
    poles INTEGER,
    may_turn BOOLEAN NOT NULL,
    may_undercut BOOLEAN NOT NULL,
    note VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT kind_is_known CHECK (kind IN ('starter','generator','alternator')),
    UNIQUE (number)
)""",
    'CREATE INDEX ix_model_key ON model ("key")',
    """CREATE TABLE person (
    id INTEGER NOT NULL,
    initials VARCHAR NOT NULL,
    name VARCHAR NOT NULL,
    may VARCHAR NOT NULL,
    pin VARCHAR,
    active BOOLEAN NOT NULL,
    PRIMARY KEY (id),
    UNIQUE (initials)
)""",
    """CREATE TABLE setting (
    name VARCHAR NOT NULL,
    value VARCHAR NOT NULL,
    PRIMARY KEY (name)
)""",
    """CREATE TABLE calibration (
    id INTEGER NOT NULL,
    gauge_id INTEGER NOT NULL,
    calibrated VARCHAR,
    due VARCHAR,
    expanded_uncertainty VARCHAR,
    k VARCHAR,
    result VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    note VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT result_is_known CHECK (result IN ('good','bad')),
    FOREIGN KEY(gauge_id) REFERENCES gauge (id)
)""",
    "CREATE INDEX ix_calibration_gauge_id ON calibration (gauge_id)",
    """CREATE TABLE revision (
    id INTEGER NOT NULL,
    model_id INTEGER NOT NULL,
    number INTEGER NOT NULL,
    decision VARCHAR NOT NULL,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    why VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT one_revision_a_number UNIQUE (model_id, number),
    CONSTRAINT decision_is_known CHECK (decision IN ('simple','guarded-1.65u','guarded-U')),
    FOREIGN KEY(model_id) REFERENCES model (id)
)""",
    """CREATE TABLE unit (
    id INTEGER NOT NULL,
    model_id INTEGER NOT NULL,
    serial VARCHAR NOT NULL,
    "key" VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT one_unit_a_serial UNIQUE (model_id, "key"),
    FOREIGN KEY(model_id) REFERENCES model (id)
)""",
    'CREATE INDEX ix_unit_key ON unit ("key")',
    """CREATE TABLE job (
    id INTEGER NOT NULL,
    tag VARCHAR NOT NULL,
    "key" VARCHAR NOT NULL,
    unit_id INTEGER NOT NULL,
    revision_id INTEGER,
    customer VARCHAR NOT NULL,
    application VARCHAR NOT NULL,
    hours VARCHAR,
    starts VARCHAR,
    complaint VARCHAR NOT NULL,
    taken_in VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    assembled_by VARCHAR NOT NULL,
    outcome VARCHAR NOT NULL,
    ended VARCHAR,
    ended_by VARCHAR NOT NULL,
    earlier_id INTEGER,
    comeback_outcome VARCHAR NOT NULL,
    from_history BOOLEAN NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT outcome_is_known CHECK (outcome IN ('open','released','scrapped','returned')),
    CONSTRAINT comeback_outcome_is_known CHECK (comeback_outcome IN (
        '','workmanship','part','wear','system','installation','wrong-part','no-fault','not-ours')),
    UNIQUE (tag),
    FOREIGN KEY(unit_id) REFERENCES unit (id),
    FOREIGN KEY(revision_id) REFERENCES revision (id),
    FOREIGN KEY(earlier_id) REFERENCES job (id)
)""",
    "CREATE INDEX ix_job_earlier_id ON job (earlier_id)",
    'CREATE INDEX ix_job_key ON job ("key")',
    "CREATE INDEX ix_job_outcome ON job (outcome)",
    "CREATE INDEX ix_job_taken_in ON job (taken_in)",
    "CREATE INDEX ix_job_unit_id ON job (unit_id)",
    """CREATE TABLE wear_limit (
    id INTEGER NOT NULL,
    revision_id INTEGER NOT NULL,
    characteristic_id INTEGER NOT NULL,
    stage VARCHAR NOT NULL,
    unit VARCHAR NOT NULL,
    new VARCHAR,
    low VARCHAR,
    high VARCHAR,
    at_limit VARCHAR NOT NULL,
    count INTEGER,
    source VARCHAR NOT NULL,
    note VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT one_limit_a_stage UNIQUE (revision_id, characteristic_id, stage),
    CONSTRAINT stage_is_known CHECK (stage IN ('as-found','as-left','both')),
    CONSTRAINT at_limit_is_known CHECK (at_limit IN ('pass','fail')),
    FOREIGN KEY(revision_id) REFERENCES revision (id),
    FOREIGN KEY(characteristic_id) REFERENCES characteristic (id)
)""",
    """CREATE TABLE finding (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    component VARCHAR NOT NULL,
    mode VARCHAR NOT NULL,
    mechanism VARCHAR NOT NULL,
    cause VARCHAR NOT NULL,
    note VARCHAR NOT NULL,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    PRIMARY KEY (id),
    FOREIGN KEY(job_id) REFERENCES job (id)
)""",
    "CREATE INDEX ix_finding_job_id ON finding (job_id)",
    """CREATE TABLE judgement (
    job_id INTEGER NOT NULL,
    stage VARCHAR NOT NULL,
    characteristic_id INTEGER NOT NULL,
    limit_id INTEGER,
    verdict VARCHAR NOT NULL,
    size FLOAT,
    kept VARCHAR NOT NULL,
    PRIMARY KEY (job_id, stage, characteristic_id),
    FOREIGN KEY(job_id) REFERENCES job (id),
    FOREIGN KEY(characteristic_id) REFERENCES characteristic (id),
    FOREIGN KEY(limit_id) REFERENCES wear_limit (id)
) WITHOUT ROWID""",
    """CREATE TABLE note (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    text VARCHAR NOT NULL,
    PRIMARY KEY (id),
    FOREIGN KEY(job_id) REFERENCES job (id)
)""",
    "CREATE INDEX ix_note_job_id ON note (job_id)",
    """CREATE TABLE reading (
    id INTEGER NOT NULL,
    job_id INTEGER NOT NULL,
    stage VARCHAR NOT NULL,
    characteristic_id INTEGER NOT NULL,
    position VARCHAR NOT NULL,
    typed VARCHAR NOT NULL,
    mark VARCHAR NOT NULL,
    value VARCHAR,
    unit VARCHAR NOT NULL,
    places INTEGER NOT NULL,
    detail VARCHAR NOT NULL,
    gauge_id INTEGER,
    at VARCHAR NOT NULL,
    "by" VARCHAR NOT NULL,
    note VARCHAR NOT NULL,
    corrects_id INTEGER,
    why VARCHAR NOT NULL,
    PRIMARY KEY (id),
    CONSTRAINT stage_is_known CHECK (stage IN ('as-found','as-left')),
    FOREIGN KEY(job_id) REFERENCES job (id),
    FOREIGN KEY(characteristic_id) REFERENCES characteristic (id),
    FOREIGN KEY(gauge_id) REFERENCES gauge (id),
    FOREIGN KEY(corrects_id) REFERENCES reading (id)
)""",
    "CREATE UNIQUE INDEX reading_corrected_once ON reading (corrects_id) WHERE corrects_id IS NOT NULL",
    "CREATE INDEX reading_of_job ON reading (job_id, stage, characteristic_id)",
)

# What was accepted stays: these tables are only ever added to, even from the sqlite3 shell.
APPEND_ONLY = {
    "reading": "a reading is never changed; correct it by another reading",
    "audit": "the audit chain is never changed",
    "wear_limit": "a limit is never changed; enter a new revision",
    "revision": "a revision is never changed; enter a new one",
}


def upgrade() -> None:
    """Make the tables, their triggers, and the mark by which a record is known (PRAGMA application_id)."""
    op.execute("PRAGMA application_id = 1464617294")
    for statement in TABLES:
        op.execute(statement)
    for table, why in APPEND_ONLY.items():
        for verb in ("UPDATE", "DELETE"):
            op.execute(
                f"CREATE TRIGGER {table}_keeps_on_{verb.lower()} BEFORE {verb} ON {table} "
                f"BEGIN SELECT RAISE(ABORT, '{why}'); END"
            )
