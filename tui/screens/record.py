"""Record: where the file is, its size, the last backup; verify, backup, restore, export."""

from __future__ import annotations

from pathlib import Path
from typing import Any, ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widgets import Static

from store.errors import brief
from tui.screens.form import Form, Line
from tui.screens.standing import Standing


class RecordPlace(Standing):
    """The shop's record as a file."""

    CSS_PATH = "record.tcss"
    TITLE_WORDS = "Record"
    EXPLAINS = (
        "The shop's whole record is one file on this machine. F2 verifies it: the file, the audit chain, every row, every verdict and "
        "every frozen report. F3 copies it to a new file while others write; one copy a day is kept on its own. F4 restores a copy "
        "into a new file, which is verified before it is named. F5 writes everything out as CSV and JSON."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "verify", "verify"),
        Binding("f3", "backup", "backup"),
        Binding("f4", "restore", "restore"),
        Binding("f5", "export", "export"),
        Binding("escape", "back", "back"),
    ]

    def body(self) -> ComposeResult:
        """A page of facts and a line of what goes on."""
        with VerticalScroll():
            yield Static("", id="facts", markup=False)
            yield Static("", id="going-on", markup=False)

    def record_opened(self) -> None:
        """Read the facts."""
        self.say_where()
        self.query_one(VerticalScroll).focus()

        def question() -> Any:
            from store import audit, backups

            assert self.record is not None
            with self.record.read() as conn:
                head = audit.head(conn)
                newest = audit.entries(conn, most=8)
            return self.record.path, self.record.path.stat().st_size, backups.kept(self.record), head, newest

        self.ask("facts", question, self._show)

    def _show(self, answer: Any) -> None:
        from store import times

        path, size, kept, head, newest = answer
        text = Text()
        facts = [
            ("file", str(path.absolute())), ("size", f"{size / 1_000_000:.1f} MB"),
            ("last daily backup", f"{kept[0].day}, {len(kept)} kept in {kept[0].path.parent}" if kept else "none yet; one is made a day"),
            ("head of the chain", head),
        ]  # fmt: skip
        for name, value in facts:
            text.append(f"{name:<19}", style="dim")
            text.append(f"{value}\n")
        text.append("\nlast changes\n", style="bold")
        for entry in newest:
            text.append(f"{times.local(entry.at)}  {entry.by:<5} {entry.action}  {brief(entry.subject, 60)}\n")
        self.query_one("#facts", Static).update(text)

    def _tell(self, what: str, done: int) -> None:
        self.app.call_from_thread(
            self.query_one("#going-on", Static).update, f"{what}: {done:,}" if done else f"{what} ..."
        )

    def action_verify(self) -> None:
        """Verify the record in a thread, telling how far it is."""

        def question() -> Any:
            from store import verify

            assert self.record is not None
            return verify.verify(self.record, self._tell)

        def done(found: Any) -> None:
            said = f"NOT VERIFIED  {found.wrong}" if found.wrong else (
                f"verified: {found.entries:,} entries, {found.rows:,} rows, {found.judgements:,} judgements, {found.reports:,} reports"
            )  # fmt: skip
            self.query_one("#going-on", Static).update(Text(said, style="bold"))

        self.ask("verify", question, done)

    def action_backup(self) -> None:
        """Copy the record to a new file."""
        assert self.record is not None
        suggested = Path.home() / f"{self.record.path.stem}-{self.record.now()[:10]}.wearline"

        def keep(values: dict[str, str]) -> Any:
            from store import backups

            assert self.record is not None
            return backups.backup(self.record, Path(values["file"].strip()).expanduser())

        form = Form(
            "Backup", [Line("file", "to a new file", "", str(suggested))], keep, "Others may go on writing meanwhile."
        )
        self.app.push_screen(form, lambda path: self._said(f"backup: {path}" if path else ""))

    def action_restore(self) -> None:
        """Restore a backup into a new file."""

        def keep(values: dict[str, str]) -> Any:
            from store import backups

            return backups.restore(Path(values["source"].strip()).expanduser(), Path(values["to"].strip()).expanduser())

        lines = [
            Line("source", "backup", "its file"),
            Line("to", "to a new file", "open it with: wearline --record FILE"),
        ]
        form = Form("Restore", lines, keep, "The copy is verified before it is named; nothing is overwritten.")
        self.app.push_screen(form, lambda path: self._said(f"restored and verified: {path}" if path else ""))

    def action_export(self) -> None:
        """Write everything out."""

        def keep(values: dict[str, str]) -> Any:
            from store import exports

            assert self.record is not None
            return exports.export(self.record, Path(values["folder"].strip()).expanduser())

        line = Line("folder", "into a folder", "", str(Path.home() / "wearline-export"))
        form = Form("Export everything", [line], keep, "A CSV file a kind, and the whole as JSON.")
        self.app.push_screen(form, lambda written: self._said(f"written: {', '.join(written)}" if written else ""))

    def _said(self, text: str) -> None:
        if text:
            self.query_one("#going-on", Static).update(text)

    def action_back(self) -> None:
        """Back."""
        self.dismiss()
