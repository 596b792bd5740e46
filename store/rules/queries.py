"""What somebody types to find a note: words, "phrases", -excluded words, and filters such as `model:KS-100`.

Anything may be typed. What is no operator here is a word; what holds no word is left out; nothing is an error but a
filter whose value cannot be.
"""

from __future__ import annotations

import re
from dataclasses import dataclass, field

from store.errors import Refused
from store.rules.words import Token, has_digit, tokens

MOST_WORDS = 12
MOST_CHARACTERS = 5_000
FILTERS = ("model", "since", "until", "stage", "verdict", "comeback", "by", "in")
NO_WORD = "type a word to look for"

_PART = re.compile(
    r"""(?P<minus>(?<!\S)-)? (?: "(?P<phrase>[^"]*)(?:"|$)
    | (?P<name>[a-zA-Z]+):(?:"(?P<quoted>[^"]*)(?:"|$)|(?P<value>[^\s"]+))
    | (?P<word>[^\s"]+) )""",
    re.VERBOSE,
)
_FIGURE = re.compile(r"[+-]?\d*[.,]\d+[a-zA-Z%]{0,4}\Z")
"""A size is no misspelt word: 12.34 is looked for as it is."""


@dataclass(frozen=True, slots=True)
class Term:
    """One word that is looked for. `literal`: as typed, not corrected. `unfinished`: still being typed.

    `joined` are comparing keys that it makes with its neighbours ("KM 2210" is looked for as "km2210", too).
    """

    word: str
    literal: bool = False
    unfinished: bool = False
    joined: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Query:
    """What is looked for, as understood. `left_out` says in one line what of the text was not used; else empty."""

    terms: tuple[Term, ...] = ()
    phrases: tuple[tuple[str, ...], ...] = ()
    excluded: tuple[str, ...] = ()
    excluded_phrases: tuple[tuple[str, ...], ...] = ()
    filters: dict[str, str] = field(default_factory=dict)
    left_out: str = ""

    @property
    def is_empty(self) -> bool:
        """Whether there is nothing to look for."""
        return not self.terms and not self.phrases


def parse(text: str, *, typing: bool = False) -> Query:
    """Understand a typed query. `typing`: the last word may go on, unless a space follows it.

    Raises Refused for a filter given twice with two values.
    """
    cut = text[:MOST_CHARACTERS]
    terms: list[Term] = []
    made: dict[str, list[tuple[str, ...]]] = {"phrases": [], "excluded_phrases": []}
    excluded: list[str] = []
    filters: dict[str, str] = {}
    for part in _PART.finditer(cut):
        name = (part["name"] or "").lower()
        if name in FILTERS:
            _filter(filters, name, part["quoted"] if part["quoted"] is not None else part["value"])
            continue
        phrase = part["phrase"]
        said = part.group().lstrip("-") if phrase is None and part["minus"] else phrase or part.group()
        pieces, whole = _words(said)
        if not pieces:
            continue
        if part["minus"]:
            if len(pieces) == 1 or whole:
                excluded.append(whole or pieces[0])
            else:
                made["excluded_phrases"].append(pieces)
        elif phrase is not None and len(pieces) > 1:
            made["phrases"].append(pieces)
        elif phrase is not None:
            terms.append(Term(pieces[0], literal=True))
        else:
            last = typing and part.end() == len(cut) and len(text) == len(cut)
            figure = _FIGURE.match(said) is not None
            terms += [Term(word, literal=figure, unfinished=last) for word in ((whole,) if whole else pieces)]
    kept = _unique(terms)
    left_out = ""
    if len(kept) > MOST_WORDS or len(text) > MOST_CHARACTERS:
        left_out = f"only the first {MOST_WORDS} words are looked for"
    return Query(
        _joined(kept[:MOST_WORDS]), tuple(made["phrases"][:MOST_WORDS]), tuple(excluded[:MOST_WORDS]),
        tuple(made["excluded_phrases"][:MOST_WORDS]), filters, left_out,
    )  # fmt: skip


def _filter(filters: dict[str, str], name: str, value: str) -> None:
    if filters.setdefault(name, value) != value:
        raise Refused(f"{name}: is given twice")


def _words(said: str) -> tuple[tuple[str, ...], str]:
    """The pieces of what was said, and the one comparing key when it is a single joined number; else an empty one."""
    found = tokens(said)
    keys = [t for t in found if _is_joined(t, found)]
    pieces = tuple(t.word for t in found if t not in keys)
    single = len(keys) == 1 and keys[0].start == found[0].start and keys[0].end == max(t.end for t in found)
    return pieces, keys[0].word if single else ""


def _is_joined(token: Token, found: list[Token]) -> bool:
    return any(t.start >= token.start and t.end <= token.end and t is not token for t in found)


def _unique(terms: list[Term]) -> list[Term]:
    kept: dict[str, Term] = {}
    for term in terms:
        kept.setdefault(term.word, term)
    return list(kept.values())


def _joined(terms: list[Term]) -> tuple[Term, ...]:
    keys: list[list[str]] = [[] for _ in terms]
    for n in range(len(terms) - 1):
        first, second = terms[n], terms[n + 1]
        both = first.word + second.word
        if has_digit(both) and not first.literal and not second.literal:
            keys[n].append(both)
            keys[n + 1].append(both)
    return tuple(
        Term(term.word, term.literal, term.unfinished, tuple(own)) for term, own in zip(terms, keys, strict=True)
    )
