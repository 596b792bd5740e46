"""Search over notes: the shop's shorthand, and the log of texts that were changed or deleted."""

from __future__ import annotations

from alembic import op

revision = "0003"
down_revision = "0002"

TABLES = (
    """CREATE TABLE shorthand (
    short VARCHAR NOT NULL,
    long VARCHAR NOT NULL,
    PRIMARY KEY (short)
)""",
    """CREATE TABLE text_change (
    id INTEGER NOT NULL,
    origin VARCHAR NOT NULL,
    "row" INTEGER NOT NULL,
    PRIMARY KEY (id)
)""",
)

# The columns whose change makes a text another one; new rows are found by their numbers and need no trigger.
CHANGING = {
    "note": ("job_id", "at", "by", "text"),
    "job": ("taken_in", "by", "complaint"),
    "finding": ("job_id", "component", "mode", "mechanism", "cause", "note", "at", "by"),
    "fitted": ("job_id", "number", "maker", "position", "lot", "supplier", "why", "at", "by"),
    "relation": ("from_id", "relation", "to_id", "caveat", "dated"),
}


def upgrade() -> None:
    """Make the tables, and the triggers that write the log."""
    for statement in TABLES:
        op.execute(statement)
    for table, names in CHANGING.items():
        columns = ", ".join(f'"{name}"' for name in names)
        differs = " OR ".join(f'OLD."{name}" IS NOT NEW."{name}"' for name in names)
        log = f"INSERT INTO text_change(origin, \"row\") VALUES ('{table}', OLD.id)"  # noqa: S608
        op.execute(
            f"CREATE TRIGGER {table}_text_changed AFTER UPDATE OF {columns} ON {table} WHEN {differs} BEGIN {log}; END"
        )
        op.execute(f"CREATE TRIGGER {table}_text_deleted AFTER DELETE ON {table} BEGIN {log}; END")
