"""Forms for what is stated of a number: enter it, relate it, say what it fits, its sizes and attributes, take a statement back."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.screen import ModalScreen
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.widgets.listing import Column, Item, Listing


def new_number(record: Any, typed: str) -> Form:
    """Enter a number."""

    def keep(values: dict[str, str]) -> Any:
        from store.parts import numbers

        return numbers.enter(
            record, values["number"], values["kind"].strip(), maker=values["maker"].strip(),
            description=values["description"].strip(), status=values["status"].strip(),
        )  # fmt: skip

    lines = [
        Line("number", "number", "as printed", typed), Line("maker", "maker"),
        Line("kind", "kind", "brush set, drive, bushing, starter ..."), Line("description", "description"),
        Line("status", "status", "superseded, discontinued ..."),
    ]  # fmt: skip
    return Form("A new number", lines, keep)


def edit(record: Any, number: Any) -> Form:
    """Change what is said of a number."""

    def keep(values: dict[str, str]) -> Any:
        from store.parts import numbers

        return numbers.edit(record, number, **values)

    lines = [
        Line("kind", "kind", "", number.kind), Line("description", "description", "", number.description),
        Line("status", "status", "superseded, discontinued ...", number.status),
    ]  # fmt: skip
    return Form(f"{number.number} {number.maker}", lines, keep, "The number and its maker stay.")


def relate(record: Any, number: Any) -> Form:
    """State a relation of a number."""

    def keep(values: dict[str, str]) -> Any:
        from store.parts import numbers

        return numbers.relate(
            record, number.number, values["relation"].strip(), values["other"], maker=number.maker,
            other_maker=values["other_maker"], caveat=values["caveat"].strip(), source=values["source"].strip(), dated=values["dated"],
        )  # fmt: skip

    lines = [
        Line("relation", "is", "superseded-by, interchanges-with, same-as, substitute, holds, do-not-use"),
        Line("other", "number", "the other one; empty only for do-not-use"), Line("other_maker", "its maker"),
        Line("caveat", "caveat", "what must be seen to, if anything"), Line("source", "on whose word", "list and edition, bulletin, own bench"),
        Line("dated", "dated", "2026-12-01"),
    ]  # fmt: skip
    return Form(f"{number.number} {number.maker} ...", lines, keep, "A statement without a source is trusted least.")


def fits(record: Any, number: Any, model: str) -> Form:
    """State that a number goes on a model."""

    def keep(values: dict[str, str]) -> Any:
        from store.files.parts import quantity
        from store.parts import numbers

        return numbers.say_fits(
            record, number.number, values["model"], maker=number.maker, position=values["position"],
            quantity=quantity(values["quantity"]), source=values["source"],
        )  # fmt: skip

    lines = [
        Line("model", "goes on", "a model's number", model), Line("position", "position", "drive end, brushes ..."),
        Line("quantity", "pieces"), Line("source", "on whose word"),
    ]  # fmt: skip
    return Form(f"{number.number} {number.maker} goes on ...", lines, keep)


def size(record: Any, number: Any) -> Form:
    """State a size of a number."""

    def keep(values: dict[str, str]) -> Any:
        from store.parts import numbers

        return numbers.say_size(
            record, number.number, values["name"], values["value"], values["unit"], maker=number.maker
        )

    lines = [
        Line("name", "size", "width, thickness, length, od, id ..."), Line("value", "value", "8 or 5/16"),
        Line("unit", "unit", "mm or in", "mm"),
    ]  # fmt: skip
    return Form(f"A size of {number.number} {number.maker}", lines, keep)


def attribute(record: Any, number: Any, model: str = "") -> Form:
    """State an attribute of a number, or of a model where `model` names one."""

    def keep(values: dict[str, str]) -> Any:
        from store.parts import numbers

        if model:
            return numbers.say_attribute(record, values["name"], values["value"], model=model)
        return numbers.say_attribute(record, values["name"], values["value"], number=number.number, maker=number.maker)

    lines = [
        Line("name", "attribute", "rotation, volts, teeth, pitch, pilot ..."),
        Line("value", "value", "ccw from commutator end; 9; module 2.5 ..."),
    ]
    of = model or f"{number.number} {number.maker}"
    return Form(f"An attribute of {of}", lines, keep, "A rotation is as seen from the drive end unless you say.")


class Statements(ModalScreen[Any]):
    """Everything that is stated of a number; Enter takes a statement back, with a reason."""

    CSS_PATH = "parts.tcss"
    TITLE_WORDS = "Statements"
    EXPLAINS = (
        "Relations, models, sizes and attributes that are stated of this number. Enter takes one back: it is asked why, and "
        "what it was stays in the chain."
    )
    BINDINGS: ClassVar[list[BindingType]] = [Binding("escape", "close", "back")]

    def __init__(self, record: Any, number: Any) -> None:
        super().__init__()
        self.record, self.number = record, number

    def compose(self) -> ComposeResult:
        """Title, statements, keys."""
        with Vertical():
            yield Static(f"stated of {self.number.number} {self.number.maker}", markup=False, classes="head")
            yield Listing(
                [Column("", 9, quiet=True), Column("statement", 0)], empty="nothing is stated of it", id="statements"
            )
            yield Static("Enter takes it back   Esc back", markup=False, classes="keys")

    def on_mount(self) -> None:
        """Read them."""
        from store.parts import statements

        said = statements.stated_of(self.record, self.number)
        listing = self.query_one("#statements", Listing)
        listing.show([Item((one.kind, one.says), one) for one in said])
        listing.focus()

    @on(Listing.Chosen)
    def take_back(self, message: Listing.Chosen) -> None:
        """Ask why, then take it back."""
        one = message.item.value

        def keep(values: dict[str, str]) -> Any:
            from store.parts import statements

            statements.withdraw(self.record, one.kind, one.id, values["why"])
            return True

        self.app.push_screen(Form("Take back", [Line("why", "why")], keep, one.says), self.taken)

    def taken(self, done: Any) -> None:
        """Back, with whether one was taken."""
        self.dismiss(done)

    def action_close(self) -> None:
        """Leave it as it is."""
        self.dismiss(None)
