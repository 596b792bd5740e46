"""Two years of the invented shop: cores, readings, notes, findings, parts, and what came back."""

from __future__ import annotations

import random
from dataclasses import dataclass, field
from datetime import UTC, datetime, timedelta

from tests.demo_shop import parts
from tests.demo_shop.sheets import DERIVED, MODELS, TESTS, Line, Model, sheet

START, END = datetime(2024, 12, 2, 7, 30, tzinfo=UTC), datetime(2026, 11, 27, 15, 0, tzinfo=UTC)
FRESH_JOBS = 308
BAD_LOT, GOOD_LOTS = "CS-4417", ("CS-4102", "CS-4230", "CS-4391", "CS-4502")
BENCH = ("AB", "CN", "ET")
CUSTOMERS = (
    "Marrow Farm", "Tolland Quarry", "Brindle Buses", "Fenwick Haulage", "Ashby Boatyard", "North Mill", "Parish of Odd",
    "Corran Plant Hire", "Well Street Garage", "Hallow Dairy", "walk-in", "Dunnock Taxis",
)  # fmt: skip
WORKS_ON = {
    "starter": ("tractor", "loader", "bus", "boat", "truck", "generator set"),
    "generator": ("tractor", "crane", "boat"),
    "alternator": ("bus", "truck", "loader", "van"),
}
COMPLAINTS = {
    "starter": (
        "cranks slow",
        "clicks, does not turn",
        "solenoid chatters",
        "spins, does not engage",
        "stays in",
        "no crank",
        "noisy",
        "slow when hot",
    ),
    "generator": ("no charge", "low output", "noisy", "lamp stays on"),
    "alternator": ("no charge", "overcharges", "noisy bearing", "lamp glows", "low output at idle"),
}
FAULTS = {
    "starter": (
        ("solenoid", "contacts burned", "electrical", "overload"), ("brushes", "worn short", "wear", "expected wear"),
        ("commutator", "worn undersize", "wear", "expected wear"), ("commutator", "high mica", "wear", "expected wear"),
        ("bushings", "worn", "clearance", "lack of lubrication"), ("drive", "slipping", "wear", "expected wear"),
        ("armature winding", "grounded", "earth fault", "overcranking"), ("field", "grounded", "earth fault", "water ingress"),
        ("solenoid", "hold-in open", "open circuit", "vibration"), ("springs", "weak", "overheating", "overcranking"),
    ),
    "generator": (
        ("brushes", "worn short", "wear", "expected wear"), ("commutator", "threaded", "wear", "wrong brush grade"),
        ("bearings", "rough", "wear", "lack of lubrication"), ("field", "open", "open circuit", "vibration"),
    ),
    "alternator": (
        ("diode", "shorted", "short circuit", "reversed polarity"), ("bearings", "noisy", "wear", "belt too tight"),
        ("slip ring", "worn", "wear", "expected wear"), ("regulator", "no output", "open circuit", "expected wear"),
        ("stator", "burned", "overheating", "overload"), ("brushes", "worn short", "wear", "expected wear"),
    ),
}  # fmt: skip
NOTES = (
    "grwler ok, comm {comm}, {sol} contcts pitted", "comm turned to clean up, undercut again, deburred", "brushs worn to the lead on one side",
    "{sol} contacts burnt, disc turned over last time allready", "bushng at drive end eggd, pressed new one",
    "arm grounded at the riser, rewind or scrap - ask", "water in the housing, rust on the pole shoes", "springs blue, replaced all four",
    "ran no load 30 s, smooth, no sparking", "customer says battery new, cables not looked at", "drive slips cold, holds warm; replaced",
    "plunger sticking, cleaned and a new return spring", "field ok after drying overnight 80 C", "oil all over, front seal of the engine leaks",
    "teeth chamfer gone on two, ring gear to be looked at", "bearing noisy, spun race at the slip ring end", "diode plate replaced, two shorted",
    "regulater cuts in late, replaced", "tag soaked, number read off the {comm} end", "limits from the sheet on the wall, entered as rev 1",
)  # fmt: skip
TURNED = frozenset({"commutator-diameter", "slip-ring-diameter"})
OUTCOMES = ("workmanship", "part", "wear", "system", "installation", "wrong-part", "no-fault", "not-ours")


