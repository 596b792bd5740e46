"""Bringing a record up to the schema of this program, by Alembic; imported only when a record is behind.

A step is one file in `versions`, written by hand, numbered 0001, 0002 ...; a new record goes through all of them.
To add one: write the next file with `revision` and `down_revision`, set `store.records.HEAD`, change the tables; the
tests compare both and migrate a record of every earlier version.
"""

from __future__ import annotations

import sqlite3
import tempfile
from functools import lru_cache
from pathlib import Path

from alembic import command
from alembic.config import Config

from store import catalogue, judgements, times
from store.changes import Change
from store.records import SHOP, Record
from store.sqlite.engine import engine


def bring_up(path: Path, version: str | None, at: str) -> None:
    """Bring the record at `path` from `version` (None: a new file) to the newest; all steps in one transaction.

    A record that holds anything is backed up beside itself first, as `NAME.before-VERSION`. Raises sqlite3.Error
    and SQLAlchemy's DBAPIError.
    """
    if version is not None:
        _back_up(path, version)
    made = engine(path)
    try:
        with made.connect().execution_options(writing=True) as conn, conn.begin():
            config = Config()
            config.set_main_option("script_location", str(Path(__file__).parent).replace("%", "%%"))
            config.attributes["connection"] = conn
            config.attributes["at"] = at
            command.upgrade(config, "head")
            change = Change(conn, at, SHOP, "catalogue shipped", "")
            catalogue.ship(change)
            change.close()
            if version is not None:  # rules may have moved since: what is derived is judged anew
                judgements.rebuild_all(Record(path, made, SHOP, times.now), conn)
    finally:
        made.dispose()


@lru_cache(maxsize=1)
def schema() -> dict[tuple[str, str], str]:
    """What the newest schema is made of, type and name to its SQL, from a record made anew for the purpose."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "schema.wearline"
        bring_up(path, None, "2000-01-01T00:00:00Z")
        raw = sqlite3.connect(path)
        try:
            made = raw.execute("SELECT type, name, sql FROM sqlite_master WHERE sql IS NOT NULL").fetchall()
        finally:
            raw.close()
    return {(kind, name): sql for kind, name, sql in made}


def _back_up(path: Path, version: str) -> None:
    target = path.with_name(f"{path.name}.before-{version}")
    if target.exists():
        return
    half = target.with_name(target.name + ".part")
    half.unlink(missing_ok=True)
    source, copy = sqlite3.connect(path), sqlite3.connect(half)
    try:
        source.backup(copy)
    finally:
        copy.close()
        source.close()
    half.rename(target)
