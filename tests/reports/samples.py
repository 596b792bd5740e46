"""Invented reports for the tests: a released starter with everything that a report can carry, and shorter ones."""

from __future__ import annotations

from dataclasses import fields, is_dataclass, replace
from typing import Any

from store.reports.contents import (
    Amendment,
    Characteristic,
    Concession,
    Decision,
    Finding,
    Fitted,
    Gauge,
    Limit,
    Person,
    Place,
    PlanLine,
    Predicted,
    Reading,
    Replaced,
    Report,
    Result,
    Shop,
    Signature,
    Unit,
    WearRule,
)

BENCH = Person("jt", "Jorun Teig")
INSPECTOR = Person("mo", "Marit Ost")
BOOK = "Overhaul book HL-7, table 3, 2nd edition"
HEAD = "5f1d0c6a9b7e4d3f82a1c0b9e8d7f6a5b4c3d2e1f00112233445566778899aab"


def limit(text: str, unit: str, *, new: str | None = None, low: str | None = None, high: str | None = None,
          at_limit: str = "pass", count: int | None = None) -> Limit:  # fmt: skip
    """A limit of the sample's sheet."""
    return Limit(text, unit, new, low, high, at_limit, count, BOOK, 2)


def readings(unit: str, figures: str, *, gauge: str = "", stage_hour: int = 9) -> tuple[Reading, ...]:
    """Readings typed as plain figures, at positions 1, 2, ... unless written `A1=45.02`."""
    made = []
    for n, figure in enumerate(figures.split(), 1):
        position, _, text = figure.rpartition("=")
        made.append(
            Reading(
                position or str(n), text, "number", text, unit, text, unit,
                gauge=gauge, at=f"2026-03-02T{stage_hour:02}:{n:02}:00Z", by="jt",
            )
        )  # fmt: skip
    return tuple(made)


def rule(new: float, low: float | None, high: float | None, ticks: tuple[float, ...], judged: float | None = None,
         faint: tuple[float, ...] = (), guard: float = 0.0) -> WearRule:  # fmt: skip
    """A wear rule from sizes; the scale leaves a quarter of the way beyond a limit."""
    if low is not None and high is not None:
        spread = (high - low) / 2
        left, right = low - spread / 2, high + spread / 2
    else:
        far = low if low is not None else high
        assert far is not None
        left, right = new, far + (far - new) / 3

    def at(size: float) -> float:
        return round((size - left) / (right - left), 4)

    limits = [size for size in (low, high) if size is not None]
    inside = (at(limits[0]), at(limits[1])) if len(limits) == 2 else (0.0, at(limits[0]))
    guards = []
    if guard:
        share = guard / abs(right - left)
        guards = [(round(at(size) - share, 4), round(at(size) + share, 4)) for size in limits]
    return WearRule(
        inside, tuple(Place(at(size), f"{size:g}") for size in limits), Place(at(new), f"{new:g}"), tuple(guards),
        tuple(at(t) for t in ticks), tuple(at(f) for f in faint), None if judged is None else at(judged),
    )  # fmt: skip


def result(stage: str, verdict: str, because: str, shown: str, unit: str, **more: object) -> Result:
    """A result; count and expected are those of its readings unless said."""
    taken = more.get("readings", ())
    assert isinstance(taken, tuple)
    values: dict[str, object] = {
        "statistic": "smallest", "count": len(taken), "expected": len(taken), "rule": "guarded-1.65u",
        "value": shown if shown.replace(".", "").isdigit() else None, **more,
    }  # fmt: skip
    return Result(stage=stage, verdict=verdict, because=because, shown=shown, unit=unit, **values)  # type: ignore[arg-type]


def attribute(name: str, label: str, component: str, datum: str, *stages: tuple[str, str, str]) -> Characteristic:
    """A pass/fail test; each stage is (stage, typed, verdict)."""
    passes = Limit("pass", "", None, None, None, "pass", 1, BOOK, 2)
    made = []
    for stage, typed, verdict in stages:
        mark, _, detail = typed.partition(" ")
        one = Reading("1", typed, mark, None, "", typed, "", detail, "", "2026-03-02T09:30:00Z", "jt")
        because = "passed" if verdict == "in" else f"failed: {detail}"
        made.append(
            Result(stage, verdict, because, "attribute", None, "", typed, 1, 1, rule="", limit=passes, readings=(one,))
        )
    return Characteristic(name, label, component, datum, tuple(made))


