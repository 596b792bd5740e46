"""The line at the bottom: the keys that work here and now, as many as there is room for; F1 tells of all of them.

Above them, for a while, what came of the last thing that was asked for.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, replace
from textwrap import wrap
from typing import Any

from rich.cells import cell_len
from rich.segment import Segment
from rich.style import Style
from textual import events
from textual.screen import Screen
from textual.strip import Strip
from textual.timer import Timer
from textual.widget import Widget

from tui.widgets.listing import flat

EXPLAIN, LAST = "explain", ("Esc",)
GAP = 2
SECONDS, LONGEST, MOST_LINES = 12, 600, 4
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
    """The keys that work on a screen now and are worth naming, one for each action: F keys by number, then the others."""
    named: dict[str, str] = getattr(screen, "key_names", {})
    seen = set()
    for active in sorted(screen.active_bindings.values(), key=lambda active: _rank(active.binding.key)):
        binding = active.binding
        if binding.description and binding.show and active.enabled and binding.action not in seen:
            seen.add(binding.action)
            words = named.get(binding.action, binding.description)
            yield Key(written(binding.key), words, binding.tooltip or words, binding.action, active.node)


def _rank(key: str) -> int:
    return int(key[1:]) if key[:1] == "f" and key[1:].isdigit() else 100


class KeyLine(Widget):
    """The keys of its screen on one line or more. A click on one is as good as the key."""

    DEFAULT_CSS = "KeyLine { dock: bottom; height: 1; }"

    def __init__(self, lines: int = 1) -> None:
        super().__init__()
        self.lines = lines
        self.said: list[str] = []
        self.is_loud = False
        self.until: Timer | None = None
        self.spans: list[tuple[int, int, int, Key]] = []

    def on_mount(self) -> None:
        """Follow what works."""
        self.styles.height = self.lines
        self.screen.bindings_updated_signal.subscribe(self, lambda _: self.refresh())

    def say(self, text: str, *, is_loud: bool = False) -> None:
        """Show a message above the keys; the next one takes its place, and it goes by itself."""
        self.said = wrap(flat(text)[:LONGEST], max(20, self.size.width - 2))[:MOST_LINES]
        self.is_loud = is_loud
        self.styles.height = self.lines + len(self.said)
        self.refresh()
        if self.until is not None:
            self.until.stop()
        if text:
            self.until = self.set_timer(SECONDS, lambda: self.say(""))

    def fitting(self, room: int) -> list[list[Key]]:
        """Line by line the keys that find room, the way out and the one that explains last; the latter promises them all
        where some find none.
        """
        every = list(keys_of(self.screen))
        last = sorted(
            (key for key in every if key.key in LAST or key.action == EXPLAIN), key=lambda key: key.action == EXPLAIN
        )
        first = [key for key in every if key not in last]
        laid = _laid([*first, *last], room)
        if len(laid) > self.lines:
            last = [replace(key, words="all keys") if key.action == EXPLAIN else key for key in last]
        while len(laid) > self.lines and first:
            first.pop(_spare(first))
            laid = _laid([*first, *last], room)
        return laid

    def render_line(self, y: int) -> Strip:
        """Keys in brass, words quiet."""
        tones, width = self.app.theme_variables, self.size.width
        ground = Style(color=tones["quiet"], bgcolor=tones["panel"])
        brass = ground + Style(color=tones["brass"], bold=True)
        if y < len(self.said):
            tone = Style(color=tones["loud" if self.is_loud else "foreground"], bold=True)
            return Strip([Segment(f" {self.said[y]}", ground + tone)]).adjust_cell_length(width, ground)
        row, y = y, y - len(self.said)
        laid = self.fitting(width - 2)
        segments, at = [Segment(" ", ground)], 1
        self.spans = [span for span in self.spans if span[0] != row]
        for key in laid[y] if y < len(laid) else ():
            length = _length(key)
            self.spans.append((row, at, at + length, key))
            segments += [Segment(key.key, brass), Segment(f" {key.words}  ", ground)]
            at += length + GAP
        return Strip(segments).adjust_cell_length(width, ground)

    async def on_click(self, event: events.Click) -> None:
        """Do what the key does."""
        for line, begin, end, key in self.spans:
            if line == event.y and begin <= event.x < end:
                await self.app.run_action(key.action, key.node)
                return


def say(screens: Sequence[Screen[Any]], words: str, *, is_loud: bool) -> None:
    """Say something above the keys of the full screen that is on top or beneath a form."""
    for screen in reversed(screens):
        for line in screen.query(KeyLine):
            line.say(words, is_loud=is_loud)
            return


def _spare(keys: list[Key]) -> int:
    """Which key is missed least: one with ctrl, then the highest F key, which leads elsewhere; a letter acts on what is in front."""
    ctrl = [n for n, key in enumerate(keys) if key.key.startswith("^")]
    places = [n for n, key in enumerate(keys) if key.key[1:].isdigit()]
    return (ctrl or places or [-1])[-1]


def _length(key: Key) -> int:
    return cell_len(f"{key.key} {key.words}")


def _laid(keys: list[Key], room: int) -> list[list[Key]]:
    """Keys flowed into lines of so many columns."""
    lines: list[list[Key]] = [[]]
    at = 0
    for key in keys:
        length = _length(key)
        if lines[-1] and at + length > room:
            lines.append([])
            at = 0
        lines[-1].append(key)
        at += length + GAP
    return lines
