"""What typed text looks like in print: every character either has a glyph or is named, and nothing breaks the page.

A character that no bundled font has, a control character, an invisible one, or one that turns the order of what follows
is written as its code point in brackets, `[U+202E]`. A long word can be broken at a zero-width space. The exact text
stands in the attached JSON.
"""

from __future__ import annotations

import re
import unicodedata
from bisect import bisect_right
from collections.abc import Callable
from functools import lru_cache
from importlib import resources

BREAK = "\u200b"
MOST_MARKS = 4
"""How many combining marks may stand on one letter; more would run into the lines above and below."""

_LINE_ENDS = re.compile(r"\r\n|[\n\r\v\f\x1c-\x1e\x85\u2028\u2029]")
_PLAIN = re.compile(r"[ -~\n]*\Z")
# Joiners, the choice between text and emoji form, and direction marks have no width, and the scripts need them.
_JOINERS = frozenset("\u200c\u200d\ufe0e\ufe0f\u200e\u200f\u061c")
_MARKS = ("Mn", "Me")
# Not Cn (unassigned): which code points are assigned depends on the interpreter, and a reprint must not.
_UNSEEN = ("Cc", "Cf", "Cs", "Co", "Zl", "Zp")


def in_print(text: str) -> str:
    """`text` with every character that cannot be printed as it is named; line ends become "\\n", tabs spaces."""
    if _PLAIN.match(text):
        return text
    return _named(_LINE_ENDS.sub("\n", text).replace("\t", " "), is_covered)


def in_plain(text: str) -> str:
    """As `in_print`, for text files and terminals: a character needs no bundled font, only to be visible."""
    if _PLAIN.match(text):
        return text
    return _named(_LINE_ENDS.sub("\n", text).replace("\t", " "), lambda _: True)


def strictly(text: str) -> str:
    """`text` with every character beyond Latin, Greek and Cyrillic letters and common signs named; always printable."""
    if _PLAIN.match(text):
        return text
    return "".join(c if c == BREAK or _is_simple(c) else code(c) for c in text)


def one_line(text: str) -> str:
    """`text` on one line: line ends and runs of spaces are one space."""
    return " ".join(text.split())


def breakable(text: str, longest: int) -> str:
    """`text` with places to break in each word of more than `longest` characters, never inside of a letter with marks."""
    if len(text) <= longest:
        return text
    piece = max(4, longest // 2)
    return re.sub(rf"[^\s{BREAK}]{{{longest + 1},}}", lambda word: _broken(word.group(), piece), text)


def width(text: str) -> int:
    """How many columns a terminal or a line printer gives one line of text: two for wide characters, none for marks."""
    if text.isascii():
        return len(text)
    return sum(_width(c) for c in text)


def code(character: str) -> str:
    """The name of a character in print: `[U+00AD]`."""
    return f"[U+{ord(character):04X}]"


def is_covered(character: str) -> bool:
    """Whether one of the bundled fonts has a glyph for a character."""
    place = bisect_right(_bounds(), ord(character))
    return place % 2 == 1


def _named(text: str, has_glyph: Callable[[str], bool]) -> str:
    made: list[str] = []
    marks = 0
    for c in text:
        kind = unicodedata.category(c)
        marks = marks + 1 if kind in _MARKS and c not in _JOINERS else 0
        seen = c == "\n" or c in _JOINERS or (kind not in _UNSEEN and not _is_blank(c) and has_glyph(c))
        made.append(c if seen and marks <= MOST_MARKS else code(c))
    return "".join(made)


def _is_blank(c: str) -> bool:
    """What looks like nothing: fillers, the grapheme joiner, variation selectors, and code points that are no letters."""
    if c in "\u034f\u115f\u1160\u17b4\u17b5\u2800\u3164\uffa0" or "\ufe00" <= c <= "\ufe0d" or c >= "\U000e0000":
        return True
    return "\ufdd0" <= c <= "\ufdef" or ord(c) & 0xFFFE == 0xFFFE


def _is_simple(c: str) -> bool:
    return c == "\n" or (c < "\u0530" and is_covered(c) and unicodedata.category(c)[0] in "LNPSZ" and c != "\u00a0")


def _broken(word: str, piece: int) -> str:
    made: list[str] = []
    since = 0
    for n, c in enumerate(word):
        joined = c in _JOINERS or unicodedata.category(c) in ("Mn", "Me", "Mc") or (n > 0 and word[n - 1] == "\u200d")
        if since >= piece and not joined:
            made.append(BREAK)
            since = 0
        made.append(c)
        since += 1
    return "".join(made)


@lru_cache(maxsize=4096)
def _width(c: str) -> int:
    if c in _JOINERS or c == BREAK or unicodedata.category(c) in _MARKS:
        return 0
    return 2 if unicodedata.east_asian_width(c) in "WF" else 1


@lru_cache(maxsize=1)
def _bounds() -> tuple[int, ...]:
    """First and one past the last code point of each run that the fonts cover, rising."""
    text = resources.files("store.reports").joinpath("fonts", "coverage.txt").read_text("ascii")
    made: list[int] = []
    for run in text.split():
        first, _, last = run.partition("-")
        made += (int(first, 16), int(last or first, 16) + 1)
    return tuple(made)
