"""Gathering a job's report from the record: every figure is fixed here, so that what prints never decides anything."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Sequence
from fractions import Fraction
from math import sqrt

from sqlalchemy import Connection

from store import gauge_fit, gauges, jobs, limit_sheets, models, plans, readings, sheets, shop, strip_chart, verdicts
from store.catalogue import Catalogue, catalogue
from store.errors import Refused
from store.jobs import Job
from store.readings import Reading
from store.records import Record
from store.reports import contents
from store.reports.parts_fitted import parts_fitted
from store.rules import quantities, wear
from store.rules.limits import Limit, Rule
from store.rules.readings import Mark
from store.sheets import Sheet, SheetRow
from store.sqlite.engine import rows

RULES = {
    Rule.simple: "Simple acceptance: a result is in when it does not pass the limit; the gauge's uncertainty is not counted.",
    Rule.guarded_165u: "Guarded acceptance with w = 1.65 u (ISO 14253-1:2017): in when inside the limit by at least w, "
    "out when outside by at least w, else in doubt. Where u is not known the result is judged as read, and says so.",
    Rule.guarded_u: "Guarded acceptance with w = U (ILAC-G8:09/2019): in when inside the limit by at least U, out when "
    "outside by at least U, else in doubt. Where U is not known the result is judged as read, and says so.",
}
CAUTIONS = (
    "This report states what was measured on this unit; it does not say that the unit is electrically safe.",
    "Follow the maker's manual and local rules; have electrical work done by those licensed for it.",
    "Disconnect the battery before fitting; no sparks, no open flame: hydrogen.",
)


def draft(record: Record, tag: str) -> contents.Report:
    """The report of a job as it stands: without a number, marked as a draft. The same bytes until something changes.

    Raises NotFound.
    """
    with record.read() as conn:
        return gather(record, conn, tag)


def gather(record: Record, conn: Connection, tag: str) -> contents.Report:
    """A job's report inside a running transaction, as a draft. Raises NotFound."""
    job = jobs.find(record, tag, conn)
    ever = {r.id: r for r in readings.of_job_in(record, conn, job.id, corrected=True)}
    replaced = {r.corrects for r in ever.values()}
    taken = [r for r in ever.values() if r.id not in replaced]
    found, left = (sheets.of_job(record, conn, job, stage, taken) for stage in contents.STAGES)
    names = dict(rows(conn, "SELECT initials, name FROM person"))
    sheet = None if job.revision_id is None else limit_sheets.by_revision(record, conn, job.revision_id)
    moments = sorted(r.at for r in taken)
    unit = _unit(conn, job)

    def remarks(row: SheetRow) -> tuple[str, ...]:
        said = strip_chart.said(row, unit.bars, unit.poles)
        return (*filter(None, (said,)), *gauge_fit.said(record, conn, row))

    return contents.Report(
        number="",
        issued=_last_change(conn, job, moments),
        shop=contents.Shop(shop.kept(conn, "shop"), shop.kept(conn, "address")),
        tag=job.tag,
        outcome=job.outcome,
        unit=unit,
        received=job.taken_in,
        customer=job.customer,
        application=job.application,
        hours=job.hours,
        starts=job.starts,
        complaint=job.complaint,
        earlier_tag=job.earlier,
        measured_first=moments[0] if moments else None,
        measured_last=moments[-1] if moments else None,
        ended=job.ended,
        revision=job.revision,
        decision=None
        if sheet is None
        else contents.Decision(sheet.revision.decision.value, RULES[sheet.revision.decision]),
        characteristics=tuple(_characteristics(catalogue(record, conn), job, ever, found, left, remarks)),
        findings=_findings(conn, job),
        concessions=_concessions(conn, job, names),
        plan=_plan(record, conn, job),
        fitted=parts_fitted(record, conn, job),
        diagnosis=tuple(filter(None, (plans.diagnosis(sheet) for sheet in (found, left)))),
        gauges=_gauges(record, conn, taken),
        measured_by=tuple(contents.Person(who, names.get(who, "")) for who in sorted({r.by for r in taken})),
        assembled_by=contents.Person(job.assembled_by, names.get(job.assembled_by, "")) if job.assembled_by else None,
        cautions=CAUTIONS,
        from_history=job.from_history,
        draft=True,
        paper=shop.kept(conn, "paper"),
    )


def _last_change(conn: Connection, job: Job, moments: Sequence[str]) -> str:
    """When the job last changed: what dates a draft, so that it prints the same until then."""
    noted = rows(conn, "SELECT max(at) FROM audit WHERE subject = ?", (job.tag,))[0][0]
    return max(str(m) for m in (noted, job.ended, job.taken_in, *moments[-1:]) if m)


