"""No-load verdicts in the record: the voltage moves them whenever it is read or corrected."""

from __future__ import annotations

from pathlib import Path

from store import readings, sheets, verify
from store.records import Record
from tests import shop
from tests.conftest import Writer

LIMITS = """model,characteristic,stage,unit,new,low,high,source
KS-100,no-load-voltage,both,V,11.5,11,12,"TM 5-3895-382-24"
KS-100,no-load-current,both,A,,,130,"TM 5-3895-382-24"
KS-100,no-load-speed,both,rpm,,7000,,"TM 5-3895-382-24"
"""


def verdicts(record: Record, tag: str) -> tuple[str, str]:
    """Of current and speed."""
    sheet = sheets.sheet(record, tag, "as-left")
    return sheet.row("no-load-current").verdict.value, sheet.row("no-load-speed").verdict.value


def test_the_voltage_decides_whether_it_can_be_compared(record: Record, tmp_path: Path, write: Writer) -> None:
    """Read first, judged as read; at 10 V not comparable; the voltage corrected to 11 V, the speed is brought to 11.5."""
    from store import files

    shop.fill(record, tmp_path)
    files.load(record, [write("more.csv", LIMITS)])
    tag = shop.core(record).tag
    for name, text in (("no-load-current", "120"), ("no-load-speed", "6800")):
        readings.add(record, tag, "as-left", name, text)
    assert verdicts(record, tag) == ("in", "out")
    moved = readings.add(record, tag, "as-left", "no-load-voltage", "10").judged
    assert {j.characteristic.name for j in moved} >= {"no-load-current", "no-load-speed"}
    assert verdicts(record, tag) == ("not comparable", "not comparable")
    readings.add(record, tag, "as-left", "no-load-voltage", "11", position="1", why="read the wrong scale")
    assert verdicts(record, tag) == ("in", "in")
    row = sheets.sheet(record, tag, "as-left").row("no-load-speed")
    assert row.judged is not None
    assert "corrected, tested at 11 V" in row.judged.because
    assert row.readings[0] is not None
    assert row.readings[0].typed.text == "6800"
    assert verify.verify(record).wrong is None
