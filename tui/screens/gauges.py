"""Gauges: due dates, uncertainty, calibrations, and the jobs that one touched."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.screens.standing import Standing
from tui.widgets.listing import Column, Item, Listing


class Gauges(Standing):
    """The gauges, those due first on top; below, what the one under the cursor touched."""

    CSS_PATH = "gauges.tcss"
    TITLE_WORDS = "Gauges"
    EXPLAINS = (
        "Every gauge with its resolution, expanded uncertainty U and the date at which calibration is due. An overdue gauge may be "
        "used, but stands in the way of a release. A bad calibration (F3) shows below which jobs the gauge touched since its last "
        "good one, released jobs first: those are to be recalled or looked at again.\n\n"
        "A gauge's resolution should be about a tenth of the tolerance it judges (common practice)."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "new", "new gauge"),
        Binding("f3", "calibrate", "calibrate"),
        Binding("f4", "retire", "out of use"),
        Binding("escape", "back", "back"),
    ]

    def body(self) -> ComposeResult:
        """The gauges over the jobs touched."""
        yield Listing(
            [
                Column("gauge", 14), Column("kind", 0), Column("resolution", 10, right=True), Column("U", 7, right=True),
                Column("unit", 5), Column("calibrated", 10, quiet=True, from_width=90), Column("due", 11),
            ],
            empty="no gauge yet: F2 enters one",
            id="gauges",
        )  # fmt: skip
        yield Static("", id="touched-head", markup=False)
        yield Listing(
            [
                Column("tag", 10), Column("stands", 12), Column("readings", 8, right=True), Column("from", 17, quiet=True),
                Column("to", 0, quiet=True),
            ],
            empty="no reading since its last good calibration",
            id="touched",
        )  # fmt: skip

    def record_opened(self) -> None:
        """Read the gauges."""
        self.say_where()
        self.query_one("#gauges").focus()

        def question() -> Any:
            from store import gauges

            assert self.record is not None
            return gauges.listing(self.record), self.record.now()

        self.ask("gauges", question, self._show)

    def _show(self, answer: Any) -> None:
        found, now = answer
        items = []
        for g in found:
            last, overdue = g.calibration, g.is_overdue(now)
            cells = (
                g.name, g.kind, g.resolution or "", (last.expanded_uncertainty or "") if last else "", g.unit,
                (last.calibrated or "") if last else "never", "OVERDUE" if overdue else g.due or "no date",
            )  # fmt: skip
            items.append(Item(cells, g, "loud" if overdue else ""))
        self.query_one("#gauges", Listing).show(items)

    @on(Listing.Moved, "#gauges")
    def moved(self, message: Listing.Moved) -> None:
        """Which jobs it touched."""
        gauge = message.item.value

        def question() -> Any:
            from store import gauges

            assert self.record is not None
            return gauge, gauges.recall(self.record, gauge.name)

        self.ask("touched", question, self._show_touched)

    def _show_touched(self, answer: Any) -> None:
        from store import times

        gauge, touched = answer
        note = f"   {gauge.note}" if gauge.note else ""
        self.query_one("#touched-head", Static).update(
            f"jobs with readings by {gauge.name} since its last good calibration{note}"
        )
        items = [
            Item((t.tag, t.outcome, str(t.readings), times.local(t.first), times.local(t.last)), t.tag) for t in touched
        ]
        self.query_one("#touched", Listing).show(items)

    @on(Listing.Chosen, "#gauges")
    def to_touched(self) -> None:
        """Into the jobs."""
        self.query_one("#touched").focus()

    @on(Listing.Chosen, "#touched")
    def open_job(self, message: Listing.Chosen) -> None:
        """Open a job that was touched."""
        self.wearline.go("job", message.item.value)

    def action_new(self) -> None:
        """Enter a gauge."""

        def keep(values: dict[str, str]) -> Any:
            from store import gauges

            assert self.record is not None
            return gauges.add(self.record, values.pop("gauge"), values.pop("kind"), **values)

        lines = [
            Line("gauge", "gauge", "its engraved number"), Line("kind", "kind", "outside micrometer, caliper ..."),
            Line("unit", "unit", "what it sends: mm, in, N ..."), Line("resolution", "resolution"),
            Line("expanded_uncertainty", "uncertainty U", "from its certificate"), Line("k", "factor k", "", "2"),
            Line("calibrated", "calibrated", "2026-12-01"), Line("due", "due", "2027-12-01"), Line("note", "note"),
        ]  # fmt: skip
        self.app.push_screen(Form("A new gauge", lines, keep), lambda done: self.record_opened())

    def _gauge(self) -> Any:
        item = self.query_one("#gauges", Listing).item
        return item.value if item else None

    def action_calibrate(self) -> None:
        """Enter a calibration of the gauge under the cursor."""
        gauge = self._gauge()
        if gauge is None:
            return

        def keep(values: dict[str, str]) -> Any:
            from store import calibrations

            assert self.record is not None
            return calibrations.enter(self.record, gauge.name, **values)

        last = gauge.calibration
        lines = [
            Line("result", "result", "good or bad", "good"), Line("calibrated", "on", "empty: today"), Line("due", "next due", "2027-12-01"),
            Line("expanded_uncertainty", "uncertainty U", gauge.unit, (last.expanded_uncertainty or "") if last else ""),
            Line("k", "factor k", "", (last.k or "2") if last else "2"), Line("note", "note"),
        ]  # fmt: skip
        self.app.push_screen(
            Form(f"Calibration of {gauge.name}", lines, keep, gauge.kind), lambda done: self.record_opened()
        )

    def action_retire(self) -> None:
        """Take the gauge under the cursor out of use."""
        gauge = self._gauge()
        if gauge is None:
            return

        def keep(values: dict[str, str]) -> Any:
            from store import gauges

            assert self.record is not None
            return gauges.retire(self.record, gauge.name, values["why"])

        form = Form(f"Take {gauge.name} out of use", [Line("why", "why")], keep, "Its readings stay.")
        self.app.push_screen(form, lambda done: self.record_opened())

    def action_back(self) -> None:
        """From the jobs to the gauges, then back."""
        if self.query_one("#touched").has_focus:
            self.query_one("#gauges").focus()
        else:
            self.dismiss()
