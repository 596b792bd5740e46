"""The order of what is found, against a plain sort of everything."""

from __future__ import annotations

import numpy as np
from hypothesis import given
from hypothesis import strategies as st

from store.rules.ranking import CORRECTED, EXACT, FAR, SAME, code, order

NEAR = [0, 1, 2, 5, 11, 23, 47]
MATCH = st.none() | st.tuples(st.sampled_from([EXACT, SAME, CORRECTED, FAR]), st.integers(0, 60))
TEXT = st.tuples(st.lists(MATCH, min_size=3, max_size=3), st.booleans(), st.integers(0, 3))


@given(st.lists(TEXT, min_size=1, max_size=40), st.integers(1, 50))
def test_order(texts: list[tuple[list[tuple[int, int] | None], bool, int]], most: int) -> None:
    """All words before some, then exact before corrected, near before far, recent before old, later rows first."""
    codes = [np.zeros(len(texts), np.uint16) for _ in range(3)]
    for n, (matches, _, _) in enumerate(texts):
        for word, match in enumerate(matches):
            if match is not None:
                codes[word][n] = code(match[0], np.array([match[1]], np.uint16))[0]
    wanted = np.array([text[1] for text in texts])
    at = np.array([text[2] for text in texts], np.uint32)

    def rank(n: int) -> tuple[int, ...]:
        found = [match for match in texts[n][0] if match is not None]
        places = [place for _, place in found]
        between = max(0, max(places) - min(places) - (len(found) - 1))
        far = sum(between > edge for edge in NEAR)
        return (-len(found), sum(cost for cost, _ in found), far, -texts[n][2], -n)

    fit = [
        n for n, (matches, is_wanted, _) in enumerate(texts) if is_wanted and sum(m is not None for m in matches) >= 2
    ]
    expected = sorted(fit, key=rank)[:most]
    assert expected == order(codes, wanted, at, lambda where: where, most).tolist()
