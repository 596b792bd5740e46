"""The words of the index, and the words near one: a filter over 64-bit signatures that loses nothing, then distances."""

from __future__ import annotations

from array import array
from bisect import bisect_left
from collections.abc import Iterable

import numpy as np
from numpy.typing import NDArray
from rapidfuzz import process
from rapidfuzz.distance import OSA

from store.rules.spelling import SIGNATURE_BITS_A_SLIP, Neighbour, signature
from store.rules.words import LONGEST

MOST_KEPT = 256
FEW = 1000


class Lexicon:
    """Words by number (from 0, in the order of their first coming), in how many texts each stands, and their neighbours.

    Words that stand in no text any more are kept by number and never handed out.
    """

    def __init__(self, words: Iterable[str] = (), frequencies: NDArray[np.int32] | None = None) -> None:
        self.words = list(words)
        self.numbers = {word: n for n, word in enumerate(self.words)}
        self._frequencies = (
            array("i", [0] * len(self.words)) if frequencies is None else array("i", frequencies.tobytes())
        )
        self._known_near: dict[tuple[str, int], list[Neighbour]] = {}
        self._sorted = 0
        self._signatures: NDArray[np.uint64] = np.zeros(0, np.uint64)
        self._by_length: NDArray[np.int32] = np.zeros(0, np.int32)
        self._first_of_length: list[int] = [0] * (LONGEST + 2)
        self._by_letters: NDArray[np.int32] = np.zeros(0, np.int32)

    def __len__(self) -> int:
        return len(self.words)

    def number(self, word: str) -> int:
        """The number of a word, which is given one when it is new."""
        known = self.numbers.get(word)
        if known is None:
            known = self.numbers[word] = len(self.words)
            self.words.append(word)
            self._frequencies.append(0)
        return known

    def count(self, number: int, texts: int) -> None:
        """So many more texts (fewer, when negative) hold the word."""
        self._frequencies[number] += texts
        self._known_near.clear()

    def frequency(self, word: str) -> int:
        """In how many texts a word stands."""
        number = self.numbers.get(word)
        return 0 if number is None else self._frequencies[number]

    def frequencies(self) -> NDArray[np.int32]:
        """In how many texts each word stands, by number (a copy)."""
        return np.array(self._frequencies, np.int32)

    def near(self, word: str, slips: int) -> list[Neighbour]:
        """Every word at most `slips` away, `word` itself left out, in no particular order.

        Answers are kept until a text comes or goes: as one types, most words of a query stay the same.
        """
        if slips < 1:
            return []
        known = self._known_near.get((word, slips))
        if known is None:
            if len(self._known_near) >= MOST_KEPT:
                self._known_near.clear()
            known = self._known_near[word, slips] = self._near(word, slips)
        return known

    def _near(self, word: str, slips: int) -> list[Neighbour]:
        self._sort()
        low, high = max(1, len(word) - slips), min(LONGEST, len(word) + slips)
        if low > high:
            return []
        start, end = self._first_of_length[low], self._first_of_length[high + 1]
        unlike = np.bitwise_count(self._signatures[start:end] ^ np.uint64(signature(word)))
        likely = self._by_length[start:end][unlike <= SIGNATURE_BITS_A_SLIP * slips].tolist()
        words = self.words
        choices = [words[n] for n in likely]
        found = process.extract(word, choices, scorer=OSA.distance, processor=None, score_cutoff=slips, limit=None)
        made = []
        for candidate, away, at in found:
            frequency = self._frequencies[likely[at]]
            if frequency > 0 and candidate != word:
                made.append(Neighbour(candidate, frequency, int(away)))
        return made

    def beginning(self, start: str, most: int) -> list[str]:
        """The most frequent words that begin with `start`, itself left out."""
        self._sort()
        words, order = self.words, self._by_letters
        low = bisect_left(order, start, key=lambda n: words[n])
        high = bisect_left(order, start + "\U0010ffff", lo=low, key=lambda n: words[n])
        found = [(-self._frequencies[n], words[n]) for n in order[low:high].tolist() if self._frequencies[n] > 0]
        found.sort()
        return [word for _, word in found if word != start][:most]

    def _sort(self) -> None:
        """Bring the orders by length and by letters up to date with words that have come since."""
        new = list(range(self._sorted, len(self.words)))
        if not new:
            return
        lengths = np.fromiter((len(self.words[n]) for n in new), np.int64, len(new))
        signatures = np.fromiter((signature(self.words[n]) for n in new), np.uint64, len(new))
        if len(new) > FEW:
            lengths = np.concatenate([self._lengths(), lengths])
            every = np.concatenate([self._by_number(), signatures])
            self._by_length = np.argsort(lengths, kind="stable").astype(np.int32)
            self._signatures = every[self._by_length]
            self._first_of_length = np.searchsorted(lengths[self._by_length], np.arange(LONGEST + 2)).tolist()
            self._by_letters = np.array(sorted(range(len(self.words)), key=self.words.__getitem__), np.int32)
        else:
            self._put_in(new, lengths, signatures)
        self._sorted = len(self.words)

    def _put_in(self, new: list[int], lengths: NDArray[np.int64], signatures: NDArray[np.uint64]) -> None:
        """Put a few words into their places: sorting anew would cost more than the search at half a million words."""
        firsts = np.array(self._first_of_length)
        order = np.argsort(lengths, kind="stable")  # of words put in at one place the shorter first
        ends = firsts[lengths[order] + 1]
        self._by_length = np.insert(self._by_length, ends, np.array(new)[order])
        self._signatures = np.insert(self._signatures, ends, signatures[order])
        shorter = np.cumsum(np.bincount(lengths, minlength=LONGEST + 1))
        firsts[1:] += shorter[: LONGEST + 1]
        self._first_of_length = firsts.tolist()
        words = self.words
        new.sort(key=words.__getitem__)
        places = [bisect_left(self._by_letters, words[n], key=lambda m: words[m]) for n in new]
        self._by_letters = np.insert(self._by_letters, places, new)

    def _lengths(self) -> NDArray[np.int64]:
        """The lengths of the words sorted so far, by number."""
        made = np.empty(self._sorted, np.int64)
        made[self._by_length] = np.repeat(np.arange(LONGEST + 1), np.diff(self._first_of_length))
        return made

    def _by_number(self) -> NDArray[np.uint64]:
        """The signatures of the words sorted so far, by number."""
        made = np.empty(self._sorted, np.uint64)
        made[self._by_length] = self._signatures
        return made

    def orders(self) -> tuple[NDArray[np.uint64], NDArray[np.int32], NDArray[np.int32]]:
        """Signatures by length, word numbers by length and by letters: what a snapshot keeps."""
        self._sort()
        return self._signatures, self._by_length, self._by_letters

    def take_orders(
        self, signatures: NDArray[np.uint64], by_length: NDArray[np.int32], by_letters: NDArray[np.int32]
    ) -> None:
        """The orders of exactly these words, as `orders` gave them."""
        lengths = np.fromiter(map(len, self.words), np.int32, len(self.words))
        self._signatures, self._by_length, self._by_letters = signatures, by_length, by_letters
        self._first_of_length = np.searchsorted(lengths[by_length], np.arange(LONGEST + 2)).tolist()
        self._sorted = len(self.words)
