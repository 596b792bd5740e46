"""The words that set the notes of comebacks apart from those of all other jobs."""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass

from store.followed import period
from store.records import Record
from store.sqlite.engine import rows


@dataclass(frozen=True, slots=True)
class Word:
    """A word of the notes: in how many comebacks' notes it stands, of how many; and the same for all other jobs."""

    word: str
    back: int
    of_back: int
    other: int
    of_other: int


_NOTED = "SELECT job_id, text FROM note"
MOST_WORDS = 20
FEWEST_NOTES = 2


def words(record: Record, *, until: str = "") -> tuple[Word, ...]:
    """Words that set the notes of comebacks apart from all others, by the gap of their shares, with counts.

    A word counts once a job; shorthand and slips are read as the shop writes them. Empty without notes on both sides.
    """
    from store.rules.words import indexed

    _, last = period(record, "", until)
    with record.read() as conn:
        back = {
            r[0]
            for r in rows(
                conn, "SELECT id FROM job WHERE earlier_id IS NOT NULL AND substr(taken_in, 1, 10) <= ?", (last,)
            )
        }
        noted = rows(conn, _NOTED)
    seen: dict[int, set[str]] = {}
    for job, text in noted:
        seen.setdefault(job, set()).update(word for word, _ in indexed(text) if word.isalpha() and len(word) > 2)
    sides = [Counter(word for job in seen if (job in back) is side for word in seen[job]) for side in (True, False)]
    of_back = sum(job in back for job in seen)
    of_other = len(seen) - of_back
    if not of_back or not of_other:
        return ()
    made = [
        Word(word, count, of_back, sides[1][word], of_other)
        for word, count in sides[0].items()
        if count >= FEWEST_NOTES
    ]
    made.sort(key=lambda w: (w.other / w.of_other - w.back / w.of_back, w.word))
    return tuple(w for w in made if w.back / w.of_back > w.other / w.of_other)[:MOST_WORDS]
