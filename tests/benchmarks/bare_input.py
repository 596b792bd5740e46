"""A bare Textual app with one input that counts lines: `python -m tests.benchmarks.bare_input COUNT`."""

from __future__ import annotations

import sys

from textual.app import App, ComposeResult
from textual.widgets import Input


class Bare(App[None]):
    """Shows how many lines came; leaves nothing behind."""

    lines = 0

    def compose(self) -> ComposeResult:
        """One input."""
        yield Input(placeholder="ready")

    def on_input_submitted(self, event: Input.Submitted) -> None:
        """Count and clear."""
        self.lines += 1
        event.input.value = ""
        if self.lines == int(sys.argv[1]):
            event.input.placeholder = "all lines came"


if __name__ == "__main__":
    Bare().run()
