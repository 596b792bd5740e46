"""What is to be done with a commutator, known before the lathe turns: leave, polish, turn, the last cut, replace.

The sizes are those of `store.rules.commutator`. The ladder, its first rung that holds: a bent shaft; a diameter that is under
its limit; nothing that calls for a cut; a cut that must not be made; a cut that would end under the limit; the cut.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from enum import StrEnum
from fractions import Fraction

from store.rules.commutator import clean_up, cuts_left, worst_slot, worst_slot_eccentric
from store.rules.quantities import plain


class Action(StrEnum):
    """What is to be done with the commutator."""

    leave = "leave"
    polish = "polish"
    turn = "turn"
    turn_last_cut = "turn-last-cut"
    replace = "replace"  # type: ignore[assignment]  # the trade's word; nobody replaces letters in an action
    straighten_shaft_first = "straighten-shaft-first"
    not_to_be_turned = "not-to-be-turned"
    re_undercut = "re-undercut"


ORDER = "turn, re-undercut, deburr, polish, measure again"
RINGS_ORDER = "turn, polish, measure again"


@dataclass(frozen=True, slots=True)
class Found:
    """A commutator (or pair of slip rings: `noun`) as measured and as limited, all sizes in `unit`; None where it is not.

    `surface_failed` with a `defect` of None: something is below the surface, and nobody knows how deep. `out_of_shape`
    says in words that ovality or taper is out of a limit of its own; `stations` how many diameters were read.
    """

    unit: str
    diameter: Fraction | None = None
    runout: Fraction | None = None
    undercut: Fraction | None = None
    defect: Fraction | None = Fraction(0)
    polish: Fraction = Fraction(0)
    lowest: Fraction | None = None
    lowest_passes: bool = True
    most_runout: Fraction | None = None
    least_undercut: Fraction | None = None
    shaft_runout: Fraction | None = None
    most_shaft_runout: Fraction | None = None
    surface_failed: bool = False
    may_turn: bool = True
    may_undercut: bool = True
    most_runout_passes: bool = True
    least_undercut_passes: bool = True
    most_shaft_runout_passes: bool = True
    out_of_shape: str = ""
    stations: int = 1
    noun: str = "commutator"


@dataclass(frozen=True, slots=True)
class Advice:
    """One line: what to do and why, the formula with its numbers, and predicted sizes by characteristic. Never a reading."""

    action: Action
    because: str
    formula: str = ""
    predicted: tuple[tuple[str, Fraction], ...] = ()


def advise(found: Found) -> tuple[Advice, ...]:
    """What to do, in the order of the work; at least one line once a diameter is measured.

    Without one: a bent shaft, and slots that are too shallow as they are. Raises Refused for sizes that cannot be (see
    `clean_up`).
    """
    if found.diameter is not None and found.runout is not None:
        clean_up(found.diameter, found.runout)
    if _bent(found):
        shaft = f"{plain(found.shaft_runout or Fraction(0))} over {plain(found.most_shaft_runout or Fraction(0))} {found.unit}"
        return (
            Advice(
                Action.straighten_shaft_first,
                f"the shaft runs out {shaft}; straighten or replace it, then measure again",
            ),
        )
    if found.diameter is None:
        return tuple(_shallow(found))
    if found.lowest is not None and _under(found.diameter, found):
        said = f"{plain(found.diameter)} {found.unit} is under the limit of {plain(found.lowest)} before any cut"
        return (Advice(Action.replace, said),)
    if not _wants_a_cut(found):
        return _without_a_cut(found)
    if not found.may_turn:
        return (
            Advice(
                Action.not_to_be_turned,
                f"{_why_cut(found)}, and this model's {found.noun} must not be turned: replace or rewind",
            ),
        )
    return _with_a_cut(found)


def _bent(found: Found) -> bool:
    return _is_over(found.shaft_runout, found.most_shaft_runout, found.most_shaft_runout_passes)


def _under(diameter: Fraction, found: Found) -> bool:
    assert found.lowest is not None
    return diameter < found.lowest or (diameter == found.lowest and not found.lowest_passes)


def _wants_a_cut(found: Found) -> bool:
    """Nothing is turned that is inside its runout limit, in shape where that is limited, and has no surface defect."""
    return bool(found.defect) or _runs_out(found) or bool(found.out_of_shape)


def _runs_out(found: Found) -> bool:
    return _is_over(found.runout, found.most_runout, found.most_runout_passes)


def _is_over(size: Fraction | None, most: Fraction | None, equal_passes: bool) -> bool:
    return size is not None and most is not None and (size > most or (size == most and not equal_passes))


def _is_shallow(slot: Fraction, found: Found) -> bool:
    """Whether a slot is under its limit; without one, whether it is gone."""
    if found.least_undercut is None:
        return slot <= 0
    return (
        slot < found.least_undercut or (slot == found.least_undercut and not found.least_undercut_passes) or slot <= 0
    )


def _is_depth_unknown(found: Found) -> bool:
    return found.surface_failed and found.defect is None


def _why_cut(found: Found) -> str:
    said = []
    if _runs_out(found):
        said.append(
            f"it runs out {plain(found.runout or Fraction(0))} over {plain(found.most_runout or Fraction(0))} {found.unit}"
        )
    if found.out_of_shape:
        said.append(found.out_of_shape)
    if found.defect:
        said.append(f"its surface is damaged {plain(found.defect)} {found.unit} deep")
    return " and ".join(said)


def _without_a_cut(found: Found) -> tuple[Advice, ...]:
    lines = []
    if _is_depth_unknown(found):
        lines.append(
            Advice(
                Action.polish,
                "the surface is not clean and the depth of its defect is not measured: measure it first; "
                "polishing is enough only where it has none",
            )
        )
    elif found.surface_failed:
        predicted = (("commutator-diameter", found.diameter - found.polish),) if found.diameter is not None else ()
        lines.append(
            Advice(
                Action.polish,
                "it runs true; the surface is not clean but has no depth",
                f"D - p = {_less(found)}",
                predicted,
            )
        )
    elif found.runout is not None and found.most_runout is not None:
        lines.append(
            Advice(
                Action.leave,
                f"it runs true, {plain(found.runout)} within {plain(found.most_runout)} {found.unit}, and nothing that was measured calls for a cut",
            )
        )
    else:
        lines.append(
            Advice(
                Action.leave,
                "nothing measured calls for a cut; without a runout and its limit nothing more can be said",
            )
        )
    slots = _shallow(found)
    return tuple(slots) if slots and not found.may_undercut else (*lines, *slots)


def _shallow(found: Found) -> list[Advice]:
    """The line for slots that are too shallow before any cut."""
    if found.undercut is None or found.least_undercut is None or not _is_shallow(found.undercut, found):
        return []
    return [_undercut(found, f"the shallowest slot is {plain(found.undercut)}")]


def _less(found: Found) -> str:
    assert found.diameter is not None
    return f"{plain(found.diameter)} - {plain(found.polish)} = {plain(found.diameter - found.polish)} {found.unit}"


def _with_a_cut(found: Found) -> tuple[Advice, ...]:
    assert found.diameter is not None
    runout = found.runout or Fraction(0)
    defect = found.defect or Fraction(0)
    turned = clean_up(found.diameter, runout, defect, found.polish)
    formula = (
        f"D - r - 2g - p = {plain(found.diameter)} - {plain(runout)} - 2 x {plain(defect)} - {plain(found.polish)} = "
        f"{plain(turned)} {found.unit}"
    )
    predicted = [("commutator-diameter", turned)]
    if found.lowest is not None and _under(turned, found):
        said = f"{_why_cut(found)}; cleaned up it would be {plain(turned)}, under the limit of {plain(found.lowest)}: do not turn it"
        return (Advice(Action.replace, said, formula, tuple(predicted)),)
    action, said = Action.turn, _why_cut(found)
    if found.lowest is None:
        said += "; no least diameter is entered, so nothing says whether it may be turned again"
    elif _under(2 * turned - found.diameter, found):
        action = Action.turn_last_cut
        said += f"; another cut of this size would pass the limit of {plain(found.lowest)}"
    else:
        left = cuts_left(turned, found.lowest, found.diameter - turned, found.lowest_passes)
        said += f"; {left} more cut{'s' if left != 1 else ''} of this size would remain"
    unknown = _unknown(found)
    if unknown:  # the cut may have to go deeper, so no size is predicted
        return (Advice(action, f"{_why_cut(found)}; {unknown}{_order(found)}", f"at most {formula}"),)
    lines = [Advice(action, f"{said}; {_rests_on(found)}", formula, tuple(predicted))]
    if found.undercut is not None:
        slots = _after_the_cut(found, turned, runout)
        if slots and not found.may_undercut:
            return (replace(slots[0], because=f"{_why_cut(found)}; {slots[0].because}", predicted=()),)
        if not slots:
            slot = worst_slot(found.undercut, found.diameter, turned, runout)
            kept = (*lines[0].predicted, ("undercut-depth", slot))
            lines[0] = replace(lines[0], formula=f"{formula}; {_slot_formula(found, turned, runout)}", predicted=kept)
        lines += slots
    lines[0] = replace(lines[0], because=lines[0].because + _order(found))
    return tuple(lines)


def _order(found: Found) -> str:
    return f". Order: {ORDER if found.noun == 'commutator' else RINGS_ORDER}"


def _unknown(found: Found) -> str:
    """What nobody measured and the depth of the cut hangs on; "" where nothing is missing."""
    if found.runout is None:
        return "the runout is not measured and the cut must take it out: measure it first"
    if _is_depth_unknown(found):
        return "the surface defect's depth is not measured and the cut must go below it: measure it first"
    return ""


def _rests_on(found: Found) -> str:
    """What the predicted diameter rests on."""
    if found.stations == 1:
        return "the size holds if the one diameter read is the smallest there is"
    return f"the size holds if the smallest diameter there is was among the {found.stations} read"


def _after_the_cut(found: Found, turned: Fraction, runout: Fraction) -> list[Advice]:
    """The line for the slots, where the worst would be too shallow."""
    assert found.undercut is not None
    assert found.diameter is not None
    slot = worst_slot(found.undercut, found.diameter, turned, runout)
    if not _is_shallow(slot, found):
        return []
    said = f"after the cut the worst slot would be {plain(max(slot, Fraction(0)))}"
    predicted = (("undercut-depth", max(slot, Fraction(0))),)
    return [replace(_undercut(found, said), formula=_slot_formula(found, turned, runout), predicted=predicted)]


def _slot_formula(found: Found, turned: Fraction, runout: Fraction) -> str:
    assert found.undercut is not None
    assert found.diameter is not None
    slot = worst_slot(found.undercut, found.diameter, turned, runout)
    round_one = worst_slot_eccentric(found.undercut, found.diameter, turned, runout)
    return (
        f"u - [(D - D')/2 + r] = {plain(found.undercut)} - [({plain(found.diameter)} - {plain(turned)})/2 + {plain(runout)}] = "
        f"{plain(slot)} {found.unit}, the bound for any shape; {plain(round_one)} if it is round and only off its centre"
    )


def _undercut(found: Found, said: str) -> Advice:
    least = "" if found.least_undercut is None else f", under {plain(found.least_undercut)} {found.unit}"
    if not found.may_undercut:
        return Advice(
            Action.not_to_be_turned,
            f"{said}{least}, and this model's commutator must not be undercut: replace or rewind",
        )
    return Advice(Action.re_undercut, f"{said}{least}")
