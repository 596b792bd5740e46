"""Limits: a model's sheet with the source of each limit, its revisions, copying, and proposals from own readings."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Horizontal
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.screens.new_model import NewModel
from tui.screens.standing import Standing
from tui.widgets.listing import Column, Item, Listing

SHEET = (
    Column("characteristic", 26), Column("stage", 8, quiet=True, from_width=84), Column("limit", 20),
    Column("readings", 8, right=True, quiet=True, from_width=84), Column("source", 0, quiet=True),
)  # fmt: skip
NAMED, REVISION = 26, 18
STAGES = {"both": "as found and as left", "as-found": "as found", "as-left": "as left"}


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
        Binding(
            "f2",
            "revision",
            "revisions",
            tooltip="the revisions side by side, what differs marked; again: the newest alone",
        ),
        Binding("f3", "copy", "copy from", tooltip="copy the sheet of another model"),
        Binding("f4", "propose", "propose", tooltip="what the shop's own as-left readings of this model would suggest"),
        Binding("f5", "new_model", "new model"),
        Binding("delete", "drop", "drop limit", tooltip="a new revision without the limit under the cursor"),
        Binding("escape", "back", "back"),
    ]

    def __init__(self, model: str | None = None) -> None:
        super().__init__()
        self.model = model
        self.side_by_side = False
        self.sheet: Any = None

    def body(self) -> ComposeResult:
        """Two lists and a line on the revision."""
        yield Static("", id="revision", markup=False)
        with Horizontal():
            yield Listing([Column("model", 0), Column("rev", 3, right=True)], empty="F5: new model", id="models")
            yield Listing(SHEET, empty="no limits yet: Enter on a line enters one, F3 copies a sheet", id="sheet")
        yield Static("", id="about", markup=False)

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
        self.read_sheet(message.item.value)

    @on(Listing.Chosen, "#models")
    def to_sheet(self) -> None:
        """Into the sheet."""
        self.query_one("#sheet").focus()

    def read_sheet(self, model: Any) -> None:
        """Ask for the newest sheet of a model with the characteristics that have no limit, or for its revisions."""
        side_by_side = self.side_by_side
        most = max(2, (self.query_one("#sheet").size.width - NAMED) // (REVISION + 1))

        def question() -> Any:
            from store import catalogue, limit_sheets

            assert self.record is not None
            known = limit_sheets.revisions(self.record, model.number)
            wanted = known[-most:] if side_by_side else known[-1:]
            sheets = [limit_sheets.sheet(self.record, model.number, revision.number) for revision in wanted]
            return model, sheets, len(known), catalogue.catalogue(self.record).of(model.kind)

        self.ask("sheet", question, self._show_sheet)

    def _show_sheet(self, answer: Any) -> None:
        model, sheets, known, characteristics = answer
        self.sheet = sheets[-1] if sheets else None
        volts = f"  {model.volts} V" if model.volts else ""
        said = f"{model.number}  {model.kind}{volts}  {model.rotation}"
        if self.sheet is not None:
            rev = self.sheet.revision
            said += f"   revision {rev.number} of {known}, {rev.decision.value.replace('-', ' ')}, {rev.at[:10]} {rev.by}  {rev.why}"
        self.query_one("#revision", Static).update(said)
        listing = self.query_one("#sheet", Listing)
        if self.side_by_side and sheets:
            listing.columns = (
                Column("characteristic", NAMED), *(Column(f"revision {s.revision.number}", REVISION) for s in sheets),
            )  # fmt: skip
            listing.show(_compared(sheets, {c.name: c for c in characteristics}))
            return
        listing.columns = SHEET
        items, limited = [], set()
        for x in self.sheet.limits if self.sheet else ():
            limited.add(x.characteristic)
            one = next(c for c in characteristics if c.name == x.characteristic)
            stage = "" if x.stage == "both" else x.stage.replace("-", " ")
            items.append(Item((one.label, stage, _limit(x), str(x.count or ""), x.source), (one, x)))
        rest = [Item((c.label, "", "", "", ""), (c, None), "quiet") for c in characteristics if c.name not in limited]
        if rest:
            items += [Item(("without a limit",), heading=True), *rest]
        listing.show(items)

    @on(Listing.Moved, "#sheet")
    def say_all(self, message: Listing.Moved) -> None:
        """The limit under the cursor in full."""
        one, x = message.item.value
        said = f"{one.label}: "
        if x is None:
            said += f"no limit.  {one.datum}"
        else:
            new = f"new {x.new} {x.unit}, " if x.new else ""
            equal = (
                "" if one.statistic.value == "attribute" else f", equal to it {x.at_limit}es".replace("failes", "fails")
            )
            count = f", {x.count} readings" if x.count else ""
            said += f"{new}{_limit(x)}{equal}, {STAGES[x.stage]}{count}.  {x.source}.  {x.note}"
        self.query_one("#about", Static).update(said)

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
        """The newest revisions side by side, or the newest alone."""
        self.side_by_side = not self.side_by_side
        model = self._model()
        if model is not None:
            self.read_sheet(model)

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

        def done(made: Any) -> None:
            if made is not None:
                self.model = made.number
                self.record_opened()

        self.app.push_screen(NewModel(), done)

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


def _compared(sheets: Any, characteristics: Any) -> list[Item]:
    """A line for each limit of any revision; one that is not the same in all is marked."""
    found: dict[tuple[str, str], list[Any]] = {}
    for n, sheet in enumerate(sheets):
        for x in sheet.limits:
            found.setdefault((x.characteristic, x.stage), [None] * len(sheets))[n] = x
    items = []
    for (name, stage), limits in found.items():
        shown = ["none" if x is None else _limit(x) for x in limits]
        differs = any(x is None or (x.low, x.high, x.new, x.at_limit, x.unit) != _sizes(limits[-1]) for x in limits)
        label = characteristics[name].label + ("" if stage == "both" else f", {stage.replace('-', ' ')}")
        item = (f"{'≠ ' if differs else '  '}{label}", *shown)
        items.append(Item(item, (characteristics[name], limits[-1]), "doubt" if differs else ""))
    return items


def _sizes(x: Any) -> Any:
    return None if x is None else (x.low, x.high, x.new, x.at_limit, x.unit)


def _limit(x: Any) -> str:
    from store.reports.gather import limit_text

    return limit_text(x.low, x.high, x.unit)
