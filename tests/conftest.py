"""What tests share: a record on a real file with a clock that stands, and small sheets to judge by."""

from __future__ import annotations

import os
import shutil
from collections.abc import Callable, Iterator
from dataclasses import dataclass
from datetime import UTC, datetime, timedelta
from pathlib import Path

import pytest

from store import records
from store.records import Record

for _said in ("WEARLINE_AS", "WEARLINE_RECORD"):  # whoever runs the tests may have a shop of their own
    os.environ.pop(_said, None)

START = datetime(2026, 11, 2, 8, 0, 0, tzinfo=UTC)


@dataclass
class Clock:
    """A clock that stands until it is moved."""

    at: datetime = START

    def __call__(self) -> datetime:
        return self.at

    def move(self, **by: float) -> None:
        """Move on by days, hours, seconds ..."""
        self.at += timedelta(**by)


@pytest.fixture
def clock() -> Clock:
    """A clock at 2026-11-02 08:00 UTC."""
    return Clock()


@pytest.fixture(scope="session")
def empty_record(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """An empty record, made once; tests copy it."""
    path = tmp_path_factory.mktemp("empty") / "shop.wearline"
    records.open(path, create=True, now=Clock()).close()
    return path


@pytest.fixture
def record(empty_record: Path, tmp_path: Path, clock: Clock) -> Iterator[Record]:
    """An empty record on a file of its own."""
    path = tmp_path / "shop.wearline"
    shutil.copyfile(empty_record, path)
    opened = records.open(path, now=clock)
    yield opened
    opened.close()


@pytest.fixture(scope="session")
def demo_record_path(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The demo record, made once; copy it before writing to it."""
    from store import demonstration

    path = tmp_path_factory.mktemp("demo") / "demo.wearline"
    demonstration.make(path)
    return path


@pytest.fixture
def demo(demo_record_path: Path, tmp_path: Path) -> Iterator[Record]:
    """A copy of the demo record, acting as one of its people."""
    path = tmp_path / "demo.wearline"
    shutil.copyfile(demo_record_path, path)
    opened = records.open(path)
    yield opened
    opened.close()


Writer = Callable[[str, str], Path]


@pytest.fixture
def write(tmp_path: Path) -> Writer:
    """Writes a file of this name and text and gives its path."""

    def make(name: str, text: str) -> Path:
        path = tmp_path / name
        path.write_text(text, encoding="utf-8")
        return path

    return make
