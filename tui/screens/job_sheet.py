"""The sheet of a job at a stage: readings go in, verdicts come back, and the row under the cursor explains itself below."""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from typing import Any, ClassVar

from rich.text import Text
from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical
from textual.geometry import Size

from store.errors import WearlineError
from tui.screens import job_explained, job_faces
from tui.screens.job_explained import Explanation
from tui.widgets.keying import State
from tui.widgets.sheet import ReadingSheet
from tui.writer import Order

OTHER = {"as-found": "as-left", "as-left": "as-found"}
LOOKED_AGAIN = "looked again: it is right"
TYPE_AGAIN = "Then type the value again."


class JobSheet(Vertical):
    """The pane that the Job screen opens with. `waiting` values are with the writer."""

    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "stage", "as left", tooltip="as found or as left; the other stage stays as a faint mark"),
        Binding("f3", "not_measured", "not measured", tooltip="say why this is not measured"),
        Binding("f4", "gauge", "gauge", tooltip="the gauge that the next readings are taken with"),
        Binding("ctrl+l", "row_limit", "limit", tooltip="enter a limit for the row under the cursor"),
        Binding(
            "ctrl+r", "all_rows", "all rows", tooltip="every characteristic of this machine, or only what is asked for"
        ),
        Binding("ctrl+z", "undo", "undo", tooltip="go back to the last reading and correct it"),
        Binding(
            "ctrl+y",
            "right",
            "look again",
            tooltip="to a reading that may be a slip (?); on it: looked at again, it is right",
        ),
    ]

    def __init__(self, stage: str, characteristic: str = "", *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.stage, self.wanted = stage, characteristic
        self.sheet: Any = None
        self.gauges: dict[str, str] = {}
        self.questions: dict[job_faces.Which, str] = {}
        self.precedents: dict[str, Any] = {}
        self.to_look: dict[str, None] = {}
        self.asked: Counter[str] = Counter()
        self.cautioned: set[str] = set()
        self.waiting = 0
        self.version: Any = None
        self.every_row = False

    def compose(self) -> ComposeResult:
        """The sheet over the lines that explain it."""
        yield ReadingSheet(id="sheet", turning=frozenset({"f2", "ctrl+r"}))
        yield Explanation(self._explained, id="explain")

    @property
    def job(self) -> Any:
        """The Job screen that this belongs to."""
        return self.screen

    @property
    def grid(self) -> ReadingSheet:
        """The widget that the keys go to."""
        return self.query_one(ReadingSheet)

    def show(self, screen: Any) -> None:
        """In front again: the keys go to the sheet."""
        self.grid.focus()
        self.fill()

    def fill(self) -> None:
        """Read the sheet of the stage anew; the cursor stays where it is."""
        stage, job = self.stage, self.job

        def question() -> Any:
            from store import sheets, watch

            version = watch.version(job.record)
            return stage, sheets.sheet(job.record, job.tag, stage), version

        job.ask("sheet", question, self._show)

    def _show(self, answer: Any) -> None:
        stage, sheet, version = answer
        grid = self.grid
        if self.waiting or grid.is_busy or stage != self.stage:
            return
        same = self.sheet is not None and self.sheet.stage == stage
        where, is_through = (grid.keying.where, grid.keying.at is None) if same else (None, False)
        aside, last = grid.keying.aside, grid.keying.last if same else []
        before = [row.name for row in grid.keying.rows]
        self.version = version
        self.sheet = sheet = job_faces.asked(sheet, every=self.every_row)
        rows = job_faces.rows(sheet, grid.keying.refused() if same else {})
        grid.show(rows, job_faces.faces(sheet, self.questions), where, is_through=is_through)
        grid.keying.aside, grid.keying.last = (
            [*aside, *grid.keying.aside],
            last if before == [row.name for row in rows] else [],
        )
        self._stand_where_wanted()
        if not same:
            self._look_back()
        self.job.key_names["stage"] = OTHER[stage].replace("-", " ")
        self.job.say_where()
        self.job.refresh_bindings()
        self.explain()

    def _stand_where_wanted(self) -> None:
        """Stand on the row that the screen was opened for; once."""
        row = self._row_of(self.wanted) if self.wanted else None
        self.wanted = ""
        if row is not None and self.grid.keying.rows[row].cells:
            self.grid.stand(row)

    def look_again(self) -> None:
        """Show what another screen wrote, when nothing of ours is under way."""
        if self.waiting:
            return
        if self.sheet is None:
            self.fill()
            return
        job = self.job

        def question() -> Any:
            from store import watch

            return watch.version(job.record)

        job.ask("version", question, lambda version: self.fill() if version != self.version else None)

    @on(ReadingSheet.Typed)
    def typed(self, message: ReadingSheet.Typed) -> None:
        """Hand what was typed to the writer."""
        for given in message.submitted:
            caution = self._caution_unseen(given.row, given.text)
            if caution:
                self.grid.answered(
                    given.row, given.column, State.refused, given.text, f"CAUTION  {caution} {TYPE_AGAIN}"
                )
            else:
                self._order(given.row, given.column, given.text, given.why)

    def _caution_unseen(self, row: int, text: str) -> str:
        """The caution that must be on the screen before this value goes in, as a burst runs ahead of what is seen; or ""."""
        if self.sheet is None or text.casefold().startswith("not measured"):
            return ""
        from store import cautions

        caution = cautions.before(self.sheet.rows[row].characteristic)
        if not caution or caution in self.cautioned or caution in cautions.seen(self.sheet.rows):
            return ""
        return caution

    def _order(self, row: int, column: int, text: str, why: str) -> None:
        from store.readings import Entry

        writer = self.job.wearline.writer
        if self.sheet is None or writer is None:
            return
        one = self.sheet.rows[row].characteristic
        gauge = None if one.statistic.value == "attribute" else self.gauges.get(one.gauge)
        position = self.grid.keying.rows[row].cells[column].position
        entry = Entry(one.name, text, self.stage, position, gauge=gauge, why=why)
        self.waiting += 1
        writer.put(Order(self.job.tag, entry, (self, row, column)))

    def written(self, answers: Sequence[tuple[Order, Any]]) -> None:
        """What came of the values: verdicts, or the reason of a refusal."""
        grid = self.grid
        moved: dict[str, Any] = {}
        for order, answer in answers:
            token: Any = order.token
            pane, row, column = token
            if pane is not self:
                continue
            self.waiting -= 1
            if order.entry.stage != self.stage:
                if isinstance(answer, WearlineError):
                    self.job.refuse(f"{order.entry.characteristic} {order.entry.text}, {order.entry.stage}: {answer}")
                continue
            if isinstance(answer, WearlineError):
                grid.answered(row, column, State.refused, order.entry.text, str(answer))
                continue
            grid.answered(row, column, State.accepted, job_faces.in_cell(answer.reading))
            self.to_look[answer.reading.characteristic] = None
            moved |= {judged.characteristic.name: judged for judged in answer.judged}
        for name, judged in moved.items():
            n = self._row_of(name)
            if n is not None:
                self.sheet = job_faces.with_judged(self.sheet, n, judged)
                grid.set_face(n, job_faces.face(self.sheet, n, self.questions))
        self.explain()
        if not self.waiting:
            self._look_twice()
            self.fill()

    def _look_twice(self) -> None:
        """Once nothing more is waiting: ask whether what was just read may be a slip."""
        job, stage, names = self.job, self.stage, tuple(self.to_look)
        self.to_look.clear()

        def question() -> Any:
            from store import slips

            return stage, names, slips.of_stage(job.record, job.tag, stage, names, just_read=True)

        if names:
            self.asked["slips"] += 1
            job.ask(f"slips {self.asked['slips']}", question, self._slips)

    def _slips(self, answer: Any) -> None:
        stage, names, found = answer
        kept = {which: said for which, said in self.questions.items() if which[0] != stage or which[1] not in names}
        self.questions = kept | {(stage, *place): said[0] for place, said in found.items()}
        if self.sheet is not None and stage == self.sheet.stage:
            for n, row in enumerate(self.sheet.rows):
                if row.characteristic.name in names:
                    self.grid.set_face(n, job_faces.face(self.sheet, n, self.questions))
        self.explain()

    def _look_back(self) -> None:
        """When a stage comes up: what went before, and what is still to be looked at again."""
        job, stage = self.job, self.stage
        names = tuple(row.characteristic.name for row in self.sheet.rows)

        def question() -> Any:
            from store import precedents, slips

            asked = slips.of_stage(job.record, job.tag, stage) if self.sheet.job.is_open else {}
            return precedents.of_job(job.record, job.tag, stage), (stage, names, asked)

        def then(answer: Any) -> None:
            self.precedents, found = answer
            self._slips(found)

        job.ask("before", question, then)

    def _row_of(self, name: str) -> int | None:
        return next((n for n, row in enumerate(self.sheet.rows) if row.characteristic.name == name), None)

    @on(ReadingSheet.Moved)
    def explain(self) -> None:
        """Explain the row under the cursor below the sheet, at the next painting."""
        self.query_one(Explanation).refresh()

    def _explained(self, room: Size) -> Text:
        if self.sheet is None:
            return Text()
        known = job_explained.Known(self.sheet, self.questions, self.gauges, self.precedents)
        drawn = job_explained.explanation(known, self.grid.keying, room, self.app.theme_variables)
        about = {row.characteristic.caution for row in self.sheet.rows}
        self.cautioned |= job_explained.cautions_shown(about, drawn.plain, room)
        return drawn

    def action_stage(self) -> None:
        """As found or as left."""
        self.grid.hold()
        self.stage = OTHER[self.stage]
        self.fill()

    def action_all_rows(self) -> None:
        """Every row, or only those that are asked for; the cursor begins anew."""
        self.grid.hold()
        self.every_row = not self.every_row
        self.sheet = None
        self.fill()

    def action_not_measured(self) -> None:
        """Ask for the reason."""
        self.grid.ask_not_measured()

    def action_undo(self) -> None:
        """Back to the last reading, to correct it."""
        self.grid.undo()

    def action_right(self) -> None:
        """To the next reading that may be a slip; on it: it was looked at again and is right, and the record keeps that."""
        grid, at = self.grid, self.grid.keying.at
        if self.sheet is None:
            return
        asked = [
            (n, column)
            for n, row in enumerate(grid.keying.rows)
            for column, cell in enumerate(row.cells)
            if (self.stage, row.name, cell.position) in self.questions and cell.state is State.accepted
        ]
        if at in asked:
            reading = self.sheet.rows[at[0]].readings[at[1]]
            if reading is not None:
                self._order(*at, reading.typed.text, LOOKED_AGAIN)
        elif asked:
            grid.stand(*next((place for place in asked if at is None or place > at), asked[0]))

    def action_gauge(self) -> None:
        """Choose the gauge for readings of this kind."""
        from tui.screens.pick_gauge import PickGauge

        at = self.grid.keying.at
        if self.sheet is None or at is None or self.job.record is None:
            return
        kind = self.sheet.rows[at[0]].characteristic.gauge

        def chosen(name: str | None) -> None:
            if name is not None:
                self.gauges[kind] = name
                self.explain()

        self.app.push_screen(PickGauge(kind), chosen)

    def action_row_limit(self) -> None:
        """Enter a limit for the row under the cursor, in place."""
        at = self.grid.keying.at
        if self.sheet is not None and at is not None:
            from tui.screens.enter_limit import EnterLimit

            form = EnterLimit(self.sheet.job.model, self.sheet.rows[at[0]].characteristic, self.job.tag)
            self.app.push_screen(form, lambda done: self.fill())

    def close_buffer(self) -> None:
        """What is being typed goes to the writer at once, as before leaving."""
        keying = self.grid.keying
        if keying.buffer and keying.at is not None:
            self.typed(ReadingSheet.Typed(keying.go(*keying.at)))
