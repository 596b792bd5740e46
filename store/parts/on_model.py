"""Does a number go on a model: by its attributes, and by the lists that say so."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from json import dumps

from sqlalchemy import Connection

from store.models import Model
from store.parts.lists import RecordLists
from store.parts.numbers import Number
from store.rules import attributes, interchange
from store.rules.attributes import Comparison, Fits
from store.rules.interchange import Step
from store.sqlite.engine import rows


@dataclass(frozen=True, slots=True)
class Listed:
    """A list says that a part goes on the model; `path` leads from the listed part to the one asked, empty for itself."""

    number: int
    position: str
    quantity: int | None
    source: str
    path: tuple[Step, ...] = ()


@dataclass(frozen=True, slots=True)
class OnModel:
    """The answer for one number on one model. `elsewhere` are models that lists name instead, where none names this one."""

    model: str
    comparison: Comparison
    listed: tuple[Listed, ...]
    elsewhere: tuple[str, ...]

    @property
    def verdict(self) -> Fits:
        """By the attributes alone: a list that says it fits proves nothing against a difference."""
        return self.comparison.verdict

    @property
    def is_mismatch(self) -> bool:
        """Whether something speaks against it: an attribute that differs, or lists that name other models only."""
        return self.verdict is Fits.does_not_fit or bool(self.elsewhere)

    @property
    def says(self) -> str:
        """The answer in one sentence."""
        said = self.comparison.because
        if self.listed:
            one = self.listed[0]
            how = "listed" if not one.path else "in place of a part that is listed"
            return f"{said}; {how} for {self.model}" + (f" by {one.source}" if one.source else ", no source named")
        if self.elsewhere:
            return f"{said}; listed for {', '.join(self.elsewhere[:3])}, not for {self.model}"
        return said


def listed_parts(conn: Connection, model: int) -> tuple[Listed, ...]:
    """The parts that lists say go on a model, by position."""
    sql = "SELECT number_id, position, quantity, source FROM fit WHERE model_id = ? ORDER BY position, id"
    return tuple(Listed(*r) for r in rows(conn, sql, (model,)))


def answers(conn: Connection, numbers: Sequence[Number], model: Model) -> dict[int, OnModel]:
    """For each of these numbers, by its key, whether it goes on the model. A few statements however many there are."""
    theirs = model_attributes(conn, model)
    ours = part_attributes(conn, numbers)
    listed = _listed(conn, model, {number.id for number in numbers})
    elsewhere = _elsewhere(conn, [number.id for number in numbers if number.id not in listed])
    return {
        number.id: OnModel(
            model.number,
            attributes.compare(number.kind, ours[number.id], theirs),
            tuple(listed.get(number.id, ())),
            tuple(elsewhere.get(number.id, ())),
        )
        for number in numbers
    }


def model_attributes(conn: Connection, model: Model) -> dict[str, str]:
    """What is known of a model: its own columns, and the attributes that are stated of it."""
    columns = {
        "volts": model.volts, "rotation": model.rotation, "viewed-from": model.viewed_from,
        "teeth": _text(model.teeth), "bars": _text(model.bars), "poles": _text(model.poles),
    }  # fmt: skip
    stated = dict(rows(conn, "SELECT name, value FROM part_attribute WHERE model_id = ? ORDER BY id", (model.id,)))
    return {name: value for name, value in {**columns, **stated}.items() if value}


def part_attributes(conn: Connection, numbers: Sequence[Number]) -> dict[int, dict[str, str]]:
    """What is known of each number: stated attributes, its sizes, and for a model's own number the model's columns."""
    asked = dumps([number.id for number in numbers])
    made: dict[int, dict[str, str]] = {number.id: {} for number in numbers}
    sql = (
        "SELECT n.id, m.volts, m.rotation, m.viewed_from, m.teeth, m.bars, m.poles FROM json_each(?) k "
        "CROSS JOIN part_number n ON n.id = k.value JOIN model m ON m.key = n.key AND n.maker = ''"
    )
    for which, *values in rows(conn, sql, (asked,)):
        names = ("volts", "rotation", "viewed-from", "teeth", "bars", "poles")
        made[which].update((name, _text(value)) for name, value in zip(names, values, strict=True) if value)
    sql = (
        "SELECT s.number_id, s.name, s.value || ' ' || s.unit FROM json_each(?) k "
        "CROSS JOIN part_size s ON s.number_id = k.value ORDER BY s.id"
    )
    kinds = {number.id: number.kind.casefold() for number in numbers}
    for which, name, value in rows(conn, sql, (asked,)):
        made[which][f"brush-{name}" if "brush" in kinds[which] else name] = value
    sql = "SELECT a.number_id, a.name, a.value FROM json_each(?) k CROSS JOIN part_attribute a ON a.number_id = k.value ORDER BY a.id"
    for which, name, value in rows(conn, sql, (asked,)):
        made[which][name] = value
    return made


def _listed(conn: Connection, model: Model, wanted: set[int]) -> Mapping[int, list[Listed]]:
    """How the wanted numbers come to be listed for a model: themselves, or led to from a part that is."""
    found: dict[int, list[Listed]] = {}
    parts = listed_parts(conn, model.id)
    for part in parts:
        if part.number in wanted:
            found.setdefault(part.number, []).append(part)
    rest = wanted - found.keys()
    if not rest or not parts:
        return found
    of = {part.number: part for part in reversed(parts)}
    for answer in interchange.walk(list(of), RecordLists(conn)).answers:
        first = answer.path[0].start
        if answer.number in rest and not any(
            step.stated.relation is interchange.Relation.holds for step in answer.path
        ):
            part = of[first]
            found.setdefault(answer.number, []).append(
                Listed(part.number, part.position, part.quantity, part.source, answer.path)
            )
    return found


def _elsewhere(conn: Connection, numbers: Sequence[int]) -> dict[int, list[str]]:
    """The models that lists name for numbers, at most a few each."""
    found: dict[int, list[str]] = {}
    sql = (
        "SELECT DISTINCT f.number_id, m.number FROM json_each(?) k CROSS JOIN fit f ON f.number_id = k.value "
        "JOIN model m ON m.id = f.model_id ORDER BY m.number LIMIT 5000"
    )
    for which, model in rows(conn, sql, (dumps(list(numbers)),)):
        found.setdefault(which, []).append(model)
    return found


def _text(value: object) -> str:
    return "" if value is None else str(value)
