"""Comebacks: what returns, how soon, of which groups, and whether a difference is real.

A job is a comeback when its unit has an earlier release. Days run from that release to the comeback's taking in; units that
have not come back are known to have stayed away until the end of the period, or until they came back for a cause that is
not counted. What counts is the user's choice and stands beside every figure. numpy and scipy are imported only here.
"""

from __future__ import annotations

from collections import Counter
from dataclasses import dataclass
from typing import Any

from store import shop, times
from store.errors import Refused, brief
from store.jobs import COMEBACK_OUTCOMES
from store.records import Record
from store.rules import survival
from store.rules.foretelling import Separation, separate, tighter
from store.rules.proportions import wilson
from store.rules.recurrence import Mean, mean_cumulative
from store.rules.survival import Step
from store.sqlite.engine import rows

GROUPS = ("model", "part", "supplier", "lot", "assembler", "finding")
DAYS = (90, 180, 365)
FEWEST_COMEBACKS, FEWEST_RELEASES = 5, 20
YEAR = 365.0
RAREST = 1e-4  # beyond this the approximation says no more than that it is rare


@dataclass(frozen=True, slots=True)
class Group:
    """One group: counts, the curve at a year with its limits (None: too young), p, p adjusted, and the verdict in words.

    `tags` are the released jobs of the group that came back, newest first.
    """

    by: str
    name: str
    released: int
    comebacks: int
    fraction_365: float | None
    low: float | None
    high: float | None
    p: float | None
    adjusted: float | None
    named: bool
    says: str
    tags: tuple[str, ...]


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

    `remarks` say what was left out and why, in words.
    """

    since: str
    until: str
    counted: tuple[str, ...]
    rate: float
    released: int
    comebacks: int
    curve: tuple[Step, ...]
    at: dict[int, tuple[float, float, float] | None]
    repeat: tuple[Mean, ...]
    pareto: tuple[Finding, ...]
    groups: tuple[Group, ...]
    remarks: tuple[str, ...]
    tags: tuple[str, ...]


_RELEASED = (
    "SELECT j.id, j.tag, j.unit_id, j.ended, m.number, j.assembled_by FROM job j JOIN unit u ON u.id = j.unit_id "
    "JOIN model m ON m.id = u.model_id WHERE j.outcome = 'released' AND j.ended IS NOT NULL "
    "AND substr(j.ended, 1, 10) >= ? AND substr(j.ended, 1, 10) <= ? ORDER BY j.id"
)
_CAME_BACK = (
    "SELECT j.earlier_id, j.id, j.tag, j.taken_in, j.comeback_outcome FROM job j WHERE j.earlier_id IS NOT NULL "
    "AND substr(j.taken_in, 1, 10) <= ? ORDER BY j.taken_in, j.id"
)
_MEMBERS = {
    "part": "SELECT job_id, number FROM fitted",
    "supplier": "SELECT job_id, supplier FROM fitted WHERE supplier <> ''",
    "lot": "SELECT job_id, lot FROM fitted WHERE lot <> ''",
    "finding": "SELECT job_id, component || ': ' || mode FROM finding",
}
_FINDINGS = "SELECT job_id, component || ': ' || mode FROM finding"


@dataclass
class _Seen:
    """The releases of the period as columns: days followed, whether that ended in a counted comeback, and who is who."""

    ids: list[int]
    tags: list[str]
    units: list[int]
    models: list[str]
    assemblers: list[str]
    days: list[float]
    returned: list[bool]
    comeback_of: dict[int, int]
    wrong: int


def review(
    record: Record, *, by: str | None = None, since: str = "", until: str = "", counted: tuple[str, ...] | None = None,
    rate: float | None = None,
) -> Review:  # fmt: skip
    """Review what came back among the units released in a period; groups of one kind where `by` names it.

    `counted` are the outcomes that count, the shop's setting unless given; an outcome not yet known counts.
    Raises Refused for a kind of group, an outcome or a date that there is not.
    """
    if by is not None and by not in GROUPS:
        raise Refused(f"{brief(by)!r} is no kind of group; one of {', '.join(GROUPS)}")
    since, until = _period(record, since, until)
    chosen = counted if counted is not None else _counted(shop.value(record, "comebacks_count"))
    for outcome in chosen:
        if outcome not in COMEBACK_OUTCOMES:
            raise Refused(f"{brief(outcome)!r} is no outcome of a comeback; one of {', '.join(COMEBACK_OUTCOMES)}")
    allowed = rate if rate is not None else float(shop.value(record, "false_discovery"))
    with record.read() as conn:
        seen = _seen(conn, since, until, chosen)
        found = rows(conn, _FINDINGS)
        members = _members(conn, by, seen) if by else {}
    steps = survival.curve(seen.days, seen.returned)
    longest = max(seen.days, default=0.0)
    groups = _groups(by or "", members, seen, allowed)
    back = tuple(tag for tag, returned in zip(seen.tags, seen.returned, strict=True) if returned)
    return Review(
        since, until, chosen, allowed, len(seen.ids), sum(seen.returned), steps,
        {day: survival.fraction_at(steps, day, longest) for day in DAYS}, _repeats(seen), _pareto(seen, found),
        groups, _remarks(seen, groups, by), back,
    )  # fmt: skip


def _period(record: Record, since: str, until: str) -> tuple[str, str]:
    first = times.read(since)[:10] if since else "0001-01-01"
    last = times.read(until)[:10] if until else record.now()[:10]
    if first > last:
        raise Refused(f"the period ends {last} before it begins {first}")
    return first, last


def _counted(text: str) -> tuple[str, ...]:
    return tuple(part.strip() for part in text.split(";") if part.strip())


def _seen(conn: Any, since: str, until: str, counted: tuple[str, ...]) -> _Seen:
    """Every release with how it went on; dates that run backwards are left out and counted in `wrong`."""
    first: dict[int, tuple[int, str, str]] = {}
    for earlier, job, _, taken_in, outcome in rows(conn, _CAME_BACK, (until,)):
        if earlier not in first:
            first[earlier] = (job, taken_in, outcome)
    seen = _Seen([], [], [], [], [], [], [], {}, 0)
    for job, tag, unit, ended, model, assembler in rows(conn, _RELEASED, (since, until)):
        came = first.get(job)
        days = times.days_between(ended[:10], came[1][:10] if came else until)
        if days < 0:
            seen.wrong += 1
            continue
        is_counted = came is not None and (not came[2] or came[2] in counted)
        seen.ids.append(job)
        seen.tags.append(tag)
        seen.units.append(unit)
        seen.models.append(model)
        seen.assemblers.append(assembler)
        seen.days.append(days)
        seen.returned.append(is_counted)
        if came is not None and is_counted:
            seen.comeback_of[job] = came[0]
    return seen


def _members(conn: Any, by: str, seen: _Seen) -> dict[str, list[int]]:
    """The places of each group's releases among those seen."""
    place = {job: n for n, job in enumerate(seen.ids)}
    found: dict[str, dict[int, None]] = {}
    if by == "model":
        pairs: Any = zip(seen.ids, seen.models, strict=True)
    elif by == "assembler":
        pairs = ((job, who) for job, who in zip(seen.ids, seen.assemblers, strict=True) if who)
    else:
        pairs = rows(conn, _MEMBERS[by])
    for job, name in pairs:
        if job in place:
            found.setdefault(name, {})[place[job]] = None
    return {name: list(places) for name, places in found.items()}


