"""Moments as the record keeps them: UTC, whole seconds, text that sorts."""

from __future__ import annotations

from datetime import UTC, date, datetime

from store.errors import Refused, brief


def now() -> datetime:
    """The wall clock, the one place that asks for it; everything else takes the moment as an argument."""
    return datetime.now(UTC)


def stored(moment: datetime) -> str:
    """`2026-12-01T11:05:33Z`; a moment without an offset is taken as local time."""
    if moment.tzinfo is not UTC:
        moment = moment.astimezone(UTC)
    return moment.replace(microsecond=0, tzinfo=None).isoformat() + "Z"


def read(text: str) -> str:
    """A date or a moment as typed (ISO 8601, with or without an offset), as the record keeps it.

    A bare date is kept as the date: `2026-12-01`. Raises Refused with the form that is wanted.
    """
    text = text.strip()
    try:
        if len(text) == 10:
            return date.fromisoformat(text).isoformat()
        return stored(datetime.fromisoformat(text))
    except (ValueError, OverflowError):
        raise Refused(f"{brief(text)!r} is no date; write 2026-12-01 or 2026-12-01T14:30") from None


def moment(text: str) -> str:
    """Like `read`, but a bare date becomes its first second in UTC, so that moments compare as text."""
    kept = read(text)
    return f"{kept}T00:00:00Z" if len(kept) == 10 else kept


def local(text: str) -> str:
    """A stored moment as the bench reads it: `2026-12-01 12:05` in local time; a bare date stays one."""
    if len(text) <= 10:
        return text
    return datetime.fromisoformat(text).astimezone().strftime("%Y-%m-%d %H:%M")


def days_between(earlier: str, later: str) -> float:
    """Days from one stored moment or date to another; negative where they run backwards."""
    return (_parsed(later) - _parsed(earlier)).total_seconds() / 86_400


def _parsed(text: str) -> datetime:
    found = datetime.fromisoformat(text)
    return found if found.tzinfo else found.replace(tzinfo=UTC)
