"""SIGKILL during release, amendment, backup, restore, migration and load: either before or after, never between."""

from __future__ import annotations

import os
import random
import shutil
import signal
import sqlite3
import subprocess
import sys
import time
from pathlib import Path

import pytest

from store import backups, people, records, releases, verify
from store.records import Record
from tests import shop
from tests.store.test_releases import GOOD, measure

FULL = os.environ.get("WEARLINE_FULL") == "1"
TIMES = 30 if FULL else 3

ACTS = {
    "release": "releases.release(record.acting('MW'), tag)",
    "amendment": "releases.amend(record.acting('MW'), old, 'name', fields={'customer': 'new name'})",
    "backup": "backups.backup(record, Path(folder) / 'copy.wearline')",
    "restore": "backups.restore(Path(folder) / 'source.wearline', Path(folder) / 'restored.wearline')",
    "load": "files.load(record, [Path(folder) / 'big.csv'])",
    "migration": "record.close(); records.open(Path(folder) / 'behind.wearline').close()",
}
CODE = """
import sys
from pathlib import Path
from store import backups, files, records, releases, verify, migrations
from store.reports import gather
path, tag, old, folder, act = sys.argv[1:6]
record = records.open(path, by="AB")
print("ready", flush=True)
sys.stdin.readline()
exec(act)
print("done", flush=True)
"""


@pytest.fixture(scope="module")
def made(tmp_path_factory: pytest.TempPathFactory) -> tuple[Path, str, str]:
    """A record with a released job and one that may be released; beside it a backup, a big file and an older record."""
    folder = tmp_path_factory.mktemp("made")
    record = records.open(folder / "shop.wearline", create=True)
    shop.fill(record, folder)
    people.add(record, "AB", "Ada Birch")
    people.add(record.acting("AB"), "MW", "Mara Wend", "inspect")
    tags = []
    for serial in ("1", "2"):
        tag = shop.core(record.acting("AB"), serial).tag
        measure(record.acting("AB"), tag, GOOD)
        tags.append(tag)
    releases.release(record.acting("MW"), tags[0])
    lines = ["tag,model,serial,taken_in"] + [f"H{n},KS-100,{9000 + n},2026-01-02" for n in range(3000)]
    (folder / "big.csv").write_text("\n".join(lines) + "\n")
    backups.backup(record, folder / "source.wearline")
    record.close()
    _make_older(folder / "behind.wearline")
    return folder / "shop.wearline", tags[1], tags[0]


def _make_older(path: Path) -> None:
    """A record as the first schema made it, with a core in it."""
    from alembic import command
    from alembic.config import Config

    from store import migrations
    from store.sqlite.engine import engine

    made = engine(path)
    with made.connect() as conn:
        conn.info["writing"] = True
        with conn.begin():
            config = Config()
            config.set_main_option("script_location", str(Path(migrations.__file__).parent))
            config.attributes["connection"] = conn
            config.attributes["at"] = "2026-01-01T00:00:00Z"
            command.upgrade(config, "0001")
            conn.exec_driver_sql("INSERT INTO setting(name, value) VALUES ('shop', 'older shop')")
    made.dispose()


def state(path: Path, tag: str, old: str) -> tuple[object, ...]:
    """What of the record the acts change."""
    record: Record = records.open(path)
    found = (len(releases.of_job(record, tag)), len(releases.of_job(record, old)))
    with record.read() as conn:
        jobs = conn.exec_driver_sql("SELECT count(*) FROM job").scalar()
    record.close()
    return (*found, jobs)


@pytest.mark.parametrize("act", ACTS)
@pytest.mark.parametrize("seed", range(TIMES))
def test_killed_at_a_random_moment(made: tuple[Path, str, str], tmp_path: Path, act: str, seed: int) -> None:
    """Before or after, never between; the record verifies, and so does whatever file the act was to make."""
    source, tag, old = made
    for path in source.parent.glob("*.*"):
        if path.is_file():
            shutil.copyfile(path, tmp_path / path.name)
    path = tmp_path / source.name
    before = state(path, tag, old)
    longest = _time_of(act, tmp_path, tag, old) if seed == 0 else 0.3
    for made_before in ("copy.wearline", "restored.wearline"):
        (tmp_path / made_before).unlink(missing_ok=True)
    for fresh in (source.name, "behind.wearline"):
        for ending in ("", "-wal", "-shm"):
            Path(f"{tmp_path / fresh}{ending}").unlink(missing_ok=True)
        shutil.copyfile(source.parent / fresh, tmp_path / fresh)
    process = _start(act, tmp_path, tag, old)
    assert process.stdin is not None
    process.stdin.write("\n")
    process.stdin.flush()
    time.sleep(random.Random(f"{act}{seed}").uniform(0, longest))
    process.send_signal(signal.SIGKILL)
    process.communicate()
    after = state(path, tag, old)
    allowed = {
        "release": {before, (1, before[1], before[2])},
        "amendment": {before, (before[0], 2, before[2])},
        "load": {before, (before[0], before[1], int(str(before[2])) + 3000)},
    }.get(act, {before})
    assert after in allowed
    assert verify.verify_file(path).wrong is None
    for name in ("copy.wearline", "restored.wearline"):
        if (tmp_path / name).exists():
            assert verify.verify_file(tmp_path / name).wrong is None
    if act == "migration":
        _whole_migration(tmp_path / "behind.wearline")


def _whole_migration(path: Path) -> None:
    """The older record is of the old schema or of the new one; opened again it is new, and what was in it still is."""
    raw = sqlite3.connect(path)
    assert raw.execute("PRAGMA integrity_check").fetchone() == ("ok",)
    assert raw.execute("SELECT version_num FROM alembic_version").fetchone()[0] in {"0001", records.HEAD}
    raw.close()
    record = records.open(path)
    with record.read() as conn:
        assert conn.exec_driver_sql("SELECT value FROM setting").scalar() == "older shop"
    record.close()


def _start(act: str, folder: Path, tag: str, old: str) -> subprocess.Popen[str]:
    process = subprocess.Popen(
        [sys.executable, "-c", CODE, str(folder / "shop.wearline"), tag, old, str(folder), ACTS[act]],
        stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True,
    )  # fmt: skip
    assert process.stdout is not None
    assert process.stdout.readline() == "ready\n"
    return process


def _time_of(act: str, folder: Path, tag: str, old: str) -> float:
    """How long the act takes here, so that the kills fall within it."""
    process = _start(act, folder, tag, old)
    begun = time.monotonic()
    process.communicate("\n")
    assert process.returncode == 0
    return time.monotonic() - begun