def commutator() -> tuple[Characteristic, ...]:
    """The commutator's rows."""
    size = limit("42.5 mm min", "mm", new="45", low="42.5", count=4)
    trued = limit("0.05 mm max", "mm", new="0", high="0.05", count=1)
    depth = limit("0.2 mm min", "mm", new="0.8", low="0.2", count=6, at_limit="fail")
    before, after = "A1=43.12 A2=43.06 B1=43.15 B2=43.10", "A1=42.88 A2=42.88 B1=42.89 B2=42.88"
    return (
        Characteristic(
            "commutator-diameter", "commutator diameter", "commutator",
            "over the bars, clear of the brush track's edge; two stations, two directions at 90 degrees",
            (
                result("as-found", "in", "43.06 mm at A2, 0.56 above the 42.5 minimum", "43.06", "mm",
                       limit=size, readings=readings("mm", before, gauge="M-2"), worst_at="A2",
                       probability=0.99999, wear_used=0.776, uncertainty="0.008",
                       wear_rule=rule(45, 42.5, None, (43.12, 43.06, 43.15, 43.10), 43.06, guard=0.01)),
                result("as-left", "in", "42.88 mm at A1, 0.38 above the 42.5 minimum", "42.88", "mm",
                       limit=size, readings=readings("mm", after, gauge="M-2", stage_hour=14), worst_at="A1",
                       probability=0.99999, wear_used=0.848, uncertainty="0.008",
                       wear_rule=rule(45, 42.5, None, (42.88, 42.88, 42.89, 42.88), 42.88,
                                      (43.12, 43.06, 43.15, 43.10), guard=0.01)),
            ),
        ),
        Characteristic(
            "commutator-runout", "commutator runout (TIR)", "commutator", "from the journals, in V-blocks",
            (
                result("as-found", "out", "0.12 mm, 0.07 over the 0.05 maximum", "0.12", "mm", limit=trued,
                       readings=readings("mm", "0.12", gauge="D-1"), statistic="largest", probability=0.0,
                       wear_used=2.4, uncertainty="0.012",
                       wear_rule=rule(0, None, 0.05, (0.12,), 0.12, guard=0.01)),
                result("as-left", "in", "0.02 mm, 0.03 under the 0.05 maximum", "0.02", "mm", limit=trued,
                       readings=readings("mm", "0.02", gauge="D-1", stage_hour=14), statistic="largest",
                       probability=0.99999, wear_used=0.4, uncertainty="0.012",
                       remarks=("the gauge resolves 0.01 mm, coarser than a tenth of the tolerance",),
                       wear_rule=rule(0, None, 0.05, (0.02,), 0.02, (0.12,), guard=0.01)),
            ),
        ),
        Characteristic(
            "undercut-depth", "undercut depth", "commutator", "from the bar surface to the mica, six slots round",
            (
                result("as-found", "out", "slot 3 is 0.15 mm, 0.05 under the 0.2 minimum", "0.15", "mm", limit=depth,
                       readings=readings("mm", "0.30 0.25 0.15 0.20 0.35 0.30", gauge="DG-1"), worst_at="3",
                       wear_used=1.083, wear_rule=rule(0.8, 0.2, None, (0.3, 0.25, 0.15, 0.2, 0.35, 0.3), 0.15)),
                result("as-left", "in", "slot 5 is 0.60 mm, 0.4 above the 0.2 minimum", "0.60", "mm", limit=depth,
                       readings=readings("mm", "0.65 0.70 0.65 0.65 0.60 0.70", gauge="DG-1", stage_hour=14),
                       worst_at="5", wear_used=0.333,
                       wear_rule=rule(0.8, 0.2, None, (0.65, 0.7, 0.65, 0.65, 0.6, 0.7), 0.6, (0.3, 0.25, 0.15, 0.2))),
            ),
        ),
    )  # fmt: skip


def armature() -> tuple[Characteristic, ...]:
    """The armature's tests."""
    return (
        attribute("growler-short", "growler short test", "armature", "steel strip over every slot, one full turn",
                  ("as-found", "pass", "in"), ("as-left", "pass", "in")),
        attribute("armature-ground", "armature ground test", "armature", "lamp, all bars to the shaft",
                  ("as-found", "fail bars 4-5", "out"), ("as-left", "pass", "in")),
    )  # fmt: skip


