"""Models and limit sheets of the invented shop: sizes that agree with each other, from no real manual."""

from __future__ import annotations

from dataclasses import dataclass


@dataclass(frozen=True)
class Model:
    """A model; `size` scales its sizes, `inch` says which units its sheet is in."""

    number: str
    kind: str
    volts: int
    rotation: str
    teeth: int | None = None
    bars: int | None = None
    poles: int | None = None
    size: float = 1.0
    inch: bool = False
    limits: bool = True
    may_turn: bool = True
    brushes: int = 4
    note: str = ""


MODELS = (
    Model("KS-110L", "starter", 12, "ccw", 9, 25, 4, 0.85, note="twin of KS-110R, other rotation"),
    Model("KS-110R", "starter", 12, "cw", 9, 25, 4, 0.85, note="twin of KS-110L, other rotation"),
    Model("KS-240", "starter", 24, "cw", 11, 29, 4, 1.1),
    Model("KS-245", "starter", 24, "cw", 11, 29, 4, 1.1, note="replaces KS-240"),
    Model("KS-310", "starter", 12, "cw", 10, 23, 4, 0.9, inch=True),
    Model("KS-350", "starter", 24, "cw", 12, 33, 4, 1.25, limits=False, note="no limits found yet"),
    Model(
        "KS-400",
        "starter",
        12,
        "cw",
        9,
        28,
        4,
        0.7,
        may_turn=False,
        note="planetary, permanent magnets; commutator not to be turned",
    ),
    Model("KS-520", "starter", 24, "cw", 11, 33, 6, 1.4, inch=True, brushes=8),
    Model("KG-120", "generator", 12, "cw", None, 28, 2, 0.9, brushes=2),
    Model("KG-240", "generator", 24, "cw", None, 36, 4, 1.3, inch=True, brushes=4),
    Model("KA-145", "alternator", 14, "cw", None, None, 12, 0.8, brushes=2),
    Model("KA-170", "alternator", 14, "cw", None, None, 12, 0.9, brushes=2),
    Model("KA-280", "alternator", 28, "cw", None, None, 12, 1.1, brushes=2),
    Model(
        "KA-285",
        "alternator",
        28,
        "ccw",
        None,
        None,
        12,
        1.1,
        inch=True,
        brushes=2,
        note="other rotation, fan to match",
    ),
)


@dataclass(frozen=True)
class Line:
    """One line of a sheet in millimetres, newtons ...; `wear` is how far it has typically gone as found, as a share of new to limit."""

    characteristic: str
    unit: str
    new: float | None
    low: float | None
    high: float | None
    places: int
    gauge: str
    wear: float = 0.45
    spread: float = 0.02
    stage: str = "both"
    count: int | None = None
    lengths: bool = False


def sheet(model: Model) -> tuple[Line, ...]:
    """The sheet of a model, whether the shop has entered it or not."""
    return {"starter": _starter, "generator": _generator, "alternator": _alternator}[model.kind](model)


def _brushes(m: Model) -> tuple[Line, ...]:
    s = m.size
    return (
        Line(
            "brush-length",
            "mm",
            round(17 * s, 1),
            round(10 * s, 1),
            None,
            2,
            "CAL-2",
            0.6,
            0.05,
            count=m.brushes,
            lengths=True,
        ),
        Line(
            "brush-spring-force", "N", round(18 * s, 1), round(12 * s, 1), None, 1, "SPR-1", 0.3, 0.04, count=m.brushes
        ),
    )


def _commutator(m: Model, new: float) -> tuple[Line, ...]:
    return (
        Line("growler-short", "", None, None, None, 0, "", stage="both"),
        Line("armature-ground", "", None, None, None, 0, "", stage="both"),
        Line("shaft-runout", "mm", None, None, 0.08, 2, "DI-1", 0.3, 0.2, lengths=True),
        Line(
            "commutator-diameter", "mm", new, round(new - 2.0, 2), None, 2, "MIC-50", 0.45, 0.01, count=4, lengths=True
        ),
        Line("commutator-runout", "mm", None, None, 0.05, 3, "DI-2", 0.9, 0.25, lengths=True),
        Line("undercut-depth", "mm", 0.7, 0.3, None, 2, "DEP-1", 0.6, 0.06, count=4, lengths=True),
    )


