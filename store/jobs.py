"""Jobs: taking in a core, finding a job, where it stands, earlier jobs of the same unit."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import Any

from sqlalchemy import Connection

from store import job_lines, limit_sheets, models, people, times
from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.job_lines import JobLine
from store.nearest import nearest
from store.records import Record
from store.rules.numbers import comparing_key, folded_key
from store.sqlite.engine import driver
from store.tables.jobs import JobRow

OUTCOMES = ("open", "released", "scrapped", "returned")
COMEBACK_OUTCOMES = ("workmanship", "part", "wear", "system", "installation", "wrong-part", "no-fault", "not-ours")
MOST_TEXT = 10_000
FEWEST_TO_COMPARE = 4


@dataclass(frozen=True, slots=True)
class Job:
    """One visit of one unit, with what its ticket says. Moments are stored text (UTC); `revision` is None without limits."""

    id: int
    tag: str
    model: str
    kind: str
    serial: str
    unit_id: int
    model_id: int
    revision_id: int | None
    revision: int | None
    customer: str
    application: str
    hours: str | None
    starts: str | None
    complaint: str
    taken_in: str
    by: str
    assembled_by: str
    outcome: str
    ended: str | None
    ended_by: str
    earlier: str | None
    comeback_outcome: str
    from_history: bool

    @property
    def is_open(self) -> bool:
        """Whether the job has not ended."""
        return self.outcome == "open"

    @property
    def is_comeback(self) -> bool:
        """Whether the unit had been released before."""
        return self.earlier is not None


_JOB = """
SELECT j.id, j.tag, m.number, m.kind, u.serial, u.id, m.id, j.revision_id, r.number, j.customer, j.application, j.hours,
 j.starts, j.complaint, j.taken_in, j.by, j.assembled_by, j.outcome, j.ended, j.ended_by, e.tag, j.comeback_outcome,
 j.from_history
