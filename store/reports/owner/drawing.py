"""The owner's report as plain lists and objects for its template; nothing is left to it but where things stand."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from store.comeback_groups import FEWEST_COMEBACKS, FEWEST_RELEASES, Group
from store.errors import brief
from store.reports.drawing import PAPERS, WIDTHS_MM
from store.reports.figures import day, instant
from store.reports.owner import charts
from store.reports.owner.contents import Owner
from store.reports.pen import Pen, Seen
from store.rules.recurrence import VARIANCE

TITLE = "What comes back"
MOST_GROUPS, MOST_RANKED, MOST_FINDINGS, MOST_JOBS, MOST_FORETOLD, MOST_WORDS = 8, 20, 12, 24, 12, 12
_SOON = (
    "How soon: Kaplan and Meier's curve with log-log 95 % limits; units released lately count for as long as they were out. "
    "Below the curve stands how many were still followed."
)
_GROUPS = (
    "Groups: each against all others by the log-rank test, and by a Poisson count where that is more cautious; corrected by "
    "Benjamini and Hochberg for all groups of its kind that were looked at. "
    f"Under {FEWEST_COMEBACKS} comebacks or {FEWEST_RELEASES} releases nothing is ranked; counts stand with Wilson's limits."
)
METHODS = (
    _SOON,
    _GROUPS,
    f"Repeats: mean cumulative number of comebacks a unit (Nelson), variance {VARIANCE}.",
    "Readings as left: Mann and Whitney's test, area with Hanley and McNeil's limits, corrected in the same way.",
    "Every figure stands in the attached JSON; the jobs behind it open from the Comebacks screen.",
)


def of(owner: Owner, seen: Seen) -> dict[str, Any]:
    """Everything the template draws, ready for JSON."""
    pen, mm, found = Pen(seen), WIDTHS_MM[owner.paper], owner.review
    made = day(owner.at)
    return {
        "document": _document(pen, owner),
        "paper": PAPERS[owner.paper],
        "head": {
            "shop": pen.line(brief(owner.shop, 44), 60),
            "unit": f"released {_period(owner)}",
            "number": TITLE.lower(),
        },
        "foot": f"as the record stood on {made}",
        "title": TITLE,
        "number": made,
        "shop": {"name": pen.line(owner.shop, mm), "address": pen.line(", ".join(owner.address.splitlines()), mm)},
        "facts": [{"label": label, "value": pen.whole(value, mm - 34), "height": None} for label, value in _facts(owner)],
        "says": [pen.whole(said, mm) for said in found.remarks],
        "curve": charts.returns(found.curve, found.at_risk, found.longest),
        "by": [(f"by {by} days", _limits(at)) for by, at in found.at.items()],
        "pareto": _pareto(pen, owner),
        "kinds": [_kind(pen, owner, kind) for kind in owner.kinds if any(g.by == kind for g in found.groups)],
        "nameless": _nameless(owner),
        "repeats": charts.repeats(found.repeat, found.longest),
        "repeats-says": _repeats(owner),
        "foretold": [
            (
                pen.whole(f"{f.model}  {f.characteristic}", 40), str(f.found.returned), str(f.found.stayed),
                f"{f.found.area:.2f}", pen.whole(f.says, 90),
            )
            for f in owner.foretold[:MOST_FORETOLD]
        ],
        "foretold-says": _foretold(owner),
        "words": [(pen.whole(w.word, 40), f"{w.back} of {w.of_back}", f"{w.other} of {w.of_other}") for w in owner.words[:MOST_WORDS]],
        "jobs": _jobs(pen, owner),
        "methods": list(METHODS),
        "end": "end of report",
    }  # fmt: skip


def _document(pen: Pen, owner: Owner) -> dict[str, Any]:
    at = instant(owner.at)
    return {
        "title": f"{TITLE}, {day(owner.at)}",
        "author": pen.line(brief(owner.shop, 200), 1_000),
        "description": f"Comebacks of units released {_period(owner)}",
        "keywords": ["comebacks"],
        "date": {
            "year": at.year, "month": at.month, "day": at.day, "hour": at.hour, "minute": at.minute, "second": at.second,
        },
    }  # fmt: skip


def _period(owner: Owner) -> str:
    begun = f"from {owner.review.since}" if owner.since else "from the beginning"
    return f"{begun}, followed to {owner.review.until}"


def _facts(owner: Owner) -> tuple[tuple[str, str], ...]:
    found = owner.review
    return (
        ("released", f"{found.released} units, {_period(owner)}"),
        ("came back", f"{found.comebacks} for a cause that counts"),
        ("what counts", f"{', '.join(found.counted) or 'nothing'}; and comebacks whose outcome is not known yet"),
        ("false alarms allowed", f"{found.rate:.0%} of the groups that are named"),
    )


def _limits(at: tuple[float, float, float] | None) -> str:
    if at is None:
        return "too young"
    return f"{at[0]:.1%}  ({at[1]:.1%} to {at[2]:.1%})" if at[0] else "none until then"


def _pareto(pen: Pen, owner: Owner) -> dict[str, Any]:
    found = owner.review.pareto
    shown = found[:MOST_FINDINGS]
    rest = sum(f.count for f in found[MOST_FINDINGS:])
    return {
        "rows": [
            {
                "name": pen.line(brief(f.finding, 60), 1_000), "count": str(f.count),
                "share": round(f.share, 4), "cumulative": round(f.cumulative, 4),
                "said": f"{f.cumulative:.0%}",
            }
            for f in shown
        ],
        "more": f"and {len(found) - len(shown)} more findings, {rest} in all" if rest else "",
    }  # fmt: skip


def _kind(pen: Pen, owner: Owner, kind: str) -> dict[str, Any]:
    groups = [g for g in owner.review.groups if g.by == kind]
    ranked = [g for g in groups if g.p is not None]
    shown = groups[: max(MOST_GROUPS, min(MOST_RANKED, len(ranked)), sum(g.named for g in ranked))]
    highs = [g.high for g in shown if g.high]
    top, marks = charts.scale(max(highs)) if highs else (1.0, [])
    left = len(groups) - len(shown)
    return {
        "title": f"By {kind}",
        "note": _seen(kind, len(groups), len(ranked), left),
        "marks": marks,
        "rows": [_group(pen, g, top) for g in shown],
    }


def _nameless(owner: Owner) -> str:
    """The kinds of which no released unit says anything."""
    absent = [kind for kind in owner.kinds if not any(g.by == kind for g in owner.review.groups)]
    if not absent:
        return ""
    *first, last = absent
    return f"No released unit of this period names its {', '.join(first)}{' or ' if first else ''}{last}."


def _seen(kind: str, groups: int, ranked: int, left: int) -> str:
    """How many groups of a kind there are, how many of them were ranked and how many are not shown."""
    more = f" {left} more, none of them named, are not shown." if left else ""
    return f"{groups} {kind}{'' if groups == 1 else 's'} seen, {ranked} with enough to be held against the rest.{more}"


def _group(pen: Pen, group: Group, top: float) -> dict[str, Any]:
    dot = None
    # without a comeback within the year there are no limits to draw: a dot at nought would look sure
    if group.fraction_365 and group.low is not None and group.high is not None:
        dot = [round(min(1.0, place / top), 4) for place in (group.low, group.fraction_365, group.high)]
    return {
        "name": pen.whole(group.name, 30), "released": str(group.released), "back": str(group.comebacks), "dot": dot,
        "year": "too young" if group.fraction_365 is None else f"{group.fraction_365:.0%}", "says": pen.whole(group.says, 60),
        "named": group.named,
    }  # fmt: skip


def _repeats(owner: Owner) -> str:
    means = owner.review.repeat
    if not means:
        return "No unit came back."
    last = means[-1]
    return (
        f"By {last.days:.0f} days a unit had come back {last.mean:.2f} times on average "
        f"({last.low:.2f} to {last.high:.2f}), repeats counted."
    )


def _foretold(owner: Owner) -> str:
    if not owner.foretold:
        return "Too few comebacks followed for a year with readings as left: nothing can be foretold yet."
    left = len(owner.foretold) - MOST_FORETOLD
    return f"and {left} more, each no clearer than the last shown" if left > 0 else ""


def _jobs(pen: Pen, owner: Owner) -> list[tuple[str, str]]:
    """The released jobs behind each named group and each finding, and behind the count of all."""
    found = owner.review
    named = [(f"{g.by} {g.name}", g.tags) for g in found.groups if g.named]
    every = [("all that came back", found.tags)] if found.tags else []
    findings = [(f.finding, f.tags) for f in found.pareto[:MOST_FINDINGS]]
    return [(pen.whole(name, 50), pen.whole(_tags(tags), 120)) for name, tags in [*named, *findings, *every]]


def _tags(tags: Sequence[str]) -> str:
    more = f" and {len(tags) - MOST_JOBS} more" if len(tags) > MOST_JOBS else ""
    return "  ".join(tags[:MOST_JOBS]) + more
