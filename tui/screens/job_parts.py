"""The parts of a job: what lists say goes on its model, cross-checked, and what was fitted, with lot and supplier."""

from __future__ import annotations

from typing import Any, ClassVar

from rich.style import Style
from rich.text import Text
from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.widgets.listing import Column, Item, Listing


class JobParts(Vertical):
    """Fitted parts and wanted ones in one list; below, what the cross-check says of the one under the cursor."""

    DEFAULT_CSS = """
    JobParts Listing { margin: 0 1; }
    JobParts #says { height: 5; padding: 0 1; border-top: solid $hairline; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding(
            "f2",
            "fit",
            "fit a part",
            tooltip="fit a part by the number printed on it; Enter fits the one under the cursor",
        ),
        Binding(
            "f3", "check", "check", tooltip="the number under the cursor on the Parts screen, held against this model"
        ),
        Binding("delete", "take_off", "take off", tooltip="take back that a part was fitted; a reason is asked"),
    ]

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.job_screen: Any = None

    def compose(self) -> ComposeResult:
        """The list over the answer."""
        yield Listing(
            [
                Column("where", 18), Column("number", 16), Column("maker", 14, quiet=True), Column("pcs", 3, right=True),
                Column("lot", 10), Column("supplier, source", 0, quiet=True),
            ],
            empty="no list names a part for this model; F2 fits one by its number",
            id="parts",
        )  # fmt: skip
        yield Static("", id="says", markup=False)

    def show(self, screen: Any) -> None:
        """Read what was fitted and what is wanted."""
        self.job_screen = screen
        self.query_one(Listing).focus()

        def question() -> Any:
            from store.parts import fitting

            return fitting.of_job(screen.record, screen.tag), fitting.wanted(screen.record, screen.tag)

        screen.ask("parts", question, self._show)

    def _show(self, answer: Any) -> None:
        fitted, wanted = answer
        items = [Item(("fitted",), heading=True)] if fitted else []
        for one in fitted:
            cells = (one.position, one.number, one.maker, str(one.quantity), one.lot, one.supplier)
            items.append(Item(cells, one, "doubt" if one.why else ""))
        if wanted:
            items.append(Item((f"goes on {self.job_screen.sheet.job.model}, by the lists",), heading=True))
        for part in wanted:
            n = part.number
            pieces = "" if part.quantity is None else str(part.quantity)
            tone = "loud" if part.is_mismatch else "quiet" if part.fitted else ""
            where = ("✓ " if part.fitted else "") + (part.position or n.kind)
            items.append(Item((where, n.number, n.maker, pieces, "", part.source or "no source"), part, tone))
        self.query_one(Listing).show(items)
        if not items:
            self.query_one("#says", Static).update("")

    @on(Listing.Moved)
    def moved(self, message: Listing.Moved) -> None:
        """What the cross-check says of it."""
        from store import times
        from store.parts.fitting import Fitted

        one = message.item.value
        text = Text()
        quiet = Style(color=self.app.theme_variables["quiet"])
        if isinstance(one, Fitted):
            text.append(f"{one.number}  fitted {times.local(one.at)} by {one.by}\n", Style(bold=True))
            text.append(f"{one.checked}\n")
            if one.why:
                text.append(f"fitted all the same: {one.why}\n", Style(bold=True))
        else:
            text.append(f"{one.number.number}  {one.number.kind}  {one.number.description}\n", Style(bold=True))
            text.append(f"{one.says}\n")
            text.append(one.evidence.says, quiet)
        self.query_one("#says", Static).update(text)

    @on(Listing.Chosen)
    def fit_this(self, message: Listing.Chosen) -> None:
        """Fit the wanted part under the cursor; one that is fitted is fitted again."""
        self._fit(message.item.value)

    def action_fit(self) -> None:
        """Fit a part by the number printed on it."""
        self._fit(None)

    def _fit(self, one: Any) -> None:
        screen = self.job_screen
        number, maker, position = _named(one)

        def keep(values: dict[str, str]) -> Any:
            from store.files.parts import quantity
            from store.parts import fitting

            return fitting.fit(
                screen.record, screen.tag, values["number"], maker=values["maker"], lot=values["lot"], supplier=values["supplier"],
                position=values["position"], quantity=quantity(values["quantity"]) or 1, why=values["why"],
            )  # fmt: skip

        lines = [
            Line("number", "number", "as printed on the part", number), Line("maker", "maker", "where several have the number", maker),
            Line("lot", "lot"), Line("supplier", "supplier"), Line("position", "where", "drive end, brushes ...", position),
            Line("quantity", "pieces", "", "1"), Line("why", "because", "only where the cross-check speaks against it"),
        ]  # fmt: skip
        self.app.push_screen(
            Form(f"Fit a part on {screen.tag}", lines, keep, "The cross-check runs when you keep."),
            lambda done: self.show(screen),
        )

    def action_check(self) -> None:
        """The number under the cursor on the Parts screen."""
        item = self.query_one(Listing).item
        if item is not None:
            number, _, _ = _named(item.value)
            self.job_screen.wearline.go("parts", number, self.job_screen.sheet.job.model)

    def action_take_off(self) -> None:
        """Take back that a part was fitted."""
        from store.parts.fitting import Fitted

        item, screen = self.query_one(Listing).item, self.job_screen
        if item is None or not isinstance(item.value, Fitted):
            return
        one = item.value

        def keep(values: dict[str, str]) -> Any:
            from store.parts import fitting

            fitting.take_off(screen.record, screen.tag, one.id, values["why"])
            return True

        form = Form(
            f"Take {one.number} off {screen.tag}",
            [Line("why", "why")],
            keep,
            "What it was stays in the record's history.",
        )
        self.app.push_screen(form, lambda done: self.show(screen))


def _named(one: Any) -> tuple[str, str, str]:
    """Number, maker and position of a fitted or a wanted part; nothing of none."""
    if one is None:
        return "", "", ""
    if isinstance(one.number, str):
        return one.number, one.maker, one.position
    return one.number.number, one.number.maker, one.position