def _groups(by: str, members: dict[str, list[int]], seen: _Seen, rate: float) -> tuple[Group, ...]:
    if not members:
        return ()
    pooled = survival.Pooled(seen.days, seen.returned)
    tested: list[tuple[str, survival.LogRank]] = []
    for name, places in members.items():
        back = sum(seen.returned[n] for n in places)
        if back >= FEWEST_COMEBACKS and len(places) >= FEWEST_RELEASES and len(places) < len(seen.ids):
            tested.append((name, pooled.log_rank(places)))
    adjusted, named = survival.rejected([found.cautious for _, found in tested], rate)
    results = {name: (found, a, is_named) for (name, found), a, is_named in zip(tested, adjusted, named, strict=True)}
    made = [_group(by, name, places, seen, results.get(name), len(tested)) for name, places in members.items()]
    return tuple(sorted(made, key=lambda g: (g.adjusted is None, g.adjusted or 0.0, -g.comebacks, g.name)))


def _group(
    by: str, name: str, places: list[int], seen: _Seen, result: tuple[survival.LogRank, float, bool] | None, looks: int
) -> Group:
    days, returned = [seen.days[n] for n in places], [seen.returned[n] for n in places]
    back = sum(returned)
    at = survival.fraction_at(survival.curve(days, returned), YEAR, max(days, default=0.0))
    tags = tuple(seen.tags[n] for n in reversed(places) if seen.returned[n])
    share, low, high = at if at is not None else (None, None, None)
    if result is None:
        less, more = wilson(back, len(places))
        says = f"too few to say: {back} of {len(places)} came back so far ({less:.0%} to {more:.0%})"
        return Group(by, name, len(places), back, share, low, high, None, None, False, says, tags)
    found, adjusted, named = result
    more_or_less = "more" if found.observed > found.expected else "less"
    if named:
        odds = f"1 of {1 / found.cautious:,.0f}" if found.cautious > RAREST else f"fewer than 1 of {1 / RAREST:,.0f}"
        says = (
            f"{more_or_less} than the rest, {found.observed:.0f} where {found.expected:.1f} would be like the rest; "
            f"would be chance in {odds} looks"
        )
    else:
        says = (
            f"no difference that chance would not make: {found.observed:.0f} came back, {found.expected:.1f} like the rest, "
            f"among {looks} looked at"
        )
    return Group(by, name, len(places), back, share, low, high, found.cautious, adjusted, named, says, tags)