def _unit(conn: Connection, job: Job) -> contents.Unit:
    model = models.by_id(conn, job.model_id)
    return contents.Unit(
        model.number,
        job.serial,
        model.kind,
        model.volts,
        model.rotation,
        model.viewed_from,
        model.teeth,
        model.bars,
        model.poles,
    )


def _findings(conn: Connection, job: Job) -> tuple[contents.Finding, ...]:
    sql = "SELECT component, mode, mechanism, cause, note FROM finding WHERE job_id = ? ORDER BY id"
    return tuple(contents.Finding(*row) for row in rows(conn, sql, (job.id,)))


def _plan(record: Record, conn: Connection, job: Job) -> tuple[contents.PlanLine, ...]:
    """The rework list, each line with its prediction held against what was left; the proposal where none was accepted."""
    listed = plans.listing(record, job.tag, conn)
    if not listed:
        try:
            lines = plans.compute(record, job.tag, conn).lines if job.is_open else ()
        except Refused:  # sizes that cannot be: the readings say so themselves, and the report still prints
            return ()
        return tuple(_plan_line(line, "open", "proposed, not accepted") for line in lines)
    made = []
    for entry in listed:
        outcome = entry.outcome if entry.outcome != "open" or job.is_open else "not done"
        said = "; ".join(filter(None, (entry.note, *(h.says for h in plans.held(record, job.tag, entry.line, conn)))))
        made.append(_plan_line(entry.line, outcome, said, entry.ended_by or entry.by, entry.ended or entry.at))
    return tuple(made)


def _plan_line(line: plans.PlanLine, outcome: str, note: str, by: str = "", at: str = "") -> contents.PlanLine:
    predicted = tuple(contents.Predicted(p.name, quantities.plain(p.value), p.unit) for p in line.predicted)
    return contents.PlanLine(line.component, line.action, line.because, line.formula, predicted, outcome, note, by, at)


def _concessions(conn: Connection, job: Job, names: dict[str, str]) -> tuple[contents.Concession, ...]:
    sql = (
        "SELECT c.label, k.departure, k.because, k.by, k.at FROM concession k "
        "JOIN characteristic c ON c.id = k.characteristic_id WHERE k.job_id = ? ORDER BY k.id"
    )
    return tuple(
        contents.Concession(label, departure, because, contents.Person(by, names.get(by, "")), at)
        for label, departure, because, by, at in rows(conn, sql, (job.id,))
    )


def _gauges(record: Record, conn: Connection, taken: Iterable[Reading]) -> tuple[contents.Gauge, ...]:
    """The gauges that were used, each with the calibration in force at its last reading of this job."""
    last: dict[str, str] = {}
    for reading in taken:
        if reading.gauge:
            last[reading.gauge] = max(reading.at, last.get(reading.gauge, ""))
    found = []
    for name in sorted(last):
        gauge = gauges.find(record, name, conn)
        used = gauge.calibration_at(last[name])
        due = used.due if used else None
        found.append(
            contents.Gauge(
                gauge.name, gauge.kind, gauge.unit, gauge.resolution, used.expanded_uncertainty if used else None,
                used.k if used else None, used.calibrated if used else None, due, bool(due and due < last[name][:10]),
            )
        )  # fmt: skip
    return tuple(found)


def _characteristics(
    known: Catalogue,
    job: Job,
    ever: dict[int, Reading],
    found: Sheet,
    left: Sheet,
    remarks: Callable[[SheetRow], tuple[str, ...]],
) -> Iterable[contents.Characteristic]:
    by_stage = {sheet.stage: {row.characteristic.name: row for row in sheet.rows} for sheet in (found, left)}
    order = {row.characteristic.name: row for sheet in (left, found) for row in sheet.rows}
    place = {c.name: n for n, c in enumerate(known.all)}
    for name in sorted(order, key=place.__getitem__):
        one = order[name].characteristic
        results = tuple(
            _result(job, stage, row, ever, remarks(row))
            for stage, sheet in by_stage.items()
            if (row := sheet.get(name)) is not None and row.is_expected
        )
        if results:
            yield contents.Characteristic(
                one.name, one.label, one.component, one.datum, results, one.component == "running tests",
                " and ".join(one.sources),
            )  # fmt: skip


