"""The shop's own settings: its name and address, its warranty, and how it judges and asks."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction

from sqlalchemy import Connection
from sqlmodel import select

from store.errors import NotFound, Refused
from store.nearest import nearest
from store.records import Record
from store.rules import quantities
from store.rules.limits import Rule
from store.tables.people import SettingRow


@dataclass(frozen=True, slots=True)
class Setting:
    """One setting: its name, what it is for, the value in force and the value it has unless set."""

    name: str
    says: str
    value: str
    unless_set: str


def _text(value: str) -> str:
    return " ".join(value.split())


def _whole(value: str) -> str:
    if not value.isdigit() or int(value) > 100_000:
        raise Refused("a whole number is wanted")
    return str(int(value))


def _length(value: str) -> str:
    from store.rules.readings import parse

    typed = parse(value, quantities.Quantity.length, "mm")
    if typed.value is None:
        raise Refused("a length is wanted, such as 0.02 mm")
    return f"{quantities.plain(typed.value)} {typed.unit}"


def _share(value: str) -> str:
    text = value.strip().rstrip("%").strip()
    try:
        number = Fraction(text.replace(",", "."))
    except (ValueError, ZeroDivisionError):
        raise Refused("a share is wanted, such as 0.1 or 10 %") from None
    if value.strip().endswith("%"):
        number /= 100
    if not 0 < number < 1:
        raise Refused("a share lies between 0 and 1")
    return quantities.plain(number)


def _one_of(*words: str) -> Callable[[str], str]:
    def check(value: str) -> str:
        if value.strip() not in words:
            raise Refused(f"one of {', '.join(words)} is wanted")
        return value.strip()

    return check


_KNOWN: dict[str, tuple[str, str, Callable[[str], str]]] = {
    "shop": ("the shop's name, as it heads a report", "", _text),
    "address": ("the shop's address", "", _text),
    "warranty_days": ("days of warranty from the release; 0 for none", "0", _whole),
    "polish": ("polish allowance on the diameter (common practice unless set)", "0.02 mm", _length),
    "decision": ("decision rule of a new limit sheet", Rule.guarded_165u.value, _one_of(*(r.value for r in Rule))),
    "false_discovery": ("rate of false alarms allowed when groups are compared", "0.1", _share),
    "comebacks_count": (
        "outcomes that count as a comeback, separated by semicolons",
        "workmanship;part;wear",
        _text,
    ),
    "own_release": ("whether who measured may release: no, or yes (recorded each time)", "no", _one_of("no", "yes")),
    "paper": ("paper of the report: a4 or letter", "a4", _one_of("a4", "letter")),
    "theme": ("graphite or paper", "graphite", _one_of("graphite", "paper")),
}


NAMES = tuple(_KNOWN)


def settings(record: Record) -> tuple[Setting, ...]:
    """Every setting with its value in force, in a fixed order; what was set under another name follows."""
    with record.read() as conn:
        kept = {r[0]: r[1] for r in conn.execute(select(SettingRow.name, SettingRow.value)).all()}
    return tuple(Setting(n, says, kept.get(n, unless), unless) for n, (says, unless, _) in _KNOWN.items())


def value(record: Record, name: str) -> str:
    """The value in force of one setting. Raises NotFound."""
    for setting in settings(record):
        if setting.name == name:
            return setting.value
    raise NotFound("setting", name, nearest(name, list(_KNOWN)))


def kept(conn: Connection, name: str) -> str:
    """The value in force inside a running transaction."""
    found = conn.execute(select(SettingRow.value).where(SettingRow.name == name)).scalar()
    return str(found) if found is not None else _KNOWN[name][1]


def checked(name: str, value: str) -> str:
    """`value` in the form in which it is kept. Raises NotFound, Refused."""
    if name not in _KNOWN:
        raise NotFound("setting", name, nearest(name, list(_KNOWN)))
    try:
        return _KNOWN[name][2](value)
    except Refused as fault:
        raise Refused(f"{name}: {fault}") from None


def put(record: Record, name: str, value: str) -> None:
    """Set one setting. Raises NotFound, Refused."""
    kept = checked(name, value)
    with record.change("setting changed", name) as change:
        known = change.conn.execute(select(SettingRow.name).where(SettingRow.name == name)).first()
        if known is None:
            change.insert(SettingRow, name=name, value=kept)
        else:
            change.update(SettingRow, name, value=kept)
