"""Comebacks: what returns and how soon, of which model, part, supplier or lot, and whether that is chance."""

from __future__ import annotations

from pathlib import Path
from typing import Any, ClassVar

from textual import on
from textual.app import ComposeResult
from textual.binding import Binding, BindingType
from textual.widgets import Static

from store.comeback_groups import KINDS
from tui.screens.form import Form, Line
from tui.screens.standing import Standing
from tui.widgets import charts
from tui.widgets.listing import Column, Item, Listing


class Comebacks(Standing):
    """The curve of returns over groups, findings and repeats; each line opens the jobs behind it."""

    CSS_PATH = "comebacks.tcss"
    TITLE_WORDS = "Comebacks"
    EXPLAINS = (
        "The curve shows what share of the released units came back by how many days, with its 95 per cent band; units that were "
        "released lately are counted only for as long as they have been out, so young releases do not make a supplier look good. "
        "Below, one kind of group at a time (F2): each is held against all the rest, corrected for the number of groups looked at, "
        "and the verdict is in words. Under five comebacks or twenty releases nothing is ranked. Enter on a line shows the jobs "
        "behind it. F4 sets the period and which outcomes count; both stand on the second line. "
        "F5 saves the owner's report of that period, with every kind of group, as PDF or JSON by the ending of the name; F6 hands it to the printer."
    )
    BINDINGS: ClassVar[list[BindingType]] = [
        Binding("f2", "next_kind", "next kind", tooltip="lot, part, supplier, model, assembler, finding"),
        Binding("f3", "foretell", "foretell", tooltip="which as-left readings went with comebacks"),
        Binding("f4", "period", "period"),
        Binding("f5", "save", "save", tooltip="the owner's report as PDF, or its figures as JSON"),
        Binding("f6", "print", "print", tooltip="hand the owner's report to the printer"),
        Binding("escape", "back", "back"),
    ]

    def __init__(self) -> None:
        super().__init__()
        self.by, self.since, self.until, self.counted = "lot", "", "", ""
        self.showing_jobs = False

    def body(self) -> ComposeResult:
        """Figures, curve, list."""
        yield Static("reviewing ...", id="figures", markup=False)
        yield Static("", id="curve", markup=False)
        yield Listing(
            [
                Column("", 18),
                Column("released", 8, right=True),
                Column("back", 5, right=True),
                Column("a year", 10, right=True),
                Column("", 0),
            ],
            empty="nothing was released in this period",
        )
        yield Static("", id="whole", markup=False)

    def where(self) -> str:
        """Which kind of group."""
        return f"Comebacks > by {self.by}"

    def record_opened(self) -> None:
        """Review."""
        self.say_where()
        self.query_one(Listing).focus()
        by, since, until, counted = self.by, self.since, self.until, self._counts()

        def question() -> Any:
            from store import comebacks

            assert self.record is not None
            return comebacks.review(self.record, by=by, since=since, until=until, counted=counted)

        self.ask("review", question, self._show)

    def _show(self, found: Any) -> None:
        self.showing_jobs = False
        since = "" if found.since.startswith("0001") else f"{found.since} "
        read = "   ".join(f"{day} days {_share(at)}" for day, at in found.at.items())
        self.query_one("#figures", Static).update(
            f"{found.comebacks} of {found.released} released {since}to {found.until} came back\n{read}\n"
            f"counted: {', '.join(found.counted)}, not yet known   false alarms allowed: {found.rate:.0%}"
        )
        height = max(5, min(10, self.size.height // 3))
        self.query_one("#curve", Static).update(
            "\n".join(charts.curve_chart(found.curve, found.at_risk, found.longest, self.size.width - 2, height - 3))
        )
        items = [Item((remark,), heading=True) for remark in found.remarks if not found.groups]
        top = max([g.high for g in found.groups if g.high is not None], default=0.0)
        for group in found.groups:
            year = "too young" if group.fraction_365 is None else f"{group.fraction_365:.0%}"
            drawn = (
                charts.dot(group.fraction_365, group.low, group.high, top, 20) + "  " if self.size.width >= 110 else ""
            )
            tone = "loud" if group.named else "quiet" if group.p is None else ""
            items.append(
                Item((group.name, str(group.released), str(group.comebacks), year, drawn + group.says), group, tone)
            )
        items.append(Item(("findings of the comebacks",), heading=True))
        items += [
            Item((f.finding, "", str(f.count), f"{f.cumulative:.0%}", charts.bar(f.share, 24)), f) for f in found.pareto
        ]
        if found.repeat:
            last = found.repeat[-1]
            said = f"mean number of comebacks a unit by {last.days:.0f} days: {last.mean:.2f} ({last.low:.2f} to {last.high:.2f})"
            items.append(Item((said,), heading=True))
        self.query_one(Listing).show(items)

    @on(Listing.Moved)
    def whole_line(self, message: Listing.Moved) -> None:
        """The whole sentence of the line under the cursor."""
        said = (
            getattr(message.item.value, "says", "")
            or getattr(message.item.value, "finding", "")
            or message.item.cells[-1]
        )
        self.query_one("#whole", Static).update(said)

    @on(Listing.Chosen)
    def open_line(self, message: Listing.Chosen) -> None:
        """The jobs behind a line; from there the job itself."""
        value = message.item.value
        if isinstance(value, str):
            self.wearline.go("job", value)
            return
        tags = getattr(value, "tags", ())
        name = getattr(value, "name", "") or getattr(value, "finding", "")

        def question() -> Any:
            from store import jobs

            assert self.record is not None
            return [jobs.find(self.record, tag) for tag in tags]

        self.ask("jobs", question, lambda found: self._show_jobs(name, found))

    def _show_jobs(self, name: str, found: Any) -> None:
        if not found:
            self.refuse(f"nothing came back of {name}")
            return
        self.showing_jobs = True
        items = [Item((f"came back: {name}; Esc goes back to the groups",), heading=True)]
        items += [
            Item((j.tag, j.model, "", (j.ended or "")[:10], f"{j.serial}  {j.customer}  {j.complaint}"), j.tag)
            for j in found
        ]
        self.query_one(Listing).show(items)

    def action_next_kind(self) -> None:
        """The next kind of group."""
        self.by = KINDS[(KINDS.index(self.by) + 1) % len(KINDS)]
        self.record_opened()

    def action_foretell(self) -> None:
        """Which as-left readings went with comebacks within a year."""

        def question() -> Any:
            from store import foretelling

            assert self.record is not None
            return foretelling.foretell(self.record, since=self.since, until=self.until)

        self.ask("foretell", question, self._show_foretold)

    def _show_foretold(self, found: Any) -> None:
        self.showing_jobs = True
        items = [Item(("as-left readings and comebacks within a year; Esc goes back",), heading=True)]
        for f in found:
            cells = (
                f"{f.model} {f.characteristic}",
                str(f.found.stayed),
                str(f.found.returned),
                f"{f.found.area:.2f}",
                f.says,
            )
            items.append(Item(cells, None, "loud" if f.named else ""))
        if not found:
            items.append(
                Item(
                    ("too few comebacks followed for a year with readings as left: nothing can be foretold yet",),
                    heading=True,
                )
            )
        self.query_one(Listing).show(items)

    def action_period(self) -> None:
        """Set the period and what counts."""

        def keep(values: dict[str, str]) -> Any:
            from store import comebacks

            assert self.record is not None
            counted = tuple(part.strip() for part in values["counted"].split(";") if part.strip()) or None
            comebacks.review(self.record, since=values["since"].strip(), until=values["until"].strip(), counted=counted)
            return values

        def done(values: Any) -> None:
            if values is not None:
                self.since, self.until, self.counted = (values[name].strip() for name in ("since", "until", "counted"))
                self.record_opened()

        lines = [
            Line("since", "released since", "2025-01-01; empty: all", self.since), Line("until", "followed to", "empty: today", self.until),
            Line("counted", "counted", "workmanship;part;wear; empty: the shop's", self.counted),
        ]  # fmt: skip
        self.app.push_screen(Form("The period, and what counts", lines, keep), done)

    def action_save(self) -> None:
        """Save the owner's report; the ending says as what. The form takes the name, the work goes on behind the keys."""

        def keep(values: dict[str, str]) -> Any:
            from store.reports.owner import issue

            return issue.named(Path(values["file"].strip()).expanduser())

        def done(path: Any) -> None:
            def question() -> Any:
                from store.reports.owner import issue

                return issue.save(self._owners_report(), path)

            if path is not None:
                self.ask("save", question, lambda saved: self.notify(f"saved: {saved}", markup=False))

        form = Form(
            "Save the owner's report",
            [Line("file", "file", "", str(Path.home() / "comebacks.pdf"))],
            keep,
            "Ending .pdf or .json",
        )
        self.app.push_screen(form, done)

    def action_print(self) -> None:
        """Hand the owner's report to the printer; where there is none, say so and where the file is."""

        def question() -> Any:
            from store.reports.owner import issue

            return issue.print_out(self._owners_report())

        self.ask("print", question, lambda said: self.notify(said, timeout=15, markup=False))

    def _owners_report(self) -> Any:
        """What is on screen as a report: this period and what counts, every kind of group."""
        from store.reports.owner import contents

        assert self.record is not None
        return contents.gather(self.record, since=self.since, until=self.until, counted=self._counts())

    def _counts(self) -> tuple[str, ...] | None:
        return tuple(part.strip() for part in self.counted.split(";") if part.strip()) or None

    def action_back(self) -> None:
        """From the jobs to the groups, then back."""
        if self.showing_jobs:
            self.record_opened()
        else:
            self.dismiss()


def _share(at: tuple[float, float, float] | None) -> str:
    return "too young" if at is None else f"{at[0]:.0%} ({at[1]:.0%} to {at[2]:.0%})"