@dataclass
class Books:
    """The lines of every file."""

    jobs: list[tuple[str, ...]] = field(default_factory=list)
    readings: list[tuple[str, ...]] = field(default_factory=list)
    notes: list[tuple[str, ...]] = field(default_factory=list)
    findings: list[tuple[str, ...]] = field(default_factory=list)
    fitted: list[tuple[str, ...]] = field(default_factory=list)


@dataclass
class Visit:
    """One visit under way."""

    tag: str
    model: Model
    serial: str
    taken_in: datetime
    bench: str
    ended: datetime | None = None
    outcome: str = "open"
    earlier: str = ""
    came_back_as: str = ""
    lot: str = ""
    supplier: str = ""
    fault: tuple[str, str, str, str] = ("", "", "", "")
    special: str = ""


class Shop:
    """Draws the two years; the same each time."""

    def __init__(self) -> None:
        self.draw = random.Random(20261127)
        self.books = Books()
        self.found: dict[tuple[str, str], float] = {}
        self.tag = 1000
        self.serial = 40_000

    def run(self) -> Books:
        """All visits in the order in which they came in."""
        moments = sorted(START + (END - START) * self.draw.random() for _ in range(FRESH_JOBS))
        waiting: list[tuple[datetime, Visit]] = []
        for n, moment in enumerate(moments):
            while waiting and min(waiting, key=lambda pair: pair[0])[0] < moment:
                due = min(waiting, key=lambda pair: pair[0])
                waiting.remove(due)
                self._come_back(due[0], due[1], waiting)
            model = self.draw.choice(MODELS)
            self.serial += self.draw.randint(1, 90)
            self._visit(self._new(model, str(self.serial), moment, _special(n)), waiting)
        for when, visit in sorted(waiting, key=lambda pair: pair[0]):
            if when < END:
                self._come_back(when, visit, [])
        return self.books

    def _new(self, model: Model, serial: str, moment: datetime, special: str = "") -> Visit:
        self.tag += 1
        if special in {"last-cut", "undersize"}:
            model = MODELS[1]
        elif special in {"fit", "doubt"}:
            model = MODELS[2]
        return Visit(str(self.tag), model, serial, moment, self.draw.choice(BENCH), special=special)

    def _come_back(self, moment: datetime, before: Visit, waiting: list[tuple[datetime, Visit]]) -> None:
        visit = self._new(before.model, before.serial, moment)
        visit.earlier = before.tag
        if before.lot == BAD_LOT and self.draw.random() < 0.85:
            visit.came_back_as, visit.fault = "part", ("solenoid", "contacts burned", "electrical", "part fault")
        else:
            visit.came_back_as = self.draw.choices(OUTCOMES, (14, 14, 20, 14, 10, 4, 16, 8))[0]
        self._visit(visit, waiting)

    def _visit(self, visit: Visit, waiting: list[tuple[datetime, Visit]]) -> None:
        draw = self.draw
        if not visit.fault[0]:
            visit.fault = draw.choice(FAULTS[visit.model.kind])
        age = (END - visit.taken_in).days
        visit.ended = visit.taken_in + timedelta(days=draw.uniform(1.5, 9))
        stage = "released"
        if age < 14 or (age < 45 and draw.random() < 0.55):
            stage = draw.choice(("taken in", "stripped", "on rework", "to inspect"))
        elif visit.special == "undersize" or draw.random() < 0.04:
            stage = "scrapped"
        elif draw.random() < 0.02:
            stage = "returned"
        if stage in {"released", "scrapped", "returned"}:
            visit.outcome = stage
        else:
            visit.ended = None
        if visit.model.kind == "starter" and (visit.fault[0] == "solenoid" or draw.random() < 0.45):
            recent = visit.taken_in > START + timedelta(days=240)
            visit.lot = (
                BAD_LOT
                if recent and visit.taken_in < START + timedelta(days=520) and draw.random() < 0.55
                else draw.choice(GOOD_LOTS)
            )
            visit.supplier = draw.choices(("Wray Electrical", "Penhallow Spares", "Brackwater Parts"), (60, 34, 6))[0]
        self._job(visit)
        if stage != "taken in":
            self._stage(visit, "as-found", visit.taken_in + timedelta(hours=3))
            self._words(visit)
        if stage in {"released", "to inspect"} or (stage == "on rework" and draw.random() < 0.5):
            self._parts(visit)
            self._stage(visit, "as-left", (visit.ended or END) - timedelta(hours=5), partial=stage == "on rework")
        if visit.outcome == "released":
            assert visit.ended is not None
            chance, mean = (0.34, 110) if visit.lot == BAD_LOT else (0.075, 190)
            if visit.supplier == "Brackwater Parts" and visit.lot != BAD_LOT:
                chance = 0.16
            if draw.random() < chance:
                waiting.append((visit.ended + timedelta(days=5 + draw.expovariate(1 / mean)), visit))

    def _job(self, visit: Visit) -> None:
        draw, kind = self.draw, visit.model.kind
        hours = str(draw.randint(300, 9000)) if draw.random() < 0.4 else ""
        complaint = draw.choice(COMPLAINTS[kind])
        self.books.jobs.append(
            (
                visit.tag, visit.model.number, visit.serial, _time(visit.taken_in), draw.choice(CUSTOMERS), draw.choice(WORKS_ON[kind]),
                hours, "", complaint, visit.bench, visit.bench if visit.outcome == "released" else "", visit.outcome,
                _time(visit.ended) if visit.ended else "", draw.choice(("ET", "MW")) if visit.ended else "", visit.earlier, visit.came_back_as,
            )
        )  # fmt: skip

    def _words(self, visit: Visit) -> None:
        draw = self.draw
        component, mode, mechanism, cause = visit.fault
        if visit.came_back_as not in {"no-fault", "not-ours"}:
            self.books.findings.append((visit.tag, component, mode, mechanism, cause, ""))
        for n in range(draw.choices((0, 1, 2, 3), (15, 50, 25, 10))[0]):
            text = draw.choice(NOTES).format(
                comm=draw.choice(("comm", "com", "commutator", "comutator")),
                sol=draw.choice(("sol", "solenoid", "solinoid")),
            )
            at = visit.taken_in + timedelta(hours=4 + 3 * n)
            self.books.notes.append((visit.tag, text, _time(min(at, END)), visit.bench))
        if visit.special:
            self.books.notes.append(
                (visit.tag, _SAYS[visit.special], _time(visit.taken_in + timedelta(hours=6)), visit.bench)
            )

    def _parts(self, visit: Visit) -> None:
        draw, m = self.draw, visit.model
        at = _time((visit.ended or END) - timedelta(hours=7))
        suffix = parts.suffix(m)
        if visit.lot:
            self.books.fitted.append(
                (visit.tag, f"CT-{suffix}", "Lorne & Hobb", visit.lot, visit.supplier, "solenoid", "1", visit.bench, at)
            )
        if draw.random() < 0.7:
            lot = f"BR-{draw.randint(21, 26)}{draw.randint(0, 9)}"
            supplier = draw.choices(("Wray Electrical", "Penhallow Spares"), (60, 40))[0]
            self.books.fitted.append(
                (visit.tag, f"BS-{suffix}", "Lorne & Hobb", lot, supplier, "", "1", visit.bench, at)
            )

    def _stage(self, visit: Visit, stage: str, moment: datetime, *, partial: bool = False) -> None:
        worn = self.draw.betavariate(3, 2.4)
        for line in sheet(visit.model):
            if line.characteristic in DERIVED or (line.stage == "as-left" and stage == "as-found"):
                continue
            if partial and self.draw.random() < 0.5:
                continue
            moment += timedelta(minutes=2)
            self._line(visit, line, stage, worn, moment)

    def _line(self, visit: Visit, line: Line, stage: str, worn: float, moment: datetime) -> None:
        draw = self.draw
        count = line.count or (4 if line.characteristic.endswith(("-bore", "-journal")) else 1)
        places = _places(line.characteristic, count)
        if line.characteristic in TESTS:
            fails = stage == "as-found" and draw.random() < 0.05
            for place in places:
                failed = fails and place == places[-1]
                self._write(visit, stage, line, place, "fail" if failed else "pass", "", "", moment)
            return
        base = draw.gauss(_typical(line, stage, worn), 0)
        for place in places:
            size = _special_size(visit.special, line, stage, place)
            if size is None:
                size = base + draw.gauss(0, abs(line.spread * _span(line)))
                size = _inside(line, size, visit.outcome, stage, draw)
            if line.characteristic in TURNED:
                size = self._turned(visit, line, stage, place, size)
            text, unit = _typed(line, size, visit.model.inch)
            self._write(visit, stage, line, place, text, unit, _gauge(line, visit.model.inch), moment)

    def _turned(self, visit: Visit, line: Line, stage: str, place: str, size: float) -> float:
        """A size that the lathe makes: as left it is what was found less the cut, or that of another armature or rotor."""
        key = (visit.tag, line.characteristic)
        if stage == "as-found":
            self.found[key] = min(size, self.found.get(key, size))
            return size
        cut = 0.06 + 0.04 * (int(visit.tag) % 7)
        made = self.found.get(key, size) - cut + 0.004 * ["A0", "A90", "B0", "B90"].index(place)
        floor = (line.low or 0.0) + 0.14 * abs(_span(line))
        return made if made > floor else size

    def _write(
        self, visit: Visit, stage: str, line: Line, place: str, text: str, unit: str, gauge: str, moment: datetime
    ) -> None:
        at = _time(min(moment, END))
        place = "" if place == "1" else place  # the first is where a reading goes by itself
        self.books.readings.append((visit.tag, stage, line.characteristic, text, place, unit, gauge, visit.bench, at))


