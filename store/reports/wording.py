"""What a report says, in what order and in which words; the PDF and the text file draw the same parts.

Nothing here knows of pages, fonts or columns, and nothing is judged.
"""

from __future__ import annotations

from dataclasses import dataclass

from store.reports import figures, strip
from store.reports.contents import Characteristic, Limit, Reading, Report, Result, WearRule
from store.reports.strip import Strip

TITLES = {
    "open": "Tolerance report",
    "released": "Tolerance report",
    "scrapped": "Tolerance report, core scrapped",
    "returned": "Tolerance report, returned unrepaired",
}
STAGE_WORDS = {"as-found": "as found", "as-left": "as left"}


@dataclass(frozen=True, slots=True)
class Cell:
    """What came of a characteristic at one stage. `readings` are (position, figure); a single one has the position ""."""

    value: str
    detail: str
    verdict: str
    quiet: tuple[str, ...]
    readings: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class Row:
    """One characteristic. `limits` are (min or max, figure) lines, `says` (loud, plain or quiet; sentence) lines.

    `strips` are the strip charts of bar-to-bar readings, by stage.
    """

    label: str
    unit: str
    limits: tuple[tuple[str, str], ...]
    limit_quiet: tuple[str, ...]
    datum: str
    gauge: str
    found: Cell | None
    left: Cell | None
    rule: WearRule | None
    says: tuple[tuple[str, str], ...]
    strips: tuple[tuple[str, Strip], ...] = ()


@dataclass(frozen=True, slots=True)
class Group:
    """The rows of one component."""

    component: str
    rows: tuple[Row, ...]


@dataclass(frozen=True, slots=True)
class Table:
    """A plain table; `widths` are shares of the line."""

    title: str
    heads: tuple[str, ...]
    widths: tuple[int, ...]
    rows: tuple[tuple[str, ...], ...]
    note: str = ""


class Sources:
    """The sources of the limits, numbered as they are first met."""

    def __init__(self) -> None:
        self._numbers: dict[tuple[str, int | None, str], int] = {}

    def number(self, limit: Limit) -> int:
        """The number of a limit's source."""
        return self._numbers.setdefault((limit.source, limit.revision, limit.note), len(self._numbers) + 1)

    def table(self) -> Table:
        """All of them."""
        rows = tuple(
            (str(number), source, "" if revision is None else str(revision), note)
            for (source, revision, note), number in self._numbers.items()
        )
        heads = ("ref.", "source of the limit", "revision of the sheet", "note")
        return Table("Limits: where they come from", heads, (5, 50, 15, 30), rows)


def groups(report: Report, sources: Sources, *, running: bool) -> tuple[Group, ...]:
    """The characteristics by component, in the order of the report: those of the bench, or the running tests."""
    made: list[tuple[str, list[Row]]] = []
    for one in report.characteristics:
        if one.is_running is running:
            if not made or made[-1][0] != one.component:
                made.append((one.component, []))
            made[-1][1].append(_row(report, one, sources))
    return tuple(Group(component, tuple(rows)) for component, rows in made)


def _row(report: Report, one: Characteristic, sources: Sources) -> Row:
    found, left = one.at("as-found"), one.at("as-left")
    shown = next(r for r in (left, found) if r is not None)
    drawn = next((r.wear_rule for r in (left, found) if r is not None and r.wear_rule is not None), None)
    unit = shown.unit or (shown.limit.unit if shown.limit else "")
    quiet = []
    if shown.limit is not None:
        quiet.append(f"ref. {sources.number(shown.limit)}")
        if shown.limit.at_limit == "fail":
            quiet.append("equal fails")
    if found is not None and found is not shown and found.limit != shown.limit:
        if found.limit is None:
            quiet.append("as found: no limit")
        else:
            quiet.append(f"as found: {found.limit.text}, ref. {sources.number(found.limit)}")
    return Row(
        label=one.label or one.name,
        unit=unit,
        limits=_limits(shown.limit),
        limit_quiet=tuple(quiet),
        datum=_sentence(one.datum, one.derived_from and f"computed from {one.derived_from}"),
        gauge=_gauges(report, one),
        found=_cell(found, unit),
        left=_cell(left, unit),
        rule=drawn,
        says=_says(report, one),
        strips=tuple((STAGE_WORDS[r.stage], made) for r in one.results if (made := strip.of(r)) is not None),
    )


