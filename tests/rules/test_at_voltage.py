"""A no-load test is judged at its voltage; sources beside each check."""

from __future__ import annotations

from fractions import Fraction

import pytest
from hypothesis import given
from hypothesis import strategies as st

from store.rules.at_voltage import judge_at, specified
from store.rules.limits import Judgement, Limit, Measured, Verdict
from store.rules.quantities import Quantity
from store.rules.readings import parse
from store.rules.statistic import Statistic
from store.rules.verdict_words import because

F = Fraction
# TM 9-2920-242-35 para 38 (read): 24 V unit, tested at 23.0 V, at most 90 A, at least 7000 rpm
VOLTS = Limit("V", new=F(23))
SPEED = Limit("rpm", low=F(7000))
CURRENT = Limit("A", high=F(90))


def at(volts: str, text: str, name: str = "no-load-speed") -> Judgement:
    """A speed or a current read at so many volts."""
    quantity, unit, limit, statistic = {
        "no-load-speed": (Quantity.speed, "rpm", SPEED, Statistic.smallest),
        "no-load-current": (Quantity.current, "A", CURRENT, Statistic.largest),
    }[name]
    tested = [Measured("1", parse(volts, Quantity.voltage, "V"))]
    return judge_at(name, [Measured("1", parse(text, quantity, unit))], statistic, limit, tested, VOLTS)


@pytest.mark.parametrize(
    ("volts", "speed", "verdict", "value"),
    [
        ("23.46", "7000", Verdict.in_, F(7000)),  # 2 % over: as read
        ("23.47", "7000", Verdict.out, 7000 * F(23) / F("23.47")),  # beyond 2 %: brought to 23 V
        ("22.54", "6999", Verdict.out, F(6999)),
        ("22.53", "6999", Verdict.in_, 6999 * F(23) / F("22.53")),
        ("20.7", "6300", Verdict.in_, F(7000)),  # 10 % under: exactly the limit
        ("20.7", "6299", Verdict.out, 6299 * F(10, 9)),
        ("25.3", "7700", Verdict.in_, F(7000)),
        ("20.69", "9000", Verdict.not_comparable, F(9000)),
        ("25.31", "9000", Verdict.not_comparable, F(9000)),
        ("0", "9000", Verdict.not_comparable, F(9000)),
    ],
)
def test_speed_on_both_sides_of_each_bound(volts: str, speed: str, verdict: Verdict, value: Fraction) -> None:
    """As read to 2 %, in proportion to 10 % (TM 5-4310-354-14), not comparable beyond."""
    found = at(volts, speed)
    assert (verdict, value) == (found.verdict, found.value)


def test_current_is_as_read_until_it_cannot_be_compared() -> None:
    """The current is nearly the same at slightly other volts (TM 5-4310-354-14)."""
    assert at("20.7", "90", "no-load-current").value == 90
    assert at("20.7", "91", "no-load-current").verdict is Verdict.out
    assert at("20.0", "50", "no-load-current").verdict is Verdict.not_comparable


def test_the_sentence_says_how_it_was_brought_there() -> None:
    """Printed as corrected; or why it says nothing."""
    said = because(at("22", "6800"), SPEED, "no-load speed")
    assert said.startswith("no-load speed is 7109")
    assert "corrected, tested at 22 V, the limit holds at 23 V" in said
    said = because(at("19", "6800"), SPEED, "no-load speed")
    assert said == "no-load speed is 6800 rpm; tested at 19 V, the limit holds at 23 V: more than 10 % off, test again"


def test_without_volts_or_limit_it_is_judged_as_read() -> None:
    """Nothing is corrected by a voltage that nobody read or entered."""
    reading = [Measured("1", parse("7000", Quantity.speed, "rpm"))]
    assert judge_at("no-load-speed", reading, Statistic.smallest, SPEED, [], VOLTS).verdict is Verdict.in_
    tested = [Measured("1", parse("5", Quantity.voltage, "V"))]
    assert judge_at("no-load-speed", reading, Statistic.smallest, SPEED, tested, None).verdict is Verdict.in_
    assert judge_at("no-load-speed", reading, Statistic.smallest, None, tested, VOLTS).verdict is Verdict.no_limit


def test_where_the_volts_are_specified() -> None:
    """The new size, else the middle of a band, else the one end."""
    assert specified(Limit("V", new=F(23), low=F(22), high=F(25))) == 23
    assert specified(Limit("V", low=F(22), high=F(24))) == 23
    assert specified(Limit("mV", high=F(11500))) == F("11.5")
    assert specified(None) is None


@given(
    volts=st.fractions(F("20.7"), F("25.3"), max_denominator=1000), speed=st.integers(1, 20000), u=st.integers(0, 50)
)
def test_correcting_scales_reading_and_uncertainty_alike(volts: Fraction, speed: int, u: int) -> None:
    """Within 10 % the verdict is that of the reading times V_spec/V with its u times the same."""
    one = Measured("1", parse(str(speed), Quantity.speed, "rpm"), F(u * u), F(2 * u))
    tested = [Measured("1", parse(str(volts.limit_denominator(1000)), Quantity.voltage, "V"))]
    found = judge_at("no-load-speed", [one], Statistic.smallest, SPEED, tested, VOLTS)
    factor = F(23) / volts if abs(volts - 23) > F("0.46") else F(1)
    assert found.value == speed * factor
    assert found.variance == u * u * factor**2
