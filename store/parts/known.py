"""Every number of the record in memory, for the length of a load: a name is resolved a million times over."""

from __future__ import annotations

from weakref import WeakKeyDictionary

from store.changes import Change
from store.errors import NotFound, Refused, brief
from store.parts import numbers

_OF_CHANGE: WeakKeyDictionary[Change, Known]


class Known:
    """Numbers by how they are printed and by whom; about 250 bytes each."""

    def __init__(self, change: Change) -> None:
        self.change = change
        self.ids: dict[str, int] = {}
        self.alone: dict[str, int] = {}
        self.otherwise: dict[str, int] = {}
        for number, maker, which in change.raw.execute("SELECT number, maker, id FROM part_number"):
            self.add(number, maker, which)

    def add(self, number: str, maker: str, which: int) -> None:
        """Take a number up; 0 in `alone` marks one that several makers have."""
        self.ids[f"{number}\n{maker}" if maker else number] = which
        self.alone[number] = 0 if number in self.alone else which

    def exactly(self, number: str, maker: str) -> int | None:
        """The key of this very number as printed, None where it is not there."""
        return self.ids.get(f"{number}\n{maker}" if maker else number)

    def find(self, number: str, maker: str) -> int:
        """The key of the number that is meant; a model takes part by its own number.

        As printed first, then by its comparing key. Raises Refused: not there, or several makers have it.
        """
        which = self.ids.get(f"{number}\n{maker}" if maker else number)
        if which is None and not maker:
            which = self.alone.get(number)
        if which is None:
            which = self.otherwise.get(f"{number}\n{maker}")
        return which or self._look(number, maker)

    def _look(self, number: str, maker: str) -> int:
        try:
            which = numbers.resolve(self.change, number, maker)
        except NotFound:
            raise Refused(f"no number {brief(number, 30)!r}" + (f" of {brief(maker, 30)}" if maker else "")) from None
        self.otherwise[f"{number}\n{maker}"] = which
        return which


def known(change: Change) -> Known:
    """The numbers at hand in this change; read once."""
    found = _OF_CHANGE.get(change)
    if found is None:
        found = _OF_CHANGE[change] = Known(change)
    return found


_OF_CHANGE = WeakKeyDictionary()