def _repeats(seen: _Seen) -> tuple[Mean, ...]:
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


def _pareto(seen: _Seen, findings: list[Any]) -> tuple[Finding, ...]:
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


def _remarks(seen: _Seen, groups: tuple[Group, ...], by: str | None) -> tuple[str, ...]:
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
    named = [g for g in groups if g.named]
    if by and groups and not named:
        said.append(f"no {by} differs from the rest by more than chance would make")
    said += [f"{g.name}: {g.says}" for g in named]
    return tuple(said)


@dataclass(frozen=True, slots=True)
class Word:
    """A word of the notes: in how many comebacks' notes it stands, of how many; and the same for all other jobs."""

    word: str
    back: int
    of_back: int
    other: int
    of_other: int


_NOTED = "SELECT job_id, text FROM note"
MOST_WORDS = 20
FEWEST_NOTES = 2


def words(record: Record, *, until: str = "") -> tuple[Word, ...]:
    """Words that set the notes of comebacks apart from all others, by the gap of their shares, with counts.

    A word counts once a job; shorthand and slips are read as the shop writes them. Empty without notes on both sides.
    """
    from store.rules.words import indexed

    _, last = _period(record, "", until)
    with record.read() as conn:
        back = {
            r[0]
            for r in rows(
                conn, "SELECT id FROM job WHERE earlier_id IS NOT NULL AND substr(taken_in, 1, 10) <= ?", (last,)
            )
        }
        noted = rows(conn, _NOTED)
    seen: dict[int, set[str]] = {}
    for job, text in noted:
        seen.setdefault(job, set()).update(word for word, _ in indexed(text) if word.isalpha() and len(word) > 2)
    sides = [Counter(word for job in seen if (job in back) is side for word in seen[job]) for side in (True, False)]
    of_back = sum(job in back for job in seen)
    of_other = len(seen) - of_back
    if not of_back or not of_other:
        return ()
    made = [
        Word(word, count, of_back, sides[1][word], of_other)
        for word, count in sides[0].items()
        if count >= FEWEST_NOTES
    ]
    made.sort(key=lambda w: (w.other / w.of_other - w.back / w.of_back, w.word))
    return tuple(w for w in made if w.back / w.of_back > w.other / w.of_other)[:MOST_WORDS]


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


