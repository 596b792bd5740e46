"""The rework plan of a job: the proposal with its numbers, the rework list, and predictions held against what was left."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.widgets.listing import Column, Item, Listing


class JobPlan(Vertical):
    """Proposed lines over the rework list, remarks below. Enter accepts a proposed line, or says that a listed one is done."""

    DEFAULT_CSS = """
    JobPlan Listing { margin: 0 1; }
    JobPlan #line { height: auto; min-height: 6; max-height: 12; padding: 0 1; border-top: solid $hairline; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding(
            "a", "accept_all", "accept all", tooltip="take every proposed line that asks for work into the rework list"
        )
    ]

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.job_screen: Any = None

    def compose(self) -> ComposeResult:
        """One list, and the line under the cursor in full."""
        yield Listing(
            [Column("", 5, right=True), Column("component", 12), Column("action", 22), Column("", 0)],
            empty="measure as found first: the plan is computed from those readings",
        )
        yield Static("", id="line", markup=False)

    def show(self, screen: Any) -> None:
        """Compute the plan of the screen's job."""
        self.job_screen = screen
        self.query_one(Listing).focus()

        def question() -> Any:
            from store import plans

            listed = plans.listing(screen.record, screen.tag)
            with_held = [(entry, plans.held(screen.record, screen.tag, entry.line)) for entry in listed]
            return plans.compute(screen.record, screen.tag), with_held

        screen.ask("plan", question, self._show)

    def _show(self, answer: Any) -> None:
        plan, listed = answer
        items = []
        accepted = {(entry.line.component, entry.line.action, entry.line.because) for entry, _ in listed}
        proposed = [
            (n, x) for n, x in enumerate(plan.lines, start=1) if (x.component, x.action, x.because) not in accepted
        ]
        if proposed:
            items.append(Item(("proposed, sizes are predictions: Enter accepts a line, a all of them",), heading=True))
        for number, line in proposed:
            loud = {"replace", "not-to-be-turned", "straighten-shaft-first", "turn-last-cut"}
            tone = "loud" if line.action in loud else "" if line.is_work else "quiet"
            cells = (str(number), line.component, line.action, line.because)
            items.append(Item(cells, ("proposed", number, line, ()), tone))
        if listed:
            items.append(Item(("rework list: Enter says what came of a line",), heading=True))
        for entry, held in listed:
            tone = "quiet" if entry.outcome != "open" else ""
            tone = "doubt" if any(h.beyond for h in held) else tone
            told = (
                {"declined": "no"}.get(entry.outcome, entry.outcome),
                entry.line.component,
                entry.line.action,
                entry.note or entry.line.because,
            )
            items.append(Item(told, ("listed", entry.id, entry.line, held), tone))
        if plan.remarks:
            items.append(Item(("what else the readings say",), heading=True))
        items += [
            Item(("", "", "", remark), ("remark", n, remark, ()), "quiet") for n, remark in enumerate(plan.remarks)
        ]
        self.query_one(Listing).show(items)
        if not items:
            self.query_one("#line", Static).update("")

    @on(Listing.Moved)
    def moved(self, message: Listing.Moved) -> None:
        """The whole line: why, the formula, what is predicted, and what was left."""
        from store import plans

        kind, _, line, held = message.item.value
        if kind == "remark":
            self.query_one("#line", Static).update(line)
            return
        text = [line.because]
        if line.formula:
            text.append(line.formula)
        if held:
            text += [h.says for h in held]
        else:
            text += [f"predicted, not measured: {p.name} {plans.shown(p.value)} {p.unit}" for p in line.predicted]
        self.query_one("#line", Static).update("\n".join(text))

    @on(Listing.Chosen)
    def chosen(self, message: Listing.Chosen) -> None:
        """Accept a proposed line; say what came of a listed one."""
        kind, number, line, _ = message.item.value
        if kind == "remark":
            return
        if kind == "proposed":
            self._accept([number])
            return

        def keep(values: dict[str, str]) -> Any:
            from store import plans

            screen = self.job_screen
            outcome = values["outcome"].strip() or "done"
            return plans.finish(screen.record, screen.tag, number, outcome=outcome, note=values["note"])

        lines = [Line("outcome", "outcome", "done or declined", "done"), Line("note", "note", "why, where declined")]
        form = Form(f"{line.component}: {line.action}", lines, keep)
        self.app.push_screen(form, lambda done: self.show(self.job_screen) if done else None)

    def action_accept_all(self) -> None:
        """Accept every proposed line that asks for work."""
        self._accept(None)

    def _accept(self, numbers: list[int] | None) -> None:
        screen = self.job_screen

        def question() -> Any:
            from store import plans

            return plans.accept(screen.record, screen.tag, numbers)

        screen.ask("accept", question, lambda listed: self.show(screen))
