"""The parts of a report around the readings: whose it is, what was done, who answers for it."""

from __future__ import annotations

from store.reports import figures
from store.reports.contents import STAGES, VERDICTS, Fitted, PlanLine, Report
from store.reports.wording import STAGE_WORDS, TITLES, Sources, Table, person

Ledger = tuple[tuple[str, str], ...]

PROMISE = (
    "The results relate to this unit only, as it was tested.",
    "Sizes predicted by the plan are not measurements. What the customer told is the customer's word, not the shop's.",
    "This report may be copied only whole. Its figures stand exactly, with all they are made of, in its JSON.",
)
HOW_TO_READ = (
    'A value equal to its limit passes unless "equal fails" stands beside the limit. P is the probability of conformity as'
    " far as the gauge's uncertainty is known, U the expanded uncertainty of the value (k = 2), wear the share of the way"
    " from new size to limit that is used up."
)
NO_RULE = "No limits were judged, so no decision rule was applied."


def title(report: Report) -> str:
    """The title of the report."""
    return TITLES[report.outcome]


def notices(report: Report) -> tuple[str, ...]:
    """What must be known before anything else is read: a draft, an ending from history, what is amended."""
    made = []
    if report.draft:
        made.append("DRAFT. This job is not released; this is no evidence of anything.")
    if report.from_history:
        made.append(
            "Entered from history: the job ended before it was recorded here, and was not signed in this record."
        )
    if report.amends is not None:
        by = person(report.amends.by.initials, report.amends.by.name)
        made.append(f"This report takes the place of {report.amends.number}. Why: {report.amends.why} ({by})")
        made += [f"Changed: {what}" for what in report.amends.changed]
    return tuple(made)


def identity(report: Report) -> Ledger:
    """The unit and its visit; lines without a value are left out."""
    unit = report.unit
    viewed = f", seen from the {unit.viewed_from}" if unit.viewed_from else ""
    counts = [
        f"{number} {noun}"
        for number, noun in ((unit.teeth, "teeth"), (unit.bars, "bars"), (unit.poles, "poles"))
        if number
    ]
    lines = (
        ("unit", f"{unit.kind}, model {unit.model}"),
        ("serial", unit.serial),
        ("volts", unit.volts),
        ("rotation", f"{unit.rotation}{viewed}" if unit.rotation else ""),
        ("details", ", ".join(counts)),
        ("job tag", report.tag),
        ("earlier visit", f"tag {report.earlier_tag}" if report.earlier_tag else ""),
        ("limit sheet", f"revision {report.revision}" if report.revision is not None else "none"),
    )
    return _filled(lines)


def visit(report: Report) -> Ledger:
    """Customer and dates."""
    first, last = report.measured_first, report.measured_last
    measured = ""
    if first and last:
        same = figures.day(first) == figures.day(last)
        measured = figures.day(first) if same else f"{figures.day(first)} to {figures.day(last)}"
    ended = {"released": "released", "scrapped": "scrapped", "returned": "returned"}.get(report.outcome, "released")
    lines = (
        ("customer", report.customer or "not named"),
        ("application", report.application),
        ("hours", report.hours or ""),
        ("starts", report.starts or ""),
        ("received", figures.moment(report.received)),
        ("measured", measured or "not measured"),
        (ended, figures.moment(report.ended) if report.ended else "not yet"),
        ("issued", figures.moment(report.issued)),
        ("work done at", "this shop"),
    )
    return _filled(lines)


def standing(report: Report) -> Ledger:
    """How many results have which verdict, by stage."""
    made = []
    for stage in STAGES:
        found = [result.verdict for _, result in report.results(stage)]
        if found:
            counts = [f"{found.count(verdict)} {verdict}" for verdict in VERDICTS if verdict in found]
            made.append((STAGE_WORDS[stage], ", ".join(counts)))
    return tuple(made)


def findings(report: Report) -> Table:
    """What was found wrong."""
    heads = ("component", "mode", "mechanism", "cause", "note")
    rows = tuple((f.component, f.mode, f.mechanism, f.cause, f.note) for f in report.findings)
    return Table("Found wrong", heads, (18, 20, 20, 20, 22), rows)


def rework(report: Report) -> Table:
    """The plan's lines and what came of each."""
    heads = ("component", "action", "because", "outcome")
    rows = tuple((line.component, line.action, _reasons(line), _outcome(line)) for line in report.plan)
    return Table("Rework: planned and done", heads, (18, 16, 42, 24), rows)


def fitted(report: Report) -> Table:
    """The parts that were fitted, each with its lot."""
    heads = ("part number", "what", "where", "qty", "lot", "supplier", "fitted")
    rows = tuple(_part(part) for part in report.fitted)
    return Table("Parts fitted", heads, (20, 22, 14, 6, 12, 14, 16), rows)


