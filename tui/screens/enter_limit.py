"""Entering one limit in place: it makes the next revision of the model's sheet, and the job at hand moves to it."""

from __future__ import annotations

from typing import Any

from tui.screens.form import Form, Line


class EnterLimit(Form):
    """A limit for one characteristic of a model; with a tag the job is judged by the new revision at once."""

    TITLE_WORDS = "Enter a limit"
    EXPLAINS = (
        "A limit has a low end, a high end or both, and names its source: title, page, edition. Does a reading equal to the limit "
        'pass? "Less than X replace" means pass; "X or less replace" means fail. The sheet gets a new revision; the old one stays.'
    )

    def __init__(self, model: str, characteristic: Any, tag: str | None = None, present: Any = None) -> None:
        self.model, self.characteristic, self.tag = model, characteristic, tag
        unit = (
            present.unit if present else ("%" if characteristic.statistic.value == "deviation" else characteristic.unit)
        )
        is_test = characteristic.statistic.value == "attribute"
        sizes = [
            Line("unit", "unit", "", unit),
            Line("new", "new size", "where the sheet gives one", (present.new or "") if present else ""),
            Line("low", "low limit", "below this it is out", (present.low or "") if present else ""),
            Line("high", "high limit", "above this it is out", (present.high or "") if present else ""),
            Line("at_limit", "equal to it", "pass or fail", present.at_limit if present else "pass"),
        ]
        lines = [
            *([] if is_test else sizes),
            Line("stage", "stage", "as-found, as-left or both", present.stage if present else "both"),
            Line("count", "readings", "how many are expected", str(present.count or "") if present else ""),
            Line("source", "source", "title, page, edition", present.source if present else ""),
            Line("note", "note", "", present.note if present else ""),
        ]
        super().__init__(f"{characteristic.label}, model {model}", lines, self._keep, characteristic.datum)

    def _keep(self, values: dict[str, str]) -> Any:
        from store import jobs, limit_sheets
        from store.errors import Refused

        app: Any = self.app
        count = values.get("count", "").strip()
        if count and not count.isdigit():
            raise Refused(f"{count!r} is no number of readings")
        entry = limit_sheets.LimitEntry(
            self.characteristic.name,
            values["source"],
            unit=values.get("unit", ""),
            stage=values["stage"].strip() or "both",
            new=values.get("new", ""),
            low=values.get("low", ""),
            high=values.get("high", ""),
            at_limit=values.get("at_limit", "pass").strip() or "pass",
            count=int(count) if count else None,
            note=values["note"],
        )
        sheet = limit_sheets.enter(
            app.record, self.model, [entry], why=f"{self.characteristic.label} entered on screen"
        )
        if self.tag is not None:
            jobs.move_to_revision(app.record, self.tag)
        return sheet
