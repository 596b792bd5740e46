"""The command that opens the demo: a record of an invented shop, made through the ordinary loaders."""

from __future__ import annotations

from pathlib import Path

import click


@click.command(epilog="Example: wearline demo --no-screens")
@click.option("--at", "folder", metavar="DIR", help="Where to put it; default: your own data folder.")
@click.option("--no-screens", is_flag=True, help="Only make the record and print where it is.")
def demo(folder: str | None, no_screens: bool) -> None:
    """Open a demo record of an invented shop; it is made from the demo data where there is none yet."""
    from store import demonstration
    from tui.commands.output import end_progress, progress

    if folder is None:
        import platformdirs

        place = platformdirs.user_data_path("wearline", appauthor=False, ensure_exists=True)
    else:
        place = Path(folder)
        place.mkdir(parents=True, exist_ok=True)
    path = place / "demo.wearline"
    try:
        demonstration.make(path, progress())
    finally:
        end_progress()
    click.echo(path)
    if not no_screens:
        from tui.commands.screens import run

        run(str(path), None)
