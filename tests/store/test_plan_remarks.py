"""What else the readings say beside a plan: each with its formula, from readings as they were typed."""

from __future__ import annotations

from fractions import Fraction
from pathlib import Path

import pytest

from store import files, jobs, plans, readings, sheets, shop
from store.errors import Refused
from store.readings import Entry
from store.records import Record
from store.rules import bars
from store.strip_chart import strip
from tests import shop as small

LIMITS = """model,characteristic,stage,unit,new,low,high,count,source
KS-100,no-load-voltage,both,V,23,22,24,,"TM 9-2920-242-35 para 38"
KS-100,no-load-current,both,A,,,90,,"TM 9-2920-242-35 para 38"
KS-100,no-load-speed,both,rpm,,7000,,,"TM 9-2920-242-35 para 38"
KS-100,bar-to-bar,both,%,,,10,27,"the shop's own"
KS-100,bushing-housing-bore,both,mm,,20.000,20.021,4,"drawing 7"
KS-100,undercut-depth,both,mm,0.7,0.3,,4,"Sheet 12, rev B"
KS-100,brush-spring-force,both,N,,8,,4,"Sheet 12, rev B"
KS-100,brush-spring-position,both,mm,14,9,14,,"Sheet 12, rev B"
"""


@pytest.fixture
def tag(record: Record, tmp_path: Path) -> str:
    """A core of the small shop with more limits."""
    small.fill(record, tmp_path)
    (tmp_path / "more.csv").write_text(LIMITS)
    files.load(record, [tmp_path / "more.csv"])
    return small.core(record).tag


def remarks(record: Record, tag: str, **values: str) -> str:
    """Everything that is said after these readings, one line."""
    for name, text in values.items():
        readings.add(record, tag, "as-found", name.replace("_", "-"), text)
    return "\n".join(plans.compute(record, tag).remarks)


def test_the_customary_diagnosis_by_the_corrected_speed(record: Record, tag: str) -> None:
    """6500 rpm at 22 V is 6795 at 23, still low, with high current: friction, or a shorted or grounded armature."""
    said = remarks(record, tag, no_load_voltage="22", no_load_current="120", no_load_speed="6500")
    assert "low speed, high current: friction" in said
    said = remarks(
        record, small.core(record, "2").tag, no_load_voltage="22", no_load_current="80", no_load_speed="6900"
    )
    assert "rated current and speed" in said


def test_no_diagnosis_where_nothing_can_be_compared(record: Record, tag: str) -> None:
    """At 12 of 23 V the pair means nothing."""
    assert "no-load" not in remarks(record, tag, no_load_voltage="12", no_load_current="120", no_load_speed="3000")


def test_stall_and_loaded_point(record: Record, tag: str) -> None:
    """TM 5-5065 para 198f (read): 6.6 V, 200 A: 0.033 ohm. US Navy Basic Machines ch. 8 (read): 20 lbf.ft at 1800 rpm."""
    said = remarks(record, tag, stall_voltage="6.6", stall_current="200")
    assert "6.6 V / 200 A = 0.0330 ohm" in said
    said = remarks(
        record, tag, loaded_torque="20 lbf.ft", loaded_speed="1800", loaded_voltage="24", loaded_current="300"
    )
    assert "= 5111 W; efficiency 71%" in said


def test_solenoid_windings_are_asked_about_only_where_they_disagree(record: Record, tag: str) -> None:
    """TM 9-4940-568-34 (read): at 20 V, 12-14 A is 1.45-1.65 ohm; 100-125 A is 0.16-0.20 ohm."""
    said = remarks(
        record, tag, solenoid_test_voltage="20", solenoid_hold_in_current="13", solenoid_hold_in_resistance="1.55"
    )
    assert "winding" not in said
    said = remarks(record, tag, solenoid_pull_in_current="110", solenoid_pull_in_resistance="1.8")
    assert "pull-in winding: 20 V at 110 A make 0.182 ohm, and 1.8 ohm was read" in said


