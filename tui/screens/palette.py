"""ctrl+p: every place and every action by its name, found as one types."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, ClassVar

from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.screen import ModalScreen
from textual.widgets import Input

from tui.widgets.listing import Column, Item, Listing


@dataclass(frozen=True, slots=True)
class Choice:
    """Something that can be done: its name, what it does at length, its key, and the action on a node."""

    name: str
    says: str
    key: str
    action: str
    node: Any = None


class Palette(ModalScreen[Choice | None]):
    """All choices, fewer with each letter; answers with the one chosen."""

    CSS_PATH = "palette.tcss"
    TITLE_WORDS = "Find"
    EXPLAINS = "Type a few letters of what you want; arrows move, Enter does it, Esc leaves."
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape,ctrl+p", "close", "back")]

    def __init__(self, choices: Sequence[Choice]) -> None:
        super().__init__()
        self.choices = tuple(choices)

    def compose(self) -> ComposeResult:
        """The line to type on, then the choices."""
        with Vertical():
            yield Input(placeholder="what do you want to do?")
            listing = Listing(
                [Column("", 22), Column("", 0, quiet=True), Column("", 5, quiet=True)],
                empty="nothing of that name",
                led=True,
            )
            yield listing

    def on_mount(self) -> None:
        """All of them at first."""
        self.fill("")

    def fill(self, asked: str) -> None:
        """Those in which every word stands, names before explanations."""
        words = asked.casefold().split()
        in_name = [c for c in self.choices if all(w in c.name.casefold() for w in words)]
        beside = [
            c for c in self.choices if c not in in_name and all(w in f"{c.name} {c.says}".casefold() for w in words)
        ]
        self.query_one(Listing).show([Item((c.name, c.says, c.key), c) for c in (*in_name, *beside)])

    @on(Input.Changed)
    def asked(self, event: Input.Changed) -> None:
        """Fewer with each letter."""
        self.fill(event.value)

    def on_key(self, event: events.Key) -> None:
        """The arrows move in the list."""
        if event.key in {"up", "down", "pageup", "pagedown"}:
            self.query_one(Listing).press(event.key)
            event.stop()

    @on(Input.Submitted)
    def choose(self) -> None:
        """Enter does what the cursor stands on."""
        self.query_one(Listing).choose()

    @on(Listing.Chosen)
    def chosen(self, message: Listing.Chosen) -> None:
        """That one."""
        self.dismiss(message.item.value)

    def action_close(self) -> None:
        """Nothing."""
        self.dismiss(None)
