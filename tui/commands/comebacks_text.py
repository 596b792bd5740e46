"""The review of comebacks in characters: what the terminal shows and what is written as text, at most 80 columns wide."""

from __future__ import annotations

from collections.abc import Iterable, Iterator, Sequence
from textwrap import wrap
from typing import TYPE_CHECKING

from store.errors import brief
from tui.commands.output import one_line
from tui.widgets import charts

if TYPE_CHECKING:
    from store.comeback_groups import Group
    from store.comeback_words import Word
    from store.comebacks import Review
    from store.foretelling import Foretold
    from store.reports.owner.contents import Owner

WIDTH = 80
MOST_FINDINGS, MOST_GROUPS, MOST_JOBS, MOST_SAID, MOST_WORDS = 12, 30, 12, 8, 8
_NAME, _DRAWN = 28, 24


def lines(
    found: Review, apart: Sequence[Word], foretold: Sequence[Foretold] | None = None, *, jobs: bool = False
) -> list[str]:
    """The review line by line; `foretold` None leaves that section out. `jobs` names the jobs behind each figure."""
    made = [*_figures(found), "", *_wrapped(found.remarks)]
    if found.curve:
        made += ["", "share that came back, by days since release, with its 95 per cent band"]
        made += charts.curve_chart(found.curve, found.at_risk, found.longest, WIDTH - 8, 12)
    if found.pareto:
        made += ["", "findings of the comebacks", *_pareto(found, jobs=jobs)]
    top = max((g.high for g in found.groups if g.high is not None), default=0.0)
    for kind in dict.fromkeys(g.by for g in found.groups):
        made += ["", *_groups(kind, [g for g in found.groups if g.by == kind], top, jobs=jobs)]
    if found.repeat:
        last = found.repeat[-1]
        said = f"mean number of comebacks a unit by {last.days:.0f} days: {last.mean:.2f} ({last.low:.2f} to {last.high:.2f})"
        made += ["", said]
    if apart:
        said = ", ".join(f"{w.word} {w.back}/{w.of_back} against {w.other}/{w.of_other}" for w in apart[:MOST_WORDS])
        made += ["", *_wrapped([f"words that set their notes apart: {said}"])]
    if foretold is not None:
        made += ["", "readings as left, and comebacks within a year", *_foretold(foretold)]
    return [one_line(line).rstrip() for line in made]


def head(owner: Owner) -> list[str]:
    """Whose report it is and of which day."""
    made = owner.at[:10]
    title = f"What comes back{made:>{WIDTH - 15}}"
    return [title, *_wrapped([one_line(text) for text in (owner.shop, owner.address) if text]), "-" * WIDTH]


def _figures(found: Review) -> Iterator[str]:
    since = "from the beginning" if found.since.startswith("0001") else found.since
    yield f"released {since} to {found.until}: {found.released}, came back: {found.comebacks}"
    yield from _wrapped(
        [
            (
                f"counted: {', '.join((*found.counted, 'outcomes not yet known'))}; "
                f"false alarms allowed: {found.rate:.0%}, for each kind of group"
            )
        ]
    )
    for day, at in found.at.items():
        yield f"  by {day} days: {_share(at)}"


def _share(at: tuple[float, float, float] | None) -> str:
    if at is None:
        return "too young"
    return f"{at[0]:.1%} ({at[1]:.1%} to {at[2]:.1%})" if at[0] else "none until then"


def _pareto(found: Review, *, jobs: bool) -> Iterator[str]:
    yield f"{'finding':{_NAME}} {'count':>6} {'share':>6} {'so far':>7}"
    for f in found.pareto[:MOST_FINDINGS]:
        bar = charts.bar(f.share, _DRAWN)
        yield f"{brief(f.finding, _NAME):{_NAME}} {f.count:6,} {f.share:6.0%} {f.cumulative:7.0%}  {bar}"
        yield from _jobs(f.tags) if jobs else ()
    yield from _left_out(len(found.pareto) - MOST_FINDINGS, "finding")


def _groups(kind: str, groups: Sequence[Group], top: float, *, jobs: bool) -> Iterator[str]:
    scale = f"0 {f'{top:.0%}':>{_DRAWN - 2}}" if top else ""
    yield f"{kind:{_NAME}} {'released':>8} {'back':>5} {'a year':>9}  {scale}"
    for g in groups[:MOST_GROUPS]:
        year = "too young" if g.fraction_365 is None else f"{g.fraction_365:.1%}"
        # without a comeback within the year there are no limits to draw: a dot at nought would look sure
        drawn = charts.dot(g.fraction_365 or None, g.low, g.high, top, _DRAWN)
        yield f"{brief(g.name, _NAME):{_NAME}} {g.released:8,} {g.comebacks:5,} {year:>9}  {drawn}"
        yield from _wrapped([g.says], "  ")
        yield from _jobs(g.tags) if jobs and g.named else ()
    yield from _left_out(len(groups) - MOST_GROUPS, kind)


def _foretold(foretold: Sequence[Foretold]) -> Iterator[str]:
    if not foretold:
        yield from _wrapped(
            ["too few comebacks followed for a year with readings as left: nothing can be foretold yet"]
        )
        return
    named = [f for f in foretold if f.named]
    if not named:
        yield f"none of {len(foretold)} looked at differs by more than chance would make"
    for f in named[:MOST_SAID]:
        yield from _wrapped([f"{f.model} {f.characteristic}: {f.says}"])


def _jobs(tags: Sequence[str]) -> list[str]:
    """The jobs behind a figure; beyond the first, how many more."""
    if not tags:
        return []
    more = f" and {len(tags) - MOST_JOBS:,} more" if len(tags) > MOST_JOBS else ""
    return _wrapped([f"jobs {', '.join(tags[:MOST_JOBS])}{more}"], "  ")


def _left_out(number: int, noun: str) -> Iterator[str]:
    if number > 0:
        yield f"and {number:,} more: {noun}{'s' if number > 1 else ''} with less to show"


def _wrapped(texts: Iterable[str], indent: str = "") -> list[str]:
    return [
        line for text in texts for line in wrap(text, WIDTH, initial_indent=indent, subsequent_indent=f"{indent}  ")
    ]
