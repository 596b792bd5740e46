"""Which texts hold which word, and where in them: flat arrays by word, and lists for what has come since.

A text is known here by its number, from 0 in the order in which texts came. An entry is (text, place of the word in it).
"""

from __future__ import annotations

from array import array

import numpy as np
from numpy.typing import NDArray

Texts = NDArray[np.uint32]
Places = NDArray[np.uint16]
RUN = 2_000_000


class Postings:
    """Entries by word number; in the flat arrays those of word w are [starts[w] : starts[w + 1]], ascending by text, place."""

    def __init__(self) -> None:
        self.starts: NDArray[np.int64] = np.zeros(1, np.int64)
        self.texts: Texts = np.zeros(0, np.uint32)
        self.places: Places = np.zeros(0, np.uint16)
        self._new: dict[int, tuple[array[int], array[int]]] = {}
        self.new_entries = 0

    def add(self, word: int, text: int, place: int) -> None:
        """One more entry; `text` is not smaller than any before it."""
        new = self._new.get(word)
        if new is None:
            new = self._new[word] = (array("I"), array("H"))
        new[0].append(text)
        new[1].append(place)
        self.new_entries += 1

    def of(self, word: int) -> tuple[Texts, Places]:
        """The entries of a word, ascending by text and place."""
        start, end = (int(self.starts[word]), int(self.starts[word + 1])) if word + 1 < len(self.starts) else (0, 0)
        texts, places = self.texts[start:end], self.places[start:end]
        new = self._new.get(word)
        if new is None:
            return texts, places
        return (
            np.concatenate([texts, np.array(new[0], np.uint32)]),
            np.concatenate([places, np.array(new[1], np.uint16)]),
        )

    def frequencies(self) -> NDArray[np.int32]:
        """In how many texts each word stands, by its number; of the flat arrays alone."""
        made = np.zeros(len(self.starts) - 1, np.int64)
        for start in range(0, len(self.texts), RUN):
            at = np.arange(start, min(start + RUN, len(self.texts)))
            word = np.searchsorted(self.starts, at, side="right") - 1
            is_again = (self.texts[at] == self.texts[at - 1]) & (at != self.starts[word])
            made += np.bincount(word[~is_again], minlength=len(made))
        return made.astype(np.int32)

    def words_of(self, text: int) -> list[int]:
        """The numbers of the words that stand in a text."""
        at = np.flatnonzero(self.texts == np.uint32(text))
        found = set((np.searchsorted(self.starts, at, side="right") - 1).tolist())
        found |= {word for word, (texts, _) in self._new.items() if text in texts}
        return sorted(found)

    def fold_in(self, words: int) -> None:
        """Move what has come since into the flat arrays; `words` is how many words there are now."""
        if not self._new and words == len(self.starts) - 1:
            return
        counts = np.zeros(words, np.int64)
        counts[: len(self.starts) - 1] = np.diff(self.starts)
        known = counts.copy()
        for word, (texts, _) in self._new.items():
            counts[word] += len(texts)
        starts = np.zeros(words + 1, np.int64)
        np.cumsum(counts, out=starts[1:])
        all_texts, all_places = np.empty(starts[-1], np.uint32), np.empty(starts[-1], np.uint16)
        shift = starts[: len(self.starts) - 1] - self.starts[:-1]
        for start in range(0, len(self.texts), RUN):  # piece by piece, so that memory stays flat
            end = min(start + RUN, len(self.texts))
            at = np.arange(start, end)
            at += shift[np.searchsorted(self.starts, at, side="right") - 1]
            all_texts[at], all_places[at] = self.texts[start:end], self.places[start:end]
        for word, (texts, places) in self._new.items():
            first = int(starts[word] + known[word])
            all_texts[first : first + len(texts)] = texts
            all_places[first : first + len(places)] = places
        self.starts, self.texts, self.places = starts, all_texts, all_places
        self._new, self.new_entries = {}, 0


class Building:
    """Entries gathered in bulk, sorted run by run so that memory stays flat, then merged into Postings."""

    def __init__(self) -> None:
        self._words, self._texts, self._places = array("I"), array("I"), array("H")
        self._runs: list[tuple[NDArray[np.int64], Texts, Places]] = []

    def add(self, words: list[int], text: int, places: list[int]) -> None:
        """The entries of one text, ascending by place."""
        self._words.extend(words)
        self._texts.extend([text] * len(words))
        self._places.extend(places)
        if len(self._words) >= RUN:
            self._close_run()

    def _close_run(self) -> None:
        words = np.frombuffer(self._words, np.uint32)
        order = np.argsort(words, kind="stable")
        counts = np.bincount(words).astype(np.int64)
        texts = np.frombuffer(self._texts, np.uint32)[order]
        places = np.frombuffer(self._places, np.uint16)[order]
        self._runs.append((counts, texts, places))
        self._words, self._texts, self._places = array("I"), array("I"), array("H")

    def postings(self, words: int) -> Postings:
        """Everything added, merged; `words` is how many words there are. The gathering is empty afterwards."""
        if len(self._words):
            self._close_run()
        counts = np.zeros(words, np.int64)
        for run, _, _ in self._runs:
            counts[: len(run)] += run
        made = Postings()
        made.starts = np.zeros(words + 1, np.int64)
        np.cumsum(counts, out=made.starts[1:])
        made.texts = np.empty(made.starts[-1], np.uint32)
        made.places = np.empty(made.starts[-1], np.uint16)
        filled = made.starts[:-1].copy()
        while self._runs:
            run, texts, places = self._runs.pop(0)
            first = np.zeros(len(run), np.int64)
            np.cumsum(run[:-1], out=first[1:])
            where = np.repeat(filled[: len(run)] - first, run) + np.arange(len(texts))
            made.texts[where], made.places[where] = texts, places
            filled[: len(run)] += run
        return made


def together(sequence: list[tuple[Texts, Places]]) -> Texts:
    """The texts in which the entries follow one another as a phrase; ascending, each once."""
    if not sequence:
        return np.zeros(0, np.uint32)
    here = _keys(*sequence[0])
    for texts, places in sequence[1:]:
        there = _keys(texts, places)
        at = np.searchsorted(there, here + 1)
        at[at == len(there)] = 0
        here = here[there[at] == here + 1] + 1 if len(there) else there
    return np.unique(here >> 16).astype(np.uint32)


def _keys(texts: Texts, places: Places) -> NDArray[np.int64]:
    return (texts.astype(np.int64) << 16) | places
