"""What the lathe may take off a commutator or a slip ring, and what is left of its slots, before anything is cut.

With D the smallest measured diameter, r the runout (TIR) from the journals, u the smallest undercut, g the deepest
defect below the surface and p the polish allowance on the diameter:

    clean-up diameter    D' = D - r - 2g - p
    worst slot at D'     u - [(D - D')/2 + r]        whatever the shape
                         u - [(D - D')/2 + r/2]      round, but off the axis

D - r holds for any shape: turned about the journals the part cleans up at twice its smallest radius, the smallest
diameter lies under smallest plus largest radius, and their difference is r. It is exact for a round part off its axis.
Source: geometry; the tests turn sampled profiles about their axis. p is common practice and the shop's own setting.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from fractions import Fraction
from math import cos, floor, pi

from store.errors import Refused
from store.rules.limits import Limit, median
from store.rules.plan_lines import Action, Line, Predicted, number, sized

GEOMETRY = "geometry of turning about the journals; holds for any shape"
ORDER = ("turn", "re-undercut", "deburr", "polish", "measure again")


@dataclass(frozen=True, slots=True)
class Surface:
    """A commutator or a pair of rings as found, every size in `unit`.

    runout, undercut, shaft_runout, defect: None where not measured. A limit is None where none is entered; all are in
    `unit` too. `is_marked`: the surface test failed or a bar stands off. `undercut` stays None for rings. Variances are
    u squared of the readings, None where the gauge's uncertainty is not known.
    """

    unit: str
    diameter: Fraction
    runout: Fraction | None
    undercut: Fraction | None = None
    defect: Fraction | None = None
    is_marked: bool = False
    shaft_runout: Fraction | None = None
    polish: Fraction = Fraction(0)
    diameter_limit: Limit | None = None
    runout_limit: Limit | None = None
    undercut_limit: Limit | None = None
    shaft_limit: Limit | None = None
    may_turn: bool = True
    may_undercut: bool = True
    component: str = "commutator"
    characteristic: str = "commutator-diameter"
    diameter_variance: Fraction | None = None
    runout_variance: Fraction | None = None
    undercut_variance: Fraction | None = None


@dataclass(frozen=True, slots=True)
class Dial:
    """A runout from n dial readings equally spaced round the circle; `share` of a once-a-turn runout they surely show."""

    runout: Fraction
    count: int
    share: float
    note: str


@dataclass(frozen=True, slots=True)
class CutsLeft:
    """How many more cuts of the usual size the diameter has in it: `rate` is the median cut of `jobs` earlier jobs."""

    count: int
    rate: Fraction
    jobs: int


def check(found: Surface) -> None:
    """Raises Refused for sizes that no part can have, in one line each."""
    for what, value in (
        ("diameter", found.diameter), ("runout", found.runout), ("undercut", found.undercut),
        ("surface defect", found.defect), ("shaft runout", found.shaft_runout), ("polish allowance", found.polish),
    ):  # fmt: skip
        if value is not None and value < 0:
            raise Refused(f"{found.component}: {what} {sized(value, found.unit)} is below zero")
    if found.diameter == 0:
        raise Refused(f"{found.component}: the diameter is zero")
    for what, value in (("runout (TIR)", found.runout), ("shaft runout", found.shaft_runout)):
        if value is not None and value >= found.diameter:
            raise Refused(
                f"{found.component}: {what} {sized(value, found.unit)} is not less than the diameter, "
                f"{sized(found.diameter, found.unit)}"
            )
    for what, value in (("undercut", found.undercut), ("surface defect", found.defect)):
        if value is not None and 2 * value >= found.diameter:
            raise Refused(f"{found.component}: {what} {sized(value, found.unit)} reaches the axis of the part")


def clean_up(
    diameter: Fraction, runout: Fraction, defect: Fraction = Fraction(0), polish: Fraction = Fraction(0)
) -> Fraction:
    """The diameter at which the part cleans up, all in one unit; never larger than the true one for any shape.

    `diameter` is the smallest there is: the micrometer is carried round the part, not set down twice.
    Raises Refused where nothing would be left.
    """
    left = diameter - runout - 2 * defect - polish
    if left <= 0:
        raise Refused(
            f"a cut of {number(runout + 2 * defect + polish)} leaves nothing of a diameter of {number(diameter)}"
        )
    return left


def worst_slot(undercut: Fraction, diameter: Fraction, after: Fraction, runout: Fraction) -> Fraction:
    """Depth of the worst slot after turning from `diameter` to `after`, whatever the shape; zero or less: it is gone."""
    return undercut - ((diameter - after) / 2 + runout)


def worst_slot_eccentric(undercut: Fraction, diameter: Fraction, after: Fraction, runout: Fraction) -> Fraction:
    """The same for a round part off its axis."""
    return undercut - ((diameter - after) / 2 + runout / 2)


def dial(readings: Sequence[Fraction]) -> Dial:
    """A runout from readings of a dial at equally spaced places. Raises Refused for fewer than three.

    An even number shows at least cos(pi/n) of a once-a-turn runout, an odd one at least cos(pi/2n).
    """
    n = len(readings)
    if n < 3:
        raise Refused("a runout takes at least three dial readings round the circle")
    share = cos(pi / n) if n % 2 == 0 else cos(pi / (2 * n))
    found = max(readings) - min(readings)
    note = (
        f"{n} dial readings show as little as {share:.2f} of a once-a-turn runout: "
        f"it may be up to {float(found) / share:.4g}; turn the part under the dial for the true one"
    )
    return Dial(found, n, share, note)


def cuts_left(after: Fraction, low: Fraction, cuts: Sequence[Fraction]) -> CutsLeft | None:
    """More cuts of this shop's usual size for the model, from `after` down to `low`; None without an earlier cut.

    `cuts` are as-found less as-left diameters of earlier jobs; those that took nothing off are no cuts.
    """
    taken = [cut for cut in cuts if cut > 0]
    if not taken or after < low:
        return None
    rate = median(taken)
    return CutsLeft(floor((after - low) / rate), rate, len(taken))


def fails(value: Fraction, limit: Limit | None) -> bool:
    """Whether a size lies past its limit, read as it stands; False where there is no limit."""
    if limit is None:
        return False
    if limit.low is not None and (value < limit.low or (value == limit.low and not limit.equal_passes)):
        return True
    return limit.high is not None and (value > limit.high or (value == limit.high and not limit.equal_passes))


@dataclass(frozen=True, slots=True)
class _Cut:
    """A cut as thought of: where it ends, with its formula."""

    after: Fraction
    formula: str
    variance: Fraction | None


def missing(found: Surface) -> tuple[str, ...]:
    """What has to be measured or entered before there can be advice on turning; empty where nothing is."""
    asked = []
    if found.runout is None:
        asked.append(f"{found.component}: measure its runout")
    elif found.runout_limit is None or found.runout_limit.high is None:
        asked.append(f"{found.component}: enter a limit for its runout")
    if found.is_marked and found.defect is None:
        asked.append(
            f"{found.component}: measure its deepest surface defect; what is below the surface must be cut too"
        )
    return tuple(asked)


def decide(found: Surface) -> Line | None:
    """What to do with the part; None where `missing` says what lacks. Raises Refused for sizes that cannot be."""
    check(found)
    if fails(found.diameter, found.diameter_limit):
        return _line(found, Action.replace_, f"the diameter is {_under(found, found.diameter)} as found")
    if missing(found):
        return None
    wants = _wants(found)
    if not wants:
        return _line(found, Action.leave, _sound(found))
    if found.shaft_runout is not None and fails(found.shaft_runout, found.shaft_limit):
        high = found.shaft_limit.high if found.shaft_limit else None
        return _line(
            found, Action.straighten_shaft_first,
            f"the shaft runs out {sized(found.shaft_runout, found.unit)}, over the {number(high or Fraction(0))} maximum; "
            "straighten or replace it and measure again before any cut",
        )  # fmt: skip
    assert found.runout is not None
    defect = found.defect or Fraction(0)
    if not fails(found.runout, found.runout_limit) and 2 * defect <= found.polish:
        return _polished(found, wants)
    if not found.may_turn:
        return _line(
            found,
            Action.not_to_be_turned,
            f"{wants}, and this model's {found.component} must not be turned: replace it",
        )
    return _turned(found, wants, defect)


def _polished(found: Surface, wants: str) -> Line:
    after = found.diameter - found.polish
    formula = f"D - p = {number(found.diameter)} - {number(found.polish)} = {sized(after, found.unit)}"
    if fails(after, found.diameter_limit):
        return _line(found, Action.replace_, f"{wants}; polished it would be {_under(found, after)}", formula)
    because = f"{wants}, no deeper than polishing takes off"
    return _line(
        found, Action.polish, because, formula, _predictions(found, after, Fraction(0), found.diameter_variance)
    )


def _turned(found: Surface, wants: str, defect: Fraction) -> Line:
    runout = found.runout or Fraction(0)
    step = runout + 2 * defect + found.polish
    if step >= found.diameter:
        raise Refused(f"{found.component}: a cut of {sized(step, found.unit)} leaves nothing of the diameter")
    after = clean_up(found.diameter, runout, defect, found.polish)
    formula = (
        f"D' = D - r - 2g - p = {number(found.diameter)} - {number(runout)} - 2 x {number(defect)} - "
        f"{number(found.polish)} = {sized(after, found.unit)} (any shape)"
    )
    if fails(after, found.diameter_limit):
        because = f"{wants}; turned it would be {_under(found, after)}: known before any cut"
        return _line(found, Action.replace_, because, formula)
    variance = None
    if found.diameter_variance is not None and found.runout_variance is not None:
        variance = found.diameter_variance + found.runout_variance
    predicted = _predictions(found, after, runout, variance)
    if found.diameter_limit is None or found.diameter_limit.low is None:
        because = f"{wants}; no limit of the diameter is entered, so nobody knows whether it stays in size"
        return _line(found, Action.turn, because, formula, predicted)
    if fails(after - step, found.diameter_limit):
        because = f"{wants}; one more cut like this would be {_under(found, after - step)}"
        return _line(found, Action.turn_last_cut, because, formula, predicted)
    low = found.diameter_limit.low
    because = f"{wants}; {sized(after - low, found.unit)} stay above the {number(low)} minimum"
    return _line(found, Action.turn, because, formula, predicted)


def re_undercut(found: Surface, line: Line) -> Line | None:
    """The line for the slots after `line` is done; None where they stay deep enough, or none may be cut.

    Judged by the bound that holds for any shape; what a round part off its axis would keep is told beside it.
    """
    if found.undercut is None or line.action not in {Action.leave, Action.polish, Action.turn, Action.turn_last_cut}:
        return None
    after = next((p.value for p in line.predicted if p.name == found.characteristic), found.diameter)
    is_turned = line.action in {Action.turn, Action.turn_last_cut}
    runout = (found.runout or Fraction(0)) if is_turned else Fraction(0)
    worst = worst_slot(found.undercut, found.diameter, after, runout)
    low = found.undercut_limit.low if found.undercut_limit else None
    if not (fails(worst, found.undercut_limit) if low is not None else worst <= 0):
        return None
    said = sized(max(worst, Fraction(0)), found.unit)
    against = f", under the {number(low)} minimum" if low is not None else ": no slot would be left"
    if not found.may_undercut:
        return None
    return Line(
        found.component, Action.re_undercut,
        f"the worst slot {'would be' if after != found.diameter else 'is'} {said}{against}",
        _slot_formula(found, after, runout) if after != found.diameter else f"u = {sized(found.undercut, found.unit)}",
        _slots(found, after, runout), GEOMETRY,
    )  # fmt: skip


def is_short_of_slots(found: Surface, line: Line) -> bool:
    """Whether the slots want cutting and the model forbids it."""
    if found.may_undercut:
        return False
    allowed = Surface(**{name: getattr(found, name) for name in Surface.__slots__} | {"may_undercut": True})
    return re_undercut(allowed, line) is not None


def _slot_formula(found: Surface, after: Fraction, runout: Fraction) -> str:
    assert found.undercut is not None
    worst = worst_slot(found.undercut, found.diameter, after, runout)
    round_one = worst_slot_eccentric(found.undercut, found.diameter, after, runout)
    return (
        f"u - [(D - D')/2 + r] = {number(found.undercut)} - [({number(found.diameter)} - {number(after)})/2 + {number(runout)}] "
        f"= {sized(worst, found.unit)} (any shape); {sized(round_one, found.unit)} if round but off the axis"
    )


def _slots(found: Surface, after: Fraction, runout: Fraction) -> tuple[Predicted, ...]:
    if found.undercut is None:
        return ()
    worst = max(Fraction(0), worst_slot(found.undercut, found.diameter, after, runout))
    round_one = max(Fraction(0), worst_slot_eccentric(found.undercut, found.diameter, after, runout))
    made = [Predicted("undercut-depth", worst, found.unit, "at least", found.undercut_variance)]
    if runout:
        made.append(
            Predicted("undercut-depth-if-eccentric", round_one, found.unit, "at least", found.undercut_variance)
        )
    return tuple(made)


def _predictions(found: Surface, after: Fraction, runout: Fraction, variance: Fraction | None) -> tuple[Predicted, ...]:
    return (Predicted(found.characteristic, after, found.unit, "about", variance), *_slots(found, after, runout))


def _wants(found: Surface) -> str:
    """What is wrong with the surface, in words; empty where nothing is: such a part is not touched."""
    said = []
    if found.runout is not None and fails(found.runout, found.runout_limit):
        high = found.runout_limit.high if found.runout_limit else None
        said.append(f"the runout is {sized(found.runout, found.unit)}, over the {number(high or Fraction(0))} maximum")
    if found.defect:
        said.append(f"the surface has a defect {sized(found.defect, found.unit)} deep")
    elif found.is_marked:
        said.append("the surface is marked")
    return " and ".join(said)


def _sound(found: Surface) -> str:
    assert found.runout is not None
    high = found.runout_limit.high if found.runout_limit else None
    said = f"the runout is {sized(found.runout, found.unit)}, inside the {number(high or Fraction(0))} maximum, and the surface is sound"
    return said if found.may_turn else f"{said}; this model's {found.component} must not be turned"


def _under(found: Surface, size: Fraction) -> str:
    low = found.diameter_limit.low if found.diameter_limit else None
    if low is None:
        return sized(size, found.unit)
    if size == low:
        return f"{sized(size, found.unit)}, at the {number(low)} minimum, which fails"
    return f"{sized(size, found.unit)}, {number(low - size)} under the {number(low)} minimum"


def _line(
    found: Surface, action: Action, because: str, formula: str = "", predicted: tuple[Predicted, ...] = ()
) -> Line:
    return Line(found.component, action, because, formula, predicted, GEOMETRY if formula else "")
