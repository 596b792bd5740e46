"""Everything a tolerance report carries, as plain values: what is frozen at release and what all printed forms draw.

Nothing is computed from these values that could be decided otherwise on another day: verdicts, sentences, shown figures
and the geometry of the wear rules are fixed here, so that a reprint is the same to the byte.

Conventions for every field below
    exact numbers   decimal text ("11.43"), never floats; None where there is none
    computed figures (probability, wear used, places on a wear rule) floats
    moments         ISO 8601 text, with a time zone where a time is said ("2026-03-02T14:05:00Z"); printed as they stand
    dates           "2026-03-02"
    text            as typed, "" where nothing was said
"""

from __future__ import annotations

from dataclasses import dataclass

STAGES = ("as-found", "as-left")
VERDICTS = ("in", "out", "in doubt", "not measured", "no limit", "not comparable")
OUTCOMES = ("open", "released", "scrapped", "returned")
PAPERS = ("a4", "letter")
LAYOUT = 1
"""The layout in which new reports are drawn. A changed look is a new number; the old templates stay for old reports."""


@dataclass(frozen=True, slots=True)
class Person:
    """Who did something; `name` is "" where only initials are known."""

    initials: str
    name: str = ""


@dataclass(frozen=True, slots=True)
class Shop:
    """Who issues the report and where the work was done; `address` may hold line breaks."""

    name: str
    address: str = ""


@dataclass(frozen=True, slots=True)
class Unit:
    """The machine that was measured, and what of its model identifies it."""

    model: str
    serial: str
    kind: str
    volts: str = ""
    rotation: str = ""
    viewed_from: str = ""
    teeth: int | None = None
    bars: int | None = None
    poles: int | None = None


@dataclass(frozen=True, slots=True)
class Decision:
    """The decision rule by its name (simple, guarded-1.65u, guarded-U) and in words (ISO/IEC 17025 7.8.6)."""

    rule: str
    text: str


@dataclass(frozen=True, slots=True)
class Gauge:
    """A gauge that was used, with the calibration in force when it was; sizes are in `unit`."""

    name: str
    kind: str
    unit: str = ""
    resolution: str | None = None
    expanded_uncertainty: str | None = None
    k: str | None = None
    calibrated: str | None = None
    due: str | None = None
    overdue: bool = False


@dataclass(frozen=True, slots=True)
class Limit:
    """The limit a result was judged by. Sizes in `unit`; `text` is the limit in words, such as "9.5 mm min"."""

    text: str
    unit: str
    new: str | None
    low: str | None
    high: str | None
    at_limit: str
    count: int | None
    source: str
    revision: int | None
    note: str = ""


@dataclass(frozen=True, slots=True)
class Replaced:
    """A reading that was corrected: what had been typed, by whom, when, and why it was replaced."""

    typed: str
    by: str
    at: str
    why: str


@dataclass(frozen=True, slots=True)
class Reading:
    """One reading: `typed` exactly as typed, `shown` the figure to print in `shown_unit` ("" for pass/fail tests).

    `value` is exact, in `unit` (the one it was typed in). `mark` is number, pass, fail, cannot judge or not measured;
    `detail` what was said after it. `replaced` holds what this reading corrects, oldest first.
    """

    position: str
    typed: str
    mark: str
    value: str | None
    unit: str
    shown: str
    shown_unit: str
    detail: str = ""
    gauge: str = ""
    at: str = ""
    by: str = ""
    note: str = ""
    replaced: tuple[Replaced, ...] = ()


@dataclass(frozen=True, slots=True)
class Place:
    """A place on a wear rule with its inscription."""

    at: float
    text: str


@dataclass(frozen=True, slots=True)
class WearRule:
    """The drawn scale of one result. Places run from 0 (left) to 1 (right); a reading may lie off the scale.

    `inside` is the stretch from limit to limit (0 or 1 where a side has none); outside of it is drawn as beyond.
    `guards` are the stretches where nothing can be told; `faint` the readings of the other stage.
    """

    inside: tuple[float, float]
    limits: tuple[Place, ...]
    new: Place | None
    guards: tuple[tuple[float, float], ...] = ()
    ticks: tuple[float, ...] = ()
    faint: tuple[float, ...] = ()
    judged: float | None = None


