"""The part lists of the invented shop: what goes on its models, and how numbers stand to each other.

Planted: a chain of four supersessions, a loop, two lists that contradict each other, a substitute in the middle of a chain,
an overhaul kit, drives of twins whose numbers differ by one letter, a drive that is known to crack, a customer's own numbers
for whole units, inch brushes and bushings
a hair apart from metric ones.
"""

from __future__ import annotations

from collections.abc import Iterable
from itertools import pairwise

from tests.demo_shop.sheets import MODELS, Model, sheet

OWN, OTHER = "Lorne & Hobb", "Tamsin Parts"
LIST_21, LIST_25, TAMSIN, BENCH = (
    "Lorne & Hobb list 2021",
    "Lorne & Hobb list 2025",
    "Tamsin cross list 4",
    "own bench book",
)
PITCH = {9: "module 2.5", 10: "8/10", 11: "module 3", 12: "module 3"}
Row = tuple[object, ...]


def suffix(model: Model) -> str:
    """What the numbers of a model's parts end in."""
    mark, _, rest = model.number.partition("-")
    return rest if mark == "KS" else f"{mark[-1]}{rest}"


def _starters() -> tuple[Model, ...]:
    return tuple(model for model in MODELS if model.kind == "starter")


def numbers() -> Iterable[Row]:
    """number, kind, maker, description, status."""
    for m in MODELS:
        s = suffix(m)
        yield (f"BS-{s}", "brush set", OWN, f"{m.brushes} brushes for {m.number}", "superseded" if s == "240" else "")
        if m.kind == "alternator":
            yield (f"RG-{s}", "regulator", OWN, f"{m.volts} V", "")
        else:
            yield (f"CB-{s}", "bushing", OWN, f"commutator end of {m.number}", "")
            yield (f"DB-{s}", "bushing", OWN, f"drive end of {m.number}", "")
        if m.kind == "starter":
            yield (f"DR-{s}", "drive", OWN, f"{m.teeth} teeth, {m.rotation}", "")
            yield (f"CT-{s}", "contact set", OWN, f"solenoid contacts for {m.number}", "")
            yield (f"SO-{s}", "solenoid", OWN, f"{m.volts} V", "")
    for place in range(1, 5):
        yield (f"BS-90{place}", "brush set", OWN, "older edition", "superseded")
    yield from (
        ("77-0310", "brush set", OTHER, "", ""), ("77-0110", "brush set", OTHER, "", ""), ("BX-31", "brush set", OTHER, "longer lead", ""),
        ("BX-32", "brush set", OTHER, "", ""), ("5-1140", "drive", OTHER, "", ""), ("KT-110R", "kit", OWN, "overhaul kit for KS-110R", ""),
        ("SL-1", "solenoid", OTHER, "", ""), ("SL-2", "solenoid", OTHER, "", ""), ("SL-3", "solenoid", OTHER, "", ""),
        ("BZ-240", "bushing", OTHER, "drive end", ""),
        ("BX-50", "brush set", OTHER, "metric", ""), ("BX-51", "brush set", OTHER, "inch: 1/2 by 1/4", ""),
        ("BZ-125", "bushing", OTHER, "metric, porous bronze, not to be reamed", ""),
        ("BZ-126", "bushing", OTHER, "inch, porous bronze, not to be reamed", ""),
        ("HD-4001-7", "starter", "", "Hallow Dairy's own number", ""),
        ("HD-4002-5", "starter", "", "Hallow Dairy's own number", ""), ("MQ 24 0931", "starter", "", "on the plate of quarry loaders", ""),
    )  # fmt: skip


def relations() -> Iterable[Row]:
    """from_number, relation, from_maker, to_number, to_maker, caveat, source, dated."""
    chain = ["BS-901", "BS-902", "BS-903", "BS-904", "BS-310"]
    for old, new in pairwise(chain):
        yield (old, "superseded-by", OWN, new, OWN, "", LIST_21, "2021-03-01")
    yield ("BS-240", "superseded-by", OWN, "BS-245", OWN, "", LIST_25, "2025-02-15")
    yield ("BS-310", "same-as", OWN, "77-0310", OTHER, "", TAMSIN, "2023-06-01")
    yield ("BS-110R", "same-as", OWN, "77-0110", OTHER, "", TAMSIN, "2023-06-01")
    yield ("BS-110L", "interchanges-with", OWN, "BS-110R", OWN, "", LIST_25, "2025-02-15")
    yield (
        "BS-903",
        "substitute",
        OWN,
        "BX-31",
        OTHER,
        "lead is 12 mm longer: route it clear of the frame",
        TAMSIN,
        "2023-06-01",
    )
    yield ("BX-31", "superseded-by", OTHER, "BX-32", OTHER, "", TAMSIN, "2023-06-01")
    for old, new, source, dated in (
        ("SL-1", "SL-2", TAMSIN, "2019-06-01"), ("SL-2", "SL-3", TAMSIN, "2021-06-01"), ("SL-3", "SL-1", "Tamsin cross list 5", "2025-06-01"),
    ):  # fmt: skip
        yield (old, "superseded-by", OTHER, new, OTHER, "", source, dated)
    yield ("DB-240", "superseded-by", OWN, "BZ-240", OTHER, "", TAMSIN, "2023-06-01")
    yield ("BZ-240", "superseded-by", OTHER, "DB-240", OWN, "", LIST_25, "2025-02-15")
    yield ("DR-110R", "interchanges-with", OWN, "5-1140", OTHER, "", TAMSIN, "2023-06-01")
    yield ("5-1140", "do-not-use", OTHER, "", "", "cracks at the neck within weeks", BENCH, "2025-09-20")
    for held in ("BS-110R", "CB-110R", "DB-110R", "CT-110R"):
        yield ("KT-110R", "holds", OWN, held, OWN, "", LIST_25, "2025-02-15")
    yield ("KS-240", "superseded-by", "", "KS-245", "", "", LIST_25, "2025-02-15")
    yield ("HD-4001-7", "same-as", "", "KS-110R", "", "", "Hallow Dairy, by letter", "2024-01-10")
    yield ("HD-4002-5", "same-as", "", "KS-110L", "", "", "Hallow Dairy, by letter", "2024-01-10")
    yield ("MQ 24 0931", "same-as", "", "KS-240", "", "", BENCH, "2025-04-02")


