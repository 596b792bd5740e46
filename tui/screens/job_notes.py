"""The notes of a job: read, and written on one line that Enter keeps."""

from __future__ import annotations

from typing import Any

from rich.text import Text
from textual import on
from textual.app import ComposeResult
from textual.containers import Vertical, VerticalScroll
from textual.widgets import Input, Static


class JobNotes(Vertical):
    """Notes, oldest first, and the line for the next one."""

    DEFAULT_CSS = """
    JobNotes VerticalScroll { height: 1fr; padding: 0 1; }
    JobNotes Input { height: 2; }
    """

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.job_screen: Any = None

    def compose(self) -> ComposeResult:
        """The notes over the line."""
        with VerticalScroll(can_focus=False):
            yield Static("", markup=False)
        yield Input(placeholder="a note; Enter keeps it")

    def show(self, screen: Any) -> None:
        """Read the notes of the screen's job; the line has the keys."""
        self.job_screen = screen
        self.query_one(Input).focus()

        def question() -> Any:
            from store import notes

            return notes.of_job(screen.record, screen.tag)

        screen.ask("notes", question, self._show)

    def _show(self, notes: Any) -> None:
        from store import times

        text = Text()
        for note in notes:
            text.append(f"{times.local(note.at)}  {note.by}\n", style="dim")
            text.append(f"{note.text}\n\n")
        if not notes:
            text.append("No note yet. Write what you saw, in your own words: it can be found again, slips and all.")
        self.query_one(Static).update(text)
        self.query_one(VerticalScroll).scroll_end(animate=False)

    @on(Input.Submitted)
    def keep(self, event: Input.Submitted) -> None:
        """Keep the note; it stays on the line until it is in the record."""
        text, screen = event.value, self.job_screen

        def question() -> Any:
            from store import notes

            return notes.add(screen.record, screen.tag, text)

        def kept(note: Any) -> None:
            self.query_one(Input).value = ""
            self.show(screen)

        if text.strip():
            screen.ask("note", question, kept)