def brushes() -> tuple[Characteristic, ...]:
    """Brushes and springs: a concession, a correction, other units, a reading that was not taken."""
    length = limit("9.5 mm min", "mm", new="14", low="9.5", count=4)
    force = limit("17.8 to 26.7 N", "N", low="17.8", high="26.7", count=4)
    old = readings("mm", "10.1 9.8 10.4 9.2", gauge="C-4")
    mended = replace(
        old[1], typed="9,8 mm", replaced=(Replaced("98", "jt", "2026-03-02T09:02:10Z", "decimal slipped"),)
    )
    springs = tuple(
        Reading(str(n), typed, "number", value, "ozf", shown, "N", "", "S-1", f"2026-03-02T09:4{n}:00Z", "jt")
        for n, (typed, value, shown) in enumerate(
            (("72 ozf", "72", "20.02"), ("70 ozf", "70", "19.46"), ("64.5 ozf", "64.5", "17.93")), 1
        )
    )
    skipped = Reading("4", "not measured spring broken", "not measured", None, "", "not measured", "", "spring broken",
                      "", "2026-03-02T09:44:00Z", "jt", "replaced unmeasured")  # fmt: skip
    return (
        Characteristic(
            "brush-length", "brush length, overall", "brushes", "along the longest edge, pigtail side",
            (
                result("as-found", "out", "brush 4 is 9.2 mm, 0.3 under the 9.5 minimum", "9.2", "mm", limit=length,
                       readings=(old[0], mended, *old[2:]), worst_at="4", probability=0.0002, wear_used=1.067,
                       uncertainty="0.05", wear_rule=rule(14, 9.5, None, (10.1, 9.8, 10.4, 9.2), 9.2, guard=0.05)),
                result("as-left", "in", "brush 1 is 14.0 mm, 4.5 above the 9.5 minimum", "14.0", "mm", limit=length,
                       readings=readings("mm", "14.0 14.0 14.1 14.0", gauge="C-4", stage_hour=14), worst_at="1",
                       probability=0.99999, wear_used=0.0, uncertainty="0.05",
                       wear_rule=rule(14, 9.5, None, (14, 14, 14.1, 14), 14, (10.1, 9.8, 10.4, 9.2), guard=0.05)),
            ),
        ),
        Characteristic(
            "brush-spring-force", "brush spring force", "brushes", "at lift-off, brush new, pull in line with the holder",
            (
                result("as-found", "in doubt", "brush 3 is 17.93 N, 0.13 above the 17.8 minimum and within the guard band of 0.25",
                       "17.93", "N", limit=force, readings=(*springs, skipped), worst_at="3", count=3, expected=4,
                       probability=0.8049, uncertainty="0.30",
                       wear_rule=rule(22, 17.8, 26.7, (20.02, 19.46, 17.93), 17.93, guard=0.25)),
                result("as-left", "in", "brush 2 is 21.8 N, 4.0 above the 17.8 minimum", "21.8", "N", limit=force,
                       readings=readings("N", "22.1 21.8 22.4 22.0", gauge="S-1", stage_hour=15), worst_at="2",
                       probability=0.99999, uncertainty="0.30",
                       wear_rule=rule(22, 17.8, 26.7, (22.1, 21.8, 22.4, 22.0), 21.8, (20.02, 19.46, 17.93), guard=0.25)),
            ),
        ),
    )  # fmt: skip


def bearings() -> tuple[Characteristic, ...]:
    """A bore, its journal and the clearance that is derived from them, in inches; and end play without a limit."""
    bore = limit("0.8780 in max", "in", new="0.8740", high="0.8780", count=2)
    journal = limit("0.8670 in min", "in", new="0.8720", low="0.8670", count=2)
    gap = limit("0.0080 in max", "in", new="0.0020", high="0.0080")
    found_gap = "0.0110 in, 0.003 over the 0.008 maximum"
    return (
        Characteristic(
            "center-bore", "center bearing bore", "bearings", "two depths, two directions",
            (
                result("as-found", "in", "0.8780 in equals the 0.878 maximum and passes", "0.8780", "in", limit=bore,
                       readings=readings("in", "0.8778 0.8780", gauge="B-1"), statistic="largest", wear_used=1.0,
                       wear_rule=rule(0.874, None, 0.878, (0.8778, 0.878), 0.878)),
                result("as-left", "in", "0.8745 in, 0.0035 under the 0.878 maximum", "0.8745", "in", limit=bore,
                       readings=readings("in", "0.8744 0.8745", gauge="B-1"), statistic="largest", wear_used=0.125,
                       wear_rule=rule(0.874, None, 0.878, (0.8744, 0.8745), 0.8745, (0.8778, 0.878))),
            ),
        ),
        Characteristic(
            "center-journal", "center journal", "bearings", "two directions at 90 degrees",
            (
                result("as-found", "in", "0.8670 in equals the 0.867 minimum and passes", "0.8670", "in", limit=journal,
                       readings=readings("in", "0.8672 0.8670", gauge="M-3"), wear_used=1.0,
                       wear_rule=rule(0.872, 0.867, None, (0.8672, 0.867), 0.867)),
                result("as-left", "in", "0.8670 in equals the 0.867 minimum and passes", "0.8670", "in", limit=journal,
                       readings=readings("in", "0.8672 0.8670", gauge="M-3"), wear_used=1.0,
                       wear_rule=rule(0.872, 0.867, None, (0.8672, 0.867), 0.867)),
            ),
        ),
        Characteristic(
            "center-clearance", "center running clearance", "bearings", "",
            (
                result("as-found", "out", found_gap, "0.0110", "in", limit=gap, statistic="largest", wear_used=1.5,
                       expected=2, count=2, wear_rule=rule(0.002, None, 0.008, (), 0.011)),
                result("as-left", "in", "0.0075 in, 0.0005 under the 0.008 maximum", "0.0075", "in", limit=gap,
                       statistic="largest", wear_used=0.9167, expected=2, count=2,
                       wear_rule=rule(0.002, None, 0.008, (), 0.0075, (0.011,))),
            ),
            derived_from="center bearing bore and center journal",
        ),
        Characteristic(
            "end-play", "armature end play", "bearings", "push and pull, unit assembled",
            (
                Result("as-found", "not measured", "not measured: came in stripped", "each", None, "mm", "", 0, 1),
                result("as-left", "no limit", "0.25 mm; no limit is entered", "0.25", "mm",
                       readings=readings("mm", "0.25", gauge="D-1"), rule=""),
            ),
        ),
    )  # fmt: skip


