"""The gauge for the readings of one kind: chosen once, used until another is."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.screen import ModalScreen
from textual.widgets import Static

from tui.widgets.listing import Column, Item, Listing


class PickGauge(ModalScreen[str | None]):
    """A list of gauges; answers with a name, "" for none, None for no change."""

    CSS_PATH = "who.tcss"
    TITLE_WORDS = "Gauge"
    EXPLAINS = "The gauge that the next readings of this kind are taken with. It gives the unit where none is typed, and the uncertainty."
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "close", "back")]

    def __init__(self, kind: str) -> None:
        super().__init__()
        self.kind = kind

    def compose(self) -> ComposeResult:
        """The list."""
        with Vertical():
            yield Static(f"Gauge for: {self.kind or 'this reading'}", markup=False, classes="head")
            yield Listing([Column("gauge", 14), Column("kind", 0), Column("unit", 5), Column("due", 11)])
            yield Static("Enter chooses   Esc no change", markup=False, classes="keys")

    def on_mount(self) -> None:
        """Those whose kind is named first on top; overdue ones say so."""
        from store import gauges

        app: Any = self.app
        now = app.record.now()
        wanted = set(self.kind.lower().replace(",", " ").split())
        known = sorted(gauges.listing(app.record), key=lambda g: (-len(wanted & set(g.kind.lower().split())), g.name))
        items = [
            Item(
                (g.name, g.kind, g.unit, "OVERDUE" if g.is_overdue(now) else g.due or ""),
                g.name,
                "loud" if g.is_overdue(now) else "",
            )
            for g in known
        ]
        listing = self.query_one(Listing)
        listing.show([*items, Item(("none", "no gauge is named", "", ""), "")])
        listing.focus()

    @on(Listing.Chosen)
    def chosen(self, message: Listing.Chosen) -> None:
        """That one."""
        self.dismiss(message.item.value)

    def action_close(self) -> None:
        """No change."""
        self.dismiss(None)
