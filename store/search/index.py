"""The index of every text: built from the rows, brought up to date before each search, kept in a file beside the record.

SQLite stays the truth: the file can be deleted at any time and is made anew.
"""

from __future__ import annotations

import threading
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path

import numpy as np
from sqlalchemy import Connection

from store.records import Record
from store.rules.words import indexed
from store.search import sources
from store.search.lexicon import Lexicon
from store.search.postings import Building, Postings
from store.search.shelf import Shelf

MANY = 5_000
WORTH_A_FILE = 2_000
Tell = Callable[[str, int], None]


@dataclass
class Index:
    """Words, entries and texts, and how far in the record they reach: `reach` as `sources.newest` gives it."""

    lexicon: Lexicon = field(default_factory=Lexicon)
    postings: Postings = field(default_factory=Postings)
    shelf: Shelf = field(default_factory=Shelf)
    reach: list[int] = field(default_factory=lambda: [0] * (len(sources.SOURCES) + 1))
    lock: threading.RLock = field(default_factory=threading.RLock, repr=False, compare=False)
    unsaved: int = 0

    def catch_up(self, conn: Connection) -> int:
        """Take in what was written, changed or deleted since; returns how many texts that was."""
        now = sources.newest(conn)
        if now == self.reach or self._is_ahead(now):
            return 0
        done = 0
        if now[-1] > self.reach[-1]:
            done += self._reread(conn, sources.changed(conn, self.reach[-1]))
        for n, source in enumerate(sources.SOURCES):
            if now[n] > self.reach[n]:
                for row, job, at, by, text in sources.past(conn, source, self.reach[n]):
                    self._add(n, row, job, at, by, text)
                    done += 1
        self.reach = now
        self.unsaved += done
        if self.postings.new_entries > max(20 * MANY, len(self.postings.texts) // 20):
            self.postings.fold_in(len(self.lexicon))
        return done

    def _is_ahead(self, now: list[int]) -> bool:
        """Whether another thread has brought the index further than `now`, the state that this one's transaction sees.

        The log only grows, and rows that went away are in it: fewer rows with no more log is an earlier state.
        """
        fewer = any(seen < known for seen, known in zip(now, self.reach, strict=True))
        return now[-1] < self.reach[-1] or (now[-1] == self.reach[-1] and fewer)

    def _add(self, source: int, row: int, job: int, at: int, by: str, text: str) -> None:
        number = self.shelf.add(source, row, job or 0, at, by or "", text)
        seen = set()
        for word, place in indexed(text):
            which = self.lexicon.number(word)
            self.postings.add(which, number, place)
            seen.add(which)
        for which in seen:
            self.lexicon.count(which, 1)

    def _reread(self, conn: Connection, changed: list[tuple[int, int]]) -> int:
        """Take changed texts off the shelf; put back those whose rows still stand and lie within reach."""
        for n, row in changed:
            number = self.shelf.number(n, row)
            if number is not None:
                self.shelf.take_off(number)
                for word in self.postings.words_of(number):
                    self.lexicon.count(word, -1)
        for n, source in enumerate(sources.SOURCES):
            mine = sorted({row for which, row in changed if which == n and row <= self.reach[n]})
            for at in range(0, len(mine), 500):
                for text in sources.some(conn, source, mine[at : at + 500]):
                    self._add(n, *text)
        return len(changed)


def build(conn: Connection, tell: Tell | None = None) -> Index:
    """A new index of everything in the record. `tell` hears how many texts are in, now and then."""
    made, building = Index(), Building()
    shelf = made.shelf
    numbers: dict[str, int] = {}
    number_of = numbers.setdefault
    made.reach = sources.newest(conn)
    for n, source in enumerate(sources.SOURCES):
        for row, job, at, by, text in sources.past(conn, source, 0):
            found = indexed(text)
            words = [number_of(word, len(numbers)) for word, _ in found]
            building.add(words, shelf.add(n, row, job or 0, at, by or "", text), [place for _, place in found])
            if tell is not None and len(shelf) % 10_000 == 0:
                tell("index", len(shelf))
    made.postings = building.postings(len(numbers))
    made.lexicon = Lexicon(numbers, made.postings.frequencies())
    made.unsaved = len(shelf)
    return made


def of(record: Record, conn: Connection) -> Index:
    """The index of a record, brought up to date with what `conn` sees. Made or read from its file at the first call."""
    known: Index | None = record.cache.get("search")
    if known is None:
        with _first:
            known = record.cache.get("search")
            if known is None:
                from store.search import snapshot

                known = snapshot.load(file_of(record), conn) or build(conn)
                record.cache["search"] = known
    with known.lock:
        known.catch_up(conn)
        if known.unsaved >= max(WORTH_A_FILE, len(known.shelf) // 20):
            _save(record, known, conn)
    return known


_first = threading.Lock()


def file_of(record: Record) -> Path:
    """The file beside the record that keeps the index. A record with few texts has none."""
    return record.path.with_name(record.path.name + ".words")


def _save(record: Record, index: Index, conn: Connection) -> None:
    from store.search import snapshot

    index.postings.fold_in(len(index.lexicon))
    index.unsaved = 0
    snapshot.save(index, file_of(record), sources.head(conn))


def differences(index: Index, fresh: Index) -> list[str]:
    """What the index says otherwise than a fresh one built from the rows, in words; empty where they agree."""
    mine, theirs = _texts(index), _texts(fresh)
    said = []
    if missing := len(theirs.keys() - mine.keys()):
        said.append(f"{missing:,} texts of the record are not in the search index")
    if extra := len(mine.keys() - theirs.keys()):
        said.append(f"{extra:,} texts in the search index are not in the record")
    if other := sum(mine[key] != theirs[key] for key in mine.keys() & theirs.keys()):
        said.append(f"{other:,} texts differ between the record and the search index")
    if not said and _entries(index) != _entries(fresh):
        said.append("words of the search index point to other texts than those of the record")
    return said


def _texts(index: Index) -> dict[tuple[int, int], tuple[int, int, int]]:
    lines = index.shelf.lines[index.shelf.standing()]
    return {
        (source, row): (job, at, checked)
        for row, job, at, checked, source in zip(
            *(lines[name].tolist() for name in ("row", "job", "at", "check", "source")), strict=True
        )
    }


def _entries(index: Index) -> int:
    """A checksum over every entry of a standing text, whatever the order of words and texts."""
    import zlib

    lines, stands, total = index.shelf.lines, index.shelf.standing(), 0
    mixed = (lines["row"].astype(np.uint64) * np.uint64(8) + lines["source"]) * np.uint64(0x9E3779B97F4A7C15)
    for number, word in enumerate(index.lexicon.words):
        texts, places = index.postings.of(number)
        kept = stands[texts]
        if not kept.any():
            continue
        each = (mixed[texts[kept]] ^ places[kept].astype(np.uint64)) * np.uint64(0xC2B2AE3D27D4EB4F)
        salt = zlib.crc32(word.encode()) * 2 + 1
        total = (total + int((each ^ (each >> np.uint64(29))).sum(dtype=np.uint64)) * salt) % (1 << 64)
    return total
