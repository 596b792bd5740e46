"""Who works here now: chosen by one key or by name."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.screen import ModalScreen
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.widgets.listing import Column, Item, Listing


class Who(ModalScreen[str | None]):
    """A list of the people; answers with initials, or None."""

    CSS_PATH = "who.tcss"
    TITLE_WORDS = "Who works here"
    EXPLAINS = "Choose yourself, by the arrows and Enter or by the first letter of your initials. Every change carries your initials."
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "enter", "enter a person"),
        Binding("escape", "close", "back"),
    ]

    def compose(self) -> ComposeResult:
        """The list."""
        with Vertical():
            yield Static("Who works here now?", markup=False, classes="head")
            yield Listing(
                [Column("", 8), Column("name", 0), Column("may", 20, quiet=True)],
                empty="nobody is entered yet: F2 enters a person",
            )
            yield Static("Enter chooses   F2 enters a person   Esc back", markup=False, classes="keys")

    def on_mount(self) -> None:
        """The list has the keys."""
        self.query_one(Listing).focus()
        self.fill()

    def fill(self) -> None:
        """Read the people; there are few."""
        from store import people

        app: Any = self.app
        listing = self.query_one(Listing)
        listing.show([Item((p.initials, p.name, ", ".join(p.may)), p.initials) for p in people.listing(app.record)])

    def action_enter(self) -> None:
        """Enter a person: initials, name, and what that person may do."""
        app: Any = self.app

        def keep(values: dict[str, str]) -> Any:
            from store import people

            return people.add(app.record, values["initials"], values["name"], values["may"])

        lines = [
            Line("initials", "initials", "short, as signed on the ticket"), Line("name", "name", "in full"),
            Line("may", "may", "bench, inspect, own; several with ;", "bench"),
        ]  # fmt: skip
        form = Form("A new person", lines, keep, "bench measures, inspect releases, own sets up the shop")
        self.app.push_screen(form, lambda made: self.fill() if made else None)

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
