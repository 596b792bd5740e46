"""What every full screen has: the line at the top that says where one is, the keys at the bottom, questions in threads."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable
from typing import TYPE_CHECKING, Any, ClassVar

from rich.text import Text
from textual.app import ComposeResult
from textual.message import Message
from textual.screen import Screen
from textual.widgets import Static

from tui.widgets.key_line import KeyLine

if TYPE_CHECKING:
    from store.records import Record
    from tui.app import Wearline


class TopLine(Static):
    """Where one is and on which job at the left, who works here at the right."""

    def say(self, where: str, who: str) -> None:
        """Show both; text is drawn as it stands."""
        room = max(10, self.size.width - 2)
        left = Text(where, no_wrap=True, overflow="ellipsis")
        right = Text(who, style="bold")
        left.truncate(room - len(who) - 2, overflow="ellipsis", pad=True)
        self.update(Text.assemble(left, "  ", right))


class Standing(Screen[Any]):
    """A full screen. Subclasses give `body` and, where they need the record at once, `record_opened`.

    To add one: a file here with a class on this one, its .tcss beside it, and a line in `tui.screens.places`. TITLE_WORDS is
    what the top line says (or `where`), EXPLAINS what F1 says in the trade's words, CAUTIONS what to beware of there, BINDINGS
    the keys for the bottom line, each with a word or two and a longer tooltip. Whatever is read or changed goes through `ask`.
    """

    TITLE_WORDS = ""
    EXPLAINS = ""
    KEY_LINES: ClassVar[int] = 1
    CAUTIONS: ClassVar[tuple[str, ...]] = ()

    class Answered(Message):
        """An answer from a thread; stale ones are dropped by their number."""

        def __init__(self, group: str, number: int, then: Callable[[Any], None], answer: Any) -> None:
            self.group, self.number, self.then, self.answer = group, number, then, answer
            super().__init__()

    def __init__(self) -> None:
        super().__init__()
        self.asked: Counter[str] = Counter()
        self.key_names: dict[str, str] = {}

    @property
    def wearline(self) -> Wearline:
        """The application, by its own type."""
        app: Any = self.app
        return app  # type: ignore[no-any-return]

    @property
    def record(self) -> Record | None:
        """The record, None until it is open."""
        return self.wearline.record

    def compose(self) -> ComposeResult:
        """Top line, body, keys."""
        yield TopLine(id="top")
        yield from self.body()
        yield KeyLine(self.KEY_LINES)

    def body(self) -> ComposeResult:
        """What stands between the top line and the keys."""
        yield from ()

    def on_mount(self) -> None:
        """Say where one is; go on at once when the record is open already."""
        self.say_where()
        if self.record is not None:
            self.record_opened()

    def on_resize(self) -> None:
        """The top line is cut to the width."""
        self.say_where()

    def where(self) -> str:
        """The words of the top line."""
        return self.TITLE_WORDS

    def say_where(self) -> None:
        """Bring the top line up to date."""
        who = "" if self.record is None else self.record.by
        self.query_one(TopLine).say(f"Wearline  {self.where()}", who)

    def record_opened(self) -> None:
        """The record is there; subclasses fill themselves."""

    def person_changed(self) -> None:
        """Somebody else works here now."""
        self.say_where()

    def ask(self, group: str, question: Callable[[], Any], then: Callable[[Any], None]) -> None:
        """Put a question to the store in a thread; `then` gets the newest answer of its group, on the screen's thread.

        What is asked before the record is open waits for it.
        """
        self.asked[group] += 1
        number = self.asked[group]

        def work() -> None:
            self.wearline.is_settled.wait()
            if self.record is None:
                return
            from store.errors import WearlineError

            try:
                answer = question()
            except WearlineError as fault:
                self.post_message(self.Answered(group, number, lambda why: self.refuse(str(why)), fault))
            except Exception as fault:
                if self.wearline.shows_faults:
                    raise
                what = (
                    f"a fault in the program, not in what you did ({type(fault).__name__}: {fault}); --debug shows it"
                )
                self.post_message(self.Answered(group, number, self.refuse, what))
            else:
                self.post_message(self.Answered(group, number, then, answer))

        self.run_worker(work, thread=True, group=group)

    def on_standing_answered(self, message: Answered) -> None:
        """Hand an answer on unless a newer question of its group is under way."""
        if message.number == self.asked[message.group]:
            message.then(message.answer)

    def refuse(self, why: str) -> None:
        """Say in one line why something was not done."""
        self.notify(why, severity="error", markup=False)
