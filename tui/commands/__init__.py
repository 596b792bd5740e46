"""The command line: everything that the screens do to a record, for scripts, printing and checks.

Each group of commands is a module that is imported only when one of its commands is run, so `wearline --help` costs
little more than click itself. To add a command: write the module and name it in COMMANDS; a test holds every command
against the README.
"""

from __future__ import annotations

import sys

import click

# name: (module, short help). The order is that of the help page.
COMMANDS = {
    "demo": ("demo", "Open a demo record of an invented shop."),
    "load": ("files", "Load CSV files, each known by its header."),
    "save": ("files", "Save one kind of thing as CSV."),
    "job": ("job", "Take in a core; list, show and link jobs."),
    "read": ("read", "Add or correct readings."),
    "note": ("note", "Add notes, and find any again whichever side made the slip."),
    "judge": ("judge", "Show every verdict of a job, explained."),
    "plan": ("plan", "What to turn, re-undercut, replace, refit; predicted sizes."),
    "limits": ("limits", "Show a model's limit sheet."),
    "parts": ("parts", "Check a number, search by size, fit a part."),
    "comebacks": ("comebacks", "What returns, how soon, and whether groups differ by more than chance."),
    "foretell": ("comebacks", "Which as-left readings went with comebacks."),
    "gauges": ("gauges", "Gauges: list, due, calibrate, recall."),
    "report": ("report", "Write or print a tolerance report."),
    "release": ("release", "Release, scrap or return a job; what stands in the way."),
    "amend": ("release", "Issue a report in the place of an issued one."),
    "verify": ("record", "Verify the whole record, or a printed head."),
    "backup": ("record", "Copy the record to a new file, while others write."),
    "restore": ("record", "Restore a backup into a new file, verified first."),
    "export": ("record", "Write everything out as CSV and JSON."),
    "people": ("people", "Who works here, and what they may do."),
    "shop": ("shop", "Show and set what holds for the whole shop."),
}

SHARED = {"record": "WEARLINE_RECORD", "acting": "WEARLINE_AS"}


class Commands(click.Group):
    """A group that knows its commands by name and imports one only to run it."""

    def list_commands(self, ctx: click.Context) -> list[str]:
        """The names in the order of the help page."""
        return list(COMMANDS)

    def get_command(self, ctx: click.Context, cmd_name: str) -> click.Command | None:
        """The command of that name, imported now; None for an unknown one."""
        if cmd_name not in COMMANDS:
            return None
        from importlib import import_module

        module = import_module(f"tui.commands.{COMMANDS[cmd_name][0]}")
        command: click.Command = getattr(module, cmd_name)
        return command

    def format_commands(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """The list of commands from the table above, without importing any."""
        with formatter.section("Commands"):
            formatter.write_dl([(name, short) for name, (_, short) in COMMANDS.items()])


@click.group(
    cls=Commands,
    invoke_without_command=True,
    context_settings={"help_option_names": ["--help"], "max_content_width": 100},
    epilog="Example: wearline demo    (a record of an invented shop, to look around in)",
)
@click.option(
    "--record", "record", metavar="FILE", envvar="WEARLINE_RECORD", help="The record; default: your own data folder."
)
@click.option("--as", "acting", metavar="INITIALS", envvar="WEARLINE_AS", help="Who acts.")
@click.option("--debug", is_flag=True, help="Show where in the program a fault arose.")
@click.version_option(None, "--version", package_name="wearline", prog_name="wearline")
@click.pass_context
def cli(ctx: click.Context, record: str | None, acting: str | None, debug: bool) -> None:
    """Wearline: measure, judge, plan, release and follow rebuilt starting motors, generators and alternators.

    Without a command it opens the screens on the shop's record.
    """
    ctx.obj = {"record": record, "acting": acting, "debug": debug}
    if ctx.invoked_subcommand is None:
        from tui.commands.screens import run

        run(record, acting, debug=debug)


def main() -> None:
    """Run the command line; a fault becomes one line on stderr and exit 1, wrong usage exit 2."""
    debug = "--debug" in sys.argv
    try:
        cli(standalone_mode=False)
    except click.exceptions.Exit as left:
        sys.exit(left.exit_code)
    except click.exceptions.Abort:
        sys.exit(130)
    except click.ClickException as fault:
        fault.show()
        sys.exit(2)
    except BrokenPipeError:
        sys.stderr.close()
        sys.exit(0)
    except Exception as fault:
        if debug:
            raise
        sys.exit(_say(fault))


def _say(fault: Exception) -> int:
    from store.errors import FileRefused, WearlineError

    if isinstance(fault, FileRefused) and len(fault.lines) > 1:
        click.echo(f"wearline: {len(fault.lines)} bad lines, nothing was written", err=True)
        for line in fault.lines:
            click.echo(f"  {line}", err=True)
    elif isinstance(fault, WearlineError):
        click.echo(f"wearline: {fault}", err=True)
    elif isinstance(fault, MemoryError):
        click.echo("wearline: this machine has no memory left for it; nothing was written", err=True)
    else:
        what = " ".join(str(fault).split())[:200]
        click.echo(
            f"wearline: a fault in the program, not in what you did ({type(fault).__name__}: {what}); --debug shows it",
            err=True,
        )
    return 1
