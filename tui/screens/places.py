"""The places of the program by name. To add one: write its file, a class with the screen's name, and a line here."""

from __future__ import annotations

from dataclasses import dataclass
from importlib import import_module
from typing import Any


@dataclass(frozen=True, slots=True)
class Place:
    """A screen: where its class is, its title and what the palette says of it.

    `key` opens it from the bench; `needs_more`: it is opened with a tag or so, never alone.
    """

    module: str
    name: str
    title: str
    says: str
    key: str = ""
    needs_more: bool = False


PLACES = {
    "bench": Place("tui.screens.bench", "Bench", "Bench", "open jobs, and taking in a core"),
    "job": Place("tui.screens.job", "JobScreen", "Job", "one job: sheet, notes, history", needs_more=True),
    "limits": Place("tui.screens.limits", "Limits", "Limits", "wear limits of a model, with their sources", "f5"),
    "report": Place("tui.screens.report", "ReportPreview", "Report", "a report as it will print", needs_more=True),
    "parts": Place(
        "tui.screens.parts", "Parts", "Parts", "which number, on whose word, and does it go on this unit", "f6"
    ),
    "comebacks": Place(
        "tui.screens.comebacks",
        "Comebacks",
        "Comebacks",
        "what returns, of which group, and whether that is chance",
        "f8",
    ),
    "gauges": Place("tui.screens.gauges", "Gauges", "Gauges", "due dates, uncertainty, recall", "f9"),
    "notes": Place("tui.screens.notes", "Notes", "Notes", "find any note again, slips and all", "f7"),
    "release": Place("tui.screens.release", "Release", "Release", "what stands in the way, and the signature", "f10"),
    "record": Place("tui.screens.record", "RecordPlace", "Record", "the file: verify, backup, restore, export", "f12"),
}


@dataclass(frozen=True, slots=True)
class Pane:
    """A part of the Job screen: a widget with `show(job_screen)`, called each time that it comes to the front.

    `key` leads to it from the sheet and back; `says` is what F1 tells of it. To add one: its file, and a line in PANES. A pane
    reads and changes through `job_screen.ask`, takes the keys to one of its own widgets in `show`, and may have BINDINGS.
    """

    module: str
    name: str
    title: str
    key: str
    says: str


PANES = {
    "plan": Pane(
        "tui.screens.job_plan", "JobPlan", "plan", "f5", "what to turn, replace and refit, and the predicted sizes"
    ),
    "parts": Pane("tui.screens.job_parts", "JobParts", "parts", "f6", "what goes on this model, and what was fitted"),
    "notes": Pane(
        "tui.screens.job_notes", "JobNotes", "notes", "f7", "what was seen, in words that can be found again"
    ),
    "history": Pane(
        "tui.screens.job_history", "JobHistory", "history", "f8", "earlier jobs of this unit, sizes over time"
    ),
}


def load(place: str) -> Any:
    """The class of a screen, imported now. Raises KeyError."""
    found = PLACES[place]
    return getattr(import_module(found.module), found.name)


def load_pane(pane: str) -> Any:
    """The class of a pane of the Job screen, imported now. Raises KeyError."""
    found = PANES[pane]
    return getattr(import_module(found.module), found.name)
