"""Taking in a core: model by number, serial, and what the ticket says; earlier jobs of the unit are shown at once."""

from __future__ import annotations

from typing import Any, ClassVar

from rich.text import Text
from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widgets import Input, Static

from tui.screens.standing import Standing
from tui.widgets.labelled import Labelled

FIELDS = (
    ("model", "model", "the unit's number, or any number that leads to it"),
    ("serial", "serial", "or the shop's own engraved mark"),
    ("customer", "customer", "who it goes back to"),
    ("application", "application", "what it works on"),
    ("complaint", "complaint", "in the customer's words"),
    ("hours", "hours run", "where known"),
    ("starts", "starts made", "where known"),
    ("tag", "tag", "empty: the next number"),
)


class TakeIn(Standing):
    """The form; answers with the tag of the new job, or None."""

    CSS_PATH = "take_in.tcss"
    TITLE_WORDS = "Bench > take in a core"
    EXPLAINS = (
        "Enter goes to the next line; ^s (ctrl and s) takes the core in from anywhere. Model and serial are needed, all else can wait. "
        "Any number that leads to a model will do. Earlier jobs of the same unit show below; a release makes this a comeback."
    )
    CAUTIONS = (
        "Battery: disconnect the negative first, no sparks, goggles on, rings and watches off.",
        "Treat unknown old insulation as suspect: do not dry-blow it.",
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("ctrl+s", "take", "take in", priority=True),
        Binding("f5", "new_model", "new model", tooltip="enter the model, where the shop has not had it yet"),
        Binding("escape", "close", "back"),
    ]

    def body(self) -> ComposeResult:
        """A line a field, then what is known."""
        with VerticalScroll(can_focus=False):
            for name, label, hint in FIELDS:
                yield Labelled(name, label, hint)
            yield Static("", id="known", markup=False)

    def on_mount(self) -> None:
        """Begin with the model."""
        super().on_mount()
        self.query_one("#model").focus()

    @on(Input.Submitted)
    def next_field(self, event: Input.Submitted) -> None:
        """Enter goes on; from the last field it takes the core in."""
        names = [name for name, _, _ in FIELDS]
        here = names.index(event.input.id or "")
        if here + 1 < len(names):
            self.query_one(f"#{names[here + 1]}").focus()
        else:
            self.action_take()

    def record_opened(self) -> None:
        """What was typed before the record was open is looked up now."""
        self.say_where()
        self.look_up()

    @on(Input.Changed, "#model,#serial")
    def look_up(self) -> None:
        """What model this is, and what this unit was here for before."""
        if self.record is None:
            return
        model, serial = (self.query_one(f"#{name}", Input).value for name in ("model", "serial"))

        def question() -> Any:
            from store import jobs, parts
            from store.errors import NotFound

            assert self.record is not None
            if not model.strip():
                return None
            try:
                meant = parts.model_meant(self.record, model)
            except NotFound as fault:
                return str(fault)
            if not serial.strip():
                return meant, (), ()
            number = meant.model.number
            return meant, jobs.of_unit(self.record, number, serial), jobs.alike(self.record, number, serial)

        self.ask("known", question, self._show)

    def _show(self, answer: Any) -> None:
        from store import times

        text = Text()
        if isinstance(answer, str):
            text.append(f"{answer}. F5 enters it as a new model.")
        elif answer is not None:
            meant, earlier, alike = answer
            model = meant.model
            for step in meant.says:
                text.append(f"{step}\n", style="italic")
            volts = f"  {model.volts} V" if model.volts else ""
            text.append(f"{model.number}  {model.kind}{volts}  {model.rotation}  {model.note}\n")
            for job in earlier:
                text.append(f"{job.tag}  {times.local(job.taken_in)[:10]}  {job.outcome}", style="bold")
                text.append(f"  {times.local(job.ended)[:10] if job.ended else ''}  {job.complaint}\n")
            if alike:
                text.append(f"never seen here; is it one of these, misread? {'  '.join(alike)}\n", style="italic")
            if any(job.outcome == "released" for job in earlier):
                text.append(
                    "This unit was released before: the new job will be a comeback of its last release.", style="bold"
                )
        self.query_one("#known", Static).update(text)

    def action_new_model(self) -> None:
        """Enter the model that was typed."""
        from tui.screens.new_model import NewModel

        line = self.query_one("#model", Input)

        def done(made: Any) -> None:
            if made is not None:
                line.value = made.number
                self.look_up()

        if self.record is not None:
            self.app.push_screen(NewModel(line.value.strip()), done)

    def action_take(self) -> None:
        """Take the core in."""
        if self.record is None:
            self.refuse("the record is still being opened; try again in a moment")
            return
        values = {name: self.query_one(f"#{name}", Input).value for name, _, _ in FIELDS}

        def question() -> Any:
            from store import jobs

            assert self.record is not None
            return jobs.take_in(
                self.record, model=values["model"], serial=values["serial"], tag=values["tag"] or None,
                customer=values["customer"], application=values["application"], complaint=values["complaint"],
                hours=values["hours"] or None, starts=values["starts"] or None,
            ).tag  # fmt: skip

        self.ask("take", question, self.taken)

    def taken(self, tag: str) -> None:
        """It is in the record."""
        self.dismiss(tag)

    def action_close(self) -> None:
        """Back without a new job."""
        self.dismiss(None)
