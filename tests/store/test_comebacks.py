"""Comebacks over a record: what counts, whom to name, and words where there is nothing to say."""

from __future__ import annotations

import json
import os
import random
from pathlib import Path

import numpy as np
import pytest
from click.testing import CliRunner

from store import comeback_groups, comeback_words, comebacks, files, foretelling
from store.errors import Refused
from store.records import Record
from store.rules.survival import Pooled, rejected
from tests import shop

FULL = os.environ.get("WEARLINE_FULL") == "1"


def history(record: Record, folder: Path, lines: list[str]) -> None:
    """Load jobs: tag,serial,taken_in,outcome,ended,earlier_tag,comeback_outcome."""
    shop.fill(record, folder)
    head = "tag,model,serial,taken_in,outcome,ended,earlier_tag,comeback_outcome"
    rows = []
    for line in lines:
        tag, rest = line.split(",", 1)
        rows.append(f"{tag},KS-100,{rest}")
    path = folder / "jobs.csv"
    path.write_text("\n".join([head, *rows]) + "\n")
    files.load(record, [path])


def released(n: int, day: str = "2026-01-10") -> str:
    """A release that has not come back."""
    return f"R{n},S{n},2026-01-01,released,{day},,"


def test_only_what_counts_is_counted(record: Record, tmp_path: Path) -> None:
    """No fault found ends the watch without being a comeback; the choice is printed with the rate."""
    history(
        record, tmp_path,
        [released(1), released(2), released(3), "C1,S1,2026-02-09,open,,R1,part", "C2,S2,2026-03-01,open,,R2,no-fault"],
    )  # fmt: skip
    found = comebacks.review(record, until="2026-11-01")
    assert (found.released, found.comebacks, found.tags) == (3, 1, ("R1",))
    assert [(s.days, round(s.stays, 4)) for s in found.curve] == [(30.0, 0.6667)]
    assert comebacks.review(record, until="2026-11-01", counted=("no-fault",)).tags == ("R2",)
    assert found.at[365] is None
    assert found.at[180] is not None


@pytest.mark.parametrize(
    ("lines", "said"),
    [
        ([], "nothing was released"),
        ([released(1), released(2)], "nothing came back of 2 released"),
        (
            [released(1), released(2), "C1,S1,2026-02-01,open,,R1,part", "C2,S2,2026-02-01,open,,R2,part"],
            "every release came back",
        ),
        ([released(1), released(2), "C1,S1,2026-02-01,open,,R1,part"], "too few to rank"),
        ([released(1, "2026-05-05"), "C1,S1,2026-02-01,open,,R1,part"], "1 left out: by their dates"),
    ],
)
def test_words_where_there_is_little(record: Record, tmp_path: Path, lines: list[str], said: str) -> None:
    """None at all, every job, two in all, wrong dates: words, not a crash; groups and foretelling too."""
    history(record, tmp_path, lines)
    for by in (None, *comeback_groups.KINDS):
        found = comebacks.review(record, by=by, until="2026-11-01")
        assert any(said in remark for remark in found.remarks), found.remarks
        json.dumps(comebacks.as_json(found))
    assert foretelling.foretell(record, until="2026-11-01") == ()


def test_bad_questions_are_refused(record: Record) -> None:
    """A kind of group, an outcome or a date that there is not."""
    for words in (
        {"by": "colour"},
        {"since": "2026-05-01", "until": "2026-04-01"},
        {"since": "soon"},
        {"counted": ("bad luck",)},
    ):
        with pytest.raises(Refused):
            comebacks.review(record, **words)


def simulated(seed: int, jobs: int = 20_000, groups: int = 200, bad: int = 200) -> tuple[float, float]:
    """A shop with one bad lot of 200 (twice a hazard of a quarter a year) among 200 of 99 each: named, share of false names.

    With a bad lot of no more than 100 jobs the power is two thirds: there is not enough to see.
    """
    draw = np.random.default_rng(seed)
    lot = np.concatenate([np.zeros(bad, int), draw.integers(1, groups + 1, jobs - bad)])
    age = draw.uniform(0, 730, jobs)
    hazard = np.where(lot == 0, 2.0, 1.0) * 0.25 / 365
    fails = draw.exponential(1 / hazard)
    days, returned = np.minimum(fails, age), fails <= age
    pooled = Pooled(days, returned)
    p = [pooled.log_rank(lot == n).cautious for n in range(groups + 1)]
    _, named = rejected(p, 0.1)
    false = sum(named[1:])
    return float(named[0]), false / max(1, sum(named))