def test_insulation_and_copper_are_brought_to_their_reference(record: Record, tag: str) -> None:
    """IEEE 43: half for each 10 degC, with its scope; copper by 234.5 (80 ohm at 20 degC is 100 ohm at 83.63)."""
    said = remarks(record, tag, insulation_resistance="8")
    assert "without the winding's temperature it cannot be brought to 40 degC" in said
    said = remarks(record, tag, winding_temperature="83.625", insulation_test_voltage="500", field_resistance="100")
    assert "field resistance at 20 degC: 100 x (234.5 + 20)/(234.5 + 83.625) = 80.000 ohm" in said
    assert "tested at 500 V" in said
    assert "750 W" in said


@pytest.mark.parametrize(
    ("typed", "is_taken"), [("-234", True), ("-234.5", False), ("-240", False), ("-400 degF", False)]
)
def test_a_temperature_below_that_of_copper_is_one_line(record: Record, tag: str, typed: str, is_taken: bool) -> None:
    """At -234.5 degC copper has no resistance left: refused as it is typed, in one line, in either unit."""
    if is_taken:
        assert readings.add(record, tag, "as-found", "winding-temperature", typed)
        return
    with pytest.raises(Refused, match="is the temperature a slip") as caught:
        readings.add(record, tag, "as-found", "winding-temperature", typed)
    assert "\n" not in str(caught.value)


@pytest.mark.parametrize(
    ("test", "values"),
    [
        ("stall", {"stall_voltage": "0", "stall_current": "200"}),
        ("no-load", {"no_load_voltage": "0", "no_load_current": "80", "no_load_speed": "7000"}),
        (
            "solenoid",
            {"solenoid_test_voltage": "0", "solenoid_hold_in_current": "13", "solenoid_hold_in_resistance": "1"},
        ),
    ],
)
def test_zero_volts_is_one_line(record: Record, tag: str, test: str, values: dict[str, str]) -> None:
    """A test at zero volts tests nothing, and the line says which test; nothing else is said of it."""
    said = [one for one in remarks(record, tag, **values).splitlines() if one.startswith(test)]
    assert said == [f"{test}: a test at zero volts says nothing; is the voltage a slip?"]


def test_a_loaded_point_at_zero_volts_keeps_its_power(record: Record, tag: str) -> None:
    """Torque and speed are good without the volts; the efficiency is not."""
    said = remarks(record, tag, loaded_torque="20", loaded_speed="1500", loaded_voltage="0", loaded_current="300")
    assert "= 3142 W; at zero volts there is no efficiency" in said


def test_springs_are_brought_to_the_stated_position(record: Record, tag: str) -> None:
    """TM 10-3930-653-14&P (read): 20 gf a millimetre. 7 N read at 11.2 mm is 7.55 N at 14 mm: a prediction, in no verdict."""
    readings.add_all(record, tag, [Entry("brush-spring-force", text) for text in ("7", "7.6", "8.1", "8")])
    before = sheets.sheet(record, tag, "as-found").row("brush-spring-force").judged
    said = remarks(record, tag, brush_spring_position="11.2", brush_spring_loss="20 gf")
    assert (
        "spring 1 at the stated 14 mm, predicted, not measured: F - (L - L') x s = 7 - (11.2 - 14) x 0.196133 = 7.55 N, "
        "8 N at least" in said
    )
    assert "spring 4 at the stated 14 mm" in said
    assert sheets.sheet(record, tag, "as-found").row("brush-spring-force").judged == before


def test_springs_read_each_at_its_own_position(record: Record, tag: str) -> None:
    """Two positions read: only those two springs are reckoned; a spring that would not reach is said in one line."""
    readings.add_all(record, tag, [Entry("brush-spring-force", text) for text in ("9", "9", "9", "9")])
    readings.add_all(record, tag, [Entry("brush-spring-position", text) for text in ("14", "16")])
    said = remarks(record, tag, brush_spring_loss="1")
    assert (
        "spring 1 at the stated 14 mm, predicted, not measured: F - (L - L') x s = 9 - (14 - 14) x 1 = 9.00 N" in said
    )
    assert "= 9 - (16 - 14) x 1 = 7.00 N" in said
    assert "spring 3" not in said
    readings.add(record, tag, "as-found", "brush-spring-loss", "5", why="read again")
    assert "spring 2 at 14 mm: at that position the spring would not reach the brush" in remarks(record, tag)