def running() -> tuple[Characteristic, ...]:
    """The running tests."""
    amps = limit("90 A max", "A", high="90")
    speed = limit("7000 rpm min", "rpm", low="7000")
    volts = limit("23 V", "V", low="22.54", high="23.46")
    rows = (
        ("no-load-voltage", "no-load voltage", "V", volts, "23.1", "in", "23.1 V, within 2 % of the 23 V wanted"),
        ("no-load-current", "no-load current", "A", amps, "71", "in", "71 A, 19 under the 90 maximum"),
        ("no-load-speed", "no-load speed", "rpm", speed, "7640", "in", "7640 rpm, 640 above the 7000 minimum"),
    )
    return tuple(
        Characteristic(
            name, label, "running tests", "clamped, 30 s on, 2 min off",
            (result("as-left", verdict, because, shown, unit, limit=wanted, statistic="each",
                    readings=readings(unit, shown, gauge="T-1", stage_hour=16)),),
            is_running=True,
        )
        for name, label, unit, wanted, shown, verdict, because in rows
    )  # fmt: skip


def gauges() -> tuple[Gauge, ...]:
    """The gauges of the sample."""
    return (
        Gauge("M-2", "outside micrometer", "mm", "0.01", "0.006", "2", "2026-01-14", "2027-01-14"),
        Gauge("D-1", "dial indicator", "mm", "0.01", "0.010", "2", "2025-11-20", "2026-11-20"),
        Gauge("DG-1", "depth gauge", "mm", "0.05"),
        Gauge("C-4", "caliper", "mm", "0.1", "0.04", "2", "2024-12-01", "2025-12-01", overdue=True),
        Gauge("S-1", "spring scale", "ozf", "0.5", "1.0", "2", "2025-10-02", "2026-10-02"),
        Gauge("B-1", "bore gauge", "in", "0.0001", "0.0001", "2", "2026-02-01", "2027-02-01"),
        Gauge("M-3", "outside micrometer", "in", "0.0001", "0.0001", "2", "2026-02-01", "2027-02-01"),
        Gauge("T-1", "running test bench", "V"),
    )


def plan() -> tuple[PlanLine, ...]:
    """The plan of the sample and what came of it."""
    return (
        PlanLine(
            "commutator", "turn", "runout 0.12 mm is over 0.05; 42.94 stays above 42.5 mm", "D' = D - r - 2g - p",
            (Predicted("diameter", "42.92", "mm"), Predicted("undercut, worst slot, any shape", "0.08", "mm")),
            "done", "turned to 42.88", "jt", "2026-03-02T12:10:00Z",
        ),
        PlanLine("commutator", "re-undercut", "the worst slot falls under 0.2 mm", outcome="done", by="jt",
                 at="2026-03-02T12:40:00Z"),
        PlanLine("bearings", "replace", "the center fit is 0.0110 in loose, over 0.0080", outcome="done", by="jt",
                 at="2026-03-02T13:05:00Z"),
        PlanLine("drive", "replace", "teeth are chipped", outcome="declined", note="the customer keeps the old one"),
    )  # fmt: skip


