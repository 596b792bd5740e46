"""Running tests against printed figures."""

from __future__ import annotations

from fractions import Fraction
from math import pi

import pytest

from store.errors import Refused
from store.rules import running
from store.rules.at_voltage import judge_at
from store.rules.limits import Limit, Measured, Rule, Verdict, judge
from store.rules.quantities import Quantity, convert
from store.rules.readings import parse
from store.rules.running import Comparable
from store.rules.statistic import Statistic

F = Fraction


@pytest.mark.parametrize(
    ("volts", "specified", "how"),
    [
        ("23.0", "23.0", Comparable.as_read), ("23.46", "23.0", Comparable.as_read), ("23.47", "23.0", Comparable.corrected),
        ("25.3", "23.0", Comparable.corrected), ("25.31", "23.0", Comparable.not_comparable), ("11.5", "11.5", Comparable.as_read),
        ("10.35", "11.5", Comparable.corrected), ("10.34", "11.5", Comparable.not_comparable),
    ],
)  # fmt: skip
def test_at_the_specified_volts(volts: str, specified: str, how: Comparable) -> None:
    """23.0 V: TM 9-2920-242-35 para 38; 11.5 V: TM 5-3895-382-24 (both read). The 2 and 10 per cent are the shop's rule."""
    assert running.at_voltage(F(volts), F(specified)) is how


def test_speed_follows_the_volts() -> None:
    """Slightly high volts raise the speed in proportion (TM 5-4310-354-14, read)."""
    assert running.corrected_speed(F(7350), F("24.15"), F("23.0")) == F(7000)


def test_stall_resistance_and_torque() -> None:
    """TM 5-5065 para 198f (read): 6.6 V, 200 A, 21 lbf.ft: 0.033 ohm, 28.5 N.m."""
    assert running.resistance(F("6.6"), F(200)) == F("0.033")
    assert round(float(convert(F(21), "lbf.ft", "N.m")), 1) == 28.5


@pytest.mark.parametrize(("amps", "ohms"), [("100", "0.20"), ("125", "0.16"), ("12", "1.67"), ("14", "1.43")])
def test_solenoid_windings(amps: str, ohms: str) -> None:
    """TM 9-4940-568-34 (read): at 20 V 100-125 A = 0.16-0.20 ohm, 12-14 A = 1.45-1.65 ohm, within five per cent."""
    assert float(running.resistance(F(20), F(amps))) == pytest.approx(float(ohms), abs=0.005)
    printed = {"100": "0.20", "125": "0.16", "12": "1.65", "14": "1.45"}[amps]
    assert running.windings_agree(F(20), F(amps), F(printed)) == ""
    assert "look again" in running.windings_agree(F(20), F(amps), F(printed) * 2)


def test_prony_brake() -> None:
    """US Navy Basic Machines ch. 8 (read): 25 and 5 lbf on a 1 ft pulley at 1800 rpm: 3.427 hp with true pi."""
    torque = float(convert(F(20) * F(1, 2), "lbf.ft", "N.m"))
    assert running.power_w(torque, 1800) / 745.69987158227 == pytest.approx(3.427, abs=5e-4)


def test_prony_brake_as_the_book_reckons_it() -> None:
    """The same with the book's pi of 3.14: 113,040 ft.lbf a minute (read)."""
    watts = running.power_w(float(convert(F(20) * F(1, 2), "lbf.ft", "N.m")), 1800)
    foot_pounds_a_minute = watts * 60 / float(convert(F(1), "lbf.ft", "N.m"))
    assert foot_pounds_a_minute * 3.14 / pi == pytest.approx(113_040, abs=0.5)


def test_pinion_clearance_by_its_datum() -> None:
    """To the stop 0.010 to 0.140 in, to the housing 0.328 to 0.390 in (TM 5-4210-230-14&P-1, TM 9-6115-604-34, read)."""
    to_stop, to_housing = (
        Limit("in", low=F(low), high=F(high), rule=Rule.simple)
        for low, high in (("0.010", "0.140"), ("0.328", "0.390"))
    )
    read = [Measured("1", parse("23/64", Quantity.length, "in"))]
    assert judge(read, Statistic.each, to_housing).verdict is Verdict.in_
    assert judge(read, Statistic.each, to_stop).verdict is Verdict.out


@pytest.mark.parametrize(
    ("specified", "most_amps", "least_rpm"), [("23.0", 90, 7000), ("11.5", 130, 7000), ("24", 50, 6500)]
)
def test_no_load_limits_as_printed(specified: str, most_amps: int, least_rpm: int) -> None:
    """TM 9-2920-242-35 para 38, TM 5-3895-382-24, TM 9-2920-243-34 para 3-27 (all read; the last prints no volts: 24 V unit).

    At the printed volts a result at its limit is in and one past it out; a twentieth more volts give a twentieth more speed.
    """
    volts = [Measured("1", parse(specified, Quantity.voltage, "V"))]
    more = [Measured("1", parse(str(float(specified) * 1.05), Quantity.voltage, "V"))]
    at = Limit("V", new=F(specified), low=F(0), high=F(100))
    amps, rpm = Limit("A", high=F(most_amps), rule=Rule.simple), Limit("rpm", low=F(least_rpm), rule=Rule.simple)

    def current(read: int) -> Verdict:
        taken = [Measured("1", parse(str(read), Quantity.current, "A"))]
        return judge_at("no-load-current", taken, Statistic.largest, amps, volts, at).verdict

    def speed(read: int, tested: list[Measured]) -> Verdict:
        taken = [Measured("1", parse(str(read), Quantity.speed, "rpm"))]
        return judge_at("no-load-speed", taken, Statistic.smallest, rpm, tested, at).verdict

    assert (current(most_amps), current(most_amps + 1)) == (Verdict.in_, Verdict.out)
    assert (speed(least_rpm, volts), speed(least_rpm - 1, volts)) == (Verdict.in_, Verdict.out)
    assert (speed(least_rpm, more), speed(round(least_rpm * 1.06), more)) == (Verdict.out, Verdict.in_)


@pytest.mark.parametrize(
    ("amps", "rpm", "said"),
    [
        ("80", "7500", "good"), ("120", "5000", "friction"), ("300", "0", "seized bearings"), ("0", "0", "open field"),
        ("20", "4000", "high internal resistance"), ("140", "11000", "shorted fields"),
    ],
)  # fmt: skip
def test_the_customary_diagnosis(amps: str, rpm: str, said: str) -> None:
    """TM 5-4310-354-14 ch 7, TM 5-3810-303-24 Table 10D-1 and TM 10-3930-671-24 agree; limits of TM 9-2920-242-35."""
    found = running.diagnose(F(amps), F(rpm), F(90), F(7000))
    assert found is not None
    assert said in found.means


def test_efficiency_only_where_it_turns_under_load() -> None:
    """At stall and running free there is no mechanical power; zero volts are refused."""
    assert running.efficiency(0, 7000, 12, 100) is None
    assert running.efficiency(20, 0, 12, 400) is None
    found = running.efficiency(10, 1500, 10, 250)
    assert found is not None
    assert found == pytest.approx(0.6283, abs=1e-4)
    for call in (
        lambda: running.efficiency(1, 1, 0, 1),
        lambda: running.at_voltage(F(0), F(12)),
        lambda: running.resistance(F(0), F(1)),
    ):
        with pytest.raises(Refused):
            call()