def _bearing(place: str, journal: float) -> tuple[Line, ...]:
    return (
        Line(
            f"{place}-bore",
            "mm",
            round(journal + 0.03, 3),
            None,
            round(journal + 0.15, 3),
            3,
            "BOR-1",
            0.4,
            0.05,
            count=4,
            lengths=True,
        ),
        Line(
            f"{place}-journal",
            "mm",
            journal,
            round(journal - 0.07, 3),
            None,
            3,
            "MIC-25",
            0.3,
            0.05,
            count=4,
            lengths=True,
        ),
        Line(f"{place}-clearance", "mm", None, 0.02, 0.2, 3, "", lengths=True),
    )


def _starter(m: Model) -> tuple[Line, ...]:
    s, half = m.size, m.volts / 12
    return (
        *_commutator(m, round(38 * s, 1)),
        *_brushes(m),
        Line("field-ground", "", None, None, None, 0, ""),
        *_bearing("drive-end", round(14 * s, 2)),
        *_bearing("commutator-end", round(11 * s, 2)),
        Line("end-play", "mm", None, 0.1, 0.6, 2, "DI-1", 0.5, 0.2, lengths=True),
        Line("clutch-free", "", None, None, None, 0, ""),
        Line("pinion-clearance-to-stop", "mm", None, 0.5, 3.0, 2, "FEE-1", 0.5, 0.2, lengths=True),
        Line("solenoid-hold-in-current", "A", None, round(8 / half, 1), round(14 / half, 1), 1, "AMM-2", 0.5, 0.15),
        Line("insulation-resistance", "Mohm", None, 1.0, None, 1, "INS-1", 0.4, 0.3),
        Line("no-load-voltage", "V", None, m.volts * 0.92, m.volts * 1.0, 1, "VOL-1", 0.5, 0.1, stage="as-left"),
        Line("no-load-current", "A", None, None, round(90 * s / half), 0, "AMM-1", 0.8, 0.06, stage="as-left"),
        Line("no-load-speed", "rpm", None, round(5200 / s), None, 0, "TAC-1", 0.8, 0.05, stage="as-left"),
    )


def _generator(m: Model) -> tuple[Line, ...]:
    s, half = m.size, m.volts / 12
    return (
        *_commutator(m, round(42 * s, 1)),
        *_brushes(m),
        Line("field-ground", "", None, None, None, 0, ""),
        Line("field-current", "A", None, round(1.4 / half, 2), round(2.0 / half, 2), 2, "AMM-2", 0.5, 0.1),
        Line("bearing-feel", "", None, None, None, 0, ""),
        Line("insulation-resistance", "Mohm", None, 1.0, None, 1, "INS-1", 0.4, 0.3),
        Line(
            "generator-output-current", "A", None, round(22 * s / half, 1), None, 1, "AMM-1", 0.7, 0.05, stage="as-left"
        ),
    )


def _alternator(m: Model) -> tuple[Line, ...]:
    s, half = m.size, m.volts / 14
    return (
        Line(
            "slip-ring-diameter",
            "mm",
            round(22 * s, 2),
            round(21.2 * s, 2),
            None,
            2,
            "MIC-25",
            0.4,
            0.02,
            count=4,
            lengths=True,
        ),
        Line("slip-ring-runout", "mm", None, None, 0.05, 3, "DI-2", 0.5, 0.25, count=2, lengths=True),
        Line("rotor-resistance", "ohm", None, round(2.6 * half, 1), round(3.4 * half, 1), 2, "OHM-1", 0.5, 0.1),
        Line("rotor-ground", "", None, None, None, 0, "", count=2),
        Line("stator-ground", "", None, None, None, 0, "", count=3),
        Line("diode", "", None, None, None, 0, "", count=6),
        *_brushes(m)[:1],
        Line("bearing-feel", "", None, None, None, 0, ""),
        Line("insulation-resistance", "Mohm", None, 1.0, None, 1, "INS-1", 0.4, 0.3),
        Line(
            "regulated-voltage",
            "V",
            None,
            round(m.volts * 0.98, 1),
            round(m.volts * 1.03, 1),
            2,
            "VOL-1",
            0.5,
            0.15,
            stage="as-left",
        ),
        Line(
            "alternator-output-current", "A", None, round(80 * s / half), None, 0, "AMM-1", 0.7, 0.05, stage="as-left"
        ),
    )


