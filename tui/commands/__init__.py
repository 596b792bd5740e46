"""The command line."""

from __future__ import annotations

import click


@click.group()
def main() -> None:
    """Wearline: measure, judge, plan, release and follow rebuilt rotating machines."""
