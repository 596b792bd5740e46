"""Which numbers may be meant by one that is asked: the same, look-alikes, one slip away, or what ? may stand for.

Every folded key that could be meant is made (see store.rules.numbers) and looked up in the index at once; nothing is
scanned, however many numbers there are. Models take part by their own numbers.
"""

from __future__ import annotations

from collections.abc import Collection
from dataclasses import dataclass
from json import dumps

from sqlalchemy import Connection

from store.parts import numbers
from store.parts.numbers import Number
from store.records import Record
from store.rules import numbers as rule
from store.rules.numbers import Asked, How
from store.sqlite.engine import rows

MOST = 20
_READ = 400  # rows looked at before ranking
_SAME = "SELECT id, number, maker, key, kind, description, status FROM part_number WHERE folded = ? LIMIT ?"
_ANY = (
    "SELECT n.id, n.number, n.maker, n.key, n.kind, n.description, n.status "
    "FROM json_each(?) k CROSS JOIN part_number n ON n.folded = k.value LIMIT ?"
)
_ORDER = {how: place for place, how in enumerate(How)}


@dataclass(frozen=True, slots=True)
class Candidate:
    """A number that may be meant, and how it was found. `id` is None for a model that no list names; `model` its model's key."""

    number: str
    maker: str
    how: How
    kind: str
    description: str
    status: str
    id: int | None
    model: int | None
    key: str


@dataclass(frozen=True, slots=True)
class ModelNumber:
    """A model by its number, as the cross-check keeps it in memory."""

    id: int
    number: str
    key: str
    kind: str


class Models:
    """The numbers of all models, by comparing key and by folded key."""

    def __init__(self, found: Collection[ModelNumber]) -> None:
        self.keys: dict[str, list[ModelNumber]] = {}
        self.folded: dict[str, list[ModelNumber]] = {}
        for one in found:
            self.keys.setdefault(one.key, []).append(one)
            self.folded.setdefault(rule.folded_key(one.key), []).append(one)


def models(record: Record, conn: Connection) -> Models:
    """The numbers of all models; read once and again when one is added."""

    def read(conn: Connection) -> Models:
        return Models([ModelNumber(*r) for r in rows(conn, "SELECT id, number, key, kind FROM model")])

    return record.kept(conn, "model numbers", "SELECT count(*), max(id) FROM model", read)


def exact(record: Record, conn: Connection, asked: Asked) -> tuple[Candidate, ...]:
    """The numbers with the same comparing key, of every maker, and the model of that number."""
    if asked.unreadable:
        return ()
    return tuple(one for one in _found(record, conn, asked, [asked.folded]) if one.how is How.exact)


def find(record: Record, conn: Connection, asked: Asked, most: int = MOST) -> tuple[Candidate, ...]:
    """All that may be meant, the same number first, then nearest first; at most `most` besides the same number."""
    if asked.unreadable:
        keys: Collection[str] = rule.readable_keys(asked.raw)
        return _ranked(asked, _found(record, conn, asked, keys))[:most]
    alike = _ranked(asked, _found(record, conn, asked, [asked.folded]))
    slips = _ranked(asked, _found(record, conn, asked, rule.slip_keys(asked.raw)))
    same = [one for one in alike if one.how is How.exact]
    others = [one for one in alike if one.how is not How.exact]
    return (*same, *(*others, *slips)[:most])


def _found(record: Record, conn: Connection, asked: Asked, keys: Collection[str]) -> list[Candidate]:
    if len(keys) == 1:
        (only,) = keys
        found = rows(conn, _SAME, (only, _READ))
    else:
        found = rows(conn, _ANY, (dumps(list(keys)), _READ))
    at_hand = models(record, conn)
    made = []
    for which, number, maker, key, kind, description, status in found:
        model = next((m for m in at_hand.keys.get(key, ()) if m.number == number or not maker), None)
        how = asked.answered_by(key)
        made.append(Candidate(number, maker, how, kind, description, status, which, model.id if model else None, key))
    there = {one.model for one in made}
    for folded in keys if len(keys) < len(at_hand.folded) else at_hand.folded.keys() & set(keys):
        for model in at_hand.folded.get(folded, ()):
            if model.id not in there:
                how = asked.answered_by(model.key)
                made.append(Candidate(model.number, "", how, model.kind, "", "", None, model.id, model.key))
    return made


def _ranked(asked: Asked, found: list[Candidate]) -> tuple[Candidate, ...]:
    from rapidfuzz.distance import OSA

    def rank(one: Candidate) -> tuple[int, int, bool, str, str]:
        return _ORDER[one.how], OSA.distance(asked.raw, one.key), one.model is None, one.number, one.maker

    return tuple(sorted(found, key=rank))


def asked_for(record: Record, text: str) -> tuple[tuple[Candidate, Number | None], ...]:
    """What may be meant by a number as typed, each with the number itself; None for a model that no list names.

    Raises Refused where there is nothing to look for.
    """
    asked = rule.asked(text)
    with record.read() as conn:
        found = find(record, conn, asked)
        named = {one.id: one for one in numbers.by_ids(conn, [one.id for one in found if one.id is not None])}
    return tuple((one, named.get(one.id) if one.id is not None else None) for one in found)


def of_number(record: Record, number: Number) -> Candidate:
    """A number of the lists as a candidate that is the very number."""
    with record.read() as conn:
        model = next((m for m in models(record, conn).keys.get(number.key, ()) if not number.maker), None)
    return Candidate(
        number.number, number.maker, How.exact, number.kind, number.description, number.status, number.id,
        model.id if model else None, number.key,
    )  # fmt: skip
