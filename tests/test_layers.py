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


ALL_RULES = (
    "import pkgutil, importlib, store.rules\n"
    "for m in pkgutil.walk_packages(store.rules.__path__, 'store.rules.'): importlib.import_module(m.name)"
)
STORE = "import store.records, store.jobs, store.readings, store.sheets, store.limit_sheets, store.gauges, store.files"
HELP = "from tui.commands import cli\nimport click\nfrom click.testing import CliRunner\nCliRunner().invoke(cli, ['--help'])"
DRAWING = {"textual", "rich", "click"}
DATABASE = {"sqlalchemy", "sqlmodel", "alembic"}
NUMBERS = {"scipy", "numpy"}


@pytest.mark.parametrize(
    ("code", "absent"),
    [
        (ALL_RULES, {*DRAWING, *DATABASE, "sqlite3", "typst", "scipy"}),
        (STORE, {*DRAWING, *NUMBERS, "typst", "alembic"}),
        ("import store.reports.issue", {*DRAWING, "scipy", "alembic"}),
        ("import tui.app, tui.screens.bench", {*DATABASE, *NUMBERS, "store.records", "typst", "rapidfuzz"}),
        (HELP, {*DATABASE, *NUMBERS, "textual", "rich", "typst", "store.records"}),
    ],
    ids=["rules", "store", "reports", "screens", "help"],
)
def test_what_does_not_come_along(code: str, absent: set[str]) -> None:
    """Each layer pulls in only what it needs."""
    assert modules_after(code) & absent == set()
