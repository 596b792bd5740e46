"""The tolerance report as PDF/A-3b with its contents attached as JSON; the same contents give the same bytes."""

from __future__ import annotations

import os
from collections import deque
from collections.abc import Iterable, Iterator
from concurrent.futures import Future, ThreadPoolExecutor

from store.errors import Refused
from store.reports import drawing
from store.reports.canonical import to_json
from store.reports.contents import LAYOUT, Frozen, Report
from store.reports.typesetting import typeset

ATTACHMENT = "wearline-report.json"


def draw(report: Report, contents: str | None = None) -> bytes:
    """The report as PDF bytes. `contents` is the frozen JSON text that is attached; None: made from `report`.

    Raises Refused where the contents cannot be drawn (an unknown layout, a moment that is none).
    """
    if report.layout != LAYOUT:
        raise Refused(f"this report is of layout {report.layout}, which this version does not draw")
    attached = to_json(report) if contents is None else contents
    return typeset("report.typ", lambda seen: drawing.of(report, seen), attached, report.issued)


def draw_many(reports: Iterable[Frozen]) -> Iterator[bytes]:
    """The reports as PDF bytes, in order, drawn on every core; no more are under way than the reader soon takes.

    Raises what `draw` raises, at the report that it concerns. Closing the iterator ends the work.
    """
    workers = max(1, min(8, os.cpu_count() or 1))
    under_way: deque[Future[bytes]] = deque()
    with ThreadPoolExecutor(workers, thread_name_prefix="report") as pool:
        try:
            for report, frozen in reports:
                under_way.append(pool.submit(draw, report, frozen))
                if len(under_way) > workers:
                    yield under_way.popleft().result()
            while under_way:
                yield under_way.popleft().result()
        finally:
            for one in under_way:
                one.cancel()