FROM job j JOIN unit u ON u.id = j.unit_id JOIN model m ON m.id = u.model_id
LEFT JOIN revision r ON r.id = j.revision_id LEFT JOIN job e ON e.id = j.earlier_id
"""


def find(record: Record, tag: str, conn: Connection | None = None) -> Job:
    """The job with this tag, spaces, case and leading zeros apart. Raises NotFound with the nearest tags."""
    if conn is None:
        with record.read() as own:
            return find(record, tag, own)
    row = conn.exec_driver_sql(_JOB + "WHERE j.tag = ?", (tag.strip(),)).first()
    if row is None and (key := comparing_key(tag)):
        found = conn.exec_driver_sql(_JOB + "WHERE j.key = ? LIMIT 2", (key,)).all()
        row = found[0] if len(found) == 1 else None
    if row is None:
        recent = conn.exec_driver_sql("SELECT tag FROM job ORDER BY id DESC LIMIT 2000").scalars().all()
        raise NotFound("job with the tag", tag, nearest(tag, [str(t) for t in recent]))
    return _job(row)


def listing(
    record: Record, *, outcome: str | None = "open", model: str | None = None, search: str = "", most: int = 500,
    before: str | None = None,
) -> tuple[JobLine, ...]:  # fmt: skip
    """Jobs, newest first. `outcome` None: all; `search` looks in tag, serial, model and customer; `before` pages by tag.

    Raises Refused for an outcome that there is not, NotFound for an unknown model or tag.
    """
    if outcome is not None and outcome not in OUTCOMES:
        raise Refused(f"{brief(outcome)!r} is no outcome; one of {', '.join(OUTCOMES)}")
    with record.read() as conn:
        return job_lines.search(
            driver(conn),
            outcome=outcome,
            model_id=None if model is None else models.find(record, model, conn).id,
            words=search,
            most=most,
            before_id=None if before is None else find(record, before, conn).id,
        )


def counts(record: Record) -> dict[str, int]:
    """How many open jobs stand where, in the order of the work."""
    with record.read() as conn:
        return job_lines.counts(job_lines.search(driver(conn), most=100_000))


def _job(row: Any) -> Job:
    """A row of _JOB."""
    made = Job(*row)
    return replace(made, from_history=bool(made.from_history))


def of_unit(record: Record, model: str, serial: str) -> tuple[Job, ...]:
    """Every job of one unit, newest first; empty for a unit never seen. Raises NotFound for an unknown model."""
    found = models.find(record, model)
    key = comparing_key(serial)
    with record.read() as conn:
        rows = conn.exec_driver_sql(
            _JOB + "WHERE u.model_id = ? AND u.key = ? ORDER BY j.taken_in DESC, j.id DESC", (found.id, key)
        ).all()
    return tuple(map(_job, rows))


def alike(record: Record, model: str, serial: str, most: int = 5) -> tuple[str, ...]:
    """Serials of this model that look like one never seen: look-alike characters, or one slip. Raises NotFound.

    A proposal for whoever takes the core in; nothing is linked by it.
    """
    found = models.find(record, model)
    asked = comparing_key(serial)
    if not asked:
        return ()
    from rapidfuzz.distance import OSA

    folded = folded_key(asked)
    with record.read() as conn:
        known = conn.exec_driver_sql("SELECT serial, key FROM unit WHERE model_id = ?", (found.id,)).all()
    if any(key == asked for _, key in known):
        return ()
    near = []
    for text, key in known:
        slips = OSA.distance(folded_key(key), folded, score_cutoff=1)
        if slips <= 1 and len(asked) >= FEWEST_TO_COMPARE:
            near.append((slips, text))
    return tuple(text for _, text in sorted(near)[:most])


def take_in(
    record: Record, *, model: str, serial: str, tag: str | None = None, customer: str = "", application: str = "",
    hours: str | None = None, starts: str | None = None, complaint: str = "", taken_in: str | None = None,
) -> Job:  # fmt: skip
    """Take in a core. A unit that was released before makes the job a comeback of its last release, at once.

    Any number that leads to a model will do. The tag is the next number unless one is given; the newest limit revision of the model is pinned.
    Raises Refused (tag taken, no serial, text too long, not a number of hours), NotFound (model, person).
    """
    from store import parts

    people.require_known(record)
    found = parts.model_meant(record, model).model
    with record.change("core taken in") as change:
        change.subject = made_tag = _tag(change, tag)
        insert(
            change, found.id, serial, made_tag, customer=customer, application=application, hours=hours, starts=starts,
            complaint=complaint, taken_in=times.read(taken_in) if taken_in else change.at, by=record.by,
        )  # fmt: skip
    return find(record, made_tag)


def insert(
    change: Change, model_id: int, serial: str, tag: str, *, hours: str | None, starts: str | None, taken_in: str,
    **values: Any,
) -> int:  # fmt: skip
    """Take in a core inside a running change; links it to the unit's last release before `taken_in`. Raises Refused."""
    for name, text in values.items():
        if isinstance(text, str) and len(text) > MOST_TEXT:
            raise Refused(f"{name.replace('_', ' ')} is longer than {MOST_TEXT:,} characters")
    unit_id, _ = models.unit_of(change, model_id, serial)
    earlier = change.conn.exec_driver_sql(
        "SELECT id FROM job WHERE unit_id = ? AND outcome = 'released' AND ended <= ? ORDER BY ended DESC, id DESC LIMIT 1",
        (unit_id, _day_end(taken_in)),
    ).scalar()
    values.setdefault("earlier_id", earlier)
    return change.insert(
        JobRow, tag=tag, key=comparing_key(tag), unit_id=unit_id, hours=count("hours", hours),
        starts=count("starts", starts), taken_in=taken_in, revision_id=limit_sheets.newest(change.conn, model_id),
        **values,
    )  # fmt: skip


