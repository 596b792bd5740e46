"""A small form over a screen: labelled lines, Enter goes on, ctrl+s keeps; what is wrong is said and nothing is lost."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.screen import ModalScreen
from textual.widgets import Input, Static

from tui.widgets.labelled import Labelled


@dataclass(frozen=True, slots=True)
class Line:
    """One line of a form: its name, label, hint and what stands in it."""

    name: str
    label: str
    hint: str = ""
    value: str = ""


class Form(ModalScreen[Any]):
    """Asks for some lines and hands them to `keep`; answers with what `keep` gave, None when left."""

    CSS_PATH = "form.tcss"
    TITLE_WORDS = "Form"
    EXPLAINS = "Enter goes to the next line, ^s (ctrl and s) keeps, Esc leaves without keeping."
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("ctrl+s", "keep", "keep", priority=True),
        Binding("escape", "close", "back"),
    ]

    def __init__(
        self, title: str, lines: Sequence[Line], keep: Callable[[dict[str, str]], Any], says: str = ""
    ) -> None:
        super().__init__()
        self.title_words, self.lines, self.keep, self.says = title, tuple(lines), keep, says

    def compose(self) -> ComposeResult:
        """Title, lines, what is wrong."""
        with VerticalScroll(can_focus=False):
            yield Static(self.title_words, markup=False, classes="head")
            if self.says:
                yield Static(self.says, markup=False, classes="says")
            for line in self.lines:
                yield Labelled(line.name, line.label, line.hint, line.value)
            yield Static("Enter next   ^s keep   Esc back", markup=False, classes="keys")
            yield Static("", id="wrong", markup=False)

    def on_mount(self) -> None:
        """Begin with the first line that is empty."""
        empty = next((line for line in self.lines if not line.value), self.lines[0])
        self.query_one(f"#{empty.name}").focus()

    @on(Input.Submitted)
    def go_on(self, event: Input.Submitted) -> None:
        """Enter goes on; from the last line it keeps."""
        names = [line.name for line in self.lines]
        here = names.index(event.input.id or "")
        if here + 1 < len(names):
            self.query_one(f"#{names[here + 1]}").focus()
        else:
            self.action_keep()

    def action_keep(self) -> None:
        """Keep what stands in the lines."""
        from store.errors import WearlineError

        values = {line.name: self.query_one(f"#{line.name}", Input).value for line in self.lines}
        try:
            done = self.keep(values)
        except WearlineError as fault:
            self.query_one("#wrong", Static).update(str(fault))
            return
        self.dismiss(done)

    def action_close(self) -> None:
        """Leave without keeping."""
        self.dismiss(None)