def released() -> Report:
    """A released starter with everything that a report can carry."""
    return Report(
        number="WL-2026-0147", issued="2026-03-04T15:20:00Z",
        shop=Shop("Harrow Lane Armature Works", "14 Harrow Lane\nEast Dock"),
        tag="1107", outcome="released",
        unit=Unit("HS-2409", "0042-B", "starter", "24", "clockwise", "drive end", 11, 27, 4),
        received="2026-02-27T08:15:00Z", customer="North Quay Ferries", application="harbor launch, port engine",
        hours="4120", starts="9800", complaint="Cranks slowly when hot; smelled burnt last week.", earlier_tag="0873",
        measured_first="2026-03-02T09:01:00Z", measured_last="2026-03-04T14:50:00Z", ended="2026-03-04T15:20:00Z",
        revision=2,
        decision=Decision("guarded-1.65u", "guarded acceptance with w = 1.65 u (ISO 14253-1:2017); where no uncertainty is"
                          " known, simple acceptance"),
        characteristics=(*commutator(), *armature(), *brushes(), *bearings(), *running()),
        diagnosis=("Rated current and speed at 23.1 V: normal.",),
        findings=(Finding("commutator", "burnt bars", "overheating", "long cranking", "bars 4 and 5 darkest"),),
        plan=plan(),
        fitted=(
            Fitted("BR-204-4", "Ostmark", "brush set", "L2291", "Dockside Supply", "all four", "1", "jt",
                   "2026-03-02T13:20:00Z"),
            Fitted("BU-88", "", "bushing, center", "", "Dockside Supply", "center", "1", "jt", "2026-03-02T13:05:00Z"),
        ),
        concessions=(
            Concession("end-play", "no limit is entered for end play", "0.25 mm is usual for this frame; the owner agrees",
                       INSPECTOR, "2026-03-04T15:05:00Z"),
        ),
        gauges=gauges(), measured_by=(BENCH,), assembled_by=BENCH,
        signature=Signature(INSPECTOR, "2026-03-04T15:20:00Z"),
        cautions=(
            "No-load test: clamp the frame, guard the pinion, at most 30 s on. Follow the maker's manual and local rules.",
            "Nothing in this report says that the unit is electrically safe; have electrical work done by those licensed.",
        ),
        audit_head=HEAD,
    )  # fmt: skip


def amended() -> Report:
    """The same job, reported anew under a later number."""
    changed = ("end play as left: 0.25 mm was 0.2 mm", "serial: 0042-B was 0042")
    return replace(
        released(), number="WL-2026-0151", issued="2026-03-09T10:00:00Z",
        amends=Amendment("WL-2026-0147", changed, "the serial was misread", INSPECTOR),
    )  # fmt: skip


def draft() -> Report:
    """An open job with nothing but a take-in and three readings."""
    return Report(
        number="", issued="2026-03-02T09:40:00Z", shop=Shop("Harrow Lane Armature Works"), tag="1107", outcome="open",
        unit=Unit("HS-2409", "0042-B", "starter"), received="2026-02-27T08:15:00Z", draft=True, paper="letter",
        characteristics=commutator()[1:2], audit_head=HEAD,
    )  # fmt: skip


def long(rows: int = 60) -> Report:
    """A report of `rows` characteristics, each measured at both stages."""
    pool = [*commutator(), *brushes(), *bearings()]
    made = [replace(pool[n % len(pool)], name=f"{pool[n % len(pool)].name}-{n}") for n in range(rows)]
    made.sort(key=lambda one: one.component)
    return replace(released(), characteristics=(*made, *running()))


HOSTILE = (
    "[/] #let x = 1 *b* _i_ $y$ `c` \\n </a> & %s {0} \x07\x00\x1b[31m \u202eabc \u05e9\u05dc\u05d5\u05dd"
    " \u0645\u0631\u062d\u0628\u0627 \U0001f527\U0001f44d\U0001f3fd \u4e2d\u6587 "
)


def hostile(text: str = HOSTILE, size: int = 10_000) -> Report:
    """A report with `text`, repeated up to `size` characters, in every field that takes text."""
    whole = (text * (size // len(text) + 1))[:size]
    made: Report = _filled(released(), whole)
    return made


_KEPT = {"issued", "outcome", "paper", "verdict", "stage", "mark", "at_limit", "rule"}


def _filled(value: Any, text: str) -> Any:
    """The same dataclass with every string replaced but those that come from a fixed list."""
    if isinstance(value, tuple):
        return tuple(_filled(item, text) for item in value)
    if not is_dataclass(value) or isinstance(value, type):
        return text if isinstance(value, str) else value
    changed = {f.name: _filled(getattr(value, f.name), text) for f in fields(value) if f.name not in _KEPT}
    return replace(value, **changed)