TESTS = {
    "growler-short",
    "armature-ground",
    "field-ground",
    "clutch-free",
    "bearing-feel",
    "rotor-ground",
    "stator-ground",
    "diode",
}
DERIVED = {"drive-end-clearance", "commutator-end-clearance"}
GAUGES = (
    ("CAL-1", "caliper", "in", "0.0005", "0.001", "2", "2026-03-10", "2027-03-10", "inch sheets"),
    ("CAL-2", "caliper", "mm", "0.01", "0.03", "2", "2026-03-10", "2027-03-10", "bench 2"),
    ("MIC-25", "outside micrometer", "mm", "0.001", "0.002", "2", "2026-02-02", "2027-02-02", ""),
    (
        "MIC-50",
        "outside micrometer, disc anvils",
        "mm",
        "0.01",
        "0.006",
        "2",
        "2026-02-02",
        "2027-02-02",
        "commutators",
    ),
    ("MIC-1", "outside micrometer", "in", "0.0001", "0.0002", "2", "2026-02-02", "2027-02-02", ""),
    ("DI-1", "dial indicator", "mm", "0.01", "0.008", "2", "2026-05-20", "2027-05-20", ""),
    ("DI-2", "test indicator", "mm", "0.002", "0.003", "2", "2025-09-15", "2026-09-15", "overdue"),
    ("DEP-1", "depth micrometer with blade", "mm", "0.01", "0.02", "2", "2026-02-02", "2027-02-02", ""),
    ("BOR-1", "bore gauge", "mm", "0.001", "0.004", "2", "2026-02-02", "2027-02-02", ""),
    ("FEE-1", "feelers", "mm", "0.05", "", "", "", "", ""),
    (
        "SPR-1",
        "spring scale",
        "N",
        "0.1",
        "0.3",
        "2",
        "2026-06-01",
        "2027-06-01",
        "fell; found 0.9 N high on 2026-11-20, out of use",
    ),
    ("DI-3", "dial indicator", "in", "0.0005", "0.0004", "2", "2026-05-20", "2027-05-20", "inch sheets"),
    ("DI-4", "test indicator", "in", "0.0001", "0.0001", "2", "2026-05-20", "2027-05-20", "inch sheets"),
    ("DEP-2", "depth micrometer with blade", "in", "0.0005", "0.0008", "2", "2026-02-02", "2027-02-02", "inch sheets"),
    ("BOR-2", "bore gauge", "in", "0.0001", "0.0002", "2", "2026-02-02", "2027-02-02", "inch sheets"),
    ("AMM-2", "ammeter", "A", "0.01", "0.03", "2", "2026-01-15", "2027-01-15", "windings"),
    ("VOL-2", "millivoltmeter", "mV", "0.1", "0.3", "2", "2026-01-15", "2027-01-15", "bar to bar"),
    ("AMM-1", "ammeter and shunt", "A", "1", "1", "2", "2026-01-15", "2027-01-15", ""),
    ("VOL-1", "voltmeter", "V", "0.01", "0.03", "2", "2026-01-15", "2027-01-15", ""),
    ("TAC-1", "tachometer", "rpm", "1", "15", "2", "2026-01-15", "2027-01-15", ""),
    ("INS-1", "insulation tester", "Mohm", "0.1", "0.2", "2", "2026-01-15", "2027-01-15", ""),
    ("OHM-1", "ohmmeter", "ohm", "0.01", "0.03", "2", "2026-01-15", "2027-01-15", ""),
)
INCH_GAUGES = {
    "CAL-2": "CAL-1", "MIC-25": "MIC-1", "MIC-50": "MIC-1", "DI-1": "DI-3", "DI-2": "DI-4", "DEP-1": "DEP-2", "BOR-1": "BOR-2",
    "FEE-1": "CAL-1",
}  # fmt: skip
STEPS = {gauge: float(resolution) for gauge, _, _, resolution, *_ in GAUGES}