_SAYS = {
    "last-cut": "comm just over the minimum once it is turned; this cut is the last one",
    "undersize": "comm would be under the minimum after turning, scrapped without a cut",
    "fit": "bushing and shaft each just in, the fit is not: new bushing",
    "doubt": "one brush right at the limit, caliper cannot tell",
}


def _special(n: int) -> str:
    return {150: "last-cut", 171: "undersize", 190: "fit", 210: "doubt"}.get(n, "")


def _special_size(special: str, line: Line, stage: str, place: str) -> float | None:
    """The teaching cases, as found."""
    if stage == "as-left":
        return None
    if special in {"last-cut", "undersize"}:
        if line.characteristic == "commutator-diameter" and line.low is not None:
            return line.low + (0.20 if special == "last-cut" else 0.09)
        return {"commutator-runout": 0.12, "shaft-runout": 0.02}.get(line.characteristic)
    if special == "fit" and line.characteristic == "drive-end-bore" and line.high is not None:
        return line.high - 0.004
    if special == "fit" and line.characteristic == "drive-end-journal" and line.low is not None:
        return line.low + 0.004
    if special == "doubt" and line.characteristic == "brush-length" and place == "2" and line.low is not None:
        return line.low + 0.01
    return None


def _span(line: Line) -> float:
    if line.new is not None:
        return line.new - (line.low if line.low is not None else line.high or 0.0)
    if line.low is not None and line.high is not None:
        return line.high - line.low
    return line.high if line.high is not None else line.low or 1.0


