"""Foretelling on a real record: readings as left of units that came back within a year against those that did not."""

from __future__ import annotations

from pathlib import Path

import pytest

from store import files, foretelling
from store.records import Record
from tests import shop

BACK, STAYED = 12, 40


@pytest.fixture
def history(record: Record, tmp_path: Path) -> Record:
    """Fifty-two released units of one model; those that came back had been left with more end play, their brushes alike."""
    shop.fill(record, tmp_path)
    jobs = ["tag,model,serial,taken_in,outcome,ended,earlier_tag,comeback_outcome"]
    readings = ["tag,stage,characteristic,position,value,unit"]
    for n in range(BACK + STAYED):
        tag, comes_back = f"H{n}", n < BACK
        jobs.append(f"{tag},KS-100,{n},2024-03-01,released,2024-03-08,,")
        play = 0.30 + n / 1000 if comes_back else 0.10 + n / 1000
        readings.append(f"{tag},as-left,end-play,1,{play:.3f},mm")
        readings += [f"{tag},as-left,brush-length,{k},{13 + n % 7 / 10 + k / 100:.2f},mm" for k in range(1, 5)]
        if comes_back:
            jobs.append(f"B{n},KS-100,{n},2024-07-01,open,,{tag},workmanship")
    (tmp_path / "jobs.csv").write_text("\n".join(jobs) + "\n")
    (tmp_path / "readings.csv").write_text("\n".join(readings) + "\n")
    files.load(record, [tmp_path / "jobs.csv", tmp_path / "readings.csv"])
    return record


def test_the_reading_that_went_with_comebacks_is_named(history: Record) -> None:
    """End play is, with what a tighter limit would have caught and refused and within which limits; brush length is not."""
    found = {f.characteristic: f for f in foretelling.foretell(history, until="2026-11-01")}
    play, brush = found["end-play"], found["brush-length"]
    assert play.named
    assert (play.found.returned, play.found.stayed, play.found.area) == (BACK, STAYED, 1.0)
    assert (play.caught.share, play.refused.share) == (1.0, 0.1)
    assert 0.7 < play.caught.low < 0.8
    assert play.caught.high == 1.0
    assert play.refused.low < 0.1 < play.refused.high
    assert "units that came back read higher in 100% of pairs" in play.says
    assert "were 100% (76% to 100%) of those and 10%" in play.says
    assert not brush.named
    assert brush.says == "no difference that chance would not make"


def test_units_not_yet_followed_for_a_year_say_nothing(history: Record) -> None:
    """Half a year after the releases only the comebacks are known: nothing can be held against them."""
    assert foretelling.foretell(history, until="2024-09-01") == ()
