"""The tolerance report as it will print: read it, save it, print it."""

from __future__ import annotations

from pathlib import Path
from typing import Any, ClassVar

from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.screens.standing import Standing


class ReportPreview(Standing):
    """The report of one job, page by page, in the same words as the PDF."""

    CSS_PATH = "report.tcss"
    TITLE_WORDS = "Report"
    EXPLAINS = (
        "The report as it will print, page by page. F2 saves it as PDF, text or JSON, by the ending of the name; F3 hands the PDF to "
        "the printer. Until the inspector releases the job it is a draft and says so on every page."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "save", "save"),
        Binding("f3", "print", "print"),
        Binding("escape", "back", "back"),
    ]

    def __init__(self, tag: str) -> None:
        super().__init__()
        self.tag = tag

    def where(self) -> str:
        """Which job's report."""
        return f"Bench > {self.tag} > report"

    def body(self) -> ComposeResult:
        """The pages, one below the other."""
        with VerticalScroll():
            yield Static("gathering the report ...", id="pages", markup=False)

    def record_opened(self) -> None:
        """Write the report as text."""
        self.query_one(VerticalScroll).focus()

        def question() -> Any:
            from store.reports import issue

            assert self.record is not None
            return issue.text(self.record, self.tag)

        self.ask("report", question, self._show)

    def _show(self, text: str) -> None:
        self.query_one("#pages", Static).update(text.replace("\f", "\n"))

    def action_save(self) -> None:
        """Save it; the ending says as what."""

        def keep(values: dict[str, str]) -> Any:
            from store.reports import issue

            assert self.record is not None
            return issue.save(self.record, self.tag, Path(values["file"].strip()).expanduser())

        form = Form(
            "Save the report",
            [Line("file", "file", "", str(Path.home() / f"report-{self.tag}.pdf"))],
            keep,
            "Ending .pdf, .txt or .json",
        )
        self.app.push_screen(form, lambda path: self.notify(f"saved: {path}", markup=False) if path else None)

    def action_print(self) -> None:
        """Hand the PDF to the printer; where there is none, say so and where the file is."""

        def question() -> Any:
            from store.reports import issue

            assert self.record is not None
            return issue.print_out(self.record, self.tag)

        self.ask("print", question, lambda said: self.notify(said, timeout=15, markup=False))

    def action_back(self) -> None:
        """Back to the job."""
        self.dismiss()