def _typical(line: Line, stage: str, worn: float) -> float:
    """Where a size typically stands: worn as found, near new as left."""
    share = line.wear * 2 * worn if stage == "as-found" else line.wear * 0.35
    if line.new is not None:
        return line.new - share * _span(line)
    if line.low is not None and line.high is not None:
        return line.low + _span(line) * (0.5 + (worn - 0.5) * (0.9 if stage == "as-found" else 0.2))
    if line.high is not None:
        return line.high * (share if line.stage == "both" else 0.82)
    return (line.low or 1.0) * (2.2 if line.unit == "Mohm" else 1.12)


def _inside(line: Line, size: float, outcome: str, stage: str, draw: random.Random) -> float:
    """A released unit is within limits as left, clear of the guard band; nothing is below zero."""
    if stage == "as-left" and outcome == "released":
        room = 0.12 * abs(_span(line))
        if line.low is not None:
            size = max(size, line.low + room + 0.03 * draw.random() * room)
        if line.high is not None:
            size = min(size, line.high - room)
    return max(size, 0.002)


def _typed(line: Line, size: float, inch: bool) -> tuple[str, str]:
    if inch and line.lengths:
        places = 4 if line.places == 3 else 3 if line.places == 2 else 2
        return f"{size / 25.4:.{places}f}", "in"
    return f"{size:.{line.places}f}", ""  # the gauge's own unit


def _gauge(line: Line, inch: bool) -> str:
    return {"MIC-25": "MIC-1", "MIC-50": "MIC-1"}.get(line.gauge, line.gauge) if inch else line.gauge


def _places(characteristic: str, count: int) -> tuple[str, ...]:
    if characteristic.endswith(("-bore", "-journal", "-diameter")):
        return ("A0", "A90", "B0", "B90")[:count]
    return tuple(str(n) for n in range(1, count + 1))


def _time(moment: datetime) -> str:
    return moment.strftime("%Y-%m-%dT%H:%MZ")
