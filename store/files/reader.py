"""Reading a CSV file line by line, with every fault of the file itself named by line and column."""

from __future__ import annotations

import codecs
import csv
from collections.abc import Iterator, Sequence
from operator import itemgetter
from pathlib import Path

from store.errors import BadLine, FileRefused, RecordUnusable, brief

LONGEST_LINE = 1_000_000
csv.field_size_limit(LONGEST_LINE)


def header(path: Path) -> tuple[str, ...]:
    """The column names of a file. Raises FileRefused (empty, wrong encoding), RecordUnusable (cannot be opened)."""
    for row in _rows(path):
        return tuple(column.strip().lower() for column in row[1])
    raise FileRefused([BadLine(path.name, 1, "", "the file is empty; the first line names the columns")])


def lines(path: Path, bad: list[BadLine]) -> Iterator[tuple[int, dict[str, str]]]:
    """The lines below the header, each with its number, as column -> text with outer spaces off; empty lines skipped.

    A line with more or fewer cells than the header is added to `bad` and left out. Raises FileRefused where reading
    cannot go on: wrong encoding, an open quote at the end, a line longer than LONGEST_LINE.
    """
    columns, rows = _even_rows(path, bad)
    for number, row in rows:
        yield number, dict(zip(columns, map(str.strip, row), strict=True))


def cells(path: Path, bad: list[BadLine], wanted: Sequence[str]) -> Iterator[tuple[int, tuple[str, ...]]]:
    """Like `lines`, with the cells of the wanted columns in that order, empty where the file lacks the column.

    Half the cost of `lines`, for files of a million.
    """
    columns, rows = _even_rows(path, bad)
    pick = itemgetter(*(columns.index(column) if column in columns else len(columns) for column in wanted))
    strip = str.strip
    for number, row in rows:
        yield number, pick([*map(strip, row), ""])


def _even_rows(path: Path, bad: list[BadLine]) -> tuple[list[str], Iterator[tuple[int, list[str]]]]:
    """The columns, and the rows that have a cell for each; empty rows are skipped, uneven ones are added to `bad`."""
    rows = _rows(path)
    columns = [column.strip().lower() for column in next(rows)[1]]
    width = len(columns)

    def even() -> Iterator[tuple[int, list[str]]]:
        for numbered in rows:
            have = len(numbered[1])
            if have == width:
                yield numbered
            elif have:
                why = f"{have} cells where the header has {width}" + ("; is the file cut off?" if have < width else "")
                bad.append(BadLine(path.name, numbered[0], columns[have] if have < width else "", why))

    return columns, even()


def _rows(path: Path) -> Iterator[tuple[int, list[str]]]:
    """Rows with the number of the line on which each begins."""
    try:
        reader = csv.reader(_decoded(path), strict=True)
        begins = 1
        while True:
            try:
                row = next(reader)
            except StopIteration:
                return
            except csv.Error as fault:
                why = str(fault)
                if "unexpected end" in why:
                    why = "a quote is opened and never closed; is the file cut off?"
                elif "field larger" in why:
                    why = f"a cell is longer than {LONGEST_LINE:,} characters; is this the right file?"
                raise FileRefused([BadLine(path.name, begins, "", why)]) from None
            yield begins, row
            begins = reader.line_num + 1
    except OSError as fault:
        raise RecordUnusable(f"{path} cannot be read: {(fault.strerror or str(fault)).lower()}") from None


def _decoded(path: Path) -> Iterator[str]:
    with path.open("rb") as raw:
        number = 0
        while line := raw.readline(LONGEST_LINE + 1):
            number += 1
            if number == 1 and line.startswith(codecs.BOM_UTF8):
                line = line[len(codecs.BOM_UTF8) :]
            if len(line) > LONGEST_LINE:
                why = f"the line is longer than {LONGEST_LINE:,} bytes; is this the right file?"
                raise FileRefused([BadLine(path.name, number, "", why)])
            try:
                text = line.decode("utf-8")
            except UnicodeDecodeError as fault:
                near = brief(line[max(0, fault.start - 20) : fault.start].decode("utf-8", "replace"))
                why = f"not UTF-8 after {near!r}; save the file as UTF-8"
                raise FileRefused([BadLine(path.name, number, "", why)]) from None
            if "\0" in text:
                raise FileRefused([BadLine(path.name, number, "", "a NUL byte; this is no text file")])
            yield text
