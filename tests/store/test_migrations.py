"""Records of every earlier version come up to this one, backed up first, with everything that was in them."""

from __future__ import annotations

from pathlib import Path

import pytest
from alembic import command
from alembic.config import Config

from store import migrations, records, verify
from store.sqlite.engine import engine

VERSIONS = [f"{n:04d}" for n in range(1, int(records.HEAD))]


def older(path: Path, version: str) -> None:
    """A record as that version made it, with a setting in it."""
    made = engine(path)
    with made.connect() as conn:
        conn.info["writing"] = True
        with conn.begin():
            config = Config()
            config.set_main_option("script_location", str(Path(migrations.__file__).parent))
            config.attributes["connection"] = conn
            config.attributes["at"] = "2026-01-01T00:00:00Z"
            command.upgrade(config, version)
            conn.exec_driver_sql("INSERT INTO setting(name, value) VALUES ('shop', 'older shop')")
    made.dispose()


@pytest.mark.parametrize("version", VERSIONS)
def test_a_record_of_an_earlier_version_comes_up(tmp_path: Path, version: str) -> None:
    """Opened, it has this program's schema and catalogue, its own data, and a backup beside it as it was."""
    path = tmp_path / "old.wearline"
    older(path, version)
    record = records.open(path)
    with record.read() as conn:
        assert conn.exec_driver_sql("SELECT version_num FROM alembic_version").scalar() == records.HEAD
        assert conn.exec_driver_sql("SELECT value FROM setting").scalar() == "older shop"
        assert int(conn.exec_driver_sql("SELECT count(*) FROM characteristic").scalar() or 0) > 100
        kept = {
            (r[0], r[1]): r[2]
            for r in conn.exec_driver_sql("SELECT type, name, sql FROM sqlite_master WHERE sql NOT NULL")
        }
    record.close()
    assert kept == migrations.schema()
    backup = path.with_name(f"old.wearline.before-{version}")
    assert backup.exists()
    found = verify.verify_file(path)
    assert found.wrong is not None  # the setting was put in behind the chain's back by this test
    assert found.wrong.where == "setting shop"
