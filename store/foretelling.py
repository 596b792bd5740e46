"""Foretelling: which readings as left went with comebacks within a year, and what a tighter limit would have done."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any

from store import shop
from store.comeback_groups import FEWEST_COMEBACKS, FEWEST_RELEASES, YEAR
from store.followed import counted, follow, period
from store.records import Record
from store.rules import survival
from store.rules.foretelling import Separation, separate, tighter
from store.rules.proportions import wilson
from store.sqlite.engine import rows


@dataclass(frozen=True, slots=True)
class Share:
    """A share with its 95 per cent limits."""

    share: float
    low: float
    high: float

    @classmethod
    def of(cls, cases: int, whole: int) -> Share:
        """The share of `cases` in `whole`, which is not zero."""
        return cls(cases / whole, *wilson(cases, whole))

    def __str__(self) -> str:
        return f"{self.share:.0%} ({self.low:.0%} to {self.high:.0%})"


@dataclass(frozen=True, slots=True)
class Foretold:
    """A characteristic whose as-left readings went with comebacks within a year; `says` in words, `limit` one that is tighter.

    `caught` and `refused` are the shares on each side that this limit would have caught and refused, each with its 95 per
    cent limits (Wilson).
    """

    model: str
    characteristic: str
    unit: str
    found: Separation
    adjusted: float
    named: bool
    limit: float
    keep_below: bool
    caught: Share
    refused: Share
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

    since, until = period(record, since, until)
    chosen = counted(record, None)
    allowed = rate if rate is not None else float(shop.value(record, "false_discovery"))
    with record.read() as conn:
        seen = follow(conn, since, until, chosen)
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
        caught, refused = (
            Share.of(cases, len(side))
            for cases, side in zip(tighter(back, stayed, limit, keep_below=keep_below), (back, stayed), strict=True)
        )
        side = "above" if keep_below else "below"
        says = (
            f"units that came back read {'higher' if keep_below else 'lower'} in {max(found.area, 1 - found.area):.0%} of pairs; "
            f"{side} {limit:.4g} {one.unit} were {caught} of those and {refused} of the others"
            if is_named
            else "no difference that chance would not make"
        )
        made.append(Foretold(model, one.name, one.unit, found, a, is_named, limit, keep_below, caught, refused, says))
    return tuple(sorted(made, key=lambda f: (f.adjusted, f.model, f.characteristic)))


def as_json(found: Sequence[Foretold]) -> list[dict[str, Any]]:
    """The contract of `foretell --json`."""
    return [
        {
            "model": f.model, "characteristic": f.characteristic, "unit": f.unit, "returned": f.found.returned, "stayed": f.found.stayed,
            "area": f.found.area, "low": f.found.low, "high": f.found.high, "p": f.found.p, "adjusted": f.adjusted,
            "limit": f.limit, "caught": f.caught.share, "caught_low": f.caught.low, "caught_high": f.caught.high,
            "refused": f.refused.share, "refused_low": f.refused.low, "refused_high": f.refused.high, "says": f.says,
        }
        for f in found
    ]  # fmt: skip
