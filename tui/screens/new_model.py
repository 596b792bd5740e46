"""Entering a model: what its plate says, and whether its commutator may be worked on."""

from __future__ import annotations

from typing import Any

from tui.screens.form import Form, Line


class NewModel(Form):
    """A model's line; answers with the model."""

    TITLE_WORDS = "A new model"
    EXPLAINS = (
        "A model is a unit number that many units share. Number and kind are needed; rotation is seen from the drive end. The plan "
        "never proposes to turn or undercut a commutator that may not be."
    )

    def __init__(self, number: str = "") -> None:
        lines = [
            Line("model", "number", "as on its plate", number), Line("kind", "kind", "starter, generator or alternator"),
            Line("volts", "volts", "12, 24 ..."), Line("rotation", "rotation", "cw, ccw or both, seen from the drive end"),
            Line("teeth", "teeth", "of its pinion"), Line("bars", "bars", "of its commutator"), Line("poles", "poles", "of its field"),
            Line("may_turn", "may be turned", "yes or no", "yes"), Line("may_undercut", "may be undercut", "yes or no", "yes"),
            Line("note", "note", "what else to know"),
        ]  # fmt: skip
        super().__init__("A new model", lines, self._keep)

    def _keep(self, values: dict[str, str]) -> Any:
        from store import models

        app: Any = self.app
        return models.enter(app.record, values)
