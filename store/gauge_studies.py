"""Gauge studies: a file of parts x people x repeats, what of its spread is the gauge's, and which limit it can judge.

The file is CSV with the columns part, person, value, and where wanted unit; a line a reading, in any order.
"""

from __future__ import annotations

from dataclasses import dataclass
from fractions import Fraction
from pathlib import Path
from typing import Any

from store import gauges, jobs, judgements, limit_sheets
from store.catalogue import catalogue
from store.errors import BadLine, FileRefused, NotFound, Refused
from store.files import reader
from store.gauges import Gauge
from store.records import Record
from store.rules import gauge_study, quantities
from store.rules.gauge_study import Study
from store.rules.limits import Limit
from store.rules.readings import parse
from store.sqlite.engine import rows
from store.tables.gauges import GaugeRow

NEEDED, OPTIONAL = ("part", "person", "value"), ("unit",)
ALPHA = gauge_study.ALPHA
FIT, BARELY = 0.1, 0.3
MOST_LINES = 100_000


@dataclass(frozen=True, slots=True)
class Studied:
    """A study with what it was made on: names in the order of the file, sizes in `unit`."""

    unit: str
    parts: tuple[str, ...]
    people: tuple[str, ...]
    repeats: int
    study: Study

    @property
    def shares(self) -> dict[str, float]:
        """Each spread as a share of the total study variation, 0 to 1 (they add up by their squares)."""
        found, total = self.study, self.study.total
        spreads = {"repeatability": found.repeatability, "reproducibility": found.reproducibility, "gauge": found.gauge,
                   "part": found.part, "total": total}  # fmt: skip
        return {name: spread / total if total else 0.0 for name, spread in spreads.items()}


@dataclass(frozen=True, slots=True)
class Against:
    """The gauge held against a limit: six standard deviations over the tolerance, and the sentence (common practice)."""

    characteristic: str
    tolerance: Fraction
    unit: str
    share: float
    verdict: str
    says: str


def read(path: Path, unit: str = "mm") -> Studied:
    """Read and analyse a file; `unit` holds where neither the line nor the value says one.

    Raises FileRefused naming every bad line, Refused (too few of something, a table with gaps), RecordUnusable.
    """
    _columns(path)
    quantity = quantities.unit(unit).quantity
    bad: list[BadLine] = []
    cells: dict[str, dict[str, list[Fraction]]] = {}
    people: dict[str, None] = {}
    for number, line in reader.lines(path, bad):
        if number > MOST_LINES:
            raise FileRefused([BadLine(path.name, number, "", f"a study has at most {MOST_LINES:,} lines")])
        try:
            part, person = line["part"], line["person"]
            if not part or not person:
                raise Refused("a reading has its part and its person")
            typed = parse(line["value"], quantity, line.get("unit") or unit)
            if typed.value is None:
                raise Refused("a study takes numbers only")
        except Refused as fault:
            bad.append(BadLine(path.name, number, "value", str(fault)))
            continue
        value = quantities.convert(typed.value, typed.unit, unit)
        cells.setdefault(part, {}).setdefault(person, []).append(value)
        people.setdefault(person)
    if bad:
        raise FileRefused(bad)
    return _studied(cells, tuple(people), unit)


def of_gauge(record: Record, path: Path, gauge: str) -> tuple[Studied, Gauge]:
    """Analyse a file in the unit of a gauge. Raises NotFound, Refused (a gauge without a unit), and as `read`."""
    found = gauges.find(record, gauge)
    if not found.unit:
        raise Refused(f"gauge {found.name} has no unit; enter one first")
    return read(path, found.unit), found


def against(record: Record, studied: Studied, model: str, characteristic: str, stage: str = "as-left") -> Against:
    """Whether a gauge can judge the limit of a characteristic on a model's newest sheet.

    The tolerance of a band is its width; with one limit it is from the new size to it. Raises NotFound, Refused.
    """
    sheet = limit_sheets.sheet(record, model)
    with record.read() as conn:
        one = catalogue(record, conn).find(characteristic)
    limit = sheet.at(one.name, stage) if sheet else None
    if limit is None:
        raise NotFound(f"limit on the sheet of {model}", one.name)
    width = tolerance(limit.limit)
    if width is None:
        raise Refused(f"the limit of {one.name} has no width: enter both ends, or the new size beside the one")
    width *= quantities.scale(limit.unit, studied.unit)
    return _against(one.name, width, studied)


