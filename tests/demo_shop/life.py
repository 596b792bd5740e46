"""Two years of the invented shop: cores, readings, notes, findings, parts, and what came back."""

from __future__ import annotations

import random
from dataclasses import dataclass, field
from datetime import UTC, datetime, timedelta

from tests.demo_shop import parts
from tests.demo_shop.sheets import DERIVED, INCH_GAUGES, MODELS, STEPS, TESTS, Line, Model, sheet
from tests.demo_shop.words import COMPLAINTS, CUSTOMERS, FAULTS, NOTES, WORKS_ON

START, END = datetime(2024, 12, 2, 7, 30, tzinfo=UTC), datetime(2026, 11, 27, 15, 0, tzinfo=UTC)
FRESH_JOBS = 308
SEED = 20261144  # of those tried, one in which nothing but what is planted stands out
BAD_LOT, GOOD_LOTS = "CS-4417", ("CS-4102", "CS-4230", "CS-4391", "CS-4502")
BENCH = ("AB", "CN", "ET")
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
    hours: int | None = None
    untested: bool = False


class Shop:
    """Draws the two years; the same each time."""

    def __init__(self) -> None:
        self.draw = random.Random(SEED)
        self.books = Books()
        self.found: dict[tuple[str, str], float] = {}
        self.early = 2  # first releases with a part of the small supplier that come back by chance
        self.tag = 1000
        self.serial = 40_000

    def run(self) -> Books:
        """All visits in the order in which they came in."""
        moments = sorted(_working(START + (END - START) * self.draw.random(), 7.5, 4.5) for _ in range(FRESH_JOBS))
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
        elif special in {"fit", "doubt", "low bar", "open bar"}:
            model = MODELS[2]
        return Visit(str(self.tag), model, serial, moment, self.draw.choice(BENCH), special=special)

    def _come_back(self, moment: datetime, before: Visit, waiting: list[tuple[datetime, Visit]]) -> None:
        visit = self._new(before.model, before.serial, moment)
        visit.earlier = before.tag
        if before.hours is not None and before.ended is not None:
            visit.hours = before.hours + round((moment - before.ended).days * self.draw.uniform(2, 7))
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
        if not visit.earlier and draw.random() < 0.4:
            visit.hours = draw.randint(300, 9000)
        visit.ended = _working(visit.taken_in + timedelta(days=draw.uniform(1.5, 9)), 13, 4)
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
        visit.untested = stage == "released" and not visit.special and draw.random() < 0.025
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
                chance, mean = (1.0, 12) if self.early else (0.05, 190)
                self.early = max(0, self.early - 1)
            if draw.random() < chance:
                waiting.append(
                    (_working(visit.ended + timedelta(days=5 + draw.expovariate(1 / mean)), 7.5, 4.5), visit)
                )

    def _job(self, visit: Visit) -> None:
        draw, kind = self.draw, visit.model.kind
        hours = "" if visit.hours is None else str(visit.hours)
        complaint = draw.choice(COMPLAINTS[kind])
        self.books.jobs.append(
            (
                visit.tag, visit.model.number, visit.serial, _time(visit.taken_in), draw.choice(CUSTOMERS), draw.choice(WORKS_ON[kind]),
                hours, "", complaint, visit.bench, visit.bench if visit.outcome == "released" else "", visit.outcome,
                _time(visit.ended) if visit.ended else "", _signs(visit, draw), visit.earlier, visit.came_back_as,
            )
        )  # fmt: skip

    def _words(self, visit: Visit) -> None:
        draw = self.draw
        component, mode, mechanism, cause = visit.fault
        if visit.came_back_as not in {"no-fault", "not-ours"}:
            self.books.findings.append((visit.tag, component, mode, mechanism, cause, ""))
        for n in range(draw.choices((0, 1, 2, 3), (15, 50, 25, 10))[0]):
            text = draw.choice(NOTES[visit.model.kind]).format(
                comm=draw.choice(("comm", "com", "commutator", "comutator")),
                sol=draw.choice(("sol", "solenoid", "solinoid")),
            )
            at = visit.taken_in + timedelta(hours=4 + 3 * n)
            self.books.notes.append((visit.tag, text, _time(min(at, END)), visit.bench))
        if visit.untested:
            text = "running test not done, bench supply down; concession by OV, customer waits and knows"
            at = (visit.ended or END) - timedelta(hours=1)
            self.books.notes.append((visit.tag, text, _time(at), "OV"))
        if visit.special:
            self.books.notes.append(
                (visit.tag, _SAYS[visit.special], _time(visit.taken_in + timedelta(hours=6)), visit.bench)
            )

    def _parts(self, visit: Visit) -> None:
        draw, m = self.draw, visit.model
        at = _time((visit.ended or END) - timedelta(hours=6))
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
            if visit.untested and line.stage == "as-left":
                continue
            moment += timedelta(minutes=2)
            self._line(visit, line, stage, worn, moment)
        if stage == "as-found" and visit.special in {"low bar", "open bar"}:
            self._bars(visit, moment)

    def _bars(self, visit: Visit, moment: datetime) -> None:
        """Drop over every pair of bars: one low as where a coil is shorted, or one high as where it is open."""
        for bar in range(1, (visit.model.bars or 0) + 1):
            drop = 41.0 + self.draw.gauss(0, 0.35)
            if visit.special == "low bar" and bar == 12:
                drop *= 0.32
            if visit.special == "open bar" and bar in {20, 21, 22}:
                drop *= 2.6 if bar == 21 else 0.9
            at = moment + timedelta(seconds=4 * bar)
            self.books.readings.append(
                (visit.tag, "as-found", "bar-to-bar", f"{drop:.1f}", str(bar), "mV", "VOL-2", visit.bench, _time(at))
            )

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
    "low bar": "one pair of bars reads low, growler hums there: coil short suspected, shop next door to rewind",
    "open bar": "one pair of bars reads high, riser cracked, resoldered",
}


