"""One job: the sheet in front; plan, parts, notes, history one key away."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.widgets import ContentSwitcher, Static

from store.errors import WearlineError
from tui.screens import job_faces
from tui.screens.bench import LOOK_AGAIN_SECONDS
from tui.screens.places import PANES, load_pane
from tui.screens.standing import Standing
from tui.widgets.keying import State
from tui.widgets.sheet import ReadingSheet
from tui.writer import Order

OTHER = {"as-found": "as-left", "as-left": "as-found"}


class JobScreen(Standing):
    """A job on the bench."""

    CSS_PATH = "job.tcss"
    TITLE_WORDS = "Job"
    EXPLAINS = (
        "Type a reading and press Enter: it goes into the cell under the cursor, is written to disk and judged, and the cursor "
        "goes to the next empty one. A gauge that types does the same. Write 11.4, 11,4, .448in, 7/16 or 1 3/16; tests are one "
        "key: p pass, f fail (add what failed), c cannot be judged. F3 says why something is not measured. Typing over a "
        "reading corrects it and asks why; nothing is erased. The lines below the sheet explain the row under the cursor: the "
        "wear rule from new size to limit, the verdict in a sentence, datum, caution, source, and what it was before.\n"
        "Marks: · being written   ! refused, see below   ◂ the reading that governs"
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "stage", "found/left", tooltip="as found or as left; the other stage stays as a faint mark"),
        Binding("f3", "not_measured", "not measured", tooltip="say why this is not measured"),
        Binding("f4", "gauge", "gauge", tooltip="the gauge that the next readings are taken with"),
        Binding("f5", "next_pane", "notes ...", tooltip="go on to the next pane: sheet, plan, parts, notes, history"),
        Binding("f6", "report", "report", tooltip="the tolerance report as it will print"),
        Binding("f7", "row_limit", "limit", tooltip="enter a limit for the row under the cursor"),
        Binding(
            "f8",
            "all_rows",
            "all rows",
            tooltip="every characteristic of this machine, or only those the sheet asks for",
        ),
        Binding("ctrl+z", "undo", "undo", tooltip="correct the last reading"),
        Binding("escape", "back", "bench"),
    ]

    def __init__(self, tag: str, stage: str = "as-found", characteristic: str = "", pane: str = "sheet") -> None:
        super().__init__()
        self.tag, self.stage = tag, stage
        self.wanted, self.wanted_pane = characteristic, pane
        self.sheet: Any = None
        self.gauges: dict[str, str] = {}
        self.questions: dict[tuple[str, str, str], str] = {}
        self.waiting = 0
        self.version: Any = None
        self.pane = "sheet"
        self.every_row = False

    def body(self) -> ComposeResult:
        """The panes, one in front."""
        with ContentSwitcher(initial="pane-sheet"), Vertical(id="pane-sheet"):
            yield ReadingSheet(id="sheet")
            yield Static("", id="explain", markup=False)

    def on_mount(self) -> None:
        """The sheet has the keys from the first moment."""
        super().on_mount()
        self.query_one(ReadingSheet).focus()
        self.set_interval(LOOK_AGAIN_SECONDS, self.look_again)

    def where(self) -> str:
        """Job, unit and stage."""
        if self.sheet is None:
            return f"Bench > {self.tag}"
        job = self.sheet.job
        stage = self.stage.replace("-", " ")
        ended = "" if job.is_open else f"  {job.outcome}"
        came = f"  comeback of {job.earlier}" if job.earlier else ""
        return f"Bench > {job.tag}  {job.model} {job.kind}  serial {job.serial}  {stage}{ended}{came}"

    def record_opened(self) -> None:
        """Read the sheet."""
        self.fill()

    def fill(self) -> None:
        """Read the sheet of the stage anew; the cursor stays where it is."""
        stage = self.stage

        def question() -> Any:
            from store import sheets, watch

            assert self.record is not None
            return stage, sheets.sheet(self.record, self.tag, stage), watch.version(self.record)

        self.ask("sheet", question, self._show)

    def _show(self, answer: Any) -> None:
        stage, sheet, self.version = answer
        widget = self.query_one(ReadingSheet)
        if self.waiting or widget.keying.buffer:
            return
        same = self.sheet is not None and self.sheet.stage == stage
        where, is_through = (widget.keying.where, widget.keying.at is None) if same else (None, False)
        aside, last = widget.keying.aside, widget.keying.last if same else []
        before = [row.name for row in widget.keying.rows]
        self.sheet = sheet = job_faces.asked(sheet, every=self.every_row)
        refused = widget.keying.refused() if same else {}
        rows = job_faces.rows(sheet, refused)
        widget.show(rows, job_faces.faces(sheet), where)
        if is_through and not any(c.state is State.empty for r in rows if r.is_asked for c in r.cells):
            widget.keying.at = None
        widget.keying.aside, widget.keying.last = aside, last if before == [row.name for row in rows] else []
        self._go_where_wanted(widget)
        self.say_where()
        self.explain()

    def _go_where_wanted(self, widget: ReadingSheet) -> None:
        """Stand on the row, or open the pane, that the screen was opened for; once."""
        row = self._row_of(self.wanted) if self.wanted else None
        if row is not None and widget.keying.rows[row].cells:
            widget.stand(row)
        pane, self.wanted, self.wanted_pane = self.wanted_pane, "", "sheet"
        if pane != "sheet" and pane in PANES:
            self.show_pane(pane)

    def look_again(self) -> None:
        """Show what another screen wrote, when nothing of ours is under way."""
        if self.record is None or self.waiting or self.app.screen is not self or self.sheet is None:
            return

        def question() -> Any:
            from store import watch

            assert self.record is not None
            return watch.version(self.record)

        self.ask("version", question, lambda version: self.fill() if version != self.version else None)

    @on(ReadingSheet.Typed)
    def typed(self, message: ReadingSheet.Typed) -> None:
        """Hand what was typed to the writer."""
        from store.readings import Entry

        widget = self.query_one(ReadingSheet)
        writer = self.wearline.writer
        if self.sheet is None or writer is None:
            return
        for given in message.submitted:
            row = self.sheet.rows[given.row]
            cell = widget.keying.rows[given.row].cells[given.column]
            gauge = self.gauges.get(row.characteristic.gauge)
            entry = Entry(
                row.characteristic.name, given.text, self.stage, cell.position,
                gauge=gauge if row.characteristic.statistic.value != "attribute" else None, why=given.why,
            )  # fmt: skip
            self.waiting += 1
            writer.put(Order(self.tag, entry, (self, given.row, given.column)))

    def written(self, answers: Sequence[tuple[Order, Any]]) -> None:
        """What came of the values: verdicts, or the reason of a refusal."""
        widget = self.query_one(ReadingSheet)
        moved: dict[str, Any] = {}
        for order, answer in answers:
            token: Any = order.token
            screen, row, column = token
            if screen is not self:
                continue
            self.waiting -= 1
            if order.entry.stage != self.stage:
                continue
            if isinstance(answer, WearlineError):
                widget.answered(row, column, State.refused, order.entry.text, str(answer))
                continue
            widget.answered(row, column, State.accepted, job_faces.shown(answer.reading))
            for judged in answer.judged:
                moved[judged.characteristic.name] = judged
            self._look_twice(answer.reading)
        for name, judged in moved.items():
            n = self._row_of(name)
            if n is not None:
                self.sheet = job_faces.with_judged(self.sheet, n, judged, widget.keying.rows[n])
                widget.set_face(n, job_faces.face(self.sheet, n))
        self.explain()
        if not self.waiting:
            self.fill()

    def _look_twice(self, reading: Any) -> None:
        """Ask whether a reading may be a slip, when nothing more is waiting; the answer is a question below the sheet."""

        def question() -> Any:
            from store import slips

            assert self.record is not None
            return reading, slips.questions(self.record, self.tag, reading)

        if self.waiting < 3:
            self.ask(f"slips-{reading.characteristic}-{reading.position}", question, self._slip)

    def _slip(self, answer: Any) -> None:
        reading, questions = answer
        which = (reading.stage, reading.characteristic, reading.position)
        self.questions.pop(which, None)
        if questions:
            self.questions[which] = questions[0]
        self.explain()

    def _row_of(self, name: str) -> int | None:
        return next((n for n, row in enumerate(self.sheet.rows) if row.characteristic.name == name), None)

    @on(ReadingSheet.Moved)
    def explain(self) -> None:
        """Explain the row under the cursor below the sheet."""
        widget = self.query_one(ReadingSheet)
        if self.sheet is None:
            return
        text = job_faces.explanation(self.sheet, widget.keying, self.questions, self.gauges, self.size.width)
        self.query_one("#explain", Static).update(text)

    def action_stage(self) -> None:
        """As found or as left."""
        self.query_one(ReadingSheet).close_buffer()
        self.stage = OTHER[self.stage]
        self.fill()

    def action_all_rows(self) -> None:
        """Every row, or only those that are asked for; the cursor begins anew."""
        self.query_one(ReadingSheet).close_buffer()
        self.every_row = not self.every_row
        self.sheet = None
        self.fill()

    def action_not_measured(self) -> None:
        """Ask for the reason."""
        self.query_one(ReadingSheet).ask_not_measured()

    def action_undo(self) -> None:
        """Back to the last reading, to correct it."""
        self.query_one(ReadingSheet).undo()

    def action_gauge(self) -> None:
        """Choose the gauge for readings of this kind."""
        from tui.screens.pick_gauge import PickGauge

        at = self.query_one(ReadingSheet).keying.at
        if self.sheet is None or at is None or self.record is None:
            return
        kind = self.sheet.rows[at[0]].characteristic.gauge

        def chosen(name: str | None) -> None:
            if name is not None:
                self.gauges[kind] = name
                if not name:
                    self.gauges.pop(kind)
                self.explain()

        self.app.push_screen(PickGauge(kind), chosen)

    def action_next_pane(self) -> None:
        """Go on to the next pane."""
        order = ["sheet", *PANES]
        self.show_pane(order[(order.index(self.pane) + 1) % len(order)])

    def show_pane(self, pane: str) -> None:
        """Bring a pane to the front; it is made when it is first wanted."""
        switcher = self.query_one(ContentSwitcher)
        self.query_one(ReadingSheet).close_buffer()
        self.pane = pane
        name = f"pane-{pane}"
        if pane != "sheet" and not switcher.query(f"#{name}"):
            made = load_pane(pane)(id=name)
            self.call_later(self._mount_pane, made, name)
            return
        self._front(name)

    async def _mount_pane(self, made: Any, name: str) -> None:
        await self.query_one(ContentSwitcher).mount(made)
        self._front(name)

    def _front(self, name: str) -> None:
        switcher = self.query_one(ContentSwitcher)
        switcher.current = name
        front = switcher.query_one(f"#{name}")
        if name == "pane-sheet":
            self.query_one(ReadingSheet).focus()
        else:
            front.show(self)  # type: ignore[attr-defined]

    def action_report(self) -> None:
        """The report as it will print."""
        self.query_one(ReadingSheet).close_buffer()
        self.wearline.go("report", self.tag)

    def action_row_limit(self) -> None:
        """Enter a limit for the row under the cursor, in place."""
        at = self.query_one(ReadingSheet).keying.at
        if self.sheet is not None and at is not None:
            from tui.screens.enter_limit import EnterLimit

            row = self.sheet.rows[at[0]]
            self.app.push_screen(
                EnterLimit(self.sheet.job.model, row.characteristic, self.tag), lambda done: self.fill()
            )

    def action_back(self) -> None:
        """Back to the sheet, then to the bench; what is being typed is closed first."""
        if self.pane != "sheet":
            self.show_pane("sheet")
            return
        self.query_one(ReadingSheet).close_buffer()
        self.dismiss()

    def leaving(self) -> None:
        """The program closes: what is in the buffer goes to the writer."""
        widget = self.query_one(ReadingSheet)
        if widget.keying.buffer and widget.keying.at is not None:
            self.typed(ReadingSheet.Typed(widget.keying.go(*widget.keying.at)))