def link(record: Record, tag: str, earlier: str, outcome: str | None = None) -> Job:
    """Make a job the comeback of an earlier one, with its outcome where it is known.

    Raises Refused: the same job, an earlier one that was not released, or one that came in later.
    """
    people.require_known(record)
    job, before = find(record, tag), find(record, earlier)
    if job.id == before.id:
        raise Refused(f"{job.tag} cannot come back from itself")
    if before.outcome != "released":
        raise Refused(f"{before.tag} was not released, so nothing can come back from it")
    if before.taken_in > job.taken_in:
        raise Refused(f"{before.tag} was taken in after {job.tag}")
    values: dict[str, Any] = {"earlier_id": before.id}
    if outcome is not None:
        values["comeback_outcome"] = _comeback(outcome)
    with record.change("comeback linked", job.tag) as change:
        change.update(JobRow, job.id, **values)
    return find(record, tag)


def set_comeback_outcome(record: Record, tag: str, outcome: str) -> Job:
    """Say what a comeback turned out to be, one of COMEBACK_OUTCOMES. Raises Refused, NotFound."""
    job = find(record, tag)
    if not job.is_comeback:
        raise Refused(f"{job.tag} is no comeback; link it to the earlier job first")
    with record.change("comeback outcome", job.tag) as change:
        change.update(JobRow, job.id, comeback_outcome=_comeback(outcome))
    return find(record, tag)


def assembled(record: Record, tag: str, by: str) -> Job:
    """Say who built the unit up. Raises NotFound."""
    job = find(record, tag)
    with record.change("assembled", job.tag) as change:
        change.update(JobRow, job.id, assembled_by=people.acting(record, by))
    return find(record, tag)


def move_to_revision(record: Record, tag: str, number: int | None = None) -> Job:
    """Judge a job by another revision of its model's sheet, the newest unless one is named; recorded, and judged anew.

    Raises NotFound, Refused (the job has ended, or there are no limits).
    """
    from store import judgements

    job = find(record, tag)
    if not job.is_open:
        raise Refused(f"{job.tag} has ended; its limits stay as they were")
    sheet = limit_sheets.sheet(record, job.model, number)
    if sheet is None:
        raise Refused(f"{job.model} has no limits yet")
    with record.change("moved to limit revision", job.tag) as change:
        change.update(JobRow, job.id, revision_id=sheet.revision.id)
        judgements.rebuild(record, change.conn, find(record, tag, change.conn))
    return find(record, tag)


def next_tag(conn: Connection) -> str:
    """The next number for a ticket: one above the highest tag that is a plain number."""
    highest = conn.exec_driver_sql(
        "SELECT max(CAST(tag AS INTEGER)) FROM job WHERE tag NOT GLOB '*[^0-9]*' AND length(tag) < 10"
    ).scalar()
    return str(int(highest or 1000) + 1)


def _tag(change: Change, tag: str | None) -> str:
    if tag is None or not tag.strip():
        return next_tag(change.conn)
    tag = tag.strip()
    check_tag(tag)
    taken = change.conn.exec_driver_sql("SELECT tag FROM job WHERE key = ? LIMIT 1", (comparing_key(tag),)).scalar()
    if taken is not None:
        raise Refused(f"the tag {tag} is taken" + (f" (as {taken})" if taken != tag else ""))
    return tag


def check_tag(tag: str) -> None:
    """Raises Refused for a tag that cannot stand on a ticket."""
    if not comparing_key(tag) or len(tag) > 20 or any(c.isspace() or not c.isprintable() for c in tag):
        raise Refused(f"{brief(tag)!r} is no tag: one to twenty letters and figures without spaces")


def count(name: str, text: str | None) -> str | None:
    """A number of hours or starts as kept; None for nothing. Raises Refused for anything else, a negative one too."""
    if text is None or not str(text).strip():
        return None
    typed = str(text).strip()
    if not typed.isascii() or not typed.replace(".", "", 1).isdigit() or len(typed) > 12:
        raise Refused(f"{name}: {brief(typed)!r} is not a number of {name}")
    return typed


def _comeback(outcome: str) -> str:
    if outcome not in COMEBACK_OUTCOMES:
        raise Refused(f"{brief(outcome)!r} is no outcome of a comeback; one of {', '.join(COMEBACK_OUTCOMES)}")
    return outcome


def _day_end(moment: str) -> str:
    return f"{moment}T23:59:59Z" if len(moment) == 10 else moment
