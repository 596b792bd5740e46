"""Triggers that log texts changed or deleted, so that an index beside the record knows what to read anew.

New rows need no trigger: they are found by their number.
"""

from __future__ import annotations

CHANGING: dict[str, tuple[str, ...]] = {
    "note": ("job_id", "at", "by", "text"),
    "job": ("taken_in", "by", "complaint"),
    "finding": ("job_id", "component", "mode", "mechanism", "cause", "note", "at", "by"),
}
"""Tables with texts that may change, and the columns that matter. Readings are only ever added."""

TABLE = """CREATE TABLE text_change (
    id INTEGER NOT NULL,
    origin VARCHAR NOT NULL,
    "row" INTEGER NOT NULL,
    PRIMARY KEY (id)
)"""


def triggers(tables: tuple[str, ...] = tuple(CHANGING)) -> list[str]:
    """The statements that make the triggers of these tables."""
    made = []
    for table in tables:
        columns = ", ".join(f'"{column}"' for column in CHANGING[table])
        differs = " OR ".join(f'OLD."{column}" IS NOT NEW."{column}"' for column in CHANGING[table])
        log = f"INSERT INTO text_change(origin, \"row\") VALUES ('{table}', OLD.id)"  # noqa: S608
        made += [
            f"CREATE TRIGGER {table}_text_changed AFTER UPDATE OF {columns} ON {table} WHEN {differs} BEGIN {log}; END",
            f"CREATE TRIGGER {table}_text_deleted AFTER DELETE ON {table} BEGIN {log}; END",
        ]
    return made
