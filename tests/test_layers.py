"""The layers, each imported in a fresh process: what must not come with it does not."""

from __future__ import annotations

import subprocess
import sys

import pytest


def modules_after(code: str) -> set[str]:
    """The names of all modules after running some code in a fresh interpreter."""
    done = subprocess.run(
        [sys.executable, "-c", f"import sys\n{code}\nprint('\\n'.join(sys.modules))"],
        capture_output=True,
        text=True,
        check=True,
    )
    return set(done.stdout.split())


@pytest.mark.parametrize(
    ("code", "absent"),
    [
        ("import pkgutil, importlib, store.rules\nfor m in pkgutil.walk_packages(store.rules.__path__, 'store.rules.'): importlib.import_module(m.name)", {"sqlalchemy", "sqlmodel", "sqlite3", "textual", "rich", "click", "typst", "scipy"}),
        ("import store.records, store.jobs, store.readings, store.sheets, store.limit_sheets, store.gauges, store.files", {"textual", "rich", "click", "typst", "scipy", "alembic", "numpy"}),
        ("import store.reports.issue", {"textual", "rich", "click", "scipy", "alembic"}),
        ("import tui.app, tui.screens.bench", {"sqlalchemy", "sqlmodel", "store.records", "typst", "scipy", "alembic", "rapidfuzz", "numpy"}),
        ("from tui.commands import cli\nimport click\nfrom click.testing import CliRunner\nCliRunner().invoke(cli, ['--help'])", {"textual", "sqlmodel", "sqlalchemy", "scipy", "typst", "rich", "store.records", "numpy"}),
    ],
    ids=["rules", "store", "reports", "screens", "help"],
)  # fmt: skip
def test_what_does_not_come_along(code: str, absent: set[str]) -> None:
    """Each layer pulls in only what it needs."""
    assert modules_after(code) & absent == set()