def test_a_position_stated_by_its_ends(record: Record, tmp_path: Path) -> None:
    """Without a new size the middle of the ends is stated; a position outside of them is no work."""
    small.fill(record, tmp_path)
    (tmp_path / "ends.csv").write_text(
        "model,characteristic,stage,unit,low,high,source\nKS-100,brush-spring-position,both,mm,13,15,own\n"
    )
    files.load(record, [tmp_path / "ends.csv"])
    tag = small.core(record).tag
    said = remarks(record, tag, brush_spring_force="9", brush_spring_position="12", brush_spring_loss="0.5")
    assert (
        "spring 1 at the stated 14 mm, predicted, not measured: F - (L - L') x s = 9 - (12 - 14) x 0.5 = 10.00 N"
        in said
    )
    assert plans.compute(record, tag).lines == ()


def test_a_position_must_be_stated(record: Record, tmp_path: Path) -> None:
    """Without a limit that states the position the plan says where to enter it."""
    small.fill(record, tmp_path)
    tag = small.core(record).tag
    said = remarks(record, tag, brush_spring_force="9", brush_spring_position="12", brush_spring_loss="1")
    assert "no position is stated at which the springs' force holds" in said


def test_the_polarization_index_where_both_values_are_read(record: Record, tag: str) -> None:
    """IEEE 43: ten-minute over one-minute value, with the scope of the standard; above 5000 Mohm (from memory) it says little."""
    said = remarks(record, tag, insulation_resistance="100")
    assert "polarization" not in said
    said = remarks(record, tag, insulation_resistance_10_min="250")
    assert "polarization index: R10/R1 = 250/100 = 2.50. IEEE 43 is written for machines of 750 W and more" in said
    assert "says little" not in said
    other = small.core(record, "2").tag
    said = remarks(record, other, insulation_resistance="6000", insulation_resistance_10_min="9000")
    assert "= 1.50; above 5000 Mohm after one minute the index says little" in said
    third = small.core(record, "3").tag
    assert "the one-minute value is not read" in remarks(record, third, insulation_resistance_10_min="9000")
    said = remarks(record, third, insulation_resistance="0")
    assert "polarization index: the one-minute value is above zero" in said


def test_bars_as_a_strip_chart_with_the_pattern(record: Record, tag: str) -> None:
    """One low bar of 27: a short suspected there, and the chart shows where, in tens."""
    entries = [Entry("bar-to-bar", "40" if bar == 9 else "50") for bar in range(1, 28)]
    readings.add_all(record, tag, entries)
    said = remarks(record, tag)
    assert "one low at 9: a short is suspected there" in said
    assert "▅" * 8 + "▁▅ " + "▅" * 10 + " " + "▅" * 7 in said
    assert "furthest bar 9, 20.0 %" in said


def test_a_bar_that_was_not_read_is_a_gap(record: Record, tag: str) -> None:
    """Bars 1 to 8 and 10 read: the low one is bar 10, not the ninth reading."""
    entries = [Entry("bar-to-bar", "50", position=str(bar)) for bar in range(1, 9)]
    readings.add_all(record, tag, [*entries, Entry("bar-to-bar", "40", position="10")])
    said = remarks(record, tag)
    assert "bars 1 to 10: ▅▅▅▅▅▅▅▅·▁  one low at 10" in said


def test_the_other_two_ways_of_reading_bars_and_no_limit(record: Record, tag: str) -> None:
    """A growler's current and a resistance get their chart too; without a limit no pattern is named."""
    readings.add_all(record, tag, [Entry("bar-to-bar-growler-current", text) for text in ("50", "50", "40")])
    assert "bar-to-bar growler current, bars 1 to 3: ▅▅▁  no limit is entered" in remarks(record, tag)