def _result(job: Job, stage: str, row: SheetRow, ever: dict[int, Reading], remarks: tuple[str, ...]) -> contents.Result:
    said = verdicts.of_row(row)
    judgement = row.judged.judgement if row.judged else None
    limit = row.limit
    exact = limit.limit if limit else None
    value = judgement.value if judgement else None
    unit = said["unit"]
    shown = "" if value is None or judgement is None else quantities.shown(value, judgement.places, _ends(exact))
    uncertainty = None
    if judgement and judgement.variance:
        uncertainty = f"{2 * sqrt(float(judgement.variance)):.2g}"
    return contents.Result(
        stage=stage,
        verdict=row.verdict.value,
        because=said["because"],
        statistic=said["statistic"],
        value=said["value"],
        unit=unit,
        shown=shown,
        count=said["count"],
        expected=said["expected"],
        worst_at=said["worst_at"],
        rule=said["rule"] or "",
        probability=said["probability"],
        wear_used=said["wear_used"],
        uncertainty=uncertainty,
        limit=None if limit is None else _limit(job, row),
        readings=tuple(_reading(r, unit, exact, ever) for r in row.readings if r is not None),
        wear_rule=_wear_rule(row, exact),
        remarks=remarks,
    )


def _ends(exact: Limit | None) -> list[Fraction]:
    return [] if exact is None else [end for end in (exact.low, exact.high) if end is not None]


def _limit(job: Job, row: SheetRow) -> contents.Limit:
    limit = row.limit
    assert limit is not None
    return contents.Limit(
        limit_text(limit.low, limit.high, limit.unit), limit.unit, limit.new, limit.low, limit.high, limit.at_limit, limit.count,
        limit.source, job.revision, limit.note,
    )  # fmt: skip


def limit_text(low: str | None, high: str | None, unit: str) -> str:
    """A limit in words: `9.5 mm min`, `0.05 mm max`, `0.1 to 0.3 mm`; `pass` for a test."""
    if low is not None and high is not None:
        return f"{low} to {high} {unit}".strip()
    if low is not None:
        return f"{low} {unit} min"
    return f"{high} {unit} max" if high is not None else "pass"


def _reading(r: Reading, unit: str, exact: Limit | None, ever: dict[int, Reading]) -> contents.Reading:
    typed = r.typed
    shown, shown_unit = typed.mark.value, ""
    if typed.mark is Mark.number and typed.value is not None:
        value, shown_unit, ends = typed.value, typed.unit, []
        if unit and unit != "%" and quantities.unit(unit).quantity is quantities.unit(typed.unit).quantity:
            value, shown_unit, ends = quantities.convert(value, typed.unit, unit), unit, _ends(exact)
        places = typed.places if shown_unit == typed.unit else max(typed.places, 4 if shown_unit == "in" else 3)
        shown = quantities.shown(value, places, ends)
    return contents.Reading(
        position=r.position,
        typed=typed.text,
        mark=typed.mark.value,
        value=None if typed.value is None else quantities.plain(typed.value),
        unit=typed.unit,
        shown=shown,
        shown_unit=shown_unit,
        detail=typed.detail,
        gauge=r.gauge or "",
        at=r.at,
        by=r.by,
        note=r.note,
        replaced=_replaced(r, ever),
    )


def _replaced(r: Reading, ever: dict[int, Reading]) -> tuple[contents.Replaced, ...]:
    chain: list[contents.Replaced] = []
    why, which = r.why, r.corrects
    while which is not None:
        before = ever[which]
        chain.append(contents.Replaced(f"{before.typed.text}", before.by, before.at, why))
        why, which = before.why, before.corrects
    return tuple(reversed(chain))


def _wear_rule(row: SheetRow, exact: Limit | None) -> contents.WearRule | None:
    if exact is None or row.judged is None or row.judged.judgement.value is None:
        return None
    judgement = row.judged.judgement
    drawn = wear.wear_rule(
        exact, sizes(row.readings, exact.unit) or [judgement.value or Fraction(0)], judgement.value, judgement.variance,
        sizes(row.other, exact.unit),
    )  # fmt: skip
    if drawn is None:
        return None
    return contents.WearRule(
        inside=drawn.inside,
        limits=tuple(contents.Place(at, quantities.plain(size)) for at, size in drawn.ends),
        new=None if drawn.new is None else contents.Place(drawn.new[0], quantities.plain(drawn.new[1])),
        guards=drawn.guards,
        ticks=drawn.ticks,
        faint=drawn.faint,
        judged=drawn.judged,
    )


def sizes(taken: Iterable[Reading | None], unit: str) -> list[Fraction]:
    """The sizes of readings in a unit; those that are of another quantity are left out."""
    return [
        quantities.convert(r.typed.value, r.typed.unit, unit)
        for r in taken
        if r is not None
        and r.typed.value is not None
        and quantities.unit(unit).quantity is quantities.unit(r.typed.unit).quantity
    ]
