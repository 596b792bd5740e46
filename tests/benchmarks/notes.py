"""A seeded generator of shop notes, as many as twenty years leave behind, with slips in four words of a hundred.

Words follow Zipf's law over the trade's words and made-up ones; lengths follow those of bench notes (3 to 40 words, 12 in
the mean); some words are part numbers. The same seed gives the same notes.
"""

from __future__ import annotations

import random
from collections.abc import Iterator
from pathlib import Path

import numpy as np

from store import records
from store.records import Record
from store.rules.findings import WORDS
from store.sqlite.engine import driver

SLIPS = 0.04
VOCABULARY = 20_000
NUMBERS = 0.02
NOTES_A_JOB = 10
FIRST_SECOND = 1_150_000_000
_BEFORE = (
    "b",
    "br",
    "c",
    "ch",
    "d",
    "dr",
    "f",
    "g",
    "gr",
    "h",
    "k",
    "l",
    "m",
    "n",
    "p",
    "pl",
    "r",
    "s",
    "sh",
    "st",
    "t",
    "tr",
    "v",
    "w",
)
_VOWELS = ("a", "e", "i", "o", "u", "ea", "oo", "ai")
_AFTER = ("", "", "n", "r", "l", "t", "s", "ck", "nd", "st", "m", "p")
_LETTERS = "abcdefghijklmnopqrstuvwxyz"


def vocabulary(rng: random.Random, count: int = VOCABULARY) -> list[str]:
    """The trade's words, then made-up ones; each once, the frequent first."""
    trade = sorted(WORDS)
    rng.shuffle(trade)
    made = dict.fromkeys(trade)
    while len(made) < count:
        syllables = rng.choices((1, 2, 3, 4), (1, 5, 4, 1))[0]
        word = "".join(rng.choice(_BEFORE) + rng.choice(_VOWELS) + rng.choice(_AFTER) for _ in range(syllables))
        made[word] = None
    return list(made)


def slip(rng: random.Random, word: str) -> str:
    """The word with one slip: a letter left out, put in, doubled, put for another, or two swapped."""
    at = rng.randrange(len(word))
    match rng.randrange(5):
        case 0 if len(word) > 2:
            return word[:at] + word[at + 1 :]
        case 1:
            return word[:at] + rng.choice(_LETTERS) + word[at:]
        case 2:
            return word[:at] + word[at] + word[at:]
        case 3 if at + 1 < len(word):
            return word[:at] + word[at + 1] + word[at] + word[at + 2 :]
        case _:
            return word[:at] + rng.choice(_LETTERS) + word[at + 1 :]


def texts(seed: int, count: int) -> Iterator[str]:
    """So many notes."""
    rng, draw = random.Random(seed), np.random.default_rng(seed)
    words = vocabulary(rng)
    weights = 1.0 / np.arange(2, len(words) + 2)
    weights /= weights.sum()
    for start in range(0, count, 10_000):
        notes = min(10_000, count - start)
        lengths = np.clip(draw.lognormal(2.35, 0.5, notes).round().astype(int), 3, 40)
        picked = draw.choice(len(words), int(lengths.sum()), p=weights).tolist()
        chance = draw.random(len(picked)).tolist()
        at = 0
        for length in lengths.tolist():
            said = []
            for n in range(at, at + length):
                word = words[picked[n]]
                if chance[n] < SLIPS and len(word) > 3:
                    word = slip(rng, word)
                elif chance[n] > 1 - NUMBERS:
                    word = f"{rng.choice(('KM', 'KS', 'BR', 'SL'))}-{rng.randrange(1000, 99999):05d}"
                said.append(word)
            at += length
            yield " ".join(said)


def record(path: Path, count: int, seed: int = 7) -> Record:
    """A new record with so many notes over twenty years, ten a job."""
    made = records.open(path, create=True)
    jobs = max(1, count // NOTES_A_JOB)
    step = 631_000_000 // max(1, count)
    with made.write() as conn:
        raw = driver(conn)
        raw.execute("INSERT INTO model VALUES (1,'KS-100','KS100','starter','12','cw','',NULL,NULL,NULL,1,1,'')")
        raw.executemany("INSERT INTO unit VALUES (?,1,?,?)", ((n, str(n), str(n)) for n in range(1, jobs + 1)))
        raw.executemany(
            "INSERT INTO job VALUES (?,?,?,?,NULL,'','',NULL,NULL,'','2006-06-11T00:00:00Z','','','open',NULL,'',NULL,'',0)",
            ((n, str(n), str(n), n) for n in range(1, jobs + 1)),
        )
        raw.executemany(
            "INSERT INTO note(job_id, at, by, text) VALUES (?, strftime('%Y-%m-%dT%H:%M:%SZ', ?, 'unixepoch'), ?, ?)",
            (
                (1 + n // NOTES_A_JOB % jobs, FIRST_SECOND + n * step, ("AB", "CN", "ET")[n % 3], text)
                for n, text in enumerate(texts(seed, count))
            ),
        )
    return made


def queries(seed: int, texts: list[str], words: int, count: int) -> list[tuple[str, str]]:
    """Queries of so many words out of notes: as meant, and with a slip in each word."""
    rng = random.Random(seed)
    made: list[tuple[str, str]] = []
    while len(made) < count:
        fit = sorted({word for word in rng.choice(texts).split() if word.isalpha() and len(word) > 3})
        if len(fit) >= words:
            right = rng.sample(fit, words)
            made.append((" ".join(right), " ".join(slip(rng, word) for word in right)))
    return made
