"""A part fitted on a job: the cross-check runs, and where it speaks against, a reason is asked."""

from __future__ import annotations

from dataclasses import dataclass

from sqlalchemy import Connection

from store import jobs, models, people
from store.errors import NotFound, Refused
from store.jobs import Job
from store.parts import numbers, on_model
from store.parts.evidence import Evidence
from store.parts.numbers import Number
from store.records import Record
from store.rules import numbers as rule
from store.sqlite.engine import rows
from store.tables.parts import FittedRow

MOST_FIELD = 80
MOST_PIECES = 1000


@dataclass(frozen=True, slots=True)
class Crossed:
    """What the cross-check says of a number on a job's model. `number` is None where no list knows it."""

    number: Number | None
    is_mismatch: bool
    says: str


@dataclass(frozen=True, slots=True)
class Fitted:
    """A part that was fitted, as printed on it. `checked` is what the cross-check said then, `why` the reason given."""

    id: int
    tag: str
    number: str
    maker: str
    lot: str
    supplier: str
    position: str
    quantity: int
    by: str
    at: str
    checked: str
    why: str


def cross(record: Record, tag: str, number: str, maker: str = "") -> Crossed:
    """What speaks for and against a number on the job's model. Raises NotFound (the job), Refused."""
    with record.read() as conn:
        return _cross(record, conn, jobs.find(record, tag, conn), rule.printed(number), maker)


def _cross(record: Record, conn: Connection, job: Job, number: str, maker: str) -> Crossed:
    try:
        known = numbers.find(record, number, maker, conn)
    except NotFound:
        return Crossed(None, False, "not checked: no list knows this number")
    barred = rows(
        conn,
        "SELECT source, caveat FROM relation WHERE from_id = ? AND relation = 'do-not-use' AND to_id IS NULL",
        (known.id,),
    )
    if barred:
        source, caveat = barred[0]
        because = f": {caveat}" if caveat else ""
        return Crossed(known, True, f"do not use ({source or 'no source'}){because}")
    answer = on_model.answers(conn, [known], models.by_id(conn, job.model_id))[known.id]
    return Crossed(known, answer.is_mismatch, answer.says)


def fit(
    record: Record, tag: str, number: str, *, maker: str = "", lot: str = "", supplier: str = "", position: str = "",
    quantity: int = 1, why: str = "",
) -> Fitted:  # fmt: skip
    """Fit a part on an open job. Raises Refused: a mismatch without a reason, an ended job, a text too long; NotFound."""
    people.require_known(record)
    kept = rule.printed(number)
    texts = {"maker": maker, "lot": lot, "supplier": supplier, "position": position}
    for column, text in texts.items():
        if len(text) > MOST_FIELD:
            raise Refused(f"{column} is longer than {MOST_FIELD} characters")
    if not 0 < quantity <= MOST_PIECES:
        raise Refused(f"{quantity} is not a number of pieces from 1 to {MOST_PIECES}")
    with record.change("part fitted") as change:
        job = jobs.find(record, tag, change.conn)
        change.subject = job.tag
        if not job.is_open:
            raise Refused(f"{job.tag} has ended; nothing can be fitted on it")
        crossed = _cross(record, change.conn, job, kept, maker.strip())
        if crossed.is_mismatch and not why.strip():
            raise Refused(f"{kept} on {job.model}: {crossed.says}; to fit it all the same, say why")
        values = {column: " ".join(text.split()) for column, text in texts.items()}
        which = change.insert(
            FittedRow, job_id=job.id, number=kept, key=rule.comparing_key(kept), quantity=quantity, by=record.by,
            at=change.at, checked=crossed.says, why=" ".join(why.split()), **values,
        )  # fmt: skip
    return next(one for one in of_job(record, tag) if one.id == which)


def of_job(record: Record, tag: str, conn: Connection | None = None) -> tuple[Fitted, ...]:
    """What was fitted on a job, in the order of fitting. Raises NotFound."""
    if conn is None:
        with record.read() as own:
            return of_job(record, tag, own)
    job = jobs.find(record, tag, conn)
    sql = (
        "SELECT id, ?, number, maker, lot, supplier, position, quantity, by, at, checked, why FROM fitted "
        "WHERE job_id = ? ORDER BY at, id"
    )
    return tuple(Fitted(*r) for r in rows(conn, sql, (job.tag, job.id)))


def take_off(record: Record, tag: str, fitted: int, why: str) -> None:
    """Take back that a part was fitted: it came off again or was never on. What it was and why stays in the chain.

    Raises Refused (no reason, an ended job), NotFound.
    """
    people.require_known(record)
    job = jobs.find(record, tag)
    if not why.strip():
        raise Refused("say why the part is taken off")
    if not job.is_open:
        raise Refused(f"{job.tag} has ended; what was fitted on it stays")
    if fitted not in {one.id for one in of_job(record, tag)}:
        raise NotFound("part fitted with the key", str(fitted))
    with record.change(f"part taken off: {' '.join(why.split())[:200]}", job.tag) as change:
        change.delete(FittedRow, fitted)


@dataclass(frozen=True, slots=True)
class Wanted:
    """A part that lists say goes on a job's model, with what came of it here; `fitted`: it is on the job."""

    number: Number
    position: str
    quantity: int | None
    source: str
    evidence: Evidence
    says: str
    is_mismatch: bool
    fitted: bool


def wanted(record: Record, tag: str) -> tuple[Wanted, ...]:
    """What goes on the model of a job by the lists, cross-checked, by position. Raises NotFound."""
    from store.parts import evidence

    with record.read() as conn:
        job = jobs.find(record, tag, conn)
        model = models.by_id(conn, job.model_id)
        listed = on_model.listed_parts(conn, model.id)
        named = {number.id: number for number in numbers.by_ids(conn, [part.number for part in listed])}
        answers = on_model.answers(conn, list(named.values()), model)
        came_of = evidence.of_numbers(conn, list(named))
        keys = {r[0] for r in rows(conn, "SELECT key FROM fitted WHERE job_id = ?", (job.id,))}
    return tuple(
        Wanted(
            named[part.number], part.position, part.quantity, part.source, came_of.get(part.number, evidence.NONE),
            answers[part.number].says, answers[part.number].is_mismatch, named[part.number].key in keys,
        )
        for part in listed
    )  # fmt: skip
