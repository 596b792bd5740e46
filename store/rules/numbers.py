"""Part and unit numbers for comparing: what was printed is kept, what is compared is a key.

    comparing key   upper case, separators out, no leading zeros        `ks-0100 a` -> KS0100A
    folded key      the comparing key with look-alikes made one         `KS0100A`   -> K50100A

A suffix letter is never dropped: it may be the rotation or the voltage. In a question `?` stands for one character that
cannot be read.
"""

from __future__ import annotations

import unicodedata
from dataclasses import dataclass
from enum import StrEnum

from store.errors import Refused, brief

LONGEST = 60
MOST_UNREADABLE = 3
UNREADABLE = "?"
_ALIKE = str.maketrans("OISBZ", "01582")
_ALIKE_BYTES = bytes.maketrans(b"OISBZ", b"01582")
FOLDED_ALPHABET = "0123456789ACDEFGHJKLMNPQRTUVWXY"
_UPPER = bytes(range(256)).upper()
_SEPARATORS = bytes(n for n in range(128) if not chr(n).isalnum())
_SEPARATORS_ASKED = _SEPARATORS.replace(UNREADABLE.encode(), b"")


class How(StrEnum):
    """How a number of the record was found from the one asked, nearest first."""

    exact = "exact"
    unreadable = "unreadable"
    look_alike = "look-alike"
    one_slip = "one slip"


def comparing_key(number: str) -> str:
    """The key under which numbers are compared: upper case, separators out, no leading zeros (`0` for zeros alone).

    Empty where nothing of `number` is a letter or a figure. Applying it again changes nothing.
    """
    return _unpadded(_characters(number))


def folded_key(key: str) -> str:
    """A comparing key with look-alikes made one (O/0, I/1, S/5, B/8, Z/2), leading zeros off again."""
    # By bytes: three times as fast, and lists hold a million.
    key = key.encode().translate(_ALIKE_BYTES).decode() if key.isascii() else key.translate(_ALIKE)
    return key.lstrip("0") or key[:1]


@dataclass(frozen=True, slots=True)
class Asked:
    """A number as asked for. `raw` is upper case without separators, zeros kept, `?` for what cannot be read."""

    text: str
    raw: str

    @property
    def unreadable(self) -> int:
        """How many characters cannot be read."""
        return self.raw.count(UNREADABLE)

    @property
    def key(self) -> str:
        """Its comparing key; meaningless where something cannot be read."""
        return _unpadded(self.raw)

    @property
    def folded(self) -> str:
        """Its folded key; meaningless where something cannot be read."""
        return folded_key(self.raw)

    def answered_by(self, key: str) -> How:
        """How a number with this comparing key, found under one of the keys asked for, answers the question."""
        if self.unreadable:
            return How.unreadable
        if key == self.key:
            return How.exact
        return How.look_alike if folded_key(key) == self.folded else How.one_slip


def asked(text: str) -> Asked:
    """A number as typed into a question. Raises Refused: empty, longer than LONGEST, or too little can be read."""
    raw = _characters(text, asking=True)
    readable = len(raw) - raw.count(UNREADABLE)
    if not raw:
        raise Refused("type a number; ? stands for one character that cannot be read")
    if len(raw) > LONGEST:
        raise Refused(f"{brief(text)!r} is longer than a number can be ({LONGEST} letters and figures)")
    if raw.count(UNREADABLE) > MOST_UNREADABLE or not readable:
        raise Refused(f"too little of {brief(text)!r} can be read; at most {MOST_UNREADABLE} characters may be ?")
    return Asked(" ".join(text.split()), raw)


def printed(text: str) -> str:
    """A number as it is kept: as printed, runs of spaces made one. Raises Refused: empty, no letter or figure, too long."""
    kept = " ".join(text.split())
    if not kept:
        raise Refused("the number is empty")
    if len(kept) > LONGEST:
        raise Refused(f"the number {brief(kept, 30)!r} has {len(kept)} characters; at most {LONGEST}")
    if not kept.isprintable():
        raise Refused(f"the number {brief(kept, 30)!r} holds a character that cannot be printed")
    if not _characters(kept):
        raise Refused(f"the number {brief(kept, 30)!r} holds no letter and no figure")
    return kept


def keyed(text: str) -> tuple[str, str, str]:
    """A number as it is kept, its comparing key and its folded key. Raises Refused as `printed` does."""
    if text.isascii() and text.isprintable() and len(text) <= LONGEST and "  " not in text and text.strip() == text:
        kept, key = text, text.encode().translate(_UPPER, _SEPARATORS).decode()
    else:
        kept, key = printed(text), _characters(text)
    if not key:
        printed(text)
    key = key.lstrip("0") or key[:1]
    return kept, key, folded_key(key)


def slip_keys(raw: str) -> frozenset[str]:
    """Every folded key that is one slip (OSA distance 1: a character more, less, other, or two swapped) from `raw`.

    `raw` keeps its leading zeros: a slip may have made or unmade one, so both forms are slipped. About 525 keys for eight
    characters; the folded key of `raw` itself is not among them.
    """
    whole = raw.translate(_ALIKE)
    found: set[str] = set()
    for word in {whole, _unpadded(whole)}:
        found |= _one_slip(word)
    keys = set(map(_unpadded, found))
    keys -= {_unpadded(whole), ""}
    return frozenset(keys)


def readable_keys(raw: str) -> frozenset[str]:
    """Every folded key that `raw` may be once its `?` are read: 31 for one, 961 for two, 29,791 for three."""
    first, *rest = raw.translate(_ALIKE).split(UNREADABLE)
    words = [first]
    for part in rest:
        words = [f"{word}{letter}{part}" for word in words for letter in FOLDED_ALPHABET]
    return frozenset(words if first and first[0] != "0" else map(_unpadded, words))


def _characters(number: str, *, asking: bool = False) -> str:
    """Letters and figures in upper case. Compatibility forms (full width, ligatures) are made plain."""
    if number.isascii():
        return number.encode().translate(_UPPER, _SEPARATORS_ASKED if asking else _SEPARATORS).decode()
    before, text = "", number
    while text != before:
        before = text
        text = unicodedata.normalize("NFKC", unicodedata.normalize("NFKC", text).upper())
        text = "".join(c for c in text if c.isalnum() or (asking and c == UNREADABLE))
    return text


def _unpadded(text: str) -> str:
    return text.lstrip("0") or text[:1]


def _one_slip(word: str) -> set[str]:
    found = set()
    for n in range(len(word) + 1):
        head, tail = word[:n], word[n:]
        found.update([head + letter + tail for letter in FOLDED_ALPHABET])
        if tail:
            rest = tail[1:]
            found.add(head + rest)
            found.update([head + letter + rest for letter in FOLDED_ALPHABET])
            if rest:
                found.add(head + rest[0] + tail[0] + rest[1:])
    return found
