"""Who works here now: chosen by one key or by name."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.screen import ModalScreen
from textual.widgets import Static

from tui.widgets.listing import Column, Item, Listing


class Who(ModalScreen[str | None]):
    """A list of the people; answers with initials, or None."""

    CSS_PATH = "who.tcss"
    TITLE_WORDS = "Who works here"
    EXPLAINS = "Choose yourself, by the arrows and Enter or by the first letter of your initials. Every change carries your initials."
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "close", "back")]

    def compose(self) -> ComposeResult:
        """The list."""
        with Vertical():
            yield Static("Who works here now?", markup=False, classes="head")
            yield Listing(
                [Column("", 8), Column("name", 0), Column("may", 20, quiet=True)],
                empty="nobody is entered yet: wearline people add INITIALS NAME",
            )
            yield Static("Enter chooses   a letter goes there   Esc back", markup=False, classes="keys")

    def on_mount(self) -> None:
        """Read the people; there are few."""
        from store import people

        app: Any = self.app
        listing = self.query_one(Listing)
        listing.show([Item((p.initials, p.name, ", ".join(p.may)), p.initials) for p in people.listing(app.record)])
        listing.focus()

    def on_key(self, event: events.Key) -> None:
        """A letter goes to the next person whose initials begin with it."""
        if event.character and event.character.isalpha():
            listing = self.query_one(Listing)
            order = [*range(listing.at + 1, len(listing.items)), *range(listing.at + 1)]
            for n in order:
                if str(listing.items[n].value).casefold().startswith(event.character.casefold()):
                    listing.move(n - listing.at)
                    break
            event.stop()

    @on(Listing.Chosen)
    def chosen(self, message: Listing.Chosen) -> None:
        """That one."""
        self.dismiss(message.item.value)

    def action_close(self) -> None:
        """Nobody else."""
        self.dismiss(None)
