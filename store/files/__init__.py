"""CSV files in and out of a record, one module a kind of file.

    load(record, [Path("limits.csv"), Path("jobs.csv")])     all of it or nothing, in the right order
    save(record, "limits", Path("limits.csv"))               load(save(x)) is x

A file's kind is known by its header. To add a kind: write a module with its KINDS and name it in `_modules`.
"""

from __future__ import annotations

import csv
import io
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path

from store import people
from store.errors import BadLine, FileRefused, NotFound
from store.files import reader
from store.files.kinds import Kind, Loading, TooManyBadLines
from store.nearest import nearest
from store.records import Record
from store.whole_files import write_whole


@dataclass(frozen=True, slots=True)
class Loaded:
    """What one file brought."""

    file: str
    kind: str
    lines: int


def kinds() -> tuple[Kind, ...]:
    """Every kind of file, in the order in which they are loaded."""
    from store.files import (
        characteristics,
        fitted,
        gauges,
        jobs,
        limits,
        models,
        notes,
        numbers,
        parts,
        readings,
        releases,
        shop,
    )

    modules = (shop, characteristics, models, limits, gauges, numbers, parts, jobs, readings, notes, fitted, releases)
    return tuple(kind for module in modules for kind in module.KINDS)


def find(name: str) -> Kind:
    """The kind of that name. Raises NotFound."""
    known = {kind.name: kind for kind in kinds()}
    if name not in known:
        raise NotFound("kind of file", name, nearest(name, list(known)))
    return known[name]


def kind_of(path: Path) -> Kind:
    """The kind whose needed columns a file has and that knows all its columns. Raises FileRefused, RecordUnusable."""
    columns = reader.header(path)
    for column in columns:
        if columns.count(column) > 1:
            raise FileRefused([BadLine(path.name, 1, column, "the column is there twice")])
    found = [kind for kind in kinds() if kind.is_of(columns)]
    if len(found) == 1:
        return found[0]
    if found:
        names = " and ".join(kind.name for kind in found)
        raise FileRefused(
            [BadLine(path.name, 1, "", f"the columns fit {names} alike; add a column that tells them apart")]
        )
    raise FileRefused(_misfit(path, columns))


def _misfit(path: Path, columns: tuple[str, ...]) -> list[BadLine]:
    """Why no kind fits: judged against the kind that shares the most columns, or the one the file is named for."""

    def fit(kind: Kind) -> tuple[int, int, bool]:
        unknown, missing = set(columns) - set(kind.columns), set(kind.needed) - set(columns)
        return len(set(columns) & set(kind.columns)) - len(missing), -len(unknown), path.stem.startswith(kind.name)

    best = max(kinds(), key=fit)
    if not set(columns) & set(best.columns):
        return [
            BadLine(path.name, 1, "", f"no kind of file has these columns; kinds: {', '.join(k.name for k in kinds())}")
        ]
    bad = []
    for column in columns:
        if column not in best.columns:
            near = nearest(column, best.columns, 1)
            hint = f"; did you mean {near[0]}?" if near else ""
            bad.append(BadLine(path.name, 1, column, f"no such column in {best.name}{hint}"))
    bad += [BadLine(path.name, 1, c, f"{best.name} needs this column") for c in best.needed if c not in columns]
    return bad


def load(
    record: Record, paths: Sequence[Path], *, check: bool = False, progress: Callable[[str, int], None] | None = None
) -> tuple[Loaded, ...]:
    """Load files, all in one transaction and in the right order; with `check` only report what would be loaded.

    `progress` is told the kind and the lines taken so far. Raises FileRefused with every bad line (nothing is written),
    RecordUnusable, Refused.
    """
    if not check:
        people.require_known(record)
    known = kinds()
    sorted_files = sorted(((kind_of(path), path) for path in paths), key=lambda pair: known.index(pair[0]))
    done: list[Loaded] = []
    names = ", ".join(path.name for _, path in sorted_files)
    bad: list[BadLine] = []
    try:
        with record.change("files loaded", names[:200]) as change:
            for kind, path in sorted_files:
                loading = Loading(record, change, progress or (lambda kind, lines: None), bad, path.name)
                taken = _take(kind, path, loading)
                done.append(Loaded(path.name, kind.name, taken))
            if bad:
                raise FileRefused(bad)
            if check:
                raise _Checked
    except _Checked:
        pass
    finally:
        record.cache.clear()
    return tuple(done)


class _Checked(Exception):
    """Rolls a load back that was only to be checked."""


def _take(kind: Kind, path: Path, loading: Loading) -> int:
    counted = 0

    def lines() -> Iterator[tuple[int, dict[str, str]]]:
        nonlocal counted
        for number, line in reader.lines(path, loading.bad):
            for column in kind.needed:
                if not line.get(column) and column not in kind.may_be_empty:
                    loading.refuse(number, column, "nothing is written here, and it is needed")
                    break
            else:
                counted += 1
                if counted % 2000 == 0:
                    loading.progress(kind.name, counted)
                yield number, line

    try:
        if kind.take_cells is not None:
            taken = kind.take_cells(loading, reader.cells(path, loading.bad, kind.columns))
        else:
            assert kind.take is not None
            taken = kind.take(loading, lines())
    except TooManyBadLines:
        raise FileRefused(loading.bad) from None
    except FileRefused as fault:
        raise FileRefused([*loading.bad, *fault.lines]) from None
    loading.progress(kind.name, taken)
    return taken


def save(record: Record, name: str, path: Path) -> int:
    """Write one kind to a file, whole or not at all; returns the lines. Raises NotFound, RecordUnusable."""
    kind = find(name)
    lines = 0
    text = io.StringIO()
    writer = csv.writer(text, lineterminator="\n")
    writer.writerow(kind.columns)
    with record.read() as conn:
        for line in kind.give(record, conn):
            writer.writerow(line)
            lines += 1
    write_whole(path, text.getvalue().encode())
    return lines


__all__ = ["Loaded", "find", "kind_of", "kinds", "load", "save"]
