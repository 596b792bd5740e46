"""The words of a text as they are compared: small letters, no accents, part numbers by their comparing key.

>>> [(t.word, t.place) for t in tokens("Solenoid 123-45678 won't")]
[('solenoid', 0), ('123', 1), ('12345678', 1), ('45678', 2), ('wont', 3)]
"""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterator
from functools import lru_cache
from operator import itemgetter
from typing import NamedTuple

LONGEST = 64
SHORTEST_KEY = 4

_PLAIN = re.compile(r"[a-z0-9]+(?:'[a-z0-9]+)*")
_ANY = re.compile(r"[^\W_](?:[^\W_]|[\u0300-\u036f]|['\u2019](?=[^\W_]))*")
_RUN = re.compile(r"[^\W_]+(?:[-./\u2010\u2011\u2013][^\W_]+)+")
_JOINT = re.compile(r"[-./\u2010\u2011\u2013]")
_LEFT_OUT = re.compile(r"['\u2019\u0300-\u036f]")
_DIGIT = re.compile(r"[0-9]")


class Token(NamedTuple):
    """One word: as compared, where it stands among the words (`place`, from 0), and `start` to `end` in the text.

    A part number of several pieces gives each piece and, at the place of the first, the whole by its comparing key.
    """

    word: str
    place: int
    start: int
    end: int


def indexed(text: str) -> list[tuple[str, int]]:
    """Every word with its place, as an index takes them; the same words as `tokens`, made faster."""
    if not text.isascii():
        return [(token.word, token.place) for token in tokens(text)]
    folded = text.lower()
    pieces = _PLAIN.findall(folded)
    if not _DIGIT.search(folded):
        if "'" in folded:
            pieces = [piece.replace("'", "") for piece in pieces]
        return [(piece[:LONGEST], place) for place, piece in enumerate(pieces)]
    made = [(_compared(piece), place) for place, piece in enumerate(pieces)]
    if _RUN.search(folded):
        made += [(key, len(_PLAIN.findall(folded[:start]))) for key, start, _ in _joined(folded)]
        made.sort(key=itemgetter(1))
    return made


def tokens(text: str) -> list[Token]:
    """Every word of a text in order, with its place and where it stands; empty for a text without any."""
    return _found(text.lower(), _PLAIN) if text.isascii() else _found(_folded(text), _ANY)


def word_of(text: str) -> str:
    """One word or part number as it is compared; empty when there is none in it.

    >>> word_of("KM-02210"), word_of("Solenoïd")
    ('km02210', 'solenoid')
    """
    found = tokens(text)
    return max(found, key=lambda t: t.end - t.start).word if found else ""


def has_digit(word: str) -> bool:
    """Whether a word is, or may be, a number of some kind."""
    return _DIGIT.search(word) is not None


def _found(folded: str, pattern: re.Pattern[str]) -> list[Token]:
    made = [Token(_compared(m.group()), place, m.start(), m.end()) for place, m in enumerate(pattern.finditer(folded))]
    made = [token for token in made if token.word]
    if _DIGIT.search(folded):
        made += _keys(folded, made)
        made.sort(key=lambda t: (t.place, t.end))
    return made


def _keys(folded: str, pieces: list[Token]) -> list[Token]:
    """Joined part numbers: "123-45678" is one number, whatever separates its pieces."""
    places = {piece.start: piece.place for piece in pieces}
    return [Token(key, places[start], start, end) for key, start, end in _joined(folded) if start in places]


def _joined(folded: str) -> Iterator[tuple[str, int, int]]:
    for run in _RUN.finditer(folded):
        text = _JOINT.sub("", run.group())
        if len(text) >= SHORTEST_KEY and has_digit(text):
            yield _compared(text), run.start(), run.end()


def _compared(word: str) -> str:
    if not word.isalpha():
        word = _LEFT_OUT.sub("", word)
        if has_digit(word):
            word = word.lstrip("0") or "0"
    return word[:LONGEST]


def _folded(text: str) -> str:
    """Small letters without accents, one character for each, so that places in the text stay."""
    return "".join(map(_letter, text))


@lru_cache(maxsize=4096)
def _letter(letter: str) -> str:
    base = unicodedata.normalize("NFKD", letter)[:1].lower()
    if len(base) == 1 and base.isalnum():
        return base
    small = letter.lower()
    return small if len(small) == 1 else letter


_DOUBLED = re.compile(r"([bdgklmnprt])\1$")


def forms(word: str) -> tuple[str, ...]:
    """Other forms that an English word may take (number, tense), without claiming that each exists; itself left out.

    >>> "contacts" in forms("contact"), "brush" in forms("brushes"), "slip" in forms("slipping")
    (True, True, True)
    """
    if len(word) < 3 or not word.isalpha():
        return ()
    stems = {word}
    for ending, instead in _ENDINGS:
        if word.endswith(ending) and len(word) - len(ending) >= 3:
            stem = word[: -len(ending)]
            stems.add(stem + instead)
            if ending in {"ed", "ing"}:
                stems.add(stem + "e")
                if _DOUBLED.search(stem):
                    stems.add(stem[:-1])
    made = set(stems)
    for stem in stems:
        made.update(_grown(stem))
    made.discard(word)
    return tuple(sorted(made))


_ENDINGS = (("ies", "y"), ("es", ""), ("s", ""), ("ed", ""), ("ing", ""), ("ied", "y"))


def _grown(stem: str) -> set[str]:
    made = {stem + "s", stem + "ed", stem + "ing"}
    if stem.endswith(("s", "x", "z", "ch", "sh")):
        made.add(stem + "es")
    if stem.endswith("e"):
        made |= {stem + "d", stem[:-1] + "ing"}
    if stem.endswith("y"):
        made |= {stem[:-1] + "ies", stem[:-1] + "ied"}
    if len(stem) >= 3 and stem[-1] in "bdgklmnprt" and stem[-2] in "aeiou" and stem[-3] not in "aeiou":
        made |= {stem + stem[-1] + "ed", stem + stem[-1] + "ing"}
    return made
