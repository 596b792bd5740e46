"""Opening the screens: the only place of the command line that imports Textual."""

from __future__ import annotations

from pathlib import Path


def run(record: str | None, acting: str | None, *, debug: bool = False) -> None:
    """Open the screens on a record; the frame is painted before the record is opened. `debug` lets a fault end the program."""
    from tui.app import Wearline
    from tui.commands.acting import default_path

    Wearline(Path(record) if record else default_path(), acting, debug=debug).run()
