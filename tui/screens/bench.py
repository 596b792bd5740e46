"""The bench: open jobs by where they stand, search as one types, and taking in a core."""

from __future__ import annotations

from collections.abc import Sequence
from datetime import UTC, datetime
from typing import TYPE_CHECKING, Any, ClassVar

from textual import events, on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import Input, Static

from tui.screens.places import PLACES
from tui.screens.standing import Standing
from tui.widgets.listing import Column, Item, Listing

if TYPE_CHECKING:
    from tui.writer import Order

LOOK_AGAIN_SECONDS = 0.5
MOST = 500
ORDER = ("taken in", "stripped", "on rework", "to inspect", "released", "scrapped", "returned")

NO_JOB = "no job here; F2 takes in a core, F7 looks in the notes"
NOT_FOUND = "no such job; Esc empties the search, F2 takes in a core, F7 looks in notes"
NOBODY = "nobody works here yet: F4 enters the first person, then F2 takes in a core"


class Bench(Standing):
    """The start of everything."""

    CSS_PATH = "bench.tcss"
    TITLE_WORDS = "Bench"
    EXPLAINS = (
        "Every open job under where it stands and what is next, the newest first: how many days it is here, how many sizes are "
        "out, how many the gauge cannot tell (doubt). Type to search tag, serial, model or customer; arrows move, Enter opens. "
        "F2 takes in a core: a unit that was released before becomes a comeback at once."
    )
    KEY_LINES = 2
    CAUTIONS = (
        "Big frames and armatures are heavy: hoist them, and never lift an armature by its commutator.",
        "Dust of old insulation may hold asbestos: do not dry-blow it; vacuum or wipe it wet.",
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "take_in", "take in", tooltip="take in a core"),
        Binding("f3", "ended", "ended", tooltip="show jobs that have ended too, or only open ones"),
        Binding("f4", "who", "who", tooltip="say who works here now"),
        *(Binding(p.key, f"app.go('{name}')", p.title.lower(), tooltip=p.says) for name, p in PLACES.items() if p.key),
    ]

    def __init__(self) -> None:
        super().__init__()
        self.with_ended = False
        self.version: Any = None
        self.shown_for: str | None = None
        self.opens_when_shown = False
        self.has_nobody = False

    def body(self) -> ComposeResult:
        """Search, counts, list."""
        yield Input(placeholder="search tag, serial, model, customer", id="search")
        yield Static("opening the record ...", id="counts", markup=False)
        listing = Listing(
            [
                Column("tag", 7), Column("model", 10), Column("serial", 10), Column("", 8), Column("customer", 0),
                Column("complaint", 0, quiet=True, from_width=100), Column("days", 4, right=True), Column("out", 3, right=True),
                Column("doubt", 5, right=True),
            ],
            empty=NO_JOB,
            id="jobs",
            led=True,
        )  # fmt: skip
        listing.waiting = True
        yield listing

    def on_mount(self) -> None:
        """Look for what others have written, twice a second."""
        self.query_one("#search").focus()
        self.set_interval(LOOK_AGAIN_SECONDS, self.look_again)

    def first_look(self, lines: Any) -> None:
        """The open jobs, while the rest of the record is still being opened."""
        self._show((lines, datetime.now(UTC).isoformat(), ""))

    def record_opened(self) -> None:
        """Fill the list; ask who works here where people are entered and nobody is said."""
        self.say_where()
        self.fill()
        self.ask("people", self._people, self._must_say_who)

    def _people(self) -> int:
        from store import people

        assert self.record is not None
        return len(people.listing(self.record))

    def _must_say_who(self, people: int) -> None:
        self.has_nobody = not people
        self._say_next()
        if people and self.record is not None and self.record.by == "shop":
            self.action_who()

    def _say_next(self) -> None:
        """What an empty list tells to do: the first person first, the way out of a search that found nothing."""
        listing = self.query_one("#jobs", Listing)
        if self.query_one("#search", Input).value.strip():
            listing.empty = NOT_FOUND
        elif self.has_nobody and self.record is not None and self.record.by == "shop":
            listing.empty = NOBODY
        else:
            listing.empty = NO_JOB
        listing.refresh()

    def written(self, answers: Sequence[tuple[Order, Any]]) -> None:
        """A value that was refused after its job was left: said here, as there is no cell any more that could hold it."""
        from store.errors import WearlineError

        for order, answer in answers:
            token: Any = order.token
            pane = token[0]
            is_shown = pane.is_attached and pane.screen in self.app.screen_stack
            if isinstance(answer, WearlineError) and not is_shown:
                self.refuse(f"{order.tag}, {order.entry.characteristic} {order.entry.text}: {answer}")

    def look_again(self) -> None:
        """Fill the list anew when the record has changed, by this program or another."""
        if self.record is not None and self.app.screen is self:
            self.ask("version", self._version, self._compare)

    def _version(self) -> Any:
        from store import watch

        assert self.record is not None
        return watch.version(self.record)

    def _compare(self, version: Any) -> None:
        if version != self.version:
            known, self.version = self.version, version
            if known is not None:
                self.fill()

    def on_screen_resume(self) -> None:
        """Back from another screen: show what has changed."""
        if self.record is not None:
            self.say_where()
            self.fill()

    def fill(self) -> None:
        """Ask for the list that the search and the switch call for."""
        search = self.query_one("#search", Input).value
        outcome = None if self.with_ended else "open"

        def question() -> Any:
            from store import jobs

            assert self.record is not None
            return jobs.listing(self.record, outcome=outcome, search=search, most=MOST), self.record.now(), search

        self.ask("jobs", question, self._show)

    def _show(self, answer: Any) -> None:
        lines, now, self.shown_for = answer
        what = "job" if self.with_ended else "open job"
        found = (
            "found" if self.query_one("#search", Input).value.strip() else "on the bench" if not self.with_ended else ""
        )
        newest = "the newest " if len(lines) >= MOST else ""
        self.query_one("#counts", Static).update(f"{newest}{len(lines)} {what}{'' if len(lines) == 1 else 's'} {found}")
        items = []
        for stands in ORDER:
            here = [line for line in lines if line.stands == stands]
            if here:
                items.append(
                    Item((f"{stands}  {len(here)}{'   ' + here[0].next if here[0].next else ''}",), heading=True)
                )
                items += [_item(line, now) for line in here]
        self._say_next()
        listing = self.query_one("#jobs", Listing)
        listing.show(items)
        if self.opens_when_shown and self.shown_for == self.query_one("#search", Input).value:
            self.opens_when_shown = False
            listing.choose()

    @on(Input.Changed, "#search")
    def search_changed(self) -> None:
        """Search as one types."""
        self.opens_when_shown = False
        if self.record is not None:
            self.fill()

    @on(Input.Submitted, "#search")
    def open_first(self) -> None:
        """Enter opens the line under the cursor, once the list is that of what was typed."""
        if self.shown_for == self.query_one("#search", Input).value:
            self.query_one("#jobs", Listing).choose()
        else:
            self.opens_when_shown = True

    def on_key(self, event: events.Key) -> None:
        """The arrows move in the list while letters go to the search."""
        if event.key in {"up", "down", "pageup", "pagedown"}:
            self.query_one("#jobs", Listing).press(event.key)
            event.stop()
        elif event.key == "escape":
            self.query_one("#search", Input).value = ""

    @on(Listing.Chosen)
    def open_job(self, message: Listing.Chosen) -> None:
        """Open the job of the chosen line."""
        self.wearline.go("job", message.item.value)

    def action_take_in(self) -> None:
        """Take in a core, then open its job."""
        from tui.screens.take_in import TakeIn

        self.app.push_screen(TakeIn(), lambda tag: self.wearline.go("job", tag) if tag else None)

    def action_ended(self) -> None:
        """Ended jobs too, or open ones only."""
        self.with_ended = not self.with_ended
        self.fill()

    def action_who(self) -> None:
        """Say who works here now."""
        from tui.screens.who import Who

        if self.record is not None:
            self.app.push_screen(Who(), lambda who: self.wearline.act_as(who) if who else None)


def _item(line: Any, now: str) -> Item:
    from store import times

    days = max(0, int(times.days_between(line.taken_in, line.ended or now)))
    return Item(
        (
            line.tag, line.model, line.serial, "comeback" if line.earlier else "", line.customer, line.complaint, str(days),
            str(line.out or ""), str(line.in_doubt or ""),
        ),
        line.tag,
        "quiet" if line.ended else "",
    )  # fmt: skip
