"""Judging a no-load test at its voltage: as read within 2 %, the speed corrected within 10 %, not comparable beyond.

The limits of a no-load test hold at one voltage. That is the new size of the voltage's own limit, else the middle of its
band, else the end there is. Slightly high volts raise the free speed in proportion and leave the current nearly as it is
(TM 5-4310-354-14).
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from fractions import Fraction

from store.rules import quantities, running
from store.rules.limits import Judgement, Limit, Measured, Verdict, judge, stated
from store.rules.running import Comparable
from store.rules.statistic import Statistic

GOVERNED = {"no-load-speed": "no-load-voltage", "no-load-current": "no-load-voltage"}
"""Characteristics whose limit holds at a voltage, and the characteristic that says at which they were tested."""
GOVERNS = {"no-load-voltage": ("no-load-speed", "no-load-current")}
_CORRECTED = frozenset({"no-load-speed"})


def specified(limit: Limit | None) -> Fraction | None:
    """The volts at which a test is specified, by the limit of its voltage; None where there is none."""
    volts = None if limit is None else stated(limit)
    return None if limit is None or volts is None else quantities.convert(volts, limit.unit, "V")


def judge_at(
    name: str, measured: Sequence[Measured], statistic: Statistic, limit: Limit | None, volts: Sequence[Measured],
    volts_limit: Limit | None,
) -> Judgement:  # fmt: skip
    """Judge a governed characteristic by the first reading of its voltage; as `judge` where the volts are not known."""
    tested = next(
        (quantities.convert(m.typed.value, m.typed.unit, "V") for m in volts if m.typed.value is not None), None
    )
    wanted = specified(volts_limit)
    if tested is None or wanted is None or wanted <= 0:
        return judge(measured, statistic, limit)
    how = Comparable.not_comparable if tested <= 0 else running.at_voltage(tested, wanted)
    said = f"tested at {quantities.plain(tested)} V, the limit holds at {quantities.plain(wanted)} V"
    if how is Comparable.not_comparable:
        made = judge(measured, statistic, limit)
        if made.value is None or made.verdict is Verdict.no_limit:
            return made
        return replace(made, verdict=Verdict.not_comparable, probability=None, wear_used=None, reason="voltage",
                       detail=f"{said}: more than 10 % off, test again")  # fmt: skip
    if how is Comparable.as_read or name not in _CORRECTED:
        return judge(measured, statistic, limit)
    made = judge([_times(m, wanted / tested) for m in measured], statistic, limit)
    return made if made.value is None else replace(made, detail=f"corrected, {said}")


def _times(one: Measured, factor: Fraction) -> Measured:
    """A reading brought to the specified volts, with its uncertainty."""
    if one.typed.value is None:
        return one
    return replace(
        one, typed=replace(one.typed, value=one.typed.value * factor),
        variance=None if one.variance is None else one.variance * factor**2,
        expanded=None if one.expanded is None else one.expanded * factor,
    )  # fmt: skip
