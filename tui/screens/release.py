"""Release: the units that wait, what stands in the way of each, concessions, the signature, printing the day's reports."""

from __future__ import annotations

from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import Static

from tui.screens.form import Form, Line
from tui.screens.standing import Standing
from tui.widgets.listing import Column, Item, Listing


class Release(Standing):
    """Jobs to inspect over what stands in the way of the one under the cursor."""

    CSS_PATH = "release.tcss"
    TITLE_WORDS = "Release"
    EXPLAINS = (
        "The units that wait for the inspector, and below what stands in the way of the one under the cursor, line by line; Enter on "
        "a line opens the place where it is mended. F3 concedes a line: a named person accepts the stated departure with a reason. "
        "F2 signs: the report is frozen and numbered and never changes again. Scrapping (F5) and returning unrepaired (F6) end a job "
        "too, each with its report. An issued report is amended by a new one (F7) that names it and says what changed.\n\n"
        "A release says what was measured. It never says that a unit is electrically safe."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "sign", "sign", tooltip="release the job under the cursor"),
        Binding("f3", "concede", "concede", tooltip="accept the line under the cursor, with a reason"),
        Binding("f4", "report", "report", tooltip="the report as it will print"),
        Binding("f5", "scrap", "scrap"),
        Binding("f6", "give_back", "return"),
        Binding("f7", "amend", "amend", tooltip="amend the newest report of the job under the cursor"),
        Binding("f8", "print_day", "print day", tooltip="hand today's reports to the printer"),
        Binding("escape", "back", "back"),
    ]

    def __init__(self, tag: str = "") -> None:
        """`tag`: the job to stand on."""
        super().__init__()
        self.wanted = tag

    def body(self) -> ComposeResult:
        """Jobs, then what stands in the way."""
        yield Listing(
            [
                Column("tag", 8), Column("model", 12), Column("serial", 10), Column("customer", 0), Column("stands", 10),
                Column("out", 3, right=True), Column("doubt", 5, right=True), Column("report", 9),
            ],
            empty="no job waits to be inspected",
            id="jobs",
        )  # fmt: skip
        yield Static("", id="way", markup=False)
        yield Listing([Column("what", 20), Column("", 0)], empty="nothing stands in the way: F2 signs", id="obstacles")
        yield Static("", id="whole", markup=False)

    def record_opened(self) -> None:
        """Read the jobs: those to inspect first, then those under way, then the newest that were released."""
        self.say_where()
        self.query_one("#jobs").focus()

        def question() -> Any:
            from store import jobs, releases

            assert self.record is not None
            under_way = jobs.listing(self.record)
            order = {"to inspect": 0, "on rework": 1, "stripped": 2, "taken in": 3}
            waiting = sorted(under_way, key=lambda line: order.get(line.stands, 9))
            ended = [line for line in jobs.listing(self.record, outcome=None, most=60) if line.ended]
            numbers = {line.tag: (releases.of_job(self.record, line.tag) or (None,))[-1] for line in ended}
            return waiting, ended, numbers

        self.ask("jobs", question, self._show)

    def _show(self, answer: Any) -> None:
        waiting, ended, numbers = answer

        def item(line: Any, tone: str) -> Item:
            issued = numbers.get(line.tag)
            number = issued.number if issued else "history" if line.ended else ""
            cells = (
                line.tag,
                line.model,
                line.serial,
                line.customer,
                line.stands,
                str(line.out or ""),
                str(line.in_doubt or ""),
                number,
            )
            return Item(cells, line, tone)

        items = [item(line, "" if line.stands == "to inspect" else "quiet") for line in waiting]
        if ended:
            items += [Item(("ended",), heading=True), *(item(line, "quiet") for line in ended)]
        listing = self.query_one("#jobs", Listing)
        listing.show(items)
        tags = [getattr(item.value, "tag", "") for item in items]
        if self.wanted and self.wanted in tags:
            listing.move(tags.index(self.wanted) - listing.at)
        self.wanted = ""

    def _line(self) -> Any:
        found = self.query_one("#jobs", Listing).item
        return found.value if found else None

    @on(Listing.Moved, "#jobs")
    def moved(self, message: Listing.Moved) -> None:
        """What stands in the way of this job."""
        line = message.item.value

        def question() -> Any:
            from store import obstacles, releases

            assert self.record is not None
            found = () if line.ended else obstacles.standing(self.record, line.tag)
            return line, found, releases.of_job(self.record, line.tag)

        self.ask("way", question, self._show_way)

    def _show_way(self, answer: Any) -> None:
        from store import times

        line, found, issued = answer
        said = f"{line.tag}: {len(found)} in the way" if found else f"{line.tag}: nothing stands in the way"
        if line.ended:
            said = f"{line.tag} {line.stands} {line.ended[:10]}"
            said += "".join(
                f"   {i.number} {times.local(i.at)} {i.by}{' in the place of ' + i.amends if i.amends else ''}"
                for i in issued
            )
            said += "" if issued else "   entered from history, no report was issued here"
        self.query_one("#way", Static).update(said)
        listing = self.query_one("#obstacles", Listing)
        listing.empty = "" if line.ended else "nothing stands in the way: F2 signs"
        self.query_one("#whole", Static).update("")
        listing.show(
            [
                Item((o.kind, o.says), o, "loud" if o.kind == "out" else "doubt" if o.kind == "in doubt" else "")
                for o in found
            ]
        )

    @on(Listing.Moved, "#obstacles")
    def whole_line(self, message: Listing.Moved) -> None:
        """The whole sentence of the line under the cursor, below the list."""
        self.query_one("#whole", Static).update(message.item.value.says)

    @on(Listing.Chosen, "#jobs")
    def to_obstacles(self) -> None:
        """Into what stands in the way."""
        self.query_one("#obstacles").focus()

    @on(Listing.Chosen, "#obstacles")
    def mend(self, message: Listing.Chosen) -> None:
        """Open the place where it is mended."""
        line, obstacle = self._line(), message.item.value
        if line is None:
            return
        if obstacle.pane == "who":
            from tui.screens.who import Who

            self.app.push_screen(Who(), self._other_person)
            return
        self.wearline.go("job", line.tag, "as-left", obstacle.characteristic, obstacle.pane)

    def _other_person(self, who: str | None) -> None:
        if who:
            self.wearline.act_as(who)
            self.record_opened()

    def on_screen_resume(self) -> None:
        """Back from a job: look again."""
        if self.record is not None:
            self.record_opened()

    def action_sign(self) -> None:
        """Release the job under the cursor: a word and the PIN, then it is frozen."""
        self._end(
            "Release",
            "a word beside the signature",
            self._release,
            "note",
            "The report is frozen and numbered; it prints the same for ever.",
        )

    def _release(self, tag: str, text: str, pin: str | None) -> Any:
        from store import releases

        assert self.record is not None
        return releases.release(self.record, tag, note=text, pin=pin)

    def action_scrap(self) -> None:
        """Scrap the core under the cursor."""

        def keep(tag: str, text: str, pin: str | None) -> Any:
            from store import releases

            assert self.record is not None
            return releases.scrap(self.record, tag, text, pin=pin)

        self._end("Scrap", "why", keep, "why", "The core is scrapped; its report says why.")

    def action_give_back(self) -> None:
        """Return the core under the cursor unrepaired."""

        def keep(tag: str, text: str, pin: str | None) -> Any:
            from store import releases

            assert self.record is not None
            return releases.give_back(self.record, tag, text, pin=pin)

        self._end("Return unrepaired", "why", keep, "why", "The core goes back as it is; its report says why.")

    def _end(self, title: str, hint: str, act: Any, name: str, says: str) -> None:
        line = self._line()
        if line is None or self.record is None:
            return
        from store import pins

        lines = [Line(name, name, hint)]
        if pins.is_set(self.record, self.record.by):
            lines.append(Line("pin", "PIN", f"of {self.record.by}"))

        def keep(values: dict[str, str]) -> Any:
            return act(line.tag, values[name], values.get("pin") or None)

        def done(issued: Any) -> None:
            if issued is not None:
                self.notify(f"{issued.tag} {issued.outcome}: report {issued.number}", markup=False)
                self.record_opened()

        self.app.push_screen(Form(f"{title} {line.tag}, as {self.record.by}", lines, keep, says), done)

    def action_concede(self) -> None:
        """Concede the line under the cursor."""
        line, item = self._line(), self.query_one("#obstacles", Listing).item
        if line is None or item is None:
            return
        obstacle = item.value
        if not obstacle.may_concede:
            self.refuse(f"{obstacle.kind} cannot be conceded")
            return

        def keep(values: dict[str, str]) -> Any:
            from store import releases

            assert self.record is not None
            releases.concede(self.record, line.tag, obstacle.characteristic, values["because"])
            return True

        form = Form(
            f"Concession on {line.tag}",
            [Line("because", "because", "the reason stands in the report")],
            keep,
            obstacle.says,
        )
        self.app.push_screen(form, lambda done: self.record_opened() if done else None)

    def action_amend(self) -> None:
        """Amend the newest report of the job under the cursor."""
        line = self._line()
        if line is None or not line.ended or self.record is None:
            return
        from store import jobs

        job = jobs.find(self.record, line.tag)
        lines = [
            Line("why", "why", "stands in the new report"), Line("customer", "customer", "", job.customer),
            Line("application", "application", "", job.application), Line("complaint", "complaint", "", job.complaint),
        ]  # fmt: skip

        def keep(values: dict[str, str]) -> Any:
            from store import releases

            assert self.record is not None
            why = values.pop("why")
            changed = {name: value for name, value in values.items() if value != getattr(job, name)}
            return releases.amend(self.record, line.tag, why, fields=changed)

        form = Form(
            f"Amend the report of {line.tag}", lines, keep, "A new report names the old one; both print for ever."
        )
        self.app.push_screen(form, lambda done: self.record_opened() if done else None)

    def action_report(self) -> None:
        """The report of the job under the cursor."""
        line = self._line()
        if line is not None:
            self.wearline.go("report", line.tag)

    def action_print_day(self) -> None:
        """Hand today's reports to the printer, one after the other."""

        def question() -> Any:
            from store.reports import issue

            assert self.record is not None
            return issue.print_day(self.record, self.record.now()[:10], progress=self._tell)

        def done(handed: Any) -> None:
            self.notify(f"{len(handed)} reports handed to the printer" if handed else "no report was issued today")

        self.ask("print", question, done)

    def _tell(self, what: str, done: int) -> None:
        self.app.call_from_thread(self.notify, f"{what}: {done}")

    def action_back(self) -> None:
        """From the lines to the jobs, then back."""
        if self.query_one("#obstacles").has_focus:
            self.query_one("#jobs").focus()
        else:
            self.dismiss()