def test_what_bars_cannot_be_is_one_line_each(record: Record, tag: str) -> None:
    """A bar past those of the model is refused as it is typed; zeros are told in the plan."""
    with pytest.raises(Refused, match="has 27 bars"):
        readings.add(record, tag, "as-found", "bar-to-bar", "50", position="28")
    readings.add_all(record, tag, [Entry("bar-to-bar", "0")] * 27)
    assert "bar-to-bar drop: the middle reading is zero; is the supply on" in remarks(record, tag)
    with pytest.raises(Refused, match="has all its 27 readings"):
        readings.add(record, tag, "as-found", "bar-to-bar", "50")


def test_a_strip_has_its_scale_from_the_furthest_to_either_side() -> None:
    """Low at the bottom, high at the top, even in the middle."""
    assert strip(bars.chart([Fraction(n) for n in (90, 100, 110)], None)) == "▁▅█"
    assert strip(bars.chart([Fraction(7)] * 3, None)) == "▄▄▄"


def test_limits_that_are_a_grade_have_its_name(record: Record, tag: str) -> None:
    """20.000 to 20.021 is 20H7 (Bhandari, Design of Machine Elements, ch. 3; ISO 286)."""
    assert "its limits are 20H7 of ISO 286" in remarks(record, tag, bushing_housing_bore="20.01")


def test_what_the_plan_had_to_do_without(record: Record, tag: str) -> None:
    """No shaft runout, no depth of the defect, and no size is predicted over an unmeasured defect."""
    said = remarks(
        record, tag, commutator_diameter="44.1", commutator_runout="0.12", commutator_surface="fail burned bars"
    )
    assert "the shaft's runout is not measured" in said
    assert "the depth of the surface defect is not measured" in said
    (line, *_) = plans.compute(record, tag).lines
    assert (line.action, line.predicted) == ("turn", ())
    assert "measure it first" in line.because
    said = remarks(record, tag, surface_defect_depth="0.1")
    assert "the depth of the surface defect" not in said
    (line, *_) = plans.compute(record, tag).lines
    assert [(p.name, p.value) for p in line.predicted] == [("commutator-diameter", Fraction("43.76"))]


def test_cuts_left_at_the_rate_of_the_shop(record: Record, tag: str) -> None:
    """Earlier jobs of the model took 0.2, 0.3 and 1.0 off: the median is 0.3; a job that took nothing is no cut."""
    shop.put(record, "polish", "0.02 mm")
    for n, left in enumerate(("44.8", "44.7", "44.0", "45")):
        earlier = small.core(record, f"E{n}").tag
        readings.add(record, earlier, "as-found", "commutator-diameter", "45")
        readings.add(record, earlier, "as-left", "commutator-diameter", left)
    remarks(record, tag, commutator_diameter="44.1", commutator_runout="0.12")
    (line, *_) = plans.compute(record, tag).lines
    assert "At 0.3 mm, the median of 3 earlier cuts on this model, 4 more would remain" in line.because


def test_nothing_to_do_is_nothing_to_accept(record: Record, tag: str) -> None:
    """A commutator that is left and brushes that are kept do not come into the rework list."""
    remarks(record, tag, commutator_diameter="45", commutator_runout="0.02")
    readings.add_all(record, tag, [Entry("brush-length", "13")] * 4)
    found = plans.compute(record, tag)
    assert [line.action for line in found.lines] == ["leave", "keep"]
    assert plans.accept(record, tag) == ()
    with pytest.raises(Refused, match="nothing to do"):
        plans.accept(record, tag, [1])


def test_slots_deeper_than_the_bound_are_as_predicted(record: Record, tag: str) -> None:
    """After undercutting they are deeper than the worst that was feared; shallower is marked."""
    shop.put(record, "polish", "0.02 mm")
    remarks(record, tag, commutator_diameter="44.1", commutator_runout="0.12")
    readings.add_all(record, tag, [Entry("undercut-depth", "0.35")] * 4)
    entries = plans.accept(record, tag)
    assert [e.line.action for e in entries] == ["turn", "re-undercut"]
    readings.add_all(record, tag, [Entry("undercut-depth", "0.7", "as-left")] * 4)
    (held,) = plans.held(record, tag, entries[1].line)
    assert (held.beyond, held.says) == (False, "predicted 0.16 mm at least, left 0.7: as predicted")
    assert jobs.find(record, tag).is_open
