"""Comebacks: what returns, how soon, of which groups, and whether a difference is real.

What counts is the user's choice and stands beside every figure. numpy and scipy are imported only when asked.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from store import comeback_groups, followed, shop
from store.comeback_groups import FEWEST_COMEBACKS, FEWEST_RELEASES, KINDS, Group
from store.errors import Refused, brief
from store.followed import Followed
from store.records import Record
from store.rules import survival
from store.rules.proportions import wilson
from store.rules.recurrence import Mean, mean_cumulative
from store.rules.survival import Step
from store.sqlite.engine import rows

DAYS = (90, 180, 365)


@dataclass(frozen=True, slots=True)
class Finding:
    """A line of the Pareto: how many comebacks had this finding, its share and the share of all up to it."""

    finding: str
    count: int
    share: float
    cumulative: float
    tags: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Review:
    """The whole review. `at` holds the share returned by 90, 180, 365 days with limits, None for too young.

    `longest` is for how many days the longest was followed, `at_risk` how many still were at round days up to that;
    `remarks` say what was left out and why, in words; `tags` are the released jobs that came back.
    """

    since: str
    until: str
    counted: tuple[str, ...]
    rate: float
    released: int
    comebacks: int
    longest: float
    curve: tuple[Step, ...]
    at_risk: tuple[tuple[int, int], ...]
    at: dict[int, tuple[float, float, float] | None]
    repeat: tuple[Mean, ...]
    pareto: tuple[Finding, ...]
    groups: tuple[Group, ...]
    remarks: tuple[str, ...]
    tags: tuple[str, ...]


_FINDINGS = "SELECT job_id, component || ': ' || mode FROM finding"


def review(
    record: Record, *, by: str | Sequence[str] | None = None, since: str = "", until: str = "",
    counted: tuple[str, ...] | None = None, rate: float | None = None,
) -> Review:  # fmt: skip
    """Review what came back among the units released in a period; groups of the kinds that `by` names, each kind by itself.

    `counted` are the outcomes that count, the shop's setting unless given; an outcome not yet known counts.
    Raises Refused for a kind of group, an outcome or a date that there is not.
    """
    kinds = (by,) if isinstance(by, str) else tuple(by or ())
    for kind in kinds:
        if kind not in KINDS:
            raise Refused(f"{brief(kind)!r} is no kind of group; one of {', '.join(KINDS)}")
    since, until = followed.period(record, since, until)
    chosen = followed.counted(record, counted)
    allowed = rate if rate is not None else float(shop.value(record, "false_discovery"))
    with record.read() as conn:
        seen = followed.follow(conn, since, until, chosen)
        found = rows(conn, _FINDINGS)
        members = {kind: comeback_groups.members(conn, kind, seen) for kind in kinds}
    pooled = survival.Pooled(seen.days, seen.returned)
    groups = tuple(
        group for kind in kinds for group in comeback_groups.compare(kind, members[kind], seen, pooled, allowed)
    )
    steps, longest = survival.curve(seen.days, seen.returned), max(seen.days, default=0.0)
    return Review(
        since, until, chosen, allowed, len(seen.ids), sum(seen.returned), longest, steps,
        survival.at_risk(seen.days, survival.marks(longest)),
        {day: survival.fraction_at(steps, day, longest) for day in DAYS}, _repeats(seen), _pareto(seen, found),
        groups, _remarks(seen, groups, kinds),
        tuple(tag for tag, returned in zip(seen.tags, seen.returned, strict=True) if returned),
    )  # fmt: skip


def _repeats(seen: Followed) -> tuple[Mean, ...]:
    """The mean number of comebacks a unit, from its first release in the period on."""
    order: dict[int, int] = {}
    followed: list[float] = []
    unit, when = [], []
    for n, number in enumerate(seen.units):
        if number not in order:
            order[number] = len(followed)
            followed.append(0.0)
        place = order[number]
        begun = followed[place]
        followed[place] = begun + seen.days[n]
        if seen.returned[n]:
            unit.append(place)
            when.append(begun + seen.days[n])
    return mean_cumulative(followed, unit, when)


def _pareto(seen: Followed, findings: list[Any]) -> tuple[Finding, ...]:
    """Findings of the comebacks, most first; one without a finding is counted as such."""
    by_job: dict[int, list[str]] = {}
    for job, name in findings:
        by_job.setdefault(job, []).append(name)
    count: Counter[str] = Counter()
    tags: dict[str, list[str]] = {}
    tag_of = dict(zip(seen.ids, seen.tags, strict=True))
    for released, comeback in seen.comeback_of.items():
        for name in dict.fromkeys(by_job.get(comeback, ["no finding noted"])):
            count[name] += 1
            tags.setdefault(name, []).append(tag_of[released])
    total = sum(count.values())
    made, so_far = [], 0
    for name, number in sorted(count.items(), key=lambda pair: (-pair[1], pair[0])):
        so_far += number
        made.append(Finding(name, number, number / total, so_far / total, tuple(tags[name])))
    return tuple(made)


def _remarks(seen: Followed, groups: tuple[Group, ...], kinds: Sequence[str]) -> tuple[str, ...]:
    said = []
    back = sum(seen.returned)
    if not seen.ids:
        said.append("nothing was released in this period")
    elif not back:
        low, high = wilson(0, len(seen.ids))
        said.append(f"nothing came back of {len(seen.ids)} released; up to {high:.1%} would still be no surprise")
    elif back < FEWEST_COMEBACKS or len(seen.ids) < FEWEST_RELEASES:
        low, high = wilson(back, len(seen.ids))
        said.append(f"{back} of {len(seen.ids)} came back, {low:.0%} to {high:.0%}: too few to rank anything")
    if back and back == len(seen.ids):
        said.append("every release came back")
    if seen.wrong:
        said.append(
            f"{seen.wrong} left out: by their dates they came back, or the period ended, before they were released"
        )
    said += [f"{g.by} {g.name}: {g.says}" for g in groups if g.named]
    alike = [kind for kind in kinds if any(g.by == kind for g in groups)]
    alike = [kind for kind in alike if not any(g.by == kind and g.named for g in groups)]
    if alike:
        listed = f"{', '.join(alike[:-1])} or {alike[-1]}" if len(alike) > 1 else alike[0]
        said.append(f"no {listed} differs from the rest by more than chance would make")
    return tuple(said)


def as_json(found: Review) -> dict[str, Any]:
    """The contract of `comebacks --json`."""
    return {
        "since": found.since, "until": found.until, "counted": list(found.counted), "false_discovery": found.rate,
        "released": found.released, "comebacks": found.comebacks,
        "curve": [
            {"days": s.days, "fraction": 1 - s.stays, "low": 1 - s.high, "high": 1 - s.low, "at_risk": s.at_risk} for s in found.curve
        ],
        "at": {str(day): None if at is None else {"fraction": at[0], "low": at[1], "high": at[2]} for day, at in found.at.items()},
        "repeat": [{"days": m.days, "mean": m.mean, "low": m.low, "high": m.high} for m in found.repeat],
        "pareto": [{"finding": f.finding, "count": f.count, "share": f.share, "cumulative": f.cumulative} for f in found.pareto],
        "groups": [
            {
                "by": g.by, "name": g.name, "released": g.released, "comebacks": g.comebacks, "fraction_365": g.fraction_365,
                "low": g.low, "high": g.high, "p": g.p, "adjusted": g.adjusted, "says": g.says,
            }
            for g in found.groups
        ],
        "remarks": list(found.remarks),
    }  # fmt: skip
