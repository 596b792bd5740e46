"""Which texts a person would want to see first.

All words before some; exact before corrected; near each other before far; recent before old at equal rank. Ties that are
left are broken by the text's own place in the record, so that the same question always has the same answer.
"""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np
from numpy.typing import NDArray

Codes = NDArray[np.uint16]
Ties = Callable[[NDArray[np.int64]], NDArray[np.int64]]

EXACT, SAME, CORRECTED, FAR = 0, 1, 2, 3
"""What a match costs: the word as typed; another form, shorthand or beginning of it; one slip; more slips."""

_PLACE_BITS = 13
_LAST = (1 << _PLACE_BITS) - 1
_NEAR = np.array([0, 1, 2, 5, 11, 23, 47], np.int64)


def code(cost: int, places: NDArray[np.uint16]) -> Codes:
    """One number for a word found in a text: the higher the better the match; the place in its lower bits."""
    return (np.uint16((FAR + 1 - cost) << _PLACE_BITS) | np.minimum(places, _LAST)).astype(np.uint16)


def order(
    codes: Sequence[Codes], wanted: NDArray[np.bool_], at: NDArray[np.uint32], ties: Ties, most: int
) -> NDArray[np.int64]:
    """The `most` best texts, the best first.

    `codes` holds for each word one code a text (0 where it is not found), `wanted` which texts may be shown at all,
    `at` their moments, all by text; `ties` gives for texts a number that no two share. At least half of the words (rounded up)
    must be found.
    """
    found = np.zeros(len(wanted), np.uint8)
    for one in codes:
        found += one != 0
    found[~wanted] = 0
    picked: list[NDArray[np.int64]] = []
    missing = most
    for words in range(len(codes), (len(codes) - 1) // 2, -1):
        texts = np.flatnonzero(found == words)
        best = _best(codes, texts, words, at, ties, missing)
        picked.append(best)
        missing -= len(best)
        if missing <= 0:
            break
    return np.concatenate(picked) if picked else np.zeros(0, np.int64)


def _best(
    codes: Sequence[Codes], texts: NDArray[np.int64], words: int, at: NDArray[np.uint32], ties: Ties, most: int
) -> NDArray[np.int64]:  # fmt: skip
    if not len(texts) or most <= 0:
        return texts[:0]
    here = [one[texts] for one in codes]
    cost = np.zeros(len(texts), np.uint8)
    for one in here:
        cost += np.where(one != 0, FAR + 1 - (one >> _PLACE_BITS), 0).astype(np.uint8)
    if len(texts) > most:  # texts too dear to come among the first are not looked at further
        enough = np.cumsum(np.bincount(cost)) >= most
        kept = cost <= np.argmax(enough)
        texts, cost, here = texts[kept], cost[kept], [one[kept] for one in here]
    first = np.full(len(texts), _LAST, np.int64)
    last = np.zeros(len(texts), np.int64)
    for one in here:
        place = (one & _LAST).astype(np.int64)
        np.minimum(first, np.where(one != 0, place, _LAST), out=first)
        np.maximum(last, place, out=last)
    between = np.maximum(last - first - (words - 1), 0)
    far = np.searchsorted(_NEAR, between)
    rank = (((255 - cost.astype(np.int64)) * 8 + (7 - far)) << 32) | at[texts]
    return texts[top(rank, lambda where: ties(texts[where]), most)]


def top(rank: NDArray[np.int64], ties: Ties, most: int) -> NDArray[np.int64]:
    """Where the `most` highest ranks are, the highest first; of equal ranks those of the higher tie number."""
    if len(rank) > most:
        edge = np.partition(rank, len(rank) - most)[len(rank) - most]
        above, level = np.flatnonzero(rank > edge), np.flatnonzero(rank == edge)
        room = most - len(above)
        if len(level) > room:
            level = level[np.argpartition(ties(level), len(level) - room)[len(level) - room :]]
        chosen = np.concatenate([above, level])
    else:
        chosen = np.arange(len(rank))
    return chosen[np.lexsort((-ties(chosen), -rank[chosen]))]
