"""Parts by size: measured sizes against those of lists, within a tolerance of the user's; ranked, never accepted.

Pitches and blanks come in inches and in millimetres that lie a hair apart (12.70 and 12.5 mm): both nominals stand side
by side, and a part of the other system is marked.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from dataclasses import dataclass
from fractions import Fraction

from store.errors import ReadingRefused, Refused, brief
from store.rules import quantities, readings
from store.rules.attributes import attribute_name
from store.rules.quantities import Quantity

MILLIONTHS = 10**6
DEFAULT_TOLERANCE = "0.1 mm"
_INCH = {"in", "thou"}
# A part's outside stands against a bore, its bore against a journal: (asked, the part's size, why a difference is wanted).
SEATS = {"housing-bore": ("od", "tight in the housing"), "journal": ("id", "running clearance on the journal")}
_NAMES = {
    "outside-diameter": "od", "outer-diameter": "od", "outside": "od", "inside-diameter": "id",
    "inner-diameter": "id", "inside": "id", "l": "length", "w": "width", "t": "thickness", "bore": "id",
    "housing": "housing-bore", "shaft": "journal",
}  # fmt: skip


@dataclass(frozen=True, slots=True)
class Size:
    """A size as typed: `value` in `unit`, exact."""

    name: str
    text: str
    value: Fraction
    unit: str

    @property
    def base(self) -> Fraction:
        """The value in the base unit of its quantity (mm for lengths)."""
        return quantities.convert(self.value, self.unit, base_unit(self.unit))

    @property
    def is_inch(self) -> bool:
        """Whether it was given in inches or thousandths."""
        return self.unit in _INCH


@dataclass(frozen=True, slots=True)
class Difference:
    """One size asked for against the part's: `over` is the part's less the asked, in the base unit; None where not listed."""

    asked: Size
    part: Size | None
    over: Fraction | None
    share: float | None
    warning: str


def size_name(text: str) -> str:
    """The name under which sizes are compared: lower case, words joined by `-`, a few usual names made one."""
    name = attribute_name(text)
    return _NAMES.get(name, name)


def base_unit(symbol: str) -> str:
    """The base unit of the quantity that `symbol` measures. Raises Refused for an unknown one."""
    return quantities.units_of(quantities.unit(symbol).quantity)[0].symbol


def millionths(value: Fraction, unit: str) -> int:
    """The value in millionths of its base unit (nanometres for lengths), rounded, for an index. Raises Refused."""
    return round(quantities.convert(value, unit, base_unit(unit)) * MILLIONTHS)


def size(name: str, text: str, unit: str = "mm") -> Size:
    """A size as typed or listed; `unit` where none is typed. Raises Refused."""
    known = quantities.unit(unit)
    if known.quantity in {Quantity.attribute, Quantity.count}:
        raise Refused(f"a size has a unit, mm or in for instance; {brief(name)!r} has none")
    typed = text.strip()
    try:
        read = readings.parse(typed, known.quantity, known.symbol)
    except ReadingRefused:
        read = _of_other_quantity(typed, known.quantity)
    if read.value is None:
        raise Refused(f"{brief(typed)!r} is no size")
    return Size(size_name(name), typed, read.value, read.unit)


def _of_other_quantity(text: str, first: Quantity) -> readings.Typed:
    """A size whose own unit is of another quantity than lengths: `force=8 N`. Raises ReadingRefused."""
    for quantity in (Quantity.force, Quantity.voltage, Quantity.resistance, Quantity.torque):
        try:
            return readings.parse(text, quantity, quantities.units_of(quantity)[0].symbol)
        except ReadingRefused:
            continue
    return readings.parse(text, first, quantities.units_of(first)[0].symbol)


def tolerance(text: str | None) -> Size:
    """The tolerance of a search as typed, DEFAULT_TOLERANCE for None; mm where no unit is typed. Raises Refused."""
    made = size("tolerance", text if text is not None and text.strip() else DEFAULT_TOLERANCE)
    if made.value <= 0:
        raise Refused("the tolerance is a size above nothing, 0.1 mm for instance")
    return made


def listed_name(asked: str) -> str:
    """The part's size that an asked one is held against: `od` for a housing bore, `id` for a journal, else itself."""
    return SEATS[asked][0] if asked in SEATS else asked


