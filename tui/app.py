"""The application: wiring only. It paints a frame, opens the record in a thread, and hands it to the screens."""

from __future__ import annotations

import threading
from collections.abc import Callable, Sequence
from pathlib import Path
from typing import TYPE_CHECKING, Any, ClassVar

from textual.app import App
from textual.binding import Binding, BindingType
from textual.filter import LineFilter
from textual.message import Message
from textual.screen import ModalScreen

from tui.screens.places import PLACES, load
from tui.theme import THEMES, Uncoloured
from tui.widgets.key_line import say
from tui.writer import Order, Writer

if TYPE_CHECKING:
    from store.records import Record
    from tui.screens.palette import Choice


class Wearline(App[None]):
    """The screens on one record. `record` is None until it is open; screens are told by `record_opened`."""

    CSS_PATH = "app.tcss"
    TITLE = "Wearline"
    ENABLE_COMMAND_PALETTE = False
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f1", "explain", "explain", tooltip="explain this screen, its keys and its cautions", priority=True),
        Binding("ctrl+p", "palette", "find", tooltip="find any place or action by its name", show=False, priority=True),
        Binding("ctrl+q", "quit", "quit", show=False, priority=True),
        Binding("ctrl+t", "other_theme", "paper or graphite", show=False),
    ]

    class Opened(Message):
        """The record is open."""

        def __init__(self, record: Record) -> None:
            self.record = record
            super().__init__()

    class Unopened(Message):
        """The record cannot be opened; `why` is one line."""

        def __init__(self, why: str) -> None:
            self.why = why
            super().__init__()

    class Written(Message):
        """What the writer said of a batch."""

        def __init__(self, answers: Sequence[tuple[Order, Any]]) -> None:
            self.answers = answers
            super().__init__()

    def __init__(self, path: Path, acting: str | None = None, *, debug: bool = False) -> None:
        super().__init__()
        self.path, self.acting, self.shows_faults = path, acting, debug
        self.record: Record | None = None
        self.is_settled = threading.Event()
        self.writer: Writer | None = None
        for theme in THEMES.values():
            self.register_theme(theme)
        self.theme = "graphite"
        self.uncoloured = [Uncoloured()] if self.no_color else []

    def get_line_filters(self) -> Sequence[LineFilter]:
        """With NO_COLOR nothing has a colour."""
        return self.uncoloured or super().get_line_filters()

    def on_mount(self) -> None:
        """Paint the bench first; only then is the store imported and the record opened."""
        self.push_screen(load("bench")())
        self.call_after_refresh(self.open_record)

    def open_record(self) -> None:
        """Open the record in a thread."""
        self.run_worker(self._open, thread=True, group="open", exit_on_error=False)

    def _open(self) -> None:
        """The open jobs first, by the driver alone; then the store is imported and the record opened in full."""
        from store import job_lines
        from store.errors import WearlineError

        if (lines := job_lines.first_look(self.path)) is not None:
            self.call_from_thread(self.tell_screens, "first_look", lines)

        try:
            from store import records, shop

            record = records.open(self.path, by=self.acting, create=True)
            theme = shop.value(record, "theme")
        except WearlineError as fault:
            self.post_message(self.Unopened(str(fault)))
            return
        self.call_from_thread(setattr, self, "theme", theme)
        self.post_message(self.Opened(record))
        self._keep_a_backup(record)

    def _keep_a_backup(self, record: Record) -> None:
        """One backup a day, beside the record; that it failed is said, and nothing else waits for it."""
        from store import backups
        from store.errors import WearlineError

        try:
            backups.daily(record)
        except WearlineError as fault:
            self.call_from_thread(self.notify, f"no backup today: {fault}", severity="warning", markup=False)

    def on_wearline_opened(self, message: Opened) -> None:
        """Start the writer and tell every screen."""
        self.record = message.record
        self.writer = Writer(message.record, lambda answers: self.post_message(self.Written(answers)))
        self.is_settled.set()
        self.tell_screens("record_opened")

    def on_wearline_unopened(self, message: Unopened) -> None:
        """Say why there is no record, on the screen and when the program has left."""
        self.exit(return_code=1, message=f"wearline: {message.why}")

    def on_wearline_written(self, message: Written) -> None:
        """Pass the writer's answers on to the screens that wait for them."""
        self.tell_screens("written", message.answers)

    def tell_screens(self, what: str, *values: Any) -> None:
        """Call a method on every screen that has it, the one on top first."""
        for screen in reversed(self.screen_stack):
            method: Callable[..., None] | None = getattr(screen, what, None)
            if method is not None:
                method(*values)

    def notify(self, message: str, *, severity: str = "information", **_: Any) -> None:
        """What came of something, said above the keys."""
        say(self.screen_stack, message, is_loud=severity != "information")

    def act_as(self, initials: str | None) -> None:
        """Somebody else works here now."""
        assert self.record is not None
        assert self.writer is not None
        self.record = self.record.acting(initials or "")
        self.writer.record = self.record
        self.tell_screens("person_changed")

    def go(self, place: str, *values: Any) -> None:
        """Open a screen by its name in PLACES."""
        self.push_screen(load(place)(*values))

    def action_go(self, place: str) -> None:
        """`go` for bindings and the palette."""
        if not isinstance(self.screen, load(place)):
            self.go(place)

    def action_explain(self) -> None:
        """Explain the screen on top in the trade's words."""
        from tui.screens.explain import Explain

        if not isinstance(self.screen, Explain):
            self.push_screen(Explain(self.screen))

    def action_other_theme(self) -> None:
        """Paper by day, graphite by night."""
        self.theme = "paper" if self.theme == "graphite" else "graphite"

    def action_palette(self) -> None:
        """Every place and every action of the screen on top, by name."""
        from tui.screens.palette import Choice, Palette
        from tui.widgets.key_line import keys_of

        if isinstance(self.screen, ModalScreen):
            return
        actions = [Choice(k.words, k.says, k.key, k.action, k.node) for k in keys_of(self.screen)]
        places = [Choice(p.title, p.says, "", f"app.go('{n}')") for n, p in PLACES.items() if not p.needs_more]
        general = [
            Choice("paper or graphite", "the other theme", "^t", "app.other_theme"),
            Choice("leave", "write what is queued, then leave", "^q", "app.quit"),
        ]
        self.push_screen(Palette([*actions, *places, *general]), self._chosen)

    def _chosen(self, choice: Choice | None) -> None:
        if choice is not None:
            self.call_later(self.run_action, choice.action, choice.node)

    async def action_quit(self) -> None:
        """Write what is queued, then leave."""
        self.tell_screens("leaving")
        self.exit()

    def on_unmount(self) -> None:
        """Nothing that was typed is left behind."""
        self.is_settled.set()
        if self.writer is not None:
            self.writer.close()
        if self.record is not None:
            self.record.close()
