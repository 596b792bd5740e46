"""The line at the bottom: the keys that work here and now, as many as there is room for; F1 tells of all of them."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from rich.cells import cell_len
from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.screen import Screen
from textual.strip import Strip
from textual.widget import Widget

EXPLAIN = "explain"
_KEYS = {"escape": "Esc", "delete": "Del", "enter": "Enter", "insert": "Ins", "pageup": "PgUp", "pagedown": "PgDn"}


@dataclass(frozen=True, slots=True)
class Key:
    """A key that works: how it is written, what it does in a word or two, at length, and its action on a node."""

    key: str
    words: str
    says: str
    action: str
    node: Any


def written(key: str) -> str:
    """A key as people write it: F2, ^s, Esc."""
    if key.startswith("ctrl+"):
        return f"^{key[5:]}"
    return _KEYS.get(key, key.upper() if key[:1] == "f" and key[1:].isdigit() else key.capitalize())


def keys_of(screen: Screen[Any]) -> Iterator[Key]:
    """The keys that work on a screen now and are worth naming, one for each action, in the order of its bindings."""
    named: dict[str, str] = getattr(screen, "key_names", {})
    seen = set()
    for active in screen.active_bindings.values():
        binding = active.binding
        if binding.description and binding.show and active.enabled and binding.action not in seen:
            seen.add(binding.action)
            words = named.get(binding.action, binding.description)
            yield Key(written(binding.key), words, binding.tooltip or words, binding.action, active.node)


class KeyLine(Widget):
    """The keys of its screen. A click on one is as good as the key."""

    DEFAULT_CSS = "KeyLine { dock: bottom; height: 1; }"

    def __init__(self) -> None:
        super().__init__()
        self.spans: list[tuple[int, int, Key]] = []

    def on_mount(self) -> None:
        """Follow what works."""
        self.screen.bindings_updated_signal.subscribe(self, lambda _: self.refresh())

    def fitting(self, room: int) -> list[Key]:
        """The keys that find room, the one that explains last; where some do not, it promises them all."""
        every = list(keys_of(self.screen))
        first = [key for key in every if key.action != EXPLAIN]
        last = [key for key in every if key.action == EXPLAIN]
        if _length([*first, *last]) <= room:
            return [*first, *last]
        last = [Key(key.key, "all keys", key.says, key.action, key.node) for key in last]
        while first and _length([*first, *last]) > room:
            first.pop()
        return [*first, *last]

    def render_line(self, y: int) -> Strip:
        """Keys in brass, words quiet."""
        tones, width = self.app.theme_variables, self.size.width
        ground = Style(color=tones["quiet"], bgcolor=tones["panel"])
        brass = ground + Style(color=tones["brass"], bold=True)
        segments, at = [Segment(" ", ground)], 1
        self.spans = []
        for key in self.fitting(width - 2):
            length = _length([key])
            self.spans.append((at, at + length, key))
            segments += [Segment(key.key, brass), Segment(f" {key.words}  ", ground)]
            at += length + 2
        return Strip(segments).adjust_cell_length(width, ground)

    async def on_click(self, event: events.Click) -> None:
        """Do what the key does."""
        for begin, end, key in self.spans:
            if begin <= event.x < end:
                await self.app.run_action(key.action, key.node)
                return


def _length(keys: list[Key]) -> int:
    return sum(cell_len(f"{key.key} {key.words}") for key in keys) + 2 * (len(keys) - 1)
