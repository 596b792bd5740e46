"""Does a part go on a model: attribute by attribute, each agrees, differs or unknown, and the verdict in words.

What must match comes from the trade: the same function with another rotation, voltage, tooth count or pilot is another
part. A rotation keeps the end it is seen from and is turned round where that is the other end.
"""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from enum import StrEnum
from fractions import Fraction

from store.errors import Refused
from store.rules import quantities


class State(StrEnum):
    """How one attribute of a part stands to the model's."""

    agrees = "agrees"
    differs = "differs"
    unknown = "unknown"


class Fits(StrEnum):
    """The verdict over all attributes."""

    fits = "fits"
    not_proved = "not proved"
    does_not_fit = "does not fit"


@dataclass(frozen=True, slots=True)
class Compared:
    """One attribute on both sides, empty where it is not known; `must`: a difference rules the part out."""

    name: str
    part: str
    model: str
    state: State
    must: bool


@dataclass(frozen=True, slots=True)
class Comparison:
    """All attributes compared, those that must match first, and the verdict.

    `silent` are those that must match for the kind and that neither side states: the verdict does not speak of them.
    """

    verdict: Fits
    attributes: tuple[Compared, ...]
    silent: tuple[str, ...] = ()

    @property
    def because(self) -> str:
        """The verdict in a sentence."""
        differ = [a for a in self.attributes if a.state is State.differs]
        unknown = [a.name for a in self.attributes if a.state is State.unknown and a.must]
        agree = [a.name for a in self.attributes if a.state is State.agrees and a.must]
        said = [f"{a.name} is {a.part}, the model's is {a.model}" for a in differ]
        if self.verdict is Fits.fits:
            said.append(f"{', '.join(agree)} agree" if len(agree) > 1 else f"{agree[0]} agrees")
        elif unknown:
            said.append(f"{', '.join(unknown)} known on one side only")
        elif not differ:
            said.append("no attribute that must match is stated")
        if self.silent and self.verdict is not Fits.does_not_fit:
            said.append(f"stated on neither side: {', '.join(self.silent)}")
        return f"{self.verdict}: {'; '.join(said)}"


_STARTER = (
    "rotation", "volts", "teeth", "pitch", "pinion-diameter", "flange", "pilot", "nose", "terminals", "grounding",
)  # fmt: skip
_MUST = {
    "starter": _STARTER,
    "generator": ("rotation", "volts", "mounting", "pulley", "terminals", "grounding"),
    "alternator": ("rotation", "volts", "mounting", "pulley", "terminals", "grounding"),
    "drive": ("rotation", "teeth", "pitch", "pinion-diameter", "splines", "bore", "travel"),
    "armature": ("rotation", "volts", "bars", "splines"),
    "solenoid": ("volts", "terminals", "grounding", "plunger"),
    "regulator": ("volts", "terminals", "grounding"),
    "field": ("volts", "poles"),
    "rotor": ("volts", "rotation"),
    "stator": ("volts",),
    "brush": ("brush-width", "brush-thickness", "terminals"),
}
EVERY_MUST = frozenset(name for names in _MUST.values() for name in names)
_NAMES = {"voltage": "volts", "volt": "volts", "direction": "rotation", "tooth-count": "teeth", "module": "pitch"}


def attribute_name(text: str) -> str:
    """The name under which attributes are compared: lower case, words joined by `-`, a few usual names made one."""
    name = "-".join(re.split(r"[\s_-]+", text.strip().casefold()))
    return _NAMES.get(name, name)


def must_match(kind: str) -> tuple[str, ...]:
    """What must match for a part of this kind (starter, drive, brush set ...); empty for a kind not listed here."""
    words = re.split(r"[\s_-]+", kind.strip().casefold())
    for word in words:
        for known, names in _MUST.items():
            if word in {known, f"{known}s", f"{known}es"}:
                return names
    return ()


