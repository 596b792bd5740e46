"""F1: the screen on top explained in the trade's words, with its keys and its cautions."""

from __future__ import annotations

from typing import Any, ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.screen import ModalScreen, Screen
from textual.widgets import Static

GENERAL = (
    "Everywhere: ctrl+p finds every place and action by its name, ctrl+t changes between paper and graphite, ctrl+q leaves. "
    "Nothing that was accepted is lost when you leave or the power goes.\n\n"
    "Follow the maker's manual and local rules; have electrical work done by those licensed for it. Wearline never says that "
    "a unit is electrically safe."
)


class Explain(ModalScreen[None]):
    """The explanation of a screen."""

    CSS_PATH = "explain.tcss"
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape,f1,enter,q", "close", "back")]

    def __init__(self, screen: Screen[Any]) -> None:
        super().__init__()
        self.explained = screen

    def compose(self) -> ComposeResult:
        """Purpose, keys, cautions."""
        text = Text()
        text.append(f"{getattr(self.explained, 'TITLE_WORDS', '') or 'Here'}\n\n", style="bold")
        text.append(f"{getattr(self.explained, 'EXPLAINS', '')}\n\n")
        for active in self.explained.active_bindings.values():
            binding = active.binding
            if binding.description and binding.show:
                text.append(f"{self.app.get_key_display(binding):>10}  ", style="bold")
                text.append(f"{binding.tooltip or binding.description}\n")
        text.append(f"\n{GENERAL}")
        with VerticalScroll():
            yield Static(text, markup=False)

    def action_close(self) -> None:
        """Back to the screen."""
        self.dismiss()
