"""Gauge bursts into the sheet: nothing lost, nothing altered, nothing in another cell."""

from __future__ import annotations

import random
from pathlib import Path

from textual import events

from store import files, jobs, readings, records
from store.records import Record
from tests.screens.support import opened, settled, terminal, until
from tui.widgets.sheet import ReadingSheet

BARS = 1000


def long_job(record: Record, folder: Path) -> str:
    """A job whose sheet asks for a drop and a resistance over each of a thousand bars: two thousand cells."""
    (folder / "models.csv").write_text(f"model,kind,bars\nKL-900,generator,{BARS}\n")
    (folder / "limits.csv").write_text(
        "model,characteristic,unit,high,source\nKL-900,bar-to-bar,%,5,own sheet\nKL-900,bar-to-bar-resistance,%,5,own sheet\n"
    )
    files.load(record, [folder / "models.csv", folder / "limits.csv"])
    return jobs.take_in(record, model="KL-900", serial="1").tag


def values(count: int, seed: int) -> list[str]:
    """Readings as gauges send them: with and without leading zeros, signs, decimal marks and units."""
    draw = random.Random(seed)
    made = []
    for n in range(count):
        number = f"{draw.randint(1, 99)}.{draw.randint(0, 9999):04d}"
        unit = "mV" if n < BARS else "uohm"
        made.append(
            draw.choice(
                [number, f"000{number}", f"+{number}", number.replace(".", ","), f"{number}{unit}", f"{number} {unit}"]
            )
        )
    return made


def kept(path: Path, tag: str) -> list[tuple[str, str, str]]:
    """What is in the record: characteristic, position and text, in the order of the sheet."""
    record = records.open(path)
    found = readings.of_job(record, tag)
    record.close()
    rank = {"bar-to-bar": 0, "bar-to-bar-resistance": 1}
    placed = sorted((rank[r.characteristic], int(r.position), r.typed.text) for r in found)
    names = {n: name for name, n in rank.items()}
    return [(names[n], str(position), text) for n, position, text in placed]


def expected(sent: list[str]) -> list[tuple[str, str, str]]:
    """Each value in the next cell of the sheet."""
    return [
        ("bar-to-bar" if n < BARS else "bar-to-bar-resistance", str(n % BARS + 1), text) for n, text in enumerate(sent)
    ]


def test_two_thousand_readings_in_one_write_through_a_terminal(record: Record, tmp_path: Path) -> None:
    """2,000 readings sent at once through a real pseudo-terminal are in the record as sent."""
    tag = long_job(record, tmp_path)
    record.close()
    sent = values(2000, 1)
    with terminal(["--record", str(record.path)]) as screen:
        screen.until(tag)
        screen.send(b"\r")
        screen.until("serial 1")
        screen.send("".join(f"{text}\r" for text in sent).encode())
        screen.until("has its readings", 120)
        screen.close()
    assert kept(record.path, tag) == expected(sent)


def test_five_hundred_at_a_millisecond_a_key(record: Record, tmp_path: Path) -> None:
    """500 readings key by key, Tab and Enter mixed, slips rubbed out, some of them pasted: all as meant."""
    tag = long_job(record, tmp_path)
    record.close()
    sent = values(500, 2)
    draw = random.Random(3)
    with terminal(["--record", str(record.path)]) as screen:
        screen.until(tag)
        screen.send(b"\r")
        screen.until("serial 1")
        n = 0
        while n < len(sent):
            way = draw.random()
            if way < 0.1:
                lines = sent[n : n + draw.randint(1, 6)]
                screen.send(b"\x1b[200~" + "".join(f"{text}\n" for text in lines).encode() + b"\x1b[201~")
                n += len(lines)
                continue
            keys = sent[n]
            if way < 0.3:
                keys = f"{keys}9\x7f"
            for key in keys + draw.choice("\r\t"):
                screen.send(key.encode())
                screen.read(0.001)
            n += 1
        record_size = len(sent)
        end = 0
        while len(kept(record.path, tag)) < record_size and end < 200:
            screen.read(0.1)
            end += 1
        screen.close()
    assert kept(record.path, tag) == expected(sent)


async def test_the_same_headless_without_waiting(record: Record, tmp_path: Path) -> None:
    """2,000 readings posted as key events, none awaited; the sheet repaints lines, not the screen."""
    tag = long_job(record, tmp_path)
    record.close()
    sent = values(2000, 4)
    async with opened(record.path) as pilot:
        pilot.app.go("job", tag)
        await settled(pilot)
        sheet = pilot.app.screen.query_one(ReadingSheet)
        for text in sent:
            for character in text:
                pilot.app.post_message(events.Key("space" if character == " " else character, character))
            pilot.app.post_message(events.Key("enter", "\r"))
        await until(pilot, lambda: sheet.keying.at is None and not pilot.app.screen.waiting, 120)
    assert kept(record.path, tag) == expected(sent)
