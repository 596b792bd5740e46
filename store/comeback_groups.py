"""Groups of released units held against all the rest: by model, part, supplier, lot, assembler, finding."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

from store.followed import Followed
from store.rules import survival
from store.rules.proportions import wilson
from store.sqlite.engine import rows

KINDS = ("lot", "part", "supplier", "model", "assembler", "finding")
FEWEST_COMEBACKS, FEWEST_RELEASES = 5, 20
YEAR = 365.0
RAREST = 1e-4  # beyond this the approximation says no more than that it is rare

_MEMBERS = {
    "part": "SELECT job_id, number FROM fitted",
    "supplier": "SELECT job_id, supplier FROM fitted WHERE supplier <> ''",
    "lot": "SELECT job_id, lot FROM fitted WHERE lot <> ''",
    "finding": "SELECT job_id, component || ': ' || mode FROM finding",
}


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


def members(conn: Any, by: str, seen: Followed) -> dict[str, list[int]]:
    """The places of each group's releases among those followed, by the group's name; `by` is one of KINDS."""
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


def compare(
    by: str, found: dict[str, list[int]], seen: Followed, pooled: survival.Pooled, rate: float
) -> tuple[Group, ...]:
    """The groups of one kind, each against all the rest; corrected for all of the kind that were looked at.

    `found` as from `members`. Those that differ most come first, then those that are too few to say.
    """
    tested: list[tuple[str, survival.LogRank]] = []
    for name, places in found.items():
        back = sum(seen.returned[n] for n in places)
        if back >= FEWEST_COMEBACKS and len(places) >= FEWEST_RELEASES and len(places) < len(seen.ids):
            tested.append((name, pooled.log_rank(places)))
    adjusted, named = survival.rejected([result.cautious for _, result in tested], rate)
    results = {name: (result, a, is_named) for (name, result), a, is_named in zip(tested, adjusted, named, strict=True)}
    made = [_group(by, name, places, seen, results.get(name), len(tested)) for name, places in found.items()]
    return tuple(sorted(made, key=lambda g: (g.adjusted is None, g.adjusted or 0.0, -g.comebacks, g.name)))


def _group(
    by: str,
    name: str,
    places: list[int],
    seen: Followed,
    result: tuple[survival.LogRank, float, bool] | None,
    looks: int,
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
