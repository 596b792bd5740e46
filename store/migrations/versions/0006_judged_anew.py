"""No table changes: the catalogue has grown, and readings of nothing round a commutator are judged otherwise."""

from __future__ import annotations

revision = "0006"
down_revision = "0005"


def upgrade() -> None:
    """Nothing to make; what is derived is judged anew after every step."""
