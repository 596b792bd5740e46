"""Setting a page: a template, what it draws and a document to attach become PDF/A-3b, by the same bytes each time.

Fonts come from this package alone, the date from the caller, nothing from the machine or the clock. Compilers are kept and
used again, so that a batch pays once for what they read.
"""

from __future__ import annotations

import json
from collections import defaultdict
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path
from queue import Empty, LifoQueue
from typing import TYPE_CHECKING, Any, Final

from store.errors import Refused, brief
from store.reports import characters
from store.reports.figures import instant
from store.reports.pen import Seen

if TYPE_CHECKING:
    import typst

STANDARD: Final = "a-3b"
_HERE = Path(__file__).parent
_IDLE: defaultdict[str, LifoQueue[typst.Compiler]] = defaultdict(LifoQueue)


def typeset(template: str, drawing: Callable[[Seen], dict[str, Any]], contents: str, issued: str) -> bytes:
    """The PDF of a template. `drawing` makes what it draws from a function that makes text printable; `contents` is attached.

    Raises Refused where it cannot be drawn as it should, or `issued` is no moment.
    """
    try:
        stamp = int(instant(issued).timestamp())
    except ValueError:
        raise Refused(f"{brief(issued, 30)!r} is no moment at which a report can be issued") from None
    try:
        return _compiled(template, drawing(characters.in_print), contents, stamp)
    except _NoGlyph:
        # Shaping joins characters in more ways than a list of code points can foretell; named ones always print.
        strict = drawing(lambda text: characters.strictly(characters.in_print(text)))
        return _compiled(template, strict, contents, stamp)


class _NoGlyph(Exception):
    """A character, as shaped, has no glyph in any bundled font."""


def _compiled(template: str, drawing: dict[str, Any], contents: str, stamp: int) -> bytes:
    import typst

    inputs = {"drawing": json.dumps(drawing, ensure_ascii=False), "contents": contents}
    with _compiler(template) as compiler:
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
def _compiler(template: str) -> Iterator[typst.Compiler]:
    """A compiler of a template that nobody else uses; it goes back to the idle ones."""
    try:
        one = _IDLE[template].get_nowait()
    except Empty:
        one = _new_compiler(template)
    try:
        yield one
    finally:
        _IDLE[template].put(one)


def _new_compiler(template: str) -> typst.Compiler:
    import typst

    fonts = typst.Fonts(include_system_fonts=False, include_embedded_fonts=False, font_paths=[_HERE / "fonts"])
    templates = _HERE / "templates"
    return typst.Compiler(templates / template, root=templates, font_paths=fonts, ignore_system_fonts=True)
