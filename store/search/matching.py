"""Which words of the notes a typed word stands for, and at what cost each."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass

from store.rules import spelling
from store.rules.findings import WORDS
from store.rules.queries import Term
from store.rules.ranking import CORRECTED, EXACT, FAR, SAME
from store.rules.shorthand import SHIPPED
from store.rules.spelling import Neighbour
from store.rules.words import forms
from store.search.lexicon import Lexicon

WITHIN = 0.3
MOST_ALSO = 8
ALSO_WITHIN = 4.0
MOST_SLIPS = 40
MOST_BEGINNINGS = 40
SHORTEST_BEGINNING = 2
KNOWN = WORDS | {form for word in WORDS for form in forms(word)} | set(SHIPPED.values())


@dataclass(frozen=True, slots=True)
class Match:
    """What a term is looked for as: words with their costs, and the corrections made, the likeliest first.

    Words less likely than those are looked for, too, at the highest cost: what they find comes last.
    """

    costs: dict[str, int]
    corrected: tuple[str, ...]


Take = Callable[[str, int], None]


def match(lexicon: Lexicon, term: Term, same: Mapping[str, tuple[str, ...]], refused: bool = False) -> Match:
    """The words that a term is looked for as. `same` are the groups of the shorthand; `refused`: no corrections."""
    word = term.word
    costs: dict[str, int] = {}

    def take(other: str, cost: int) -> None:
        if cost < costs.get(other, FAR + 1) and lexicon.frequency(other):
            costs[other] = cost

    take(word, EXACT)
    if term.literal:
        return Match(costs, ())
    for key in term.joined:
        take(key, EXACT)
    _widen(lexicon, word, same, SAME, take)
    if term.unfinished and len(word) >= SHORTEST_BEGINNING:
        for longer in lexicon.beginning(word, MOST_BEGINNINGS):
            take(longer, SAME)
    if refused:
        return Match(costs, ())
    corrected = _correct(lexicon, word, same, take, is_begun=term.unfinished and bool(costs))
    return Match(costs, corrected)


def _widen(lexicon: Lexicon, word: str, same: Mapping[str, tuple[str, ...]], cost: int, take: Take) -> None:
    for other in same.get(word, ()):
        take(other, cost)
    for other in forms(word):
        take(other, cost)


def _correct(
    lexicon: Lexicon, word: str, same: Mapping[str, tuple[str, ...]], take: Take, is_begun: bool
) -> tuple[str, ...]:
    """Look for slips of the word in the notes, and for what it may be a slip of; gives the corrections to be shown."""
    slips, reach, frequency = spelling.allowed_slips(word), spelling.furthest_slips(word), lexicon.frequency(word)
    around = lexicon.near(word, reach)
    _take_slips(word, frequency, around, take)
    if is_begun:
        return ()
    own_forms = set(forms(word))
    other = [n for n in around if n.word not in own_forms]
    likely = _likely(word, frequency, [n for n in other if n.slips <= slips])
    if not frequency:
        if not likely:
            likely = _likely(word, 0, lexicon.near(word, reach + 1) if reach > 1 else other)
        elif reach > slips:
            for meant in _likely(word, 0, other):
                take(meant.word, FAR)
    for n, meant in enumerate(likely):
        take(meant.word, CORRECTED if meant.slips == 1 else FAR)
        if n == 0:
            _widen(lexicon, meant.word, same, FAR, take)
            _take_slips(meant.word, meant.frequency, lexicon.near(meant.word, 1), take)
    shown = spelling.corrections(word, frequency, likely, MOST_ALSO, WITHIN, KNOWN)
    return tuple(meant.word for meant in shown)


def _likely(word: str, frequency: int, near: list[Neighbour]) -> list[Neighbour]:
    return spelling.corrections(word, frequency, near, MOST_ALSO, ALSO_WITHIN, KNOWN)


def _take_slips(word: str, frequency: int, near: list[Neighbour], take: Take) -> None:
    for slip in spelling.slips_of(word, frequency, near, MOST_SLIPS, KNOWN):
        take(slip.word, FAR)