def fits() -> Iterable[Row]:
    """number, model, maker, position, quantity, source."""
    for m in MODELS:
        s = suffix(m)
        yield (f"BS-{s}", m.number, OWN, "brushes", 1, LIST_25)
        if m.kind == "alternator":
            yield (f"RG-{s}", m.number, OWN, "regulator", 1, LIST_25)
        else:
            yield (f"CB-{s}", m.number, OWN, "commutator end", 1, LIST_25)
            yield (f"DB-{s}", m.number, OWN, "drive end", 1, LIST_25)
        if m.kind == "starter":
            yield (f"DR-{s}", m.number, OWN, "drive", 1, LIST_25)
            yield (f"CT-{s}", m.number, OWN, "solenoid contacts", 1, LIST_25)
            yield (f"SO-{s}", m.number, OWN, "solenoid", 1, LIST_25)


def sizes() -> Iterable[Row]:
    """number, name, value, unit, maker."""
    for m in MODELS:
        s, inch = suffix(m), m.inch
        lines = {line.characteristic: line.new for line in sheet(m)}
        width, thickness = round(16 * m.size), round(7 * m.size)
        for name, mm in (("width", width), ("thickness", thickness), ("length", lines["brush-length"])):
            yield (f"BS-{s}", name, *_size(float(mm or 0), inch), OWN)
        for place, number in (("commutator-end", f"CB-{s}"), ("drive-end", f"DB-{s}")):
            bore = lines.get(f"{place}-bore")
            if bore is not None and m.kind != "alternator":
                yield (number, "id", *_size(bore, inch), OWN)
                yield (number, "od", *_size(bore + 4.05, inch), OWN)
    for name, mm in (("width", 14.0), ("thickness", 6.0), ("length", 15.5)):
        yield ("BX-31", name, f"{mm:g}", "mm", OTHER)
    for name, metric, inch_size in (("width", "12.5", "0.5"), ("thickness", "6.3", "0.25"), ("length", "16", "0.625")):
        yield ("BX-50", name, metric, "mm", OTHER)
        yield ("BX-51", name, inch_size, "in", OTHER)
    for name, metric, inch_size in (("id", "12.5", "0.5"), ("od", "16", "0.625")):
        yield ("BZ-125", name, metric, "mm", OTHER)
        yield ("BZ-126", name, inch_size, "in", OTHER)


def _size(mm: float, inch: bool) -> tuple[str, str]:
    return (f"{mm / 25.4:.4f}", "in") if inch else (f"{mm:.3f}".rstrip("0").rstrip("."), "mm")


def attributes() -> Iterable[Row]:
    """name, value, number, maker, model."""
    for m in _starters():
        s, pitch = suffix(m), PITCH[m.teeth or 9]
        yield ("pitch", pitch, "", "", m.number)
        yield ("terminals", "two studs M8" if m.volts == 12 else "two studs M10", "", "", m.number)
        other_end = {"cw": "ccw from commutator end", "ccw": "cw from commutator end"}[m.rotation]
        yield ("rotation", other_end if s == "310" else f"{m.rotation} from drive end", f"DR-{s}", OWN, "")
        yield ("teeth", m.teeth, f"DR-{s}", OWN, "")
        yield ("pitch", pitch, f"DR-{s}", OWN, "")
        yield ("volts", m.volts, f"SO-{s}", OWN, "")
        yield ("terminals", "two studs M8" if m.volts == 12 else "two studs M10", f"SO-{s}", OWN, "")
    yield ("rotation", "cw from drive end", "5-1140", OTHER, "")
    yield ("teeth", 9, "5-1140", OTHER, "")