@dataclass(frozen=True, slots=True)
class Result:
    """What came of one characteristic at one stage. `value` is the judged value, exact, in `unit`; `shown` as printed.

    `uncertainty` is the expanded uncertainty of the judged value (k = 2) as printed, in `unit`; None where not known.
    `remarks` are what the rules warn of (a gauge too coarse for the tolerance, say), one sentence each.
    """

    stage: str
    verdict: str
    because: str
    statistic: str
    value: str | None
    unit: str
    shown: str
    count: int
    expected: int
    worst_at: str = ""
    rule: str = ""
    probability: float | None = None
    wear_used: float | None = None
    uncertainty: str | None = None
    limit: Limit | None = None
    readings: tuple[Reading, ...] = ()
    wear_rule: WearRule | None = None
    remarks: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Characteristic:
    """One characteristic of the report with its results, as found before as left; at least one of them.

    `is_running` marks a running test, which is printed apart. `derived_from` says what a computed one is made of.
    """

    name: str
    label: str
    component: str
    datum: str
    results: tuple[Result, ...]
    is_running: bool = False
    derived_from: str = ""

    def at(self, stage: str) -> Result | None:
        """The result at a stage, None where there is none."""
        return next((one for one in self.results if one.stage == stage), None)


@dataclass(frozen=True, slots=True)
class Predicted:
    """A size that the plan predicted; never a measurement."""

    name: str
    value: str
    unit: str


@dataclass(frozen=True, slots=True)
class PlanLine:
    """One line of the rework plan and what came of it: `outcome` is done, not done, declined or open."""

    component: str
    action: str
    because: str
    formula: str = ""
    predicted: tuple[Predicted, ...] = ()
    outcome: str = "open"
    note: str = ""
    by: str = ""
    at: str = ""


@dataclass(frozen=True, slots=True)
class Finding:
    """What was found wrong; component, mode, mechanism and cause are kept apart (ISO 14224)."""

    component: str
    mode: str
    mechanism: str = ""
    cause: str = ""
    note: str = ""


@dataclass(frozen=True, slots=True)
class Fitted:
    """A part that was fitted."""

    number: str
    maker: str = ""
    description: str = ""
    lot: str = ""
    supplier: str = ""
    position: str = ""
    quantity: str = "1"
    by: str = ""
    at: str = ""


@dataclass(frozen=True, slots=True)
class Concession:
    """A stated departure that a named person accepts, with a reason."""

    characteristic: str
    departure: str
    because: str
    by: Person
    at: str


@dataclass(frozen=True, slots=True)
class Signature:
    """Who ended the job and when; `own_work` says that this person had measured too, which the owner had allowed."""

    by: Person
    at: str
    own_work: bool = False
    note: str = ""


@dataclass(frozen=True, slots=True)
class Amendment:
    """The earlier report that this one takes the place of, and what changed."""

    number: str
    changed: tuple[str, ...]
    why: str
    by: Person


@dataclass(frozen=True, slots=True)
class Report:
    """The whole report of one job. `number` is unique; a draft has none and says so on every page.

    `received` and `measured_*` are moments; `issued` is when these contents were put together, and dates the PDF.
    `signature` is None on a draft and where an ending was entered from history.
    """

    number: str
    issued: str
    shop: Shop
    tag: str
    outcome: str
    unit: Unit
    received: str
    customer: str = ""
    application: str = ""
    hours: str | None = None
    starts: str | None = None
    complaint: str = ""
    earlier_tag: str | None = None
    measured_first: str | None = None
    measured_last: str | None = None
    ended: str | None = None
    revision: int | None = None
    decision: Decision | None = None
    characteristics: tuple[Characteristic, ...] = ()
    diagnosis: tuple[str, ...] = ()
    findings: tuple[Finding, ...] = ()
    plan: tuple[PlanLine, ...] = ()
    fitted: tuple[Fitted, ...] = ()
    concessions: tuple[Concession, ...] = ()
    gauges: tuple[Gauge, ...] = ()
    measured_by: tuple[Person, ...] = ()
    assembled_by: Person | None = None
    signature: Signature | None = None
    amends: Amendment | None = None
    cautions: tuple[str, ...] = ()
    audit_head: str = ""
    from_history: bool = False
    draft: bool = False
    paper: str = "a4"
    layout: int = LAYOUT

    @property
    def title(self) -> str:
        """What marks this report out on every page: its number, or that it is a draft."""
        return self.number if self.number and not self.draft else f"draft {self.tag}"

    def gauge(self, name: str) -> Gauge | None:
        """A gauge of this report by name."""
        return next((one for one in self.gauges if one.name == name), None)

    def results(self, stage: str) -> tuple[tuple[Characteristic, Result], ...]:
        """Every characteristic that has a result at a stage, with it, in order."""
        found = ((one, one.at(stage)) for one in self.characteristics)
        return tuple((one, result) for one, result in found if result is not None)


Frozen = tuple[Report, str | None]
"""A report and the text that it was frozen as when it was issued; None for a draft."""