def window(asked: Size, within: Size) -> tuple[int, int]:
    """The least and greatest millionths of the base unit that a part's size may have. Raises Refused (other quantity)."""
    reach = _reach(asked, within)
    return round((asked.base - reach) * MILLIONTHS), round((asked.base + reach) * MILLIONTHS)


def _reach(asked: Size, within: Size) -> Fraction:
    if base_unit(within.unit) == base_unit(asked.unit):
        return within.base
    return within.value  # in the base unit of what is asked: a tolerance without a unit, on a force say


def differences(kind: str, asked: Sequence[Size], part: Mapping[str, Size], within: Size) -> tuple[Difference, ...]:
    """Each asked size against the part's, in the order asked; what the part does not list has no difference."""
    found = []
    for one in asked:
        listed = part.get(listed_name(one.name))
        if listed is None or base_unit(listed.unit) != base_unit(one.unit):
            found.append(Difference(one, None, None, None, ""))
            continue
        over = listed.base - one.base
        found.append(
            Difference(one, listed, over, float(abs(over) / _reach(one, within)), _warning(kind, one, listed, over))
        )
    return tuple(found)


def worst(found: Sequence[Difference]) -> float | None:
    """The greatest share of the tolerance that any size takes; None where a size is not listed or beyond the tolerance."""
    shares = [one.share for one in found]
    if any(share is None or share > 1 for share in shares):
        return None
    return max((share for share in shares if share is not None), default=None)


def _warning(kind: str, asked: Size, part: Size, over: Fraction) -> str:
    if asked.name in SEATS:
        tight = asked.name == "housing-bore"
        amount = quantities.rounded(abs(over), 3)
        if over < 0 or (tight and over == 0):
            return f"{'loose' if tight else 'tight'} by {amount} mm, where it should be {SEATS[asked.name][1]}"
        return f"{amount} mm {SEATS[asked.name][1]}"
    if base_unit(part.unit) == "mm" and part.is_inch != asked.is_inch and over:
        ours, theirs = ("an inch", "a metric") if part.is_inch else ("a metric", "an inch")
        way = "over" if over > 0 else "under"
        what = "brush" if "brush" in kind.casefold() else "part"
        where = "holder" if what == "brush" else "place"
        return f"{ours} {what} in {theirs} {where} may not fit: {quantities.rounded(abs(over), 3)} mm {way}"
    return ""


def both_systems(one: Size) -> str:
    """A length in millimetres and inches side by side, the given one first: `12.7 mm = 0.5 in`; others as given."""
    if base_unit(one.unit) != "mm":
        return f"{one.text} {one.unit}".strip()
    mm = quantities.rounded(one.base, 3).rstrip("0").rstrip(".")
    inch = quantities.rounded(one.base / Fraction("25.4"), 4).rstrip("0").rstrip(".")
    return f"{inch} in = {mm} mm" if one.is_inch else f"{mm} mm = {inch} in"


def nominals(one: Size) -> tuple[str, str]:
    """The nearest inch nominal (in 64ths) and the nearest metric one (in halves) to a length, each with its mm.

    Raises Refused for what is no length.
    """
    if base_unit(one.unit) != "mm":
        raise Refused(f"{one.name} is no length")
    sixty_fourths = round(one.base / Fraction("25.4") * 64)
    inch = Fraction(sixty_fourths, 64)
    whole, rest = divmod(inch, 1)
    named = " ".join(str(part) for part in (whole, rest) if part) or "0"
    metric = Fraction(round(one.base * 2), 2)
    return (
        f"{named} in ({quantities.rounded(inch * Fraction('25.4'), 2)} mm)",
        f"{quantities.plain(metric)} mm ({quantities.rounded(metric / Fraction('25.4'), 4)} in)",
    )
