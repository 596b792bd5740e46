"""Notes: searching every note, complaint, finding and remark as one types, whichever side made the slip."""

from __future__ import annotations

from typing import Any, ClassVar

from rich.text import Text
from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import Input, Static

from tui.screens.form import Form, Line
from tui.screens.places import load
from tui.screens.standing import Standing
from tui.widgets.hits import HitLine, Hits

FILTERS = (
    Line("model", "model", "its number"),
    Line("since", "since", "a day, month or year: 2026-03"),
    Line("until", "until", "likewise"),
    Line("stage", "stage", "as-found, as-left, open, released, scrapped or returned"),
    Line("verdict", "verdict", "jobs that hold one: in, out, in doubt ..."),
    Line("comeback", "comeback", "yes or no"),
    Line("by", "by", "initials"),
    Line("in", "in", "note, complaint, finding, reading or part"),
)


class Notes(Standing):
    """One line to ask from, what was made of it, and the hits."""

    CSS_PATH = "notes.tcss"
    TITLE_WORDS = "Notes"
    EXPLAINS = (
        "Type what you remember: notes, complaints, findings and remarks are searched as you type, and slips do not matter, "
        "yours or the note's. All words come before some, exact before corrected, near before far, recent before old. "
        'A phrase stands in "quotes", a minus leaves a -word out; shorthand such as comm and sol is known. '
        "Corrections are shown; F2 refuses them, and so does putting the word in quotes. F3 filters by model, date, stage, "
        "verdict, comeback or person; filters can be typed, too: model:KS-110 since:2026. Arrows move, Enter opens the job."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "as_typed", "as typed", tooltip="refuse the corrections, or have them again"),
        Binding("f3", "filters", "filter", tooltip="only some models, dates, stages, verdicts, people"),
        Binding("f4", "shorthand", "shorthand", tooltip="what the shop writes short"),
        Binding("escape", "back", "back"),
    ]

    def __init__(self, text: str = "") -> None:
        super().__init__()
        self.text = text
        self.is_as_typed = False
        self.filters: dict[str, str] = {}

    def body(self) -> ComposeResult:
        """The line, what was made of it, the hits."""
        yield Input(self.text, placeholder="search every note: solinoid contcts -welded", id="ask")
        yield Static("", id="said", markup=False)
        yield Static("", id="filters", markup=False)
        yield Hits(id="hits")

    def on_mount(self) -> None:
        """Go on with what was searched for on the bench."""
        before = self.app.screen_stack[-2].query("#search").results(Input) if len(self.app.screen_stack) > 1 else ()
        for line in before:
            self.query_one("#ask", Input).value = self.text or line.value

    def record_opened(self) -> None:
        """Search at once; with nothing asked yet the index is made ready meanwhile."""
        self.query_one("#ask").focus()
        self.say_where()
        self._show_filters()
        self.query_one("#hits", Hits).show((), "making the search ready ...")
        self.search()

    def on_screen_resume(self) -> None:
        """Back from a job: its new notes are found, too."""
        if self.record is not None:
            self.search()

    @on(Input.Changed, "#ask")
    def search(self) -> None:
        """Ask for what the line says now."""
        if self.record is None:
            return
        text, filters, as_typed = self.query_one("#ask", Input).value, dict(self.filters), self.is_as_typed

        def question() -> Any:
            from store import search
            from store.errors import Refused

            assert self.record is not None
            if not text.strip():
                search.find(self.record, "a")
                return None
            try:
                return search.find(self.record, text, filters=filters, as_typed=as_typed, typing=True)
            except Refused as why:
                return search.Answer(text, said=str(why))

        self.ask("search", question, self._show)

    def _show(self, answer: Any) -> None:
        from store import times

        if answer is None:
            self.query_one("#said", Static).update("")
            self.query_one("#hits", Hits).show((), "type what you remember of it; slips do not matter")
            return
        lines = [
            HitLine(
                "  ".join(
                    part
                    for part in (hit.tag, hit.model, times.local(hit.at) if hit.at else "", hit.by, hit.where)
                    if part
                ),
                hit.text,
                hit.marks,
                hit,
            )
            for hit in answer.hits
        ]
        self.query_one("#said", Static).update(_said(answer, self.is_as_typed))
        self.query_one("#hits", Hits).show(lines, answer.said or "nothing found; fewer words find more")

    def on_key(self, event: events.Key) -> None:
        """The arrows move in the hits while letters go to the line."""
        if self.query_one("#hits", Hits).press(event.key):
            event.stop()
            event.prevent_default()

    @on(Input.Submitted, "#ask")
    def open_hit(self) -> None:
        """Enter opens the hit under the cursor."""
        self.query_one("#hits", Hits).choose()

    @on(Hits.Chosen)
    def open_job(self, message: Hits.Chosen) -> None:
        """Land on the note in its job."""
        hit = message.hit.value
        if not hit.tag:
            self.refuse("this remark belongs to no job; look its numbers up in Parts")
            return
        pane = "sheet" if hit.where == "reading" else "notes"
        screen = load("job")(hit.tag, pane=pane)
        screen.wanted_text = (hit.where, hit.row)
        self.app.push_screen(screen)

    def action_as_typed(self) -> None:
        """Refuse the corrections, or have them again."""
        self.is_as_typed = not self.is_as_typed
        self.search()

    def action_filters(self) -> None:
        """Choose filters; an empty line takes one off."""

        def keep(values: dict[str, str]) -> Any:
            from store import search

            assert self.record is not None
            given = {name: value.strip() for name, value in values.items() if value.strip()}
            search.find(self.record, "a", filters=given)
            return given

        def kept(given: Any) -> None:
            if given is not None:
                self.filters = given
                self._show_filters()
                self.search()

        lines = [Line(one.name, one.label, one.hint, self.filters.get(one.name, "")) for one in FILTERS]
        self.app.push_screen(Form("Search only", lines, keep, "Empty lines do not filter."), kept)

    def _show_filters(self) -> None:
        said = "  ".join(f"{name} {value}" for name, value in self.filters.items())
        line = self.query_one("#filters", Static)
        line.update(f"only: {said}" if said else "")
        line.display = bool(said)

    def action_shorthand(self) -> None:
        """Enter a line of the shop's shorthand, or drop one by leaving the long word empty."""

        def keep(values: dict[str, str]) -> Any:
            from store import shorthand

            assert self.record is not None
            if values["long"].strip():
                shorthand.enter(self.record, values["short"], values["long"])
            else:
                shorthand.drop(self.record, values["short"])
            return True

        lines = [
            Line("short", "short", "as the bench writes it: hsg"),
            Line("long", "long", "housing; empty drops the line"),
        ]
        self.app.push_screen(Form("The shop's shorthand", lines, keep, "Short and long find each other."), self._again)

    def _again(self, done: Any) -> None:
        if done:
            self.search()

    def action_back(self) -> None:
        """Clear the line first, then leave."""
        line = self.query_one("#ask", Input)
        if line.value:
            line.value = ""
        else:
            self.dismiss()


def _said(answer: Any, is_as_typed: bool) -> Text:
    """How many hits, and which corrections were made."""
    hits = len(answer.hits)
    text = Text(
        f"{hits} hit{'' if hits == 1 else 's'}" if hits < 50 else "the first 50", no_wrap=True, overflow="ellipsis"
    )
    if is_as_typed:
        text.append("  as typed, no corrections (F2)")
    for word, meant in answer.corrected.items():
        text.append(f"  {word} ", style="strike")
        text.append(f"→ {', '.join(meant)}", style="bold")
    if answer.corrected:
        text.append("  (F2 refuses)")
    if answer.said:
        text.append(f"  {answer.said}")
    return text
