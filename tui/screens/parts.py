"""Parts: one box for numbers, sizes and words; the path drawn step by step; does it go on a model."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, ClassVar

from rich.text import Text
from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.containers import VerticalScroll
from textual.widgets import Input, Static

from tui.screens import part_forms, part_paths
from tui.screens.form import Form, Line
from tui.screens.standing import Standing
from tui.widgets.listing import Column, Item, Listing


@dataclass(frozen=True, slots=True)
class Found:
    """What one line of the list stands for: a candidate or a number, and what is said of it besides the check."""

    number: Any
    candidate: Any = None
    said: str = ""


class Parts(Standing):
    """The box, what may be meant, and all that the one under the cursor leads to."""

    CSS_PATH = "parts.tcss"
    TITLE_WORDS = "Parts"
    KEY_LINES = 2
    EXPLAINS = (
        "One box for everything. A number: the same, look-alikes (O/0 I/1 S/5 B/8 Z/2), one slip, and ? for a character that "
        "cannot be read. Sizes: `brush width=8 thickness=5/8in within=0.2`; a bushing by its seats: "
        "`bushing housing-bore=16 journal=12.5`, for a worn bushing misleads. Words: any of a description.\n\n"
        "Below stands all that the number under the cursor leads to, step by step: the direction of each step, on whose word, "
        "from when, and its caveat. A path is worth its weakest step. A substitute ends its path; do-not-use stops one and says "
        "why; contradictions are shown with both sides. F3 holds it against a model, attribute by attribute. A match of sizes "
        "is never proof."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "new", "new number", tooltip="enter a number"),
        Binding("f3", "model", "on model", tooltip="does it go on this model? empty: no model"),
        Binding("f4", "relate", "relate", tooltip="state a relation of the number under the cursor"),
        Binding("f5", "fits", "fits", tooltip="state that it goes on a model"),
        Binding("f6", "size", "size", tooltip="state a size of it"),
        Binding("f7", "attribute", "attribute", tooltip="state an attribute of it"),
        Binding("f8", "edit", "edit", tooltip="change kind, description or status"),
        Binding("f9", "statements", "take back", tooltip="what is stated of it; take a statement back"),
        Binding("escape", "back", "back", tooltip="empty the box, then back"),
    ]

    def __init__(self, text: str = "", model: str = "") -> None:
        super().__init__()
        self.text, self.model = text, model

    def body(self) -> ComposeResult:
        """Box, list, answer."""
        yield Input(self.text, placeholder="a number (? = unreadable), sizes (brush width=8), or words", id="ask")
        columns = [
            Column("number", 16),
            Column("maker", 14, quiet=True),
            Column("how", 11),
            Column("kind", 12),
            Column("", 0, quiet=True),
        ]
        found = Listing(columns, empty="type a number, sizes or words; F2 enters a number", id="found")
        found.can_focus = False
        found.follows_input = True  # type: ignore[attr-defined]
        yield found
        with VerticalScroll(id="told", can_focus=False):
            yield Static("", id="answer", markup=False)

    def where(self) -> str:
        """With the model that is held against."""
        return f"Parts > on {self.model}" if self.model else "Parts"

    def record_opened(self) -> None:
        """The box has the keys."""
        self.say_where()
        self.query_one("#ask").focus()
        self.look()

    @on(Input.Changed, "#ask")
    def look(self) -> None:
        """Look up what the box says now."""
        text = self.query_one("#ask", Input).value
        if self.record is None:
            return

        def question() -> Any:
            assert self.record is not None
            return looked_up(self.record, text)

        self.ask("found", question, self._show_found)

    def _show_found(self, answer: Any) -> None:
        items, said = answer
        listing = self.query_one("#found", Listing)
        listing.show(items)
        if listing.item is None:
            self.query_one("#answer", Static).update(said)

    @on(Listing.Moved, "#found")
    def check(self, message: Listing.Moved) -> None:
        """Check the number under the cursor."""
        found = message.item.value

        def question() -> Any:
            from store.parts import checking
            from store.parts.candidates import of_number

            assert self.record is not None
            candidate = found.candidate or of_number(self.record, found.number)
            return found, checking.check_candidate(self.record, candidate, on=self.model or None)

        self.ask("check", question, self._show_check)

    def _show_check(self, answer: Any) -> None:
        found, check = answer
        text = Text(f"{found.said}\n" if found.said else "", style="bold")
        text.append_text(part_paths.drawn(check, self.app.theme_variables))
        self.query_one("#answer", Static).update(text)
        self.query_one("#told", VerticalScroll).scroll_home(animate=False)

    def on_key(self, event: events.Key) -> None:
        """Arrows move in the list, pages in the answer, while letters go to the box."""
        if event.key in {"up", "down"}:
            self.query_one("#found", Listing).press(event.key)
        elif event.key in {"pageup", "pagedown"}:
            told = self.query_one("#told", VerticalScroll)
            (told.scroll_page_up if event.key == "pageup" else told.scroll_page_down)(animate=False)
        else:
            return
        event.stop()

    @on(Input.Submitted, "#ask")
    def take_number(self) -> None:
        """Enter puts the number under the cursor into the box."""
        item = self.query_one("#found", Listing).item
        if item is not None:
            self.query_one("#ask", Input).value = item.cells[0]

    def _number(self) -> Any:
        """The number under the cursor, None where there is none or where it is a model that no list names."""
        item = self.query_one("#found", Listing).item
        return item.value.number if item else None

    def _with_number(self, form: Any, *more: Any) -> None:
        number = self._number()
        if number is None and not any(more):
            self.refuse("no number is under the cursor; F2 enters one")
        else:
            self.app.push_screen(form(self.record, number, *more), lambda done: self.look() if done else None)

    def action_new(self) -> None:
        """Enter what stands in the box as a number."""

        def done(made: Any) -> None:
            if made is not None:
                self.query_one("#ask", Input).value = made.number
                self.look()

        self.app.push_screen(part_forms.new_number(self.record, self.query_one("#ask", Input).value), done)

    def action_model(self) -> None:
        """Hold what is found against a model."""

        def keep(values: dict[str, str]) -> Any:
            from store import parts

            assert self.record is not None
            typed = values["model"].strip()
            return (parts.model_meant(self.record, typed).model.number,) if typed else ("",)

        def done(chosen: Any) -> None:
            if chosen is not None:
                (self.model,) = chosen
                self.say_where()
                self.look()

        lines = [Line("model", "model", "its number, or one that leads to it; empty: none", self.model)]
        self.app.push_screen(Form("Does it go on ...", lines, keep), done)

    def action_relate(self) -> None:
        """State a relation."""
        self._with_number(part_forms.relate)

    def action_fits(self) -> None:
        """State what it goes on."""
        if self._number() is None:
            self.refuse("no number is under the cursor; F2 enters one")
        else:
            self._with_number(part_forms.fits, self.model)

    def action_size(self) -> None:
        """State a size."""
        self._with_number(part_forms.size)

    def action_attribute(self) -> None:
        """State an attribute of the number, or of the model where it is one."""
        item = self.query_one("#found", Listing).item
        candidate = item.value.candidate if item else None
        self._with_number(part_forms.attribute, candidate.number if candidate and candidate.model else "")

    def action_edit(self) -> None:
        """Change what is said of it."""
        self._with_number(part_forms.edit)

    def action_statements(self) -> None:
        """What is stated of it, to take back."""
        self._with_number(part_forms.Statements)

    def action_back(self) -> None:
        """Empty the box, then leave."""
        box = self.query_one("#ask", Input)
        if box.value:
            box.value = ""
        else:
            self.dismiss()


def looked_up(record: Any, text: str) -> tuple[list[Item], str]:
    """The lines for what was typed, and what to say where there is none."""
    from store.errors import Refused
    from store.parts import by_size

    if not text.strip():
        return [], ""
    try:
        if "=" in text:
            return _by_size(record, text)
        items = _candidates(record, text)
    except Refused as why:
        items, said = [], str(why)
    else:
        said = f"nothing like {text.strip()!r} is in the lists"
    if not any(item.value.candidate.how == "exact" for item in items) and not any(
        c.isdigit() or c == "?" for c in text
    ):
        named = by_size.words(record, text)
        items = [Item((n.number, n.maker, "words", n.kind, n.description), Found(n)) for n in named] + items
    return items, said


def _candidates(record: Any, text: str) -> list[Item]:
    from store.parts import candidates

    return [
        Item(
            (one.number, one.maker, one.how.value, one.kind, " ".join(f"{one.description} {one.status}".split())),
            Found(number, one),
            "" if one.how == "exact" else "quiet",
        )
        for one, number in candidates.asked_for(record, text)
    ]


def _by_size(record: Any, text: str) -> tuple[list[Item], str]:
    from store.parts import by_size
    from store.rules import sizes

    answer = by_size.search_typed(record, text)
    items = []
    for match in answer.matches:
        listed = "  ".join(f"{d.part.name} {sizes.both_systems(d.part)}" for d in match.differences if d.part)
        said = "\n".join((listed, *match.warnings, *answer.cautions))
        n = match.number
        items.append(Item((n.number, n.maker, f"{match.worst:.0%} of tol.", n.kind, listed), Found(n, None, said)))
    near = "; ".join(f"{one.name} {sizes.both_systems(one)}" for one in answer.asked)
    return items, f"no {answer.kind} is listed within {answer.within.text} of {near}"
