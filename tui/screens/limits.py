"""Limits: a model's sheet with the source of each limit, its revisions, copying, and proposals from own readings."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.screens.standing import Standing
from tui.widgets.listing import Column, Item, Listing


class Limits(Standing):
    """Models at the left, the sheet of the one under the cursor at the right."""

    CSS_PATH = "limits.tcss"
    TITLE_WORDS = "Limits"
    EXPLAINS = (
        "The wear limits that the shop has entered, model by model, each with its source. Nothing is shipped as a limit to rely on. "
        "A sheet changes only by a new revision: jobs keep the one they were taken in under until somebody moves them. "
        "Enter on a model goes to its sheet; Enter on a line changes that limit, or enters one where there is none."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "revision", "revisions", tooltip="look at the revision before, then round to the newest"),
        Binding("f3", "copy", "copy from", tooltip="copy the sheet of another model"),
        Binding("f4", "propose", "propose", tooltip="what the shop's own as-left readings of this model would suggest"),
        Binding("f5", "new_model", "new model"),
        Binding("delete", "drop", "drop limit", tooltip="a new revision without the limit under the cursor"),
        Binding("escape", "back", "back"),
    ]

    def __init__(self, model: str | None = None) -> None:
        super().__init__()
        self.model = model
        self.number: int | None = None
        self.known: list[Any] = []
        self.sheet: Any = None

    def body(self) -> ComposeResult:
        """Two lists and a line on the revision."""
        yield Static("", id="revision", markup=False)
        with Horizontal():
            yield Listing([Column("model", 0), Column("rev", 3, right=True)], empty="F5 enters a model", id="models")
            yield Listing(
                [
                    Column("characteristic", 24), Column("stage", 8, quiet=True), Column("limit", 15), Column("=", 4, quiet=True),
                    Column("n", 2, right=True, quiet=True), Column("source", 0, quiet=True),
                ],
                empty="no limits yet: Enter on a line enters one, F3 copies a sheet",
                id="sheet",
            )  # fmt: skip

    def record_opened(self) -> None:
        """Read the models."""
        self.say_where()
        self.query_one("#models").focus()

        def question() -> Any:
            from store import limit_sheets, models

            assert self.record is not None
            return [(m, len(limit_sheets.revisions(self.record, m.number))) for m in models.listing(self.record)]

        self.ask("models", question, self._show_models)

    def _show_models(self, found: Any) -> None:
        listing = self.query_one("#models", Listing)
        listing.show([Item((model.number, str(count or "-")), model) for model, count in found])
        if self.model is not None:
            numbers = [model.number for model, _ in found]
            if self.model in numbers:
                listing.move(numbers.index(self.model) - listing.at)
            self.model = None

    @on(Listing.Moved, "#models")
    def model_moved(self, message: Listing.Moved) -> None:
        """Show the newest sheet of the model under the cursor."""
        self.number = None
        self.read_sheet(message.item.value)

    @on(Listing.Chosen, "#models")
    def to_sheet(self) -> None:
        """Into the sheet."""
        self.query_one("#sheet").focus()

    def read_sheet(self, model: Any) -> None:
        """Ask for the sheet of a model, with every characteristic that has no limit below."""
        number = self.number

        def question() -> Any:
            from store import catalogue, limit_sheets

            assert self.record is not None
            sheet = limit_sheets.sheet(self.record, model.number, number)
            return (
                model,
                sheet,
                limit_sheets.revisions(self.record, model.number),
                catalogue.catalogue(self.record).of(model.kind),
            )

        self.ask("sheet", question, self._show_sheet)

    def _show_sheet(self, answer: Any) -> None:
        model, self.sheet, revisions, characteristics = answer
        self.known = list(revisions)
        said = f"{model.number}  {model.kind}  {model.volts} V  {model.rotation}"
        if self.sheet is not None:
            rev = self.sheet.revision
            said += f"   revision {rev.number} of {len(revisions)}, {rev.decision.value}, {rev.at[:10]} by {rev.by}  {rev.why}"
        self.query_one("#revision", Static).update(said)
        items, limited = [], set()
        for x in self.sheet.limits if self.sheet else ():
            limited.add(x.characteristic)
            one = next(c for c in characteristics if c.name == x.characteristic)
            stage = "" if x.stage == "both" else x.stage.replace("as-", "")
            equal = "fail" if x.at_limit == "fail" else ""
            items.append(Item((one.label, stage, _limit(x), equal, str(x.count or ""), x.source), (one, x)))
        rest = [
            Item((c.label, "", "", "", "", ""), (c, None), "quiet") for c in characteristics if c.name not in limited
        ]
        if rest:
            items += [Item(("without a limit",), heading=True), *rest]
        self.query_one("#sheet", Listing).show(items)

    @on(Listing.Chosen, "#sheet")
    def change(self, message: Listing.Chosen) -> None:
        """Change a limit, or enter one."""
        from tui.screens.enter_limit import EnterLimit

        one, present = message.item.value
        model = self._model()
        if model is not None:
            self.app.push_screen(EnterLimit(model.number, one, present=present), lambda done: self.read_sheet(model))

    def _model(self) -> Any:
        item = self.query_one("#models", Listing).item
        return item.value if item else None

    def action_revision(self) -> None:
        """The revision before; from the first round to the newest."""
        if self.sheet is None or len(self.known) < 2:
            return
        numbers = [r.number for r in self.known]
        here = numbers.index(self.sheet.revision.number)
        self.number = numbers[here - 1]
        self.read_sheet(self._model())

    def action_copy(self) -> None:
        """Copy the sheet of another model."""
        model = self._model()
        if model is None:
            return

        def keep(values: dict[str, str]) -> Any:
            from store import limit_sheets

            return limit_sheets.copy(self.record, values["source"], model.number)  # type: ignore[arg-type]

        form = Form(
            f"Copy a sheet to {model.number}",
            [Line("source", "from model", "its number")],
            keep,
            "Each source says where it was copied from.",
        )
        self.app.push_screen(form, lambda done: self.record_opened() if done else None)

    def action_propose(self) -> None:
        """What the shop's own as-left readings would suggest for the line under the cursor."""
        model, item = self._model(), self.query_one("#sheet", Listing).item
        if model is None or item is None:
            return
        one = item.value[0]

        def question() -> Any:
            from store import proposals

            assert self.record is not None
            return proposals.propose(self.record, model.number, one.name)

        self.ask("propose", question, lambda found: self._proposed(model, one, found))

    def _proposed(self, model: Any, one: Any, found: Any) -> None:
        from tui.screens.enter_limit import EnterLimit

        self.app.push_screen(EnterLimit(model.number, one, present=found), lambda done: self.read_sheet(model))

    def action_new_model(self) -> None:
        """Enter a model."""

        def keep(values: dict[str, str]) -> Any:
            from store import models

            assert self.record is not None
            return models.enter(self.record, values)

        lines = [
            Line("model", "number", "as on its plate"), Line("kind", "kind", "starter, generator or alternator"),
            Line("volts", "volts"), Line("rotation", "rotation", "cw, ccw or both, seen from the drive end"),
            Line("teeth", "teeth"), Line("bars", "bars"), Line("poles", "poles"),
            Line("may_turn", "may be turned", "yes or no", "yes"), Line("may_undercut", "may be undercut", "yes or no", "yes"),
            Line("note", "note"),
        ]  # fmt: skip

        def done(made: Any) -> None:
            if made is not None:
                self.model = made.number
                self.record_opened()

        self.app.push_screen(Form("A new model", lines, keep), done)

    def action_drop(self) -> None:
        """A new revision without the limit under the cursor; a reason is asked."""
        model, item = self._model(), self.query_one("#sheet", Listing).item
        if model is None or item is None or item.value[1] is None:
            return
        present = item.value[1]

        def keep(values: dict[str, str]) -> Any:
            from store import limit_sheets

            assert self.record is not None
            return limit_sheets.drop(self.record, model.number, present.characteristic, present.stage, values["why"])

        form = Form(f"Drop the limit of {item.value[0].label}", [Line("why", "why")], keep, "The old revision stays.")
        self.app.push_screen(form, lambda done: self.read_sheet(model))

    def action_back(self) -> None:
        """From the sheet to the models, then back."""
        if self.query_one("#sheet").has_focus:
            self.query_one("#models").focus()
        else:
            self.dismiss()


def _limit(x: Any) -> str:
    from store.reports.gather import limit_text

    return limit_text(x.low, x.high, x.unit)