def tolerance(limit: Limit) -> Fraction | None:
    """The width of a limit in its unit: both ends, else new size to the end there is; None where that is not known."""
    if limit.low is not None and limit.high is not None:
        return limit.high - limit.low
    end = limit.low if limit.low is not None else limit.high
    if end is None:
        return None
    from_size = limit.new if limit.new is not None else (Fraction(0) if limit.low is None else None)
    width = None if from_size is None else abs(end - from_size)
    return width or None


def keep(record: Record, gauge: str, studied: Studied) -> Gauge:
    """Keep the study's repeatability for the gauge and judge anew what it measured in open jobs.

    Raises NotFound, Refused (another quantity, no repeatability in it).
    """
    found = gauges.find(record, gauge)
    spread = quantities.scale(studied.unit, found.unit) * Fraction(studied.study.repeatability)
    text = quantities.plain(Fraction(quantities.rounded(spread, 9)))
    if Fraction(text) <= 0:
        raise Refused("every repeat reads the same: the study shows the gauge's resolution, not its repeatability")
    said = f"study of {len(studied.parts)} x {len(studied.people)} x {studied.repeats}"
    with record.change("gauge study", found.name) as change:
        change.update(GaugeRow, found.id, repeatability=text, note=f"{found.note} {said}".strip())
        touched = rows(change.conn, "SELECT DISTINCT r.job_id, j.tag FROM reading r JOIN job j ON j.id = r.job_id "
                       "WHERE r.gauge_id = ?", (found.id,))  # fmt: skip
        for _, tag in touched:
            judgements.rebuild(record, change.conn, jobs.find(record, tag, change.conn))
    return gauges.find(record, gauge)


def as_json(studied: Studied, held: Against | None = None, kept: str | None = None) -> dict[str, Any]:
    """The study as values: computed figures are numbers, in `unit`."""
    found = studied.study
    return {
        "unit": studied.unit, "parts": len(studied.parts), "people": len(studied.people), "repeats": studied.repeats,
        "alpha": ALPHA, "interaction_pooled": found.pooled,
        "analysis": [
            {"effect": e.name, "df": e.freedom, "ss": e.squares, "ms": e.mean, "f": e.f, "p": e.p} for e in found.effects
        ],
        "repeatability": found.repeatability, "reproducibility": found.reproducibility, "gauge": found.gauge,
        "part": found.part, "total": found.total, "study_variation": studied.shares,
        "against": None if held is None else {
            "characteristic": held.characteristic, "tolerance": quantities.plain(held.tolerance), "unit": held.unit,
            "share": held.share, "verdict": held.verdict, "says": held.says,
        },
        "kept_for": kept,
    }  # fmt: skip


def _columns(path: Path) -> None:
    columns = reader.header(path)
    lacking = [c for c in NEEDED if c not in columns]
    unknown = [c for c in columns if c not in NEEDED + OPTIONAL]
    if lacking or unknown:
        why = f"lacks {', '.join(lacking)}" if lacking else f"{unknown[0]!r} is no column of a gauge study"
        raise FileRefused([BadLine(path.name, 1, "", f"{why}; the columns are {', '.join(NEEDED + OPTIONAL)}")])


def _studied(cells: dict[str, dict[str, list[Fraction]]], people: tuple[str, ...], unit: str) -> Studied:
    for part, of in cells.items():
        for person in people:
            if person not in of:
                raise Refused(f"part {part} was not measured by {person}; every part is measured by everyone")
    table = [[[float(x) for x in of[person]] for person in people] for of in cells.values()]
    made = gauge_study.study(table)
    return Studied(unit, tuple(cells), people, len(table[0][0]), made)


def _against(name: str, width: Fraction, studied: Studied) -> Against:
    _, share = studied.study.judges(float(width))
    verdict = "can" if share <= FIT else "barely" if share <= BARELY else "cannot"
    words = {"can": "it can judge this limit", "barely": "it can barely judge this limit (10 to 30 %)",
             "cannot": "it cannot judge this limit (over 30 %)"}[verdict]  # fmt: skip
    says = (
        f"6 x {studied.study.gauge:.4g} / {float(width):.4g} {studied.unit} = {100 * share:.0f} % of the tolerance: "
        f"{words}; common practice"
    )
    return Against(name, width, studied.unit, share, verdict, says)
