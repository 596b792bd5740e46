"""F1: the screen on top explained in the trade's words, with its keys and its cautions."""

from __future__ import annotations

from typing import Any, ClassVar

from rich.console import Group
from rich.style import Style
from rich.table import Table
from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.screen import ModalScreen, Screen
from textual.widgets import Static

from tui.widgets.key_line import keys_of

EVERYWHERE = (
    ("^p", "find any place or action by its name"),
    ("^t", "paper or graphite"),
    ("^q", "leave; what was accepted is on disk already; ^ is the ctrl key, held down"),
)
GENERAL = (
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
        self.keys = list(keys_of(screen))

    def compose(self) -> ComposeResult:
        """Purpose, keys, cautions, how to get back."""
        tones = self.app.theme_variables
        brass, quiet = Style(color=tones["brass"], bold=True), Style(color=tones["quiet"])
        keys = Table.grid(padding=(0, 2))
        keys.add_column(justify="right", style=brass, no_wrap=True)
        keys.add_column()
        for key, says in [*((k.key, k.says) for k in self.keys if k.action != "explain"), *EVERYWHERE]:
            keys.add_row(Text(key), Text(says))
        cautions = Text(style="bold")
        for caution in getattr(self.explained, "CAUTIONS", ()):
            cautions.append(f"CAUTION  {caution}\n")
        with VerticalScroll():
            yield Static(
                Group(
                    Text(getattr(self.explained, "TITLE_WORDS", "") or "Here", style="bold"), Text(),
                    Text(getattr(self.explained, "EXPLAINS", "")), Text(), keys, Text(), cautions, Text(GENERAL, style=quiet),
                )
            )  # fmt: skip
        yield Static("arrows scroll   Esc back", markup=False, classes="keys")

    def action_close(self) -> None:
        """Back to the screen."""
        self.dismiss()
