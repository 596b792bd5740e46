"""Slips of the pen: how many a word may hold, which neighbours of it may be the same word, and which is the likeliest.

The distance is that of optimal string alignment: a letter left out, put in, put for another, or two swapped, is one
slip. A word is corrected against the words of the shop's own notes and their frequency; no dictionary is asked, for it
would harm the trade's words.
"""

from __future__ import annotations

import math
from collections.abc import Container, Iterable
from dataclasses import dataclass
from itertools import pairwise

from store.rules.words import has_digit

MORE_FREQUENT = 20
MORE_FREQUENT_THAN_FEW = 5
FEW = 3
KNOWN_WORD = 2.0
SHORTEST_KNOWN = 5
SLIP_COSTS = 4.0
OTHER_FIRST_LETTER = 2.0
COMMON_SLIP = 2.0
SAME_CONSONANTS = 2.0
SIGNATURE_BITS_A_SLIP = 2


@dataclass(frozen=True, slots=True)
class Neighbour:
    """A word of the notes near one that was asked: in how many texts it stands, and how many slips away."""

    word: str
    frequency: int
    slips: int


def allowed_slips(word: str) -> int:
    """How many slips are looked for: none in up to two letters, one in up to seven, two above; a number has at most one."""
    if has_digit(word):
        return 1 if len(word) >= 4 else 0
    if len(word) <= 2:
        return 0
    return 1 if len(word) <= 7 else 2


def furthest_slips(word: str) -> int:
    """How many slips away a word is still looked for where nothing nearer will do: two from six letters on."""
    allowed = allowed_slips(word)
    return 2 if allowed == 1 and len(word) >= 6 and not has_digit(word) else allowed


def signature(word: str) -> int:
    """64 bits of a word: letters present, letters present twice, digits present, two for the rest.

    One slip changes at most SIGNATURE_BITS_A_SLIP of them, so words whose signatures differ in more are further away.
    """
    made = 0
    for letter in word:
        place = ord(letter) - 97
        if 0 <= place < 26:
            bit = 1 << place
            made |= bit << 26 if made & bit else bit
        elif "0" <= letter <= "9":
            made |= 1 << (52 + ord(letter) - 48)
        else:
            made |= 1 << 63 if made & 1 << 62 else 1 << 62
    return made


def is_common_slip(asked: str, candidate: str) -> bool:
    """Whether two letters were swapped, or one doubled or left single: the slips that fingers make most."""
    if len(asked) == len(candidate):
        unlike = [n for n, (a, b) in enumerate(zip(asked, candidate, strict=True)) if a != b]
        if len(unlike) != 2 or unlike[1] != unlike[0] + 1:
            return False
        first, second = unlike
        return asked[first] == candidate[second] and asked[second] == candidate[first]
    short, long = sorted((asked, candidate), key=len)
    if len(long) - len(short) != 1:
        return False
    at = next((n for n, (a, b) in enumerate(zip(short, long, strict=False)) if a != b), len(short))
    if short[at:] != long[at + 1 :]:
        return False
    return long[at] in {long[at - 1] if at else "", long[at + 1] if at + 1 < len(long) else ""}


def liking(asked: str, near: Neighbour) -> float:
    """How likely it is that `asked` was meant as this neighbour; the higher the likelier."""
    made = math.log1p(near.frequency) - SLIP_COSTS * near.slips
    if asked[:1] != near.word[:1]:
        made -= OTHER_FIRST_LETTER
    if is_common_slip(asked, near.word):
        made += COMMON_SLIP
    if consonants(asked) == consonants(near.word):
        made += SAME_CONSONANTS
    return made


def consonants(word: str) -> str:
    """The consonants of a word, each doubled one once, in the order of the alphabet: what slips in vowels leave alone.

    >>> consonants("solinoid") == consonants("solenoid"), consonants("comutator")
    (True, 'cmrtt')
    """
    return "".join(
        sorted(letter for before, letter in pairwise("\0" + word) if letter not in "aeiouy" and letter != before)
    )


def corrections(
    asked: str, frequency: int, near: Iterable[Neighbour], most: int, within: float, known: Container[str] = frozenset()
) -> list[Neighbour]:
    """What `asked` may have been meant as, the likeliest first: neighbours that are much more frequent, or words that are
    known to be the trade's, whose liking is at most `within` under the best.

    `frequency` is that of `asked` itself in the notes, 0 where nobody wrote it. A known word is never corrected.
    """
    if asked in known:
        return []
    least = (MORE_FREQUENT if frequency > FEW else MORE_FREQUENT_THAN_FEW) * frequency
    may_be_known = len(asked) >= SHORTEST_KNOWN
    scored = []
    for n in near:
        is_known = may_be_known and n.word in known
        if n.slips and (n.frequency >= least or (is_known and MORE_FREQUENT * n.frequency >= frequency)):
            scored.append((-liking(asked, n) - KNOWN_WORD * is_known, n.word, n))
    scored.sort(key=lambda s: s[:2])
    return [n for score, _, n in scored[:most] if score <= scored[0][0] + within]


def slips_of(
    word: str, frequency: int, near: Iterable[Neighbour], most: int, known: Container[str] = frozenset()
) -> list[Neighbour]:
    """Neighbours of a word that are slips of it in the notes, the nearest first: rare ones; where the word is known to be
    the trade's, any that are not and not far more frequent.
    """
    is_known = len(word) >= SHORTEST_KNOWN and word in known
    rare = max(1, frequency // MORE_FREQUENT)
    made = [
        n for n in near
        if n.slips and n.word not in known and (n.frequency <= rare or (is_known and n.frequency <= MORE_FREQUENT * frequency))
    ]  # fmt: skip
    made.sort(key=lambda n: (n.slips, n.word[:1] != word[:1], -n.frequency, n.word))
    return made[:most]
