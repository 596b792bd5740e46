"""The notes and findings of a job: read, and written on one line that Enter keeps; findings are offered as one types."""

from __future__ import annotations

from typing import Any, ClassVar

from rich.text import Text
from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import Vertical, VerticalScroll
from textual.widgets import Input, Static


class JobNotes(Vertical):
    """Complaint, notes and findings, oldest first, and the line for the next note."""

    DEFAULT_CSS = """
    JobNotes VerticalScroll { height: 1fr; padding: 0 1; }
    JobNotes .entry { height: auto; margin-bottom: 1; }
    JobNotes #offer { height: 1; padding: 0 1; color: $quiet; }
    """
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "take", "take finding", tooltip="take the finding that the note looks like")
    ]

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.job_screen: Any = None
        self.offers: list[Any] = []
        self.taken: set[tuple[str, str]] = set()

    def compose(self) -> ComposeResult:
        """The notes over the line, what it looks like below."""
        yield VerticalScroll(can_focus=False)
        yield Static("", id="offer", markup=False)
        yield Input(placeholder="a note; Enter keeps it", id="line")

    def show(self, screen: Any) -> None:
        """Read the notes and findings of the screen's job; the line has the keys."""
        self.job_screen = screen
        self.query_one(Input).focus()

        def question() -> Any:
            from store import findings, jobs, notes

            job = jobs.find(screen.record, screen.tag)
            return job, notes.of_job(screen.record, screen.tag), findings.of_job(screen.record, screen.tag)

        screen.ask("notes", question, self._show)

    async def _fill(self, entries: list[tuple[tuple[str, int], Text]]) -> None:
        """Put the entries on the list; the one that the screen was opened for is marked and brought into view, once."""
        scroll = self.query_one(VerticalScroll)
        await scroll.remove_children()
        wanted, self.job_screen.wanted_text = getattr(self.job_screen, "wanted_text", None), None
        marked = None
        made = []
        for which, text in entries:
            shown = Static(
                Text.assemble(("> ", "bold"), text) if which == wanted else text, classes="entry", markup=False
            )
            marked = shown if which == wanted else marked
            made.append(shown)
        await scroll.mount(*made)
        if marked is not None:
            self.call_after_refresh(marked.scroll_visible, animate=False, top=True)
        else:
            self.call_after_refresh(scroll.scroll_end, animate=False)

    def _show(self, answer: Any) -> None:
        from store import times

        job, notes, findings = answer
        entries = [(note.at, ("note", note.id), note.by, "", note.text) for note in notes]
        entries += [
            (
                f.at, ("finding", f.id), f.by, "finding  ",
                f"{f.component}: {f.mode}" + "".join(f", {x}" for x in (f.mechanism, f.cause) if x) + (f" - {f.note}" if f.note else ""),
            )
            for f in findings
        ]  # fmt: skip
        self.taken = {(f.component, f.mode) for f in findings}
        entries.sort(key=lambda entry: entry[0])
        made = []
        if job.complaint:
            made.append((("complaint", job.id), _entry(f"{times.local(job.taken_in)}  complaint", job.complaint)))
        made += [(which, _entry(f"{times.local(at)}  {by}  {kind}", text)) for at, which, by, kind, text in entries]
        if not entries:
            words = "No note yet. Write what you saw, in your own words: it can be found again, slips and all."
            made.append((("", 0), Text(words)))
        self.call_later(self._fill, made)

    @on(Input.Changed, "#line")
    def look(self, event: Input.Changed) -> None:
        """See whether what is being typed looks like a finding."""
        text, screen = event.value, self.job_screen
        if screen is None or screen.record is None or not text.strip():
            return

        def question() -> Any:
            from store import findings

            return findings.offers(screen.record, text)

        screen.ask("offers", question, self._offer)

    def _offer(self, offers: Any) -> None:
        self.offers = [offer for offer in offers if (offer.component, offer.mode) not in self.taken]
        said = "   ".join(f"{offer.component}: {offer.mode}" for offer in self.offers)
        self.query_one("#offer", Static).update(f"looks like: {said}   F2 takes the first" if said else "")

    def action_take(self) -> None:
        """Take the first finding that is offered; the next one comes to the front."""
        screen = self.job_screen
        if not self.offers or screen is None:
            return
        offer = self.offers[0]

        def question() -> Any:
            from store import findings

            return findings.add(
                screen.record, screen.tag, offer.component, offer.mode, mechanism=offer.mechanism, cause=offer.cause
            )

        def taken(found: Any) -> None:
            self.taken.add((found.component, found.mode))
            self._offer(self.offers)
            self.show(screen)

        screen.ask("finding", question, taken)

    @on(Input.Submitted, "#line")
    def keep(self, event: Input.Submitted) -> None:
        """Keep the note; it stays on the line until it is in the record. What it looks like stays offered."""
        text, screen = event.value, self.job_screen

        def question() -> Any:
            from store import notes

            return notes.add(screen.record, screen.tag, text)

        def kept(note: Any) -> None:
            self.query_one("#line", Input).value = ""
            self.show(screen)

        if text.strip():
            screen.ask("note", question, kept)


def _entry(head: str, text: str) -> Text:
    return Text.assemble((f"{head}\n", "dim"), text)