def concessions(report: Report) -> Table:
    """Departures that a named person accepts."""
    labels = {one.name: one.label or one.name for one in report.characteristics}
    heads = ("characteristic", "departure", "accepted because", "by")
    rows = tuple(
        (
            labels.get(c.characteristic, c.characteristic),
            c.departure,
            c.because,
            f"{person(c.by.initials, c.by.name)}, {figures.moment(c.at)}",
        )
        for c in report.concessions
    )
    return Table("Concessions", heads, (22, 28, 30, 20), rows)


def corrections(report: Report) -> Table:
    """Readings that were corrected: what had been typed before, and why it was replaced."""
    rows = []
    for one in report.characteristics:
        for result in one.results:
            for r in result.readings:
                stage = STAGE_WORDS.get(result.stage, result.stage)
                rows += [
                    (one.label or one.name, f"{stage}, {r.position}", old.typed, r.typed, old.why,
                     f"{old.by}, {figures.moment(old.at)}")
                    for old in r.replaced
                ]  # fmt: skip
    heads = ("characteristic", "at", "had been typed", "stands", "why", "by")
    return Table("Corrected readings", heads, (20, 14, 14, 12, 22, 18), tuple(rows))


def gauges(report: Report) -> Table:
    """The gauges used, with the calibration that was in force."""
    heads = ("gauge", "kind", "resolution", "U", "k", "calibrated", "due")
    rows = tuple(
        (
            g.name,
            g.kind,
            _sized(g.resolution, g.unit),
            _sized(g.expanded_uncertainty, g.unit),
            g.k or "",
            g.calibrated or "not known",
            (g.due or "no date set") + (" (overdue when used)" if g.overdue else ""),
        )
        for g in report.gauges
    )
    note = "U is the expanded uncertainty of the calibration, k its coverage factor."
    return Table("Gauges", heads, (13, 21, 14, 13, 4, 15, 20), rows, note)


def decision(report: Report) -> tuple[str, ...]:
    """The decision rule in words, and how what is printed beside a verdict is to be read."""
    if report.decision is None:
        return (NO_RULE,)
    return (f"{report.decision.rule}: {report.decision.text}", HOW_TO_READ)


def tables(report: Report, sources: Sources) -> tuple[Table, ...]:
    """Every table that has rows, in the order in which they are printed. `sources` must know all limits by then."""
    made = (
        rework(report), fitted(report), concessions(report), corrections(report), sources.table(), gauges(report),
    )  # fmt: skip
    return tuple(table for table in made if table.rows)


def people(report: Report) -> Ledger:
    """Who measured, assembled and signed, and the head of the audit chain."""
    signature = report.signature
    signed = ""
    if signature is not None:
        signed = f"{person(signature.by.initials, signature.by.name)}, {figures.moment(signature.at)}"
        if signature.own_work:
            signed += ". Measured by the same person; the owner had allowed it"
        if signature.note:
            signed += f". {signature.note}"
    by = "; ".join(person(one.initials, one.name) for one in report.measured_by)
    assembled = person(report.assembled_by.initials, report.assembled_by.name) if report.assembled_by else ""
    ended = {"scrapped": "scrapped by", "returned": "returned by"}.get(report.outcome, "released by")
    unsigned = "entered from history, not signed in this record" if report.from_history else "not signed"
    lines = (
        ("measured by", by or "nobody named"),
        ("assembled by", assembled),
        (ended, signed or unsigned),
        ("audit chain", report.audit_head or "none"),
    )
    return _filled(lines)


def end(report: Report) -> str:
    """The marked end."""
    return f"end of report {report.title}"


def _part(part: Fitted) -> tuple[str, ...]:
    when = ", ".join(text for text in (part.by, figures.day(part.at)) if text)
    number = f"{part.number} ({part.maker})" if part.maker else part.number
    return (number, part.description, part.position, part.quantity, part.lot or "not known", part.supplier, when)


def _reasons(line: PlanLine) -> str:
    sizes = "; ".join(f"{p.name} {p.value} {p.unit}".rstrip() for p in line.predicted)
    parts = (line.because, line.formula, f"predicted: {sizes}" if sizes else "")
    return "\n".join(part for part in parts if part)


def _outcome(line: PlanLine) -> str:
    when = ", ".join(text for text in (line.by, figures.day(line.at)) if text)
    return "\n".join(part for part in (line.outcome, line.note, when) if part)


def _sized(size: str | None, unit: str) -> str:
    return f"{size} {unit}".rstrip() if size else "not known"


def _filled(lines: tuple[tuple[str, str], ...]) -> Ledger:
    return tuple(line for line in lines if line[1])