def compare(kind: str, part: Mapping[str, str], model: Mapping[str, str]) -> Comparison:
    """The attributes of a part against those of a model; names as `attribute_name` gives them, values as typed.

    An attribute that either side states is compared when it must match, a further one when both state it. One that must
    match and differs: does not fit; one that must match and is unknown on one side, or another that differs: not proved.
    `viewed-from` is the viewpoint of `rotation`; without one it is the drive end, as the record defines it.
    """
    must = must_match(kind) or tuple(sorted(EVERY_MUST))
    stated = (part.keys() | model.keys()) - {"viewed-from"}
    both = part.keys() & model.keys() - {"viewed-from"}
    order = {name: n for n, name in enumerate(must)}
    known = {name for name in stated if name in order and (must_match(kind) or name in both)} | both
    found = []
    for name in sorted(known, key=lambda n: (order.get(n, len(order)), n)):
        ours, theirs = _said(name, part), _said(name, model)
        found.append(Compared(name, ours, theirs, _state(name, ours, theirs), name in order))
    silent = tuple(name for name in must_match(kind) if name not in known)
    return Comparison(_verdict(found), tuple(found), silent)


def _verdict(found: list[Compared]) -> Fits:
    if any(a.must and a.state is State.differs for a in found):
        return Fits.does_not_fit
    proved = any(a.must for a in found) and all(a.state is State.agrees for a in found if a.must)
    return Fits.fits if proved and all(a.state is not State.differs for a in found) else Fits.not_proved


def _said(name: str, side: Mapping[str, str]) -> str:
    value = " ".join(side.get(name, "").split())
    if name == "rotation" and value and "from" not in value.casefold() and side.get("viewed-from", "").strip():
        return f"{value} from {' '.join(side['viewed-from'].split())}"
    return value


def _state(name: str, ours: str, theirs: str) -> State:
    if not ours or not theirs:
        return State.unknown
    if name == "rotation":
        a, b = rotation(ours), rotation(theirs)
        if a is None or b is None:
            return State.unknown
        return State.agrees if a == b or "both" in {a, b} else State.differs
    return State.agrees if _same(ours, theirs) else State.differs


_CW = {"cw", "clockwise", "right", "rh", "right-hand", "r"}
_CCW = {
    "ccw",
    "acw",
    "anticlockwise",
    "counterclockwise",
    "counter-clockwise",
    "anti-clockwise",
    "left",
    "lh",
    "left-hand",
    "l",
}
_BOTH = {"both", "either", "reversible"}
_DRIVE_END = {"drive", "pinion", "pulley", "de"}
_OTHER_END = {
    "commutator",
    "opposite",
    "rear",
    "brush",
    "non",
    "non-drive",
    "nde",
    "anti",
    "anti-drive",
    "slip-ring",
    "back",
}
_TURNED = {"cw": "ccw", "ccw": "cw", "both": "both"}


def rotation(text: str) -> str | None:
    """`cw`, `ccw` or `both` as seen from the drive end; None where the words or the viewpoint are not known.

    `ccw from commutator end` is cw. An engine's rotation seen from its flywheel is None: which way the pinion then turns
    depends on which side of the flywheel the unit is mounted.
    """
    words = [word for word in re.split(r"[\s,;()]+", text.casefold().replace("_", "-")) if word]
    if not words:
        return None
    way = next((name for name, known in (("cw", _CW), ("ccw", _CCW), ("both", _BOTH)) if words[0] in known), None)
    rest = [
        word.removesuffix("-end") for word in words[1:] if word not in {"from", "the", "end", "viewed", "seen", "side"}
    ]
    if way is None or not rest or all(word in _DRIVE_END for word in rest):
        return way
    is_other = any(word in _OTHER_END for word in rest) and all(word in _OTHER_END | _DRIVE_END for word in rest)
    return _TURNED[way] if is_other else None


_SIZE = re.compile(r"([+-]?\d+(?:[.,]\d+)?)(?:\s*/\s*(\d+))?\s*([^\d\s]\S*)?\s*\Z")


def _same(a: str, b: str) -> bool:
    one, other = _size(a), _size(b)
    if one is not None and other is not None:
        return _equal_sizes(one, other)
    return _words(a) == _words(b)


def _equal_sizes(one: tuple[Fraction, str], other: tuple[Fraction, str]) -> bool:
    (x, x_unit), (y, y_unit) = one, other
    if not x_unit or not y_unit or x_unit.casefold() == y_unit.casefold():
        return x == y
    try:
        return quantities.convert(x, x_unit, y_unit) == y
    except Refused:
        return False


def _size(text: str) -> tuple[Fraction, str] | None:
    match = _SIZE.match(text.strip())
    if match is None:
        return None
    value = Fraction(match[1].replace(",", "."))
    if match[2]:
        if not int(match[2]):
            return None
        value /= int(match[2])
    return value, match[3] or ""


def _words(text: str) -> str:
    return "".join(c for c in text.casefold() if c.isalnum() or c in "+-./")
