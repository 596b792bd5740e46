"""Whether the record has changed, by whichever program: cheap enough to ask twice a second."""

from __future__ import annotations

from store.records import Record
from store.sqlite.engine import rows


def version(record: Record) -> tuple[int, int]:
    """A pair that differs when something was written since: the newest entry of the audit chain and how many jobs."""
    with record.read() as conn:
        ((entry, jobs),) = rows(conn, "SELECT (SELECT max(id) FROM audit), (SELECT max(id) FROM job)")
    return int(entry or 0), int(jobs or 0)
