"""The history of a job's unit: earlier jobs, and its sizes from visit to visit."""

from __future__ import annotations

from typing import Any

from textual import on
from textual.app import ComposeResult
from textual.containers import Vertical

from tui.widgets.listing import Column, Item, Listing


class JobHistory(Vertical):
    """Jobs of the unit on top, sizes below; Enter on a job opens it."""

    DEFAULT_CSS = "JobHistory Listing { margin: 0 1; }"

    def __init__(self, *, id: str | None = None) -> None:  # noqa: A002
        super().__init__(id=id)
        self.job_screen: Any = None

    def compose(self) -> ComposeResult:
        """One list with headings."""
        yield Listing(
            [
                Column("visit", 20),
                Column("stage", 9, quiet=True),
                Column("size", 14, right=True),
                Column("verdict", 12),
                Column("", 0),
            ],
            empty="no earlier visit of this unit",
        )

    def show(self, screen: Any) -> None:
        """Read the history of the screen's unit."""
        self.job_screen = screen
        self.query_one(Listing).focus()

        def question() -> Any:
            from store import history

            return history.of_unit(screen.record, screen.tag)

        screen.ask("history", question, self._show)

    def _show(self, history: Any) -> None:
        from store import times

        items = [Item(("jobs of this unit",), heading=True)]
        for job in history.jobs:
            ended = times.local(job.ended)[:10] if job.ended else ""
            came = f"comeback of {job.earlier} {job.comeback_outcome}" if job.earlier else ""
            items.append(
                Item(
                    (
                        f"{job.tag}  {times.local(job.taken_in)[:10]}",
                        "",
                        "",
                        job.outcome,
                        f"{ended} {came} {job.complaint}",
                    ),
                    job.tag,
                )
            )
        for label, sizes in history.sizes.items():
            items.append(Item((label,), heading=True))
            for size in sizes:
                tone = {"out": "loud", "in doubt": "doubt"}.get(size.verdict, "")
                items.append(
                    Item(
                        (
                            f"{size.tag}  {times.local(size.at)[:10]}",
                            size.stage.replace("-", " "),
                            size.shown,
                            size.verdict,
                            "",
                        ),
                        None,
                        tone,
                    )
                )
        self.query_one(Listing).show(items)

    @on(Listing.Chosen)
    def open_job(self, message: Listing.Chosen) -> None:
        """Open another visit."""
        if message.item.value and message.item.value != self.job_screen.tag:
            self.job_screen.wearline.go("job", message.item.value)
