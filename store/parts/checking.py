"""The check of a number: what it may be, all that it leads to with the path, conflicts, evidence, and what goes on it."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from json import dumps

from sqlalchemy import Connection

from store import models
from store.parts import candidates, evidence, numbers, on_model
from store.parts.answers import Barred, Check, Contradiction, GoesOn, LedTo, Way, name, statement
from store.parts.candidates import Candidate
from store.parts.lists import RecordLists
from store.parts.numbers import Number
from store.parts.on_model import OnModel
from store.records import Record
from store.rules import attributes, interchange
from store.rules import conflicts as clashes
from store.rules import numbers as rule
from store.rules.conflicts import Conflict
from store.rules.interchange import Relation, Stated, Step
from store.rules.numbers import How
from store.sqlite.engine import rows

MOST_MODELS = 10  # whose parts are listed in one answer


def check(record: Record, number: str, *, on: str | None = None, most: int = interchange.MOST_NUMBERS) -> Check:
    """Check a number as typed, `?` for what cannot be read; with `on`, whether each answer goes on that model.

    Raises Refused (nothing to look for), NotFound (the model).
    """
    asked = rule.asked(number)
    with record.read() as conn:
        model = models.find(record, on, conn) if on is not None else None
        found = candidates.find(record, conn, asked)
        return _Checking(record, conn, model, most).whole(asked.text, found, _followed(found))


def check_candidate(record: Record, candidate: Candidate, *, on: str | None = None) -> Check:
    """The check of one candidate that was chosen among several. Raises NotFound (the model)."""
    with record.read() as conn:
        model = models.find(record, on, conn) if on is not None else None
        checking = _Checking(record, conn, model, interchange.MOST_NUMBERS)
        return checking.whole(candidate.number, (candidate,), (candidate,))


def _followed(found: Sequence[Candidate]) -> tuple[Candidate, ...]:
    """What the paths start from: the same number, of every maker; else the only look-alike or reading of what is unreadable.

    A number one slip away is never followed by itself: it may be the other rotation.
    """
    same = tuple(one for one in found if one.how is How.exact)
    if same:
        return same
    for how in (How.unreadable, How.look_alike):
        alike = tuple(one for one in found if one.how is how)
        if alike:
            return alike if len(alike) == 1 else ()
    return ()


class _Checking:
    """One check under way, on one view of the record."""

    def __init__(self, record: Record, conn: Connection, model: models.Model | None, most: int) -> None:
        self.record, self.conn, self.model, self.most = record, conn, model, most
        self.names: dict[int, Number] = {}
        self.disputed: frozenset[int] = frozenset()

    def whole(self, asked: str, found: tuple[Candidate, ...], followed: tuple[Candidate, ...]) -> Check:
        starts = [one.id for one in followed if one.id is not None]
        walk = interchange.walk(starts, RecordLists(self.conn), self.most)
        reached = [answer.number for answer in walk.answers]
        clash = clashes.conflicts(walk.seen, {*starts, *reached})
        self.disputed = clashes.disputed(clash)
        self._learn(walk, clash, starts)
        came_of = evidence.of_numbers(self.conn, [*starts, *reached])
        on = self._on([*starts, *reached])
        led = self._models(followed, walk.answers)
        return Check(
            asked, found, followed, self._warnings(starts, walk.seen),
            tuple(
                LedTo(self.names[a.number], self._path(a.path), interchange.path_trust(a.path, self.disputed),
                      came_of.get(a.number, evidence.NONE), on.get(a.number))
                for a in walk.answers
            ),
            tuple(Barred(self.names[s.number], self._path(s.path), self._statement(s.says)) for s in walk.stopped),
            tuple(self._contradiction(one) for one in clash),
            tuple(one.number for one in led),
            self._parts(led),
            on[starts[0]] if on and starts else self._unknown(),
            {start: came_of.get(start, evidence.NONE) for start in starts},
            walk.bounded,
        )  # fmt: skip

    def _learn(self, walk: interchange.Walk, clash: Sequence[Conflict], starts: Sequence[int]) -> None:
        """Read every number that the answer names."""
        ids = set(starts)
        for path in [answer.path for answer in walk.answers] + [stop.path for stop in walk.stopped]:
            ids.update(step.end for step in path)
        stated = [one for conflict in clash for one in conflict.says] + [stop.says for stop in walk.stopped]
        stated += [one for one in walk.seen if one.of in starts]
        for one in stated:
            ids.update((one.of, one.of if one.to is None else one.to))
        self.names.update((number.id, number) for number in numbers.by_ids(self.conn, list(ids)))

    def _on(self, ids: Sequence[int]) -> Mapping[int, OnModel]:
        if self.model is None:
            return {}
        return on_model.answers(self.conn, [self.names[which] for which in ids], self.model)

    def _unknown(self) -> OnModel | None:
        """The answer for a number that no list knows: nothing is proved."""
        if self.model is None:
            return None
        comparison = attributes.compare("", {}, on_model.model_attributes(self.conn, self.model))
        return OnModel(self.model.number, comparison, (), ())

    def _path(self, steps: Sequence[Step]) -> tuple[Way, ...]:
        return tuple(
            Way(
                self.names[s.start], s.stated.relation, self.names[s.end], s.stated.source, s.stated.caveat, s.stated.dated,
                interchange.step_trust(s.stated, self.disputed),
            )
            for s in steps
        )  # fmt: skip

    def _statement(self, one: Stated) -> str:
        to = name(self.names[one.to]) if one.to is not None else ""
        return statement(one.relation, name(self.names[one.of]), to, one.source, one.caveat, one.dated)

    def _contradiction(self, one: Conflict) -> Contradiction:
        return Contradiction(one.clash.value, tuple(self._statement(stated) for stated in one.says))

    def _warnings(self, starts: Sequence[int], seen: Sequence[Stated]) -> tuple[str, ...]:
        """What lists say against the asked number itself."""
        bars = [one for one in seen if one.relation is Relation.do_not_use and one.to is None and one.of in starts]
        return tuple(self._statement(one) for one in bars)

    def _models(
        self, followed: Sequence[Candidate], answers: Sequence[interchange.Answer]
    ) -> tuple[candidates.ModelNumber, ...]:
        return _led_to_models(self.record, self.conn, followed, [(self.names[a.number], a.path) for a in answers])

    def _parts(self, led: Sequence[candidates.ModelNumber]) -> tuple[GoesOn, ...]:
        found: list[GoesOn] = []
        for model in led[:MOST_MODELS]:
            listed = on_model.listed_parts(self.conn, model.id)
            named = {one.id: one for one in numbers.by_ids(self.conn, [part.number for part in listed])}
            on = on_model.answers(self.conn, list(named.values()), models.by_id(self.conn, model.id))
            came_of = evidence.of_numbers(self.conn, list(named))
            newer = _newer(self.conn, list(named))
            found += [
                GoesOn(
                    model.number, named[part.number], part.position, part.quantity, part.source, on[part.number],
                    came_of.get(part.number, evidence.NONE), newer.get(part.number, ()),
                )
                for part in listed
            ]  # fmt: skip
        return tuple(found)


def _newer(conn: Connection, parts: Sequence[int]) -> dict[int, tuple[str, ...]]:
    """What supersedes each of these parts, one step on."""
    sql = (
        "SELECT r.from_id, n.number FROM json_each(?) k CROSS JOIN relation r ON r.from_id = k.value "
        "AND r.relation = 'superseded-by' JOIN part_number n ON n.id = r.to_id ORDER BY r.id"
    )
    found: dict[int, tuple[str, ...]] = {}
    for which, number in rows(conn, sql, (dumps(list(parts)),)):
        found[which] = (*found.get(which, ()), number)
    return found


def _led_to_models(
    record: Record, conn: Connection, followed: Sequence[Candidate], led: Sequence[tuple[Number, Sequence[Step]]]
) -> tuple[candidates.ModelNumber, ...]:
    """The models among the followed numbers, then those led to without a caveat and not out of a kit."""
    at_hand = candidates.models(record, conn)
    found: dict[int, candidates.ModelNumber] = {}
    for one in followed:
        for model in at_hand.keys.get(one.key, ()):
            if model.id == one.model:
                found.setdefault(model.id, model)
    for number, path in led:
        if any(step.stated.relation in interchange.LAST for step in path) or number.maker:
            continue
        for model in at_hand.keys.get(number.key, ()):
            if model.number == number.number or len(at_hand.keys[number.key]) == 1:
                found.setdefault(model.id, model)
    return tuple(found.values())


def models_for(record: Record, number: str) -> tuple[str, ...]:
    """The models that a number on a plate or a box leads to, nearest first; empty where none is known.

    The model's own number first; then what the number is superseded by, interchanges with or is the same as. A number one
    slip away is not taken for meant. Raises Refused where too little of it can be read.
    """
    return check(record, number).models