@dataclass(frozen=True, slots=True)
class Foretold:
    """A characteristic whose as-left readings went with comebacks within a year; `says` in words, `limit` one that is tighter.

    `caught` and `refused` are the shares on each side that this limit would have caught and refused.
    """

    model: str
    characteristic: str
    unit: str
    found: Separation
    adjusted: float
    named: bool
    limit: float
    keep_below: bool
    caught: float
    refused: float
    says: str


_LEFT = """
SELECT j.unit_id, g.job_id, g.characteristic_id, g.size FROM judgement g JOIN job j ON j.id = g.job_id
WHERE g.stage = 'as-left' AND g.size IS NOT NULL AND j.outcome = 'released'
"""


def foretell(record: Record, *, since: str = "", until: str = "", rate: float | None = None) -> tuple[Foretold, ...]:
    """Which as-left readings went with comebacks within a year, by model and characteristic; corrected for all looked at.

    Units that were not followed for a year and have not come back are left out: nothing is known of them yet.
    """
    import numpy as np

    from store.catalogue import catalogue

    since, until = _period(record, since, until)
    chosen = _counted(shop.value(record, "comebacks_count"))
    allowed = rate if rate is not None else float(shop.value(record, "false_discovery"))
    with record.read() as conn:
        seen = _seen(conn, since, until, chosen)
        known = catalogue(record, conn).by_id
        left = rows(conn, _LEFT)
    fate: dict[int, bool] = {}
    for job, days, returned in zip(seen.ids, seen.days, seen.returned, strict=True):
        if returned and days <= YEAR:
            fate[job] = True
        elif days > YEAR:
            fate[job] = False
    model_of = dict(zip(seen.ids, seen.models, strict=True))
    sides: dict[tuple[str, int], tuple[list[float], list[float]]] = {}
    for _, job, characteristic, size in left:
        if job in fate:
            sides.setdefault((model_of[job], characteristic), ([], []))[0 if fate[job] else 1].append(size)
    looked = []
    for (model, characteristic), (back, stayed) in sorted(sides.items()):
        if len(back) >= FEWEST_COMEBACKS and len(stayed) >= FEWEST_RELEASES and len({*back, *stayed}) > 1:
            found = separate(back, stayed)
            if found is not None:
                looked.append((model, characteristic, back, stayed, found))
    adjusted, named = survival.rejected([found.p for *_, found in looked], allowed)
    made = []
    for (model, characteristic, back, stayed, found), a, is_named in zip(looked, adjusted, named, strict=True):
        one = known[characteristic]
        keep_below = found.area > 0.5
        limit = float(np.quantile(stayed, 0.9 if keep_below else 0.1))
        caught, refused = tighter(back, stayed, limit, keep_below=keep_below)
        side = "above" if keep_below else "below"
        says = (
            f"units that came back read {'higher' if keep_below else 'lower'} in {max(found.area, 1 - found.area):.0%} of pairs; "
            f"{side} {limit:.4g} {one.unit} were {caught:.0%} of those and {refused:.0%} of the others"
            if is_named
            else "no difference that chance would not make"
        )
        made.append(Foretold(model, one.name, one.unit, found, a, is_named, limit, keep_below, caught, refused, says))
    return tuple(sorted(made, key=lambda f: (f.adjusted, f.model, f.characteristic)))
