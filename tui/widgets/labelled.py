"""A line to fill in: its label at the left, lit while the keys go there."""

from __future__ import annotations

from textual.app import ComposeResult
from textual.containers import Horizontal
from textual.widgets import Input, Static


class Labelled(Horizontal):
    """One labelled input; the input has the id that is given here."""

    DEFAULT_CSS = """
    Labelled { height: 1; }
    Labelled Static { width: 17; color: $quiet; }
    Labelled.-here Static { color: $brass; text-style: bold; }
    Labelled Input { width: 1fr; }
    """

    def __init__(self, name: str, label: str, hint: str = "", value: str = "") -> None:
        super().__init__()
        self.label = label
        self.input = Input(value, id=name, placeholder=hint)

    def compose(self) -> ComposeResult:
        """Label and input."""
        yield Static(self.label, markup=False)
        yield self.input

    def on_descendant_focus(self) -> None:
        """The keys go here."""
        self.add_class("-here")

    def on_descendant_blur(self) -> None:
        """They go elsewhere."""
        self.remove_class("-here")