def _special(n: int) -> str:
    return {150: "last-cut", 171: "undersize", 190: "fit", 210: "doubt", 229: "low bar", 247: "open bar"}.get(n, "")


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
    """The reading as the gauge shows it: in its own steps."""
    step = STEPS.get(_gauge(line, inch and line.lengths), 0.0)
    size = size / 25.4 if inch and line.lengths else size
    size = round(size / step) * step if step else size
    if inch and line.lengths:
        places = 4 if line.places == 3 or step < 0.001 else 3
        return f"{size:.{places}f}", "in"
    return f"{size:.{line.places}f}", ""  # the gauge's own unit


def _gauge(line: Line, inch: bool) -> str:
    return INCH_GAUGES.get(line.gauge, line.gauge) if inch and line.lengths else line.gauge


def _places(characteristic: str, count: int) -> tuple[str, ...]:
    if characteristic.endswith(("-bore", "-journal", "-diameter")):
        return ("A0", "A90", "B0", "B90")[:count]
    return tuple(str(n) for n in range(1, count + 1))


def _time(moment: datetime) -> str:
    return moment.strftime("%Y-%m-%dT%H:%MZ")


def _working(moment: datetime, opens: float, lasts: float) -> datetime:
    """The same day within the hours given; a Saturday or Sunday becomes the Monday after. Never past the end."""
    day = moment.replace(hour=0, minute=0, second=0, microsecond=0)
    share = (moment - day) / timedelta(days=1)
    day += timedelta(days={5: 2, 6: 1}.get(day.weekday(), 0))
    return min(day + timedelta(hours=opens + lasts * share), END)


def _signs(visit: Visit, draw: random.Random) -> str:
    """Who ended the job: not who measured."""
    signs = draw.choice(("ET", "MW"))
    if visit.ended is None:
        return ""
    return "MW" if visit.bench == "ET" else signs
