"""The owner's report: said on page one, drawn as lines, its figures attached; words where there is too little to say."""

from __future__ import annotations

import json
from io import BytesIO
from pathlib import Path
from typing import Any

import pypdf
import pytest

from store import comebacks, files, shop
from store.errors import Refused
from store.records import Record
from store.reports import characters
from store.reports.owner import charts, contents, drawing, issue
from store.rules import survival
from tests import shop as small

JOBS = "tag,model,serial,taken_in,outcome,ended,earlier_tag,comeback_outcome"


def read(made: bytes) -> tuple[pypdf.PdfReader, str]:
    """The PDF, and its text with single spaces."""
    reader = pypdf.PdfReader(BytesIO(made))
    return reader, " ".join(" ".join(page.extract_text() for page in reader.pages).split())


def load(record: Record, folder: Path, lines: list[str]) -> None:
    """Jobs of the past."""
    small.fill(record, folder)
    (folder / "past.csv").write_text("\n".join([JOBS, *lines]) + "\n")
    files.load(record, [folder / "past.csv"])


def test_page_one_says_what_it_is_about(demo: Record) -> None:
    """Period, what counts, the rate of false alarms, the counts, and first of all what is named, in one sentence."""
    owner = contents.gather(demo, since="2025-01-01", until="2026-11-27")
    reader, _ = read(issue.draw(owner))
    page = " ".join(reader.pages[0].extract_text().split())
    for words in (
        "from 2025-01-01, followed to 2026-11-27", "workmanship, part, wear", "outcome is not known yet",
        f"{owner.review.rate:.0%} of the groups", f"{owner.review.released} units", f"{owner.review.comebacks} for a cause",
    ):  # fmt: skip
        assert words in page


def test_the_planted_lot_is_named_and_the_coincidence_is_not(demo: Record) -> None:
    """The bad lot with the jobs behind it; no supplier."""
    owner = contents.gather(demo, until="2026-11-27")
    _, text = read(issue.draw(owner))
    assert "lot CS-4417: more than the rest" in text
    assert [(g.by, g.name) for g in owner.review.groups if g.named] == [("lot", "CS-4417")]
    assert text.count("more than the rest") == 2  # the sentence, and its line among the lots
    behind = text[text.index("The jobs behind it") :]
    named = next(g for g in owner.review.groups if g.named)
    assert "  ".join(named.tags).split() == behind[: behind.index("solenoid")].split()[6:]


def test_the_figures_are_attached(demo: Record) -> None:
    """The attachment is what `comebacks --json` prints, groups of every kind, with what readings foretell."""
    owner = contents.gather(demo, until="2026-11-27")
    reader, _ = read(issue.draw(owner))
    ((attached,),) = reader.attachments.values()
    found = json.loads(attached)
    assert found == json.loads(json.dumps(contents.as_json(owner)))
    assert {g["by"] for g in found["groups"]} == {"lot", "part", "supplier", "model", "assembler", "finding"}
    assert found["groups"][0]["says"] == comebacks.as_json(owner.review)["groups"][0]["says"]


def test_it_is_drawn_as_lines_in_embedded_fonts(demo: Record) -> None:
    """PDF/A's identifier, fonts embedded, no picture on any page, strokes on every page with a chart."""
    reader, _ = read(issue.draw(contents.gather(demo, until="2026-11-27")))
    assert reader.xmp_metadata is not None
    assert "pdfaid:part" in reader.xmp_metadata.stream.get_data().decode()
    for page in reader.pages:
        resources: Any = page["/Resources"]
        for font in resources.get("/Font", {}).values():
            inner = font.get_object()["/DescendantFonts"][0].get_object()
            assert any(key in inner["/FontDescriptor"].get_object() for key in ("/FontFile2", "/FontFile3"))
        assert not list(page.images)
    content = reader.pages[0].get_contents()
    assert content is not None
    drawn = content.get_data().split()
    assert drawn.count(b"l") > 100
    assert b"f" in drawn


def test_the_same_bytes_each_time(demo: Record) -> None:
    """Gathered and drawn twice."""
    first, second = (issue.draw(contents.gather(demo, until="2026-11-27")) for _ in range(2))
    assert first == second


@pytest.mark.parametrize("paper", ["a4", "letter"])
def test_an_empty_record_gives_words(record: Record, paper: str) -> None:
    """Nothing released: said, and nothing drawn."""
    shop.put(record, "paper", paper)
    _, text = read(issue.draw(contents.gather(record)))
    assert "nothing was released in this period" in text
    assert "No released unit of this period names its lot, part, supplier, model, assembler or finding." in text
    assert "No unit came back." in text


def test_nothing_came_back(record: Record, tmp_path: Path) -> None:
    """No comeback among thirty."""
    load(record, tmp_path, [f"P{n},KS-100,{n},2025-01-02,released,2025-01-09,," for n in range(30)])
    _, text = read(issue.draw(contents.gather(record)))
    assert "nothing came back of 30 released; up to 11.4% would still be no surprise" in text


