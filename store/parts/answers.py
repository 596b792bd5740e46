"""What a check answers, by names: paths, bars, contradictions, parts of a model."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from store.parts.candidates import Candidate
from store.parts.evidence import Evidence
from store.parts.numbers import Number
from store.parts.on_model import OnModel
from store.rules.interchange import Relation, Trust


@dataclass(frozen=True, slots=True)
class Way:
    """One step as it is walked, by names."""

    start: Number
    relation: Relation
    end: Number
    source: str
    caveat: str
    dated: str
    trust: Trust

    @property
    def says(self) -> str:
        """The step in one line: `A superseded by B (List 3, 2024-05-01)`."""
        return statement(self.relation, name(self.start), name(self.end), self.source, self.caveat, self.dated)


@dataclass(frozen=True, slots=True)
class LedTo:
    """A number that is led to, on whose word, and what came of it on the bench; `on` where a model was asked about."""

    number: Number
    path: tuple[Way, ...]
    trust: Trust
    evidence: Evidence
    on: OnModel | None


@dataclass(frozen=True, slots=True)
class Barred:
    """A number that may not be used though a path leads to it, and who says so."""

    number: Number
    path: tuple[Way, ...]
    says: str


@dataclass(frozen=True, slots=True)
class Contradiction:
    """What is wrong between lists, and each side's statement with its source."""

    what: str
    says: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class GoesOn:
    """A part that a list says goes on a model that was asked or led to; `on` is what else speaks for or against it.

    `newer` names what supersedes it, where a list says so.
    """

    model: str
    number: Number
    position: str
    quantity: int | None
    source: str
    on: OnModel
    evidence: Evidence
    newer: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Check:
    """The whole answer. `followed` are the candidates that the paths start from: none while several may be meant.

    `evidence` is what came of the followed numbers on the bench, by the key of the number.
    """

    asked: str
    candidates: tuple[Candidate, ...]
    followed: tuple[Candidate, ...]
    warnings: tuple[str, ...]
    leads_to: tuple[LedTo, ...]
    stopped: tuple[Barred, ...]
    conflicts: tuple[Contradiction, ...]
    models: tuple[str, ...]
    parts: tuple[GoesOn, ...]
    on: OnModel | None
    evidence: Mapping[int, Evidence]
    bounded: bool


def statement(relation: Relation, of: str, to: str, source: str, caveat: str, dated: str) -> str:
    """A statement in one line, on whose word: `A superseded by B (List 3, 2024-05-01); new connector`."""
    if relation is Relation.do_not_use:
        said = f"do not use {to} for {of}" if to else f"do not use {of}"
    else:
        said = f"{of} {relation.replace('-', ' ')} {to}"
    word = f"{source}, {dated or 'undated'}" if source else "no source"
    return f"{said} ({word})" + (f"; {caveat}" if caveat else "")


def name(number: Number) -> str:
    """A number with its maker: `KS-100 of Alder`."""
    return f"{number.number} of {number.maker}" if number.maker else number.number
