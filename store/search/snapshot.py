"""The index in a file: a cache that any record can make anew, and that is believed only where it fits the record.

The file begins with one line of JSON (format, how far the index reaches, number and hash of the audit entry at which it
was made, sizes, checksum), then the words, then the arrays. A file of another format, of another record, of a state that
the record no longer has (a backup restored), or a damaged one is left aside.
"""

from __future__ import annotations

import json
import os
import zlib
from pathlib import Path
from typing import Any

import numpy as np
from numpy.typing import NDArray
from sqlalchemy import Connection

from store.search import sources
from store.search.index import Index
from store.search.lexicon import Lexicon
from store.search.postings import Postings
from store.search.shelf import LINE, Shelf
from store.sqlite.engine import rows

FORMAT = "wearline words 2"
MOST_HEADER = 4_000_000


def save(index: Index, path: Path, head: tuple[int, str]) -> bool:
    """Write the index beside its record; its postings are folded in. False where the disk would not have it: no harm."""
    arrays = _arrays(index)
    words = "\n".join(index.lexicon.words).encode()
    summed = zlib.crc32(words)
    for array in arrays:
        summed = zlib.crc32(np.ascontiguousarray(array).view(np.uint8).data, summed)
    header = {
        "format": FORMAT, "reach": index.reach, "sources": [s.table for s in sources.SOURCES], "head": head,
        "people": index.shelf.people, "words": len(words), "arrays": [[a.dtype.str, len(a)] for a in arrays[:-1]],
        "texts": len(arrays[-1]), "sum": summed,
    }  # fmt: skip
    half = path.with_name(f"{path.name}.{os.getpid()}.part")
    try:
        with half.open("wb") as file:
            file.write(json.dumps(header).encode() + b"\n" + words)
            for array in arrays:
                file.write(np.ascontiguousarray(array).data)
        half.replace(path)
    except OSError:
        half.unlink(missing_ok=True)
        return False
    return True


def load(path: Path, conn: Connection) -> Index | None:
    """The index from its file, None where there is none that fits this record."""
    try:
        with path.open("rb") as file:
            header = _fitting(json.loads(file.readline(MOST_HEADER)), conn)
            words = file.read(header["words"])
            kinds = [(np.dtype(kind), count) for kind, count in header["arrays"]] + [(LINE, header["texts"])]
            summed = zlib.crc32(words)
            arrays: list[NDArray[Any]] = []
            for kind, count in kinds:
                array = np.fromfile(file, kind, count)
                summed = zlib.crc32(array.view(np.uint8).data, summed)
                arrays.append(array)
            if summed != header["sum"] or file.read(1):
                return None
    except (OSError, ValueError, TypeError, KeyError, AttributeError, MemoryError):
        return None
    return _index(header, words, arrays)


def _fitting(header: dict[str, Any], conn: Connection) -> dict[str, Any]:
    """The header, when it is of this format and of this record. Raises ValueError otherwise."""
    number, chained = header["head"]
    known = rows(conn, "SELECT hash FROM audit WHERE id = ?", (number,))
    fits = [(chained,)] == known if number else not chained
    if header["format"] != FORMAT or header["sources"] != [s.table for s in sources.SOURCES] or not fits:
        raise ValueError(FORMAT)
    if any(kept > now for kept, now in zip(header["reach"], sources.newest(conn), strict=True)):
        raise ValueError(FORMAT)
    return header


def _arrays(index: Index) -> list[NDArray[Any]]:
    postings = index.postings
    return [
        index.lexicon.frequencies(), *index.lexicon.orders(), postings.starts, postings.texts, postings.places,
        index.shelf.lines,
    ]  # fmt: skip


def _index(header: dict[str, Any], words: bytes, arrays: list[NDArray[Any]]) -> Index:
    frequencies, signatures, by_length, by_letters, starts, texts, places, lines = arrays
    lexicon = Lexicon(words.decode().split("\n") if words else (), frequencies)
    lexicon.take_orders(signatures, by_length, by_letters)
    postings = Postings()
    postings.starts, postings.texts, postings.places = starts, texts, places
    return Index(lexicon, postings, Shelf(lines, header["people"]), list(header["reach"]))
