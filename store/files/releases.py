"""Files of issued reports and of concessions: what was signed comes back as it was, to the byte."""

from __future__ import annotations

import hashlib
from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store import times
from store.errors import Refused, brief
from store.files.kinds import Kind, Loading, Numbered
from store.records import Record
from store.reports import canonical
from store.rules.numbers import comparing_key
from store.tables.releases import ConcessionRow, ReleaseRow


def _jobs(loading: Loading) -> dict[str, int]:
    return {r[0]: r[1] for r in loading.change.conn.exec_driver_sql("SELECT key, id FROM job")}


def _take_releases(loading: Loading, lines: Iterator[Numbered]) -> int:
    """Each report must give back its digest and be readable; the job that it ended no longer says `from history`."""
    jobs = _jobs(loading)
    conn = loading.change.conn
    known = {r[0]: r[1] for r in conn.exec_driver_sql("SELECT number, id FROM release")}
    next_id = conn.exec_driver_sql("SELECT coalesce(max(id),0)+1 FROM release").scalar() or 1
    made: list[tuple[Any, ...]] = []
    ended = set()
    for number, line in lines:
        job = jobs.get(comparing_key(line["tag"]))
        if job is None:
            loading.refuse(number, "tag", f"no job with the tag {brief(line['tag'])!r}")
            continue
        if line["report_number"] in known:
            loading.refuse(number, "report_number", f"the report {brief(line['report_number'])} is there already")
            continue
        amends = line.get("amends", "")
        if amends and amends not in known:
            loading.refuse(number, "amends", f"no report {brief(amends)!r} before this line")
            continue
        try:
            canonical.from_json(line["report"])
            at = times.moment(line["at"])
        except (Refused, ValueError) as fault:
            loading.refuse(number, "report", fault)
            continue
        if hashlib.sha256(line["report"].encode()).hexdigest() != line["digest"]:
            loading.refuse(number, "digest", "the report is not as it was issued")
            continue
        known[line["report_number"]] = next_id
        made.append(
            (next_id, job, line["report_number"], line["outcome"], at, line.get("by", ""), line.get("why", ""),
             known.get(amends) if amends else None, line["head"], line["digest"], line["report"])
        )  # fmt: skip
        ended.add(job)
        next_id += 1
    if loading.bad:
        return len(made)
    from store.tables.jobs import JobRow

    for job in sorted(ended):
        loading.change.update(JobRow, job, from_history=False)
    return loading.change.load(ReleaseRow, made)


def _give_releases(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT j.tag, r.number, r.outcome, r.at, r.head, r.digest, r.report, r.by, r.why, e.number FROM release r "
        "JOIN job j ON j.id = r.job_id LEFT JOIN release e ON e.id = r.amends_id ORDER BY r.id"
    )
    for row in conn.exec_driver_sql(sql):
        yield tuple("" if cell is None else str(cell) for cell in row)


def _take_concessions(loading: Loading, lines: Iterator[Numbered]) -> int:
    from store.catalogue import catalogue

    jobs = _jobs(loading)
    known = catalogue(loading.record, loading.change.conn)
    made: list[tuple[Any, ...]] = []
    for number, line in lines:
        job = jobs.get(comparing_key(line["tag"]))
        if job is None:
            loading.refuse(number, "tag", f"no job with the tag {brief(line['tag'])!r}")
            continue
        try:
            one = known.find(line["characteristic"])
            at = times.moment(line["at"]) if line.get("at") else loading.change.at
        except Refused as fault:
            loading.refuse(number, "characteristic", fault)
            continue
        made.append((None, job, one.id, line["departure"], line["because"], line.get("by") or loading.change.by, at))
    return loading.change.load(ConcessionRow, made)


def _give_concessions(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT j.tag, c.name, k.departure, k.because, k.by, k.at FROM concession k JOIN job j ON j.id = k.job_id "
        "JOIN characteristic c ON c.id = k.characteristic_id ORDER BY k.id"
    )
    yield from map(tuple, conn.exec_driver_sql(sql))


KINDS = (
    Kind(
        "concessions",
        ("tag", "characteristic", "departure", "because"),
        ("by", "at"),
        _take_concessions,
        _give_concessions,
    ),
    Kind(
        "releases",
        ("tag", "report_number", "outcome", "at", "head", "digest", "report"),
        ("by", "why", "amends"),
        _take_releases,
        _give_releases,
    ),
)
