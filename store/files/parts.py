"""Files of what parts fit, their sizes and attributes."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from typing import Any

from sqlalchemy import Connection

from store.errors import Refused, brief
from store.files.kinds import Kind, Line, Loading, Numbered
from store.parts import numbers
from store.parts.known import known
from store.records import Record
from store.rules import sizes
from store.rules.attributes import attribute_name
from store.rules.numbers import comparing_key
from store.tables.parts import FitRow, PartAttributeRow, PartSizeRow

MOST_QUANTITY = 1000


class _Cell(Refused):
    """A refusal with the column that it is about."""

    def __init__(self, column: str, why: str | Exception) -> None:
        self.column = column
        super().__init__(str(why))


def quantity(text: str) -> int | None:
    """A whole number of pieces, None for nothing written. Raises Refused."""
    typed = text.strip()
    if not typed:
        return None
    if not typed.isascii() or not typed.isdigit() or not 0 < int(typed[:6]) <= MOST_QUANTITY:
        raise Refused(f"{brief(typed)!r} is not a number of pieces from 1 to {MOST_QUANTITY}")
    return int(typed)


class _Names:
    """Numbers and models by name, for one file."""

    def __init__(self, loading: Loading) -> None:
        self.known = known(loading.change)
        self.models: dict[str, int] = {}
        self.keys: dict[str, int] = {}
        for which, number, key in loading.change.raw.execute("SELECT id, number, key FROM model"):
            self.models[number] = which
            self.keys[key] = 0 if key in self.keys else which

    def number(self, line: Line) -> int:
        """The number of a line. Raises _Cell."""
        try:
            return self.known.find(line["number"], line.get("maker", ""))
        except Refused as fault:
            raise _Cell("number", fault) from None

    def model(self, line: Line) -> int:
        """The model of a line. Raises _Cell."""
        which = self.models.get(line["model"]) or self.keys.get(comparing_key(line["model"]))
        if not which:
            raise _Cell("model", f"no model {brief(line['model'], 30)!r}")
        return which


def _take(loading: Loading, lines: Iterator[Numbered], table: Any, row: Any) -> int:
    """Load the row that `row` makes of each line; what it refuses is named."""

    def rows() -> Iterator[tuple[Any, ...]]:
        names = _Names(loading)
        for place, line in lines:
            try:
                yield row(names, line)
            except _Cell as fault:
                loading.refuse(place, fault.column, fault)

    return loading.change.load(table, rows())


def _long(line: Line, *columns: str) -> None:
    for column in columns:
        if len(line.get(column, "")) > numbers.MOST_TEXT:
            raise _Cell(column, f"longer than {numbers.MOST_TEXT:,} characters")


def _fit(names: _Names, line: Line) -> tuple[Any, ...]:
    number, model = names.number(line), names.model(line)
    _long(line, "position", "source")
    try:
        pieces = quantity(line.get("quantity", ""))
    except Refused as fault:
        raise _Cell("quantity", fault) from None
    return (None, number, model, line.get("position", ""), pieces, line.get("source", ""))


def _size(names: _Names, line: Line) -> tuple[Any, ...]:
    number = names.number(line)
    try:
        made = sizes.size(line["name"], line["value"], line["unit"])
    except Refused as fault:
        raise _Cell("unit" if "no unit" in str(fault) else "value", fault) from None
    return (None, number, made.name, made.text, made.unit, sizes.millionths(made.value, made.unit))


def _attribute(names: _Names, line: Line) -> tuple[Any, ...]:
    number, model = line.get("number", ""), line.get("model", "")
    if bool(number) == bool(model):
        raise _Cell("number", "an attribute belongs to a number or to a model, to one of them")
    _long(line, "name", "value")
    of_number = names.number(line) if number else None
    of_model = names.model(line) if model else None
    return (None, of_number, of_model, attribute_name(line["name"]), line["value"])


def _take_fits(loading: Loading, lines: Iterator[Numbered]) -> int:
    return _take(loading, lines, FitRow, _fit)


def _take_sizes(loading: Loading, lines: Iterator[Numbered]) -> int:
    return _take(loading, lines, PartSizeRow, _size)


def _take_attributes(loading: Loading, lines: Iterator[Numbered]) -> int:
    return _take(loading, lines, PartAttributeRow, _attribute)


def _give_fits(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT n.number, m.number, n.maker, f.position, coalesce(f.quantity,''), f.source FROM fit f "
        "JOIN part_number n ON n.id = f.number_id JOIN model m ON m.id = f.model_id ORDER BY f.id"
    )
    for r in conn.exec_driver_sql(sql):
        yield (*r[:4], str(r[4]), r[5])


def _give_sizes(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT n.number, s.name, s.value, s.unit, n.maker FROM part_size s JOIN part_number n ON n.id = s.number_id "
        "ORDER BY s.id"
    )
    yield from map(tuple, conn.exec_driver_sql(sql))


def _give_attributes(record: Record, conn: Connection) -> Iterator[Sequence[str]]:
    sql = (
        "SELECT a.name, a.value, coalesce(n.number,''), coalesce(n.maker,''), coalesce(m.number,'') FROM part_attribute a "
        "LEFT JOIN part_number n ON n.id = a.number_id LEFT JOIN model m ON m.id = a.model_id ORDER BY a.id"
    )
    yield from map(tuple, conn.exec_driver_sql(sql))


KINDS = (
    Kind("fits", ("number", "model"), ("maker", "position", "quantity", "source"), _take_fits, _give_fits),
    Kind("sizes", ("number", "name", "value", "unit"), ("maker",), _take_sizes, _give_sizes),
    Kind(
        "attributes",
        ("name", "value"),
        ("number", "maker", "model"),
        _take_attributes,
        _give_attributes,
        either=("number", "model"),
    ),
)
