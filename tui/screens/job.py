"""One job: the sheet in front; plan, parts, notes, history one key away. This is the frame, the panes do the work."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import ContentSwitcher

from tui.screens.bench import LOOK_AGAIN_SECONDS
from tui.screens.job_sheet import JobSheet
from tui.screens.places import PANES, load_pane
from tui.screens.standing import Standing
from tui.writer import Order


class JobScreen(Standing):
    """A job on the bench, opened at a stage, on a characteristic or on a pane. A pane's key leads there and back."""

    CSS_PATH = "job.tcss"
    TITLE_WORDS = "Job"
    KEY_LINES = 2
    EXPLAINS = (
        "Type a reading and press Enter: it goes into the cell under the cursor, is written to disk and judged, and the cursor "
        "goes to the next empty one. A gauge that types does the same. Write 11.4, 11,4, .448in, 7/16 or 1 3/16; tests are one "
        "key: p pass, f fail (add what failed), c cannot be judged. Typing over a reading corrects it and asks why; nothing is "
        "erased. The lines below the sheet explain the row under the cursor.\n\n"
        "Marks in a cell: · being written  ! refused  ? may be a slip  ◂ governs\n"
        "Wear rule: ├ new  ┃ limit  ░ the gauge cannot tell  ╌ beyond the limit\n"
        "           │ reading  ◆ judged  · reading at the other stage"
    )
    CAUTIONS = (
        "Growler: never on with no armature in the jaws; off before lifting it. Keep pacemaker wearers away.",
        "No-load test: a series motor runs away. Clamp it, guard the pinion, never above its volts; 30 s on, 2 min off.",
        "Stall test: high current and torque, a few seconds only; secure the arm and stand clear of its plane.",
        "Lathe: goggles, no gloves, rings or loose sleeves; no emery on commutators.",
        "Insulation test: take diodes and regulators off first; discharge the windings to the frame afterwards.",
    )
    HORIZONTAL_BREAKPOINTS = [(0, "-narrow"), (110, "-wide")]  # noqa: RUF012
    VERTICAL_BREAKPOINTS = [(0, "-short"), (32, "-tall")]  # noqa: RUF012
    BINDINGS: ClassVar[list[BindingType]] = [
        *(
            Binding(pane.key, f"screen.pane('{name}')", pane.title, tooltip=f"{pane.says}; again: back to the sheet")
            for name, pane in PANES.items()
        ),
        Binding("f9", "report", "report", tooltip="the tolerance report as it will print"),
        Binding("f10", "release", "release", tooltip="what stands in the way of this job's release, and the signature"),
        Binding("escape", "back", "back", tooltip="back to the sheet, then to the bench"),
    ]

    def __init__(self, tag: str, stage: str = "as-found", characteristic: str = "", pane: str = "sheet") -> None:
        super().__init__()
        self.tag = tag
        self.pane, self.wanted_pane = "sheet", pane
        self.sheet_pane = JobSheet(stage, characteristic, id="pane-sheet")

    def body(self) -> ComposeResult:
        """The panes, one in front."""
        with ContentSwitcher(initial="pane-sheet"):
            yield self.sheet_pane

    def on_mount(self) -> None:
        """The sheet has the keys from the first moment; the handler of `Standing` is called after this one."""
        self.sheet_pane.grid.focus()
        self.set_interval(LOOK_AGAIN_SECONDS, self.look_again)

    @property
    def sheet(self) -> Any:
        """The sheet as it was last read, None before."""
        return self.sheet_pane.sheet

    @property
    def waiting(self) -> int:
        """How many values are with the writer."""
        return self.sheet_pane.waiting

    def where(self) -> str:
        """Job, unit, stage or pane."""
        if self.sheet is None:
            return f"Bench > {self.tag}"
        job = self.sheet.job
        front = self.sheet_pane.stage.replace("-", " ") if self.pane == "sheet" else PANES[self.pane].title
        ended = "" if job.is_open else f"  {job.outcome}"
        came = f"  comeback of {job.earlier}" if job.earlier else ""
        return f"Bench > {job.tag} > {front}   {job.model} {job.kind}  serial {job.serial}{ended}{came}"

    def record_opened(self) -> None:
        """Read the sheet; open the pane that the screen was opened for."""
        self.sheet_pane.fill()
        if self.wanted_pane in PANES:
            self.show_pane(self.wanted_pane)

    def look_again(self) -> None:
        """Show what another screen wrote."""
        if self.record is not None and self.app.screen is self:
            self.sheet_pane.look_again()

    def written(self, answers: Sequence[tuple[Order, Any]]) -> None:
        """The writer's answers belong to the sheet."""
        self.sheet_pane.written(answers)

    def on_screen_resume(self) -> None:
        """Back from another screen: limits, gauges or outcome may have changed."""
        if self.record is not None and self.sheet is not None:
            self.sheet_pane.fill()

    def action_pane(self, pane: str) -> None:
        """To a pane, or from it back to the sheet."""
        self.show_pane("sheet" if self.pane == pane else pane)

    def show_pane(self, pane: str) -> None:
        """Bring a pane to the front; it is made when it is first wanted."""
        self.sheet_pane.close_buffer()
        self.pane = pane
        name = f"pane-{pane}"
        self.call_later(self._bring, pane, name)

    async def _bring(self, pane: str, name: str) -> None:
        """The last one asked for comes to the front, however fast the keys came."""
        switcher = self.query_one(ContentSwitcher)
        if not switcher.query(f"#{name}"):
            await switcher.mount(load_pane(pane)(id=name))
        if pane == self.pane:
            self._front(name)

    def _front(self, name: str) -> None:
        switcher = self.query_one(ContentSwitcher)
        switcher.current = name
        front: Any = switcher.query_one(f"#{name}")
        front.show(self)
        self.say_where()

    def action_report(self) -> None:
        """The report as it will print."""
        self.sheet_pane.close_buffer()
        self.wearline.go("report", self.tag)

    def action_release(self) -> None:
        """What stands in the way of this job."""
        self.sheet_pane.close_buffer()
        self.wearline.go("release", self.tag)

    def action_back(self) -> None:
        """Back to the sheet, then to the bench; what is being typed is closed first."""
        if self.pane != "sheet":
            self.show_pane("sheet")
            return
        self.sheet_pane.close_buffer()
        self.dismiss()
        for (name, _), cell in self.sheet_pane.grid.keying.refused().items():
            self.refuse(f"{self.tag}, {name} {cell.text}: {cell.why}")

    def leaving(self) -> None:
        """The program closes: what is in the buffer goes to the writer."""
        self.sheet_pane.close_buffer()
