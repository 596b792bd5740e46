"""Which model a number on a plate means: its own, or one that the lists lead to."""

from __future__ import annotations

from dataclasses import dataclass

from store import models
from store.errors import NotFound, Refused
from store.models import Model
from store.parts import checking
from store.records import Record
from store.rules.numbers import comparing_key


@dataclass(frozen=True, slots=True)
class Meant:
    """The model that is meant, and how the number leads to it, a line a step; no line where it is the model's own."""

    model: Model
    says: tuple[str, ...]


def model_meant(record: Record, number: str) -> Meant:
    """The model of that number, else the nearest one that the cross-check leads to from it.

    Raises NotFound: none is known, or several lie equally near; the refusal names what is.
    """
    try:
        return Meant(models.find(record, number), ())
    except NotFound as fault:
        try:
            answer = checking.check(record, number)
        except Refused:
            raise fault from None
        paths = {led.number.key: led.path for led in answer.leads_to}
        near = sorted((len(paths.get(comparing_key(name), ())), name) for name in answer.models)
        if not near or (len(near) > 1 and near[1][0] == near[0][0]):
            raise NotFound("model", number, [name for _, name in near] or fault.nearest) from None
        name = near[0][1]
        return Meant(models.find(record, name), tuple(way.says for way in paths.get(comparing_key(name), ())))