def test_the_bad_lot_is_named_and_chance_is_not() -> None:
    """20,000 jobs, one bad lot, 200 without: named in at least 90 per cent of seeds, false names at or under the rate."""
    seeds = 200 if FULL else 40
    found = [simulated(seed) for seed in range(seeds)]
    assert np.mean([f[0] for f in found]) >= 0.9
    assert np.mean([f[1] for f in found]) <= 0.1


def test_naive_counts_are_fooled_by_young_releases() -> None:
    """A lot that is just younger has fewer returns over releases; the curve shows that it is the same."""
    draw = random.Random(6)
    old = [(min(t, 700.0), t <= 700) for t in (draw.expovariate(1 / 800) for _ in range(1500))]
    young = [(min(t, 60.0), t <= 60) for t in (draw.expovariate(1 / 800) for _ in range(1500))]
    naive = [sum(r for _, r in group) / len(group) for group in (old, young)]
    assert naive[0] > 4 * naive[1]
    days, returned = zip(*old, *young, strict=True)
    assert Pooled(days, returned).log_rank(list(range(1500))).p > 0.01


def test_the_demo_fault_is_found_and_the_coincidence_is_not(demo: Record) -> None:
    """The planted lot is named in one sentence; the supplier with early comebacks by chance is not."""
    lots = comebacks.review(demo, by="lot", until="2026-11-27")
    named = [g for g in lots.groups if g.named]
    assert [g.name for g in named] == ["CS-4417"]
    assert "more than the rest" in named[0].says
    assert any(remark.startswith("lot CS-4417: more than the rest") for remark in lots.remarks)
    assert not any(g.named for g in comebacks.review(demo, by="supplier", until="2026-11-27").groups)


def test_by_command(demo: Record, tmp_path: Path) -> None:
    """JSON by the contract, CSV and the words on the terminal."""
    from tui.commands import cli

    path = str(demo.path)
    demo.close()
    run = CliRunner()
    found = json.loads(
        run.invoke(cli, ["comebacks", "--by", "lot", "--json", "--record", path], catch_exceptions=False).output
    )
    assert set(found) >= {
        "since",
        "until",
        "counted",
        "released",
        "comebacks",
        "curve",
        "at",
        "repeat",
        "pareto",
        "groups",
    }
    assert set(found["groups"][0]) == {
        "by",
        "name",
        "released",
        "comebacks",
        "fraction_365",
        "low",
        "high",
        "p",
        "adjusted",
        "says",
    }
    out = tmp_path / "lots.csv"
    assert (
        run.invoke(
            cli, ["comebacks", "--by", "lot", "-o", str(out), "--record", path], catch_exceptions=False
        ).exit_code
        == 0
    )
    assert out.read_text().startswith("by,name,released,comebacks")
    assert run.invoke(cli, ["foretell", "--record", path], catch_exceptions=False).exit_code == 0


def test_words_set_the_notes_of_comebacks_apart(record: Record, tmp_path: Path) -> None:
    """A word that stands in the notes of comebacks and hardly elsewhere comes first, with its counts."""
    from store import notes

    history(
        record,
        tmp_path,
        [*(released(n) for n in range(1, 7)), "C1,S1,2026-02-01,open,,R1,part", "C2,S2,2026-02-01,open,,R2,part"],
    )
    for tag in ("C1", "C2"):
        notes.add(record, tag, "contacts pitted again, replaced")
    for n in range(1, 7):
        notes.add(record, f"R{n}", "brushes replaced, turned")
    found = comeback_words.words(record, until="2026-11-01")
    assert {w.word for w in found[:3]} >= {"contacts", "pitted"}
    (contacts,) = [w for w in found if w.word == "contacts"]
    assert (contacts.back, contacts.of_back, contacts.other, contacts.of_other) == (2, 2, 0, 6)
    assert "replaced" not in {w.word for w in found}


def test_look_alike_serials_are_proposed(record: Record, tmp_path: Path) -> None:
    """A serial never seen that looks like a known one is proposed, not linked."""
    from store import jobs

    shop.fill(record, tmp_path)
    shop.core(record, "8821B3")
    assert jobs.alike(record, "KS-100", "882183") == ("8821B3",)
    assert jobs.alike(record, "KS-100", "88213") == ("8821B3",)
    assert jobs.alike(record, "KS-100", "8821B3") == ()
    assert jobs.alike(record, "KS-100", "777777") == ()
