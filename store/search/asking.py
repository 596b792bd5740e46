"""One search, from the understood query to the hits with what is to be highlighted."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

import numpy as np
from numpy.typing import NDArray
from sqlalchemy import Connection

from store import shorthand
from store.records import Record
from store.rules import ranking
from store.rules.queries import Query
from store.rules.ranking import EXACT, Codes
from store.rules.words import tokens
from store.search import Answer, Hit, filters, index, sources
from store.search.index import Index
from store.search.matching import Match, match
from store.search.postings import Places, Texts, together
from store.sqlite.engine import rows


def answer(record: Record, asked: str, query: Query, as_typed: frozenset[str] | bool, most: int) -> Answer:
    """Search with a query that holds something to look for. Raises as `store.search.find`."""
    with record.read() as conn:
        same = shorthand.groups(record, conn)
        found = index.of(record, conn)
        with found.lock:
            literal = (as_typed is True) if isinstance(as_typed, bool) else None
            matches = [
                match(found.lexicon, term, same, refused=literal if literal is not None else term.word in as_typed)  # type: ignore[operator]
                for term in query.terms
            ]
            texts = _best(record, conn, found, query, matches, most)
            picked = [(int(line["source"]), int(line["row"])) for line in found.shelf.lines[texts]]
        hits = _hits(conn, picked, matches, query.phrases)
    corrected = {t.word: m.corrected for t, m in zip(query.terms, matches, strict=True) if m.corrected}
    return Answer(asked, corrected, hits, query.left_out)


def _best(
    record: Record, conn: Connection, found: Index, query: Query, matches: Sequence[Match], most: int
) -> NDArray[np.int64]:
    wanted = filters.wanted(record, conn, found.shelf, query.filters)
    texts = len(found.shelf)
    codes = [_codes(found, one.costs.items(), texts) for one in matches]
    for phrase in query.phrases:
        held = np.zeros(texts, np.bool_)
        held[_phrase(found, phrase)] = True
        wanted &= held
        codes.append(np.where(held, _codes(found, [(phrase[0], EXACT)], texts), 0).astype(np.uint16))
    for word in query.excluded:
        if word in found.lexicon.numbers:
            wanted[_entries(found, word)[0]] = False
    for phrase in query.excluded_phrases:
        wanted[_phrase(found, phrase)] = False
    return ranking.order(codes, wanted, found.shelf.lines["at"], found.shelf.ties, most)


def _codes(found: Index, costs: Iterable[tuple[str, int]], texts: int) -> Codes:
    """For each text the best match of one asked word in it, by `ranking.code`; 0 where it is not found."""
    made = np.zeros(texts, np.uint16)
    for word, cost in sorted(costs, key=lambda c: -c[1]):
        if word in found.lexicon.numbers:
            held, places = _entries(found, word)
            made[held[::-1]] = ranking.code(cost, places)[::-1]  # of several places the first is written last
    return made


def _entries(found: Index, word: str) -> tuple[Texts, Places]:
    return found.postings.of(found.lexicon.numbers[word])


def _phrase(found: Index, phrase: Sequence[str]) -> Texts:
    if any(word not in found.lexicon.numbers for word in phrase):
        return np.zeros(0, np.uint32)
    return together([_entries(found, word) for word in phrase])


def _hits(
    conn: Connection, picked: Sequence[tuple[int, int]], matches: Sequence[Match], phrases: Sequence[Sequence[str]]
) -> tuple[Hit, ...]:
    """The texts themselves, in the order in which they were picked."""
    known: dict[tuple[int, int], tuple[str, ...]] = {}
    for n, source in enumerate(sources.SOURCES):
        which = [row for number, row in picked if number == n]
        for at in range(0, len(which), 500):
            for which_row, *values in _read(conn, source, which[at : at + 500]):
                known[n, which_row] = tuple(values)
    words = {word for one in matches for word in one.costs}
    made = []
    for n, row in picked:
        if (n, row) in known:
            tag, model, moment, by, said = known[n, row]
            made.append(Hit(tag, model, moment, by, sources.SOURCES[n].where, row, said, marks(said, words, phrases)))
    return tuple(made)


def _read(conn: Connection, source: sources.Source, which: Sequence[int]) -> list[tuple[int, str, str, str, str, str]]:
    found = rows(
        conn,
        f"SELECT t.id, coalesce(j.tag, ''), coalesce(m.number, ''), {source.at}, {source.by}, {source.text} "  # noqa: S608
        f"FROM {source.table} t LEFT JOIN job j ON j.id = {source.job} LEFT JOIN unit u ON u.id = j.unit_id "
        f"LEFT JOIN model m ON m.id = u.model_id WHERE t.id IN ({','.join('?' * len(which))})",
        which,
    )
    return [tuple(row) for row in found]


def marks(text: str, words: set[str], phrases: Sequence[Sequence[str]]) -> tuple[tuple[int, int], ...]:
    """Where in a text the words and phrases stand: (start, end), ascending, none within another."""
    found = tokens(text)
    spans = [(token.start, token.end) for token in found if token.word in words]
    by_place: dict[int, set[str]] = {}
    ends: dict[int, tuple[int, int]] = {}
    for token in found:
        by_place.setdefault(token.place, set()).add(token.word)
        ends.setdefault(token.place, (token.start, token.end))
    for phrase in phrases:
        spans += [
            (ends[place][0], ends[place + len(phrase) - 1][1])
            for place in by_place
            if all(word in by_place.get(place + n, ()) for n, word in enumerate(phrase))
        ]
    merged: list[tuple[int, int]] = []
    for start, end in sorted(set(spans), key=lambda s: (s[0], -s[1])):
        if not merged or start >= merged[-1][1]:
            merged.append((start, end))
        elif end > merged[-1][1]:
            merged[-1] = (merged[-1][0], end)
    return tuple(merged)