def _limits(limit: Limit | None) -> tuple[tuple[str, str], ...]:
    if limit is None:
        return (("", "none"),)
    lines = tuple((word, size) for word, size in (("min", limit.low), ("max", limit.high)) if size is not None)
    return lines or (("", limit.text or "pass"),)


def _cell(result: Result | None, unit: str) -> Cell | None:
    if result is None:
        return None
    quiet = []
    if result.probability is not None:
        quiet.append(f"P {figures.probability(result.probability)}")
    if result.wear_used is not None:
        quiet.append(f"wear {figures.wear_used(result.wear_used)}")
    if result.uncertainty is not None:
        quiet.append(f"U {result.uncertainty}")
    if result.count < result.expected and result.readings:
        quiet.append(f"{result.count} of {result.expected} readings")
    value, detail = result.shown, ""
    if value and not figures.is_number(value):
        value, _, detail = value.partition(" ")
    if value and result.unit and result.unit != unit:
        detail = f"{result.unit} {detail}".strip()
    single = len(result.readings) == 1
    readings = tuple(("" if single else one.position, _figure(one, unit)) for one in result.readings)
    if single and readings[0][1] == result.shown:
        readings = ()
    return Cell(value, detail, result.verdict, tuple(quiet), readings)


def _figure(one: Reading, unit: str) -> str:
    """A reading as printed: its figure, its unit where it is another than the row's; a dash where none was taken."""
    if one.mark == "not measured":
        return "–"
    figure = one.shown or one.typed
    return f"{figure} {one.shown_unit}" if one.shown_unit and one.shown_unit != unit else figure


def _looks_otherwise(one: Reading) -> bool:
    """Whether what was typed is more than the figure shown, with or without its unit."""
    typed = one.typed.replace(",", ".").replace(" ", "").casefold()
    return typed not in {text.replace(" ", "").casefold() for text in (one.shown, f"{one.shown}{one.shown_unit}")}


def _says(report: Report, one: Characteristic) -> tuple[tuple[str, str], ...]:
    """Why a result is anything but in, what the rules warn of, notes on readings, concessions, and what was typed."""
    lines: list[tuple[str, str]] = []
    for result in one.results:
        stage = STAGE_WORDS.get(result.stage, result.stage)
        if result.verdict != "in" and result.because:
            # What was out as found is why the unit came; what is out as left is what must not be overlooked.
            weight = "loud" if result.verdict == "out" and result is one.results[-1] else "plain"
            lines.append((weight, f"{stage}: {result.because}"))
        lines += [("plain", f"{stage}: {remark}") for remark in result.remarks]
        many = len(result.readings) > 1
        lines += [("plain", f"{stage}{', ' + r.position if many else ''}: {r.note}") for r in result.readings if r.note]
        if any(map(_looks_otherwise, result.readings)):
            typed = "; ".join(f"{r.position}: {r.typed.strip()}" if many else r.typed.strip() for r in result.readings)
            lines.append(("quiet", f"{stage}, as typed: {typed}"))
    lines += [
        ("plain", f"conceded by {person(c.by.initials, c.by.name)}, {figures.day(c.at)}: {c.because}")
        for c in report.concessions
        if c.characteristic == one.name
    ]
    return tuple(lines)


def _gauges(report: Report, one: Characteristic) -> str:
    names = dict.fromkeys(r.gauge for result in one.results for r in result.readings if r.gauge)
    made = []
    for name in names:
        gauge = report.gauge(name)
        when = f", cal. {gauge.calibrated}" if gauge and gauge.calibrated else ", no calibration date"
        made.append(name + when + (" (overdue)" if gauge and gauge.overdue else ""))
    return "; ".join(made)


def person(initials: str, name: str) -> str:
    """A person with initials and name, either of which may be missing."""
    return f"{name} ({initials})" if name and initials and name != initials else name or initials


def _sentence(*parts: str) -> str:
    return "; ".join(part for part in parts if part)
