"""PINs of people: optional, kept as a slow hash (Argon2id by argon2-cffi), asked for when somebody signs."""

from __future__ import annotations

from store import people
from store.errors import Refused
from store.records import Record
from store.sqlite.engine import rows
from store.tables.people import PersonRow

SHORTEST = 4


def put(record: Record, initials: str, pin: str, old: str | None = None) -> None:
    """Set a person's PIN, or take it away with an empty one. Raises NotFound, Refused (too short, the old one is wrong).

    A person sets their own; the owner may set anybody's.
    """
    who = people.acting(record, initials)
    if record.by not in {who, "shop"} and "own" not in people.find(record, record.by).may:
        raise Refused(f"{who} sets the own PIN, or the owner does")
    if record.by == who:
        check(record, old)
    if pin and (len(pin) < SHORTEST or len(pin) > 64):
        raise Refused(f"a PIN has {SHORTEST} to 64 characters")
    kept = None
    if pin:
        from argon2 import PasswordHasher

        kept = PasswordHasher().hash(pin)
    with record.change("PIN set" if pin else "PIN taken away", who) as change:
        change.update(PersonRow, people.find(record, who).id, pin=kept)


def is_set(record: Record, initials: str) -> bool:
    """Whether this person has a PIN."""
    return _kept(record, initials) is not None


def check(record: Record, pin: str | None) -> None:
    """Raises Refused where the person acting has a PIN and this is not it."""
    kept = _kept(record, record.by)
    if kept is None:
        return
    if not pin:
        raise Refused(f"{record.by} signs with a PIN")
    from argon2 import PasswordHasher
    from argon2.exceptions import InvalidHashError, VerificationError

    try:
        PasswordHasher().verify(kept, pin)
    except (VerificationError, InvalidHashError):
        raise Refused(f"that is not the PIN of {record.by}") from None


def _kept(record: Record, initials: str) -> str | None:
    with record.read() as conn:
        found = rows(conn, "SELECT pin FROM person WHERE initials = ?", (initials,))
    return found[0][0] if found else None
