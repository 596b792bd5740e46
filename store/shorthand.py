"""The shop's shorthand: what a bench writes short, so that short and long find each other."""

from __future__ import annotations

from sqlalchemy import Connection

from store import people
from store.errors import NotFound, Refused, brief
from store.records import Record
from store.rules import shorthand as rules
from store.rules.words import indexed
from store.sqlite.engine import rows
from store.tables.search import ShorthandRow


def lines(record: Record) -> dict[str, str]:
    """Every short word with its long one, by the alphabet: those shipped, with the shop's own over them."""
    with record.read() as conn:
        return dict(sorted(rules.together(_own(conn)).items()))


def groups(record: Record, conn: Connection) -> dict[str, tuple[str, ...]]:
    """For each word of the list the others that mean the same."""
    own = _own(conn)
    key, known = tuple(own.items()), record.cache.get("shorthand")
    if known is None or known[0] != key:
        known = record.cache["shorthand"] = (key, rules.groups(rules.together(own)))
    made: dict[str, tuple[str, ...]] = known[1]
    return made


def enter(record: Record, short: str, long: str) -> None:
    """Enter or change a line. Raises Refused where either is not one word, or both are the same."""
    kept = _word(short), _word(long)
    if kept[0] == kept[1]:
        raise Refused("the short and the long word are the same")
    _write(record, *kept)


def drop(record: Record, short: str) -> None:
    """Take a line out, shipped ones too. Raises NotFound."""
    word = _word(short)
    known = lines(record)
    if word not in known:
        raise NotFound("shorthand", short)
    if word in rules.SHIPPED:
        _write(record, word, "")
        return
    with record.change("shorthand dropped", word) as change:
        people.require_known(record, change.conn)
        change.delete(ShorthandRow, word)


def _write(record: Record, short: str, long: str) -> None:
    with record.change("shorthand entered", short) as change:
        people.require_known(record, change.conn)
        if rows(change.conn, "SELECT 1 FROM shorthand WHERE short = ?", (short,)):
            change.update(ShorthandRow, short, long=long)
        else:
            change.insert(ShorthandRow, short=short, long=long)


def _own(conn: Connection) -> dict[str, str]:
    return dict(rows(conn, "SELECT short, long FROM shorthand"))


def _word(text: str) -> str:
    found = [word for word, _ in indexed(text)]
    if len(found) != 1:
        raise Refused(f"{brief(text)!r} is not one word")
    return found[0]
