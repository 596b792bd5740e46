"""What the owner's report carries, gathered from the record; every figure is reckoned where the screen's is."""

from __future__ import annotations

import json
from collections.abc import Sequence
from dataclasses import asdict, dataclass
from typing import Any

from store import comeback_words, comebacks, foretelling, shop
from store.comeback_groups import KINDS
from store.comeback_words import Word
from store.comebacks import Review
from store.foretelling import Foretold
from store.records import Record


@dataclass(frozen=True, slots=True)
class Owner:
    """The review of a period with the groups of some kinds, what readings foretell, and words of the notes.

    `at` is when it was made, `since` what was asked for: "" from the beginning.
    """

    at: str
    shop: str
    address: str
    paper: str
    since: str
    kinds: tuple[str, ...]
    review: Review
    foretold: tuple[Foretold, ...]
    words: tuple[Word, ...]


def gather(
    record: Record, *, kinds: Sequence[str] = (), since: str = "", until: str = "", counted: tuple[str, ...] | None = None,
    rate: float | None = None,
) -> Owner:  # fmt: skip
    """The report of a period; groups of every kind unless some are asked for. Raises Refused as `comebacks.review` does."""
    asked = tuple(kinds) or KINDS
    return Owner(
        at=record.now(),
        shop=shop.value(record, "shop"),
        address=shop.value(record, "address"),
        paper=shop.value(record, "paper"),
        since=since,
        kinds=asked,
        review=comebacks.review(record, by=asked, since=since, until=until, counted=counted, rate=rate),
        foretold=foretelling.foretell(record, since=since, until=until, rate=rate),
        words=comeback_words.words(record, until=until),
    )


def to_json(owner: Owner) -> str:
    """What `wearline comebacks --json` prints, with what readings foretell: the document that is attached."""
    return json.dumps(as_json(owner), ensure_ascii=False, indent=2) + "\n"


def as_json(owner: Owner) -> dict[str, Any]:
    """The figures as plain objects."""
    return {
        **comebacks.as_json(owner.review),
        "words": [asdict(word) for word in owner.words],
        "foretold": foretelling.as_json(owner.foretold),
    }