def test_two_came_back_in_all(record: Record, tmp_path: Path) -> None:
    """Counts with their limits, nothing ranked."""
    past = [f"P{n},KS-100,{n},2025-01-02,released,2025-01-09,," for n in range(10)]
    past += [f"B{n},KS-100,{n},2025-06-02,open,,P{n},part" for n in range(2)]
    load(record, tmp_path, past)
    _, text = read(issue.draw(contents.gather(record)))
    assert "2 of 10 came back" in text
    assert "too few to rank anything" in text


def test_every_release_came_back(record: Record, tmp_path: Path) -> None:
    """The curve ends at all of them."""
    past = [f"P{n},KS-100,{n},2025-01-02,released,2025-01-09,," for n in range(30)]
    past += [f"B{n},KS-100,{n},2025-0{n % 8 + 2}-02,open,,P{n},part" for n in range(30)]
    load(record, tmp_path, past)
    _, text = read(issue.draw(contents.gather(record)))
    assert "every release came back" in text


def test_names_are_never_markup(record: Record, tmp_path: Path) -> None:
    """A lot by the name of a command is printed as it was typed."""
    load(record, tmp_path, [f"P{n},KS-100,{n},2025-01-02,released,2025-01-09,," for n in range(3)])
    (tmp_path / "fitted.csv").write_text('tag,number,lot,supplier\nP1,BS-1,"#panic() $x$ *b*",\u202eWray [x]\n')
    files.load(record, [tmp_path / "fitted.csv"])
    _, text = read(issue.draw(contents.gather(record)))
    assert "#panic() $x$ *b*" in text
    assert "[U+202E]Wray [x]" in text


def test_saved_by_its_ending(record: Record, tmp_path: Path) -> None:
    """PDF or JSON; another ending is refused before anything is written."""
    owner = contents.gather(record)
    assert issue.save(owner, tmp_path / "a.pdf").read_bytes().startswith(b"%PDF-")
    assert json.loads(issue.save(owner, tmp_path / "a.json").read_text())["released"] == 0
    with pytest.raises(Refused, match=r"is saved as \.pdf or \.json"):
        issue.save(owner, tmp_path / "a.doc")
    assert sorted(p.name for p in tmp_path.glob("a.*")) == ["a.json", "a.pdf"]


def test_a_curve_rises_by_steps_within_its_band() -> None:
    """From nothing at day 0 to the last day followed; places between 0 and 1."""
    days, returned = [10, 20, 30, 40, 50], [True, False, True, False, False]
    steps = survival.curve(days, returned)
    drawn = charts.returns(steps, survival.at_risk(days, (0, 30)), 50)
    assert drawn is not None
    assert drawn["line"][0] == (0.0, 0.0)
    assert drawn["line"][-1][0] == 1.0
    assert [x for x, *_ in drawn["x"]] == [0.0, 0.6]
    assert [below for *_, below in drawn["x"]] == ["5", "3"]
    assert all(0 <= place <= 1 for point in [*drawn["line"], *drawn["band"]] for place in point)
    ys = [y for _, y in drawn["line"]]
    assert ys == sorted(ys)


@pytest.mark.parametrize(("highest", "top", "words"), [(0.004, 0.005, "0%"), (0.23, 0.25, "25%"), (1.0, 1.0, "100%")])
def test_a_scale_ends_at_a_round_share(highest: float, top: float, words: str) -> None:
    """Not below the highest, and never above all."""
    found, marks = charts.scale(highest)
    assert found >= highest
    assert found <= 1.0
    assert marks[0] == (0.0, "0%")
    assert marks[-1][0] == 1.0
    assert found == pytest.approx(top)
    assert marks[-1][1] == words


def test_without_a_comeback_no_dot_is_drawn(record: Record, tmp_path: Path) -> None:
    """A dot at nought without limits would look sure; the words give Wilson's limits."""
    past = [f"P{n},KS-100,{n},2025-01-02,released,2025-01-09,," for n in range(30)]
    load(record, tmp_path, [*past, "B1,KS-100,1,2026-08-02,open,,P1,part"])
    drawn = drawing.of(contents.gather(record, kinds=("model",)), characters.in_print)
    (row,) = drawn["kinds"][0]["rows"]
    assert (row["dot"], row["year"], row["back"]) == (None, "0%", "1")


def test_many_jobs_are_named_as_far_as_there_is_room(record: Record, tmp_path: Path) -> None:
    """The first 24 behind a figure, and how many more."""
    past = [f"P{n:02},KS-100,{n},2025-01-02,released,2025-01-09,," for n in range(30)]
    past += [f"B{n},KS-100,{n},2025-0{n % 8 + 2}-02,open,,P{n:02},part" for n in range(30)]
    load(record, tmp_path, past)
    _, text = read(issue.draw(contents.gather(record)))
    behind = text[text.index("all that came back") :]
    assert "P00 P01" in behind
    assert "P23 and 6 more" in behind


def test_the_line_over_the_bars_ends_at_all_of_them(demo: Record) -> None:
    """Most first; the last row's line stands at one whole."""
    rows = drawing.of(contents.gather(demo, until="2026-11-27"), characters.in_print)["pareto"]["rows"]
    shares = [row["share"] for row in rows]
    assert shares == sorted(shares, reverse=True)
    assert rows[-1]["cumulative"] == 1.0
    assert rows[0]["cumulative"] == rows[0]["share"]
