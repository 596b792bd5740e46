"""The report as PDF/A-3b with its contents attached as JSON.

The same contents give the same bytes: fonts come from this package alone, the date from the contents, nothing from the
machine or the clock. Compilers are kept and used again, so that a batch pays once for what they read.
"""

from __future__ import annotations

import json
import os
from collections import deque
from collections.abc import Callable, Iterable, Iterator
from concurrent.futures import Future, ThreadPoolExecutor
from contextlib import contextmanager
from pathlib import Path
from queue import Empty, LifoQueue
from typing import TYPE_CHECKING, Final

from store.errors import Refused, brief
from store.reports import characters, drawing
from store.reports.canonical import to_json
from store.reports.contents import LAYOUT, Report
from store.reports.figures import instant

if TYPE_CHECKING:
    import typst

STANDARD: Final = "a-3b"
ATTACHMENT = "wearline-report.json"
_HERE = Path(__file__).parent
_IDLE: LifoQueue[typst.Compiler] = LifoQueue()


def draw(report: Report, contents: str | None = None) -> bytes:
    """The report as PDF bytes. `contents` is the frozen JSON text that is attached; None: made from `report`.

    Raises Refused where the contents cannot be drawn (an unknown layout, a moment that is none).
    """
    if report.layout != LAYOUT:
        raise Refused(f"this report is of layout {report.layout}, which this version does not draw")
    try:
        stamp = int(instant(report.issued).timestamp())
    except ValueError:
        raise Refused(f"{brief(report.issued, 30)!r} is no moment at which a report can be issued") from None
    attached = to_json(report) if contents is None else contents
    try:
        return _compiled(report, attached, stamp, characters.in_print)
    except _NoGlyph:
        # Shaping joins characters in more ways than a list of code points can foretell; named ones always print.
        return _compiled(report, attached, stamp, lambda text: characters.strictly(characters.in_print(text)))


def draw_many(reports: Iterable[Report]) -> Iterator[bytes]:
    """The reports as PDF bytes, in order, drawn on every core; no more are under way than the reader soon takes.

    Raises what `draw` raises, at the report that it concerns. Closing the iterator ends the work.
    """
    workers = max(1, min(8, os.cpu_count() or 1))
    under_way: deque[Future[bytes]] = deque()
    with ThreadPoolExecutor(workers, thread_name_prefix="report") as pool:
        try:
            for report in reports:
                under_way.append(pool.submit(draw, report))
                if len(under_way) > workers:
                    yield under_way.popleft().result()
            while under_way:
                yield under_way.popleft().result()
        finally:
            for one in under_way:
                one.cancel()


class _NoGlyph(Exception):
    """A character, as shaped, has no glyph in any bundled font."""


def _compiled(report: Report, contents: str, stamp: int, seen: Callable[[str], str]) -> bytes:
    import typst

    inputs = {"drawing": json.dumps(drawing.of(report, seen), ensure_ascii=False), "contents": contents}
    with _compiler() as compiler:
        try:
            made, warnings = compiler.compile_with_warnings(
                format="pdf", sys_inputs=inputs, pdf_standards=[STANDARD], timestamp=stamp, pdf_tags=False
            )
        except typst.TypstError as fault:
            if "could not be displayed" in fault.message:
                raise _NoGlyph from None
            raise Refused(f"the report cannot be drawn: {brief(fault.message, 200)}") from fault
    if warnings:
        raise Refused(f"the report cannot be drawn as it should: {brief(warnings[0].message, 200)}")
    if not isinstance(made, bytes):
        raise Refused("the report cannot be drawn: nothing came out")
    return made


@contextmanager
def _compiler() -> Iterator[typst.Compiler]:
    """A compiler that nobody else uses; it goes back to the idle ones."""
    try:
        one = _IDLE.get_nowait()
    except Empty:
        one = _new_compiler()
    try:
        yield one
    finally:
        _IDLE.put(one)


def _new_compiler() -> typst.Compiler:
    import typst

    fonts = typst.Fonts(include_system_fonts=False, include_embedded_fonts=False, font_paths=[_HERE / "fonts"])
    templates = _HERE / "templates"
    return typst.Compiler(templates / "report.typ", root=templates, font_paths=fonts, ignore_system_fonts=True)
