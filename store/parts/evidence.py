"""What came of numbers on the shop's own bench: fitted on so many jobs, of which so many came back."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from json import dumps

from sqlalchemy import Connection

from store.rules.proportions import wilson
from store.sqlite.engine import rows


@dataclass(frozen=True, slots=True)
class Evidence:
    """Jobs on which a number was fitted, and those whose unit came back after; the interval is Wilson's at 95 %."""

    fitted: int
    came_back: int

    @property
    def interval(self) -> tuple[float, float]:
        """The share that comes back, least and most; (0, 1) where none was fitted."""
        return wilson(self.came_back, self.fitted)

    @property
    def says(self) -> str:
        """In words: `fitted on 12, 1 came back (1% to 35%)`."""
        if not self.fitted:
            return "not fitted here yet"
        low, high = self.interval
        return f"fitted on {self.fitted}, {self.came_back} came back ({low:.0%} to {high:.0%})"


NONE = Evidence(0, 0)

# A unit that turned out not to be ours is no evidence against a part; a maker counts where both sides name one.
_SQL = """
SELECT n.id, count(DISTINCT f.job_id), count(DISTINCT e.earlier_id)
FROM json_each(?) k CROSS JOIN part_number n ON n.id = k.value
JOIN fitted f ON f.key = n.key AND (f.maker = '' OR n.maker = '' OR f.maker = n.maker)
LEFT JOIN job e ON e.earlier_id = f.job_id AND e.comeback_outcome <> 'not-ours'
GROUP BY n.id
"""


def of_numbers(conn: Connection, numbers: Sequence[int]) -> dict[int, Evidence]:
    """The evidence on each of these numbers that was ever fitted."""
    return {r[0]: Evidence(r[1], r[2]) for r in rows(conn, _SQL, (dumps(list(numbers)),))}
