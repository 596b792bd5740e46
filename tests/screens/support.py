"""The screens under test: the application on a record, headless or in a real terminal."""

from __future__ import annotations

import contextlib
import fcntl
import os
import pty
import select
import signal
import struct
import sys
import termios
import time
from collections.abc import AsyncIterator, Callable, Iterator
from pathlib import Path
from typing import Any

import pyte

from tui.app import Wearline


@contextlib.asynccontextmanager
async def opened(path: Path, size: tuple[int, int] = (80, 24), acting: str | None = None) -> AsyncIterator[Any]:
    """The application on a record with the record open, as a pilot."""
    app = Wearline(path, acting, debug=True)
    async with app.run_test(size=size) as pilot:
        await until(pilot, lambda: app.record is not None)
        await settled(pilot)
        yield pilot


async def settled(pilot: Any) -> None:
    """All that is under way has ended: workers, the writer's queue, repaints."""
    await pilot.app.workers.wait_for_complete()
    await pilot.pause()
    await pilot.app.workers.wait_for_complete()
    await pilot.pause()


async def until(pilot: Any, done: Callable[[], bool], seconds: float = 60.0) -> None:
    """Wait until something is so; raises AssertionError when it never is."""
    end = time.monotonic() + seconds
    while not done():
        assert time.monotonic() < end, "it never came about"
        await pilot.pause(0.01)


def text_of(pilot: Any) -> str:
    """What stands on the screen, line by line."""
    screen = pilot.app.screen
    lines = screen._compositor.render_strips()
    return "\n".join("".join(segment.text for segment in strip).rstrip() for strip in lines)


class Terminal:
    """The program in a real pseudo-terminal; `screen` is what a person would see."""

    def __init__(
        self, arguments: list[str], size: tuple[int, int] = (80, 24), env: dict[str, str] | None = None,
        module: str = "tui",
    ) -> None:  # fmt: skip
        self.screen = pyte.Screen(*size)
        self.stream = pyte.ByteStream(self.screen)
        self.pid, self.fd = pty.fork()
        if self.pid == 0:
            wanted = {
                **os.environ,
                "TERM": "xterm-256color",
                "COLORTERM": "",
                "TEXTUAL_ANIMATIONS": "none",
                **(env or {}),
            }
            os.execve(sys.executable, [sys.executable, "-m", module, *arguments], wanted)
        fcntl.ioctl(self.fd, termios.TIOCSWINSZ, struct.pack("HHHH", size[1], size[0], 0, 0))

    def read(self, seconds: float) -> None:
        """Take in what the program draws for so long."""
        end = time.monotonic() + seconds
        while (left := end - time.monotonic()) > 0:
            if not select.select([self.fd], [], [], min(left, 0.05))[0]:
                continue
            try:
                data = os.read(self.fd, 65536)
            except OSError:
                return
            if not data:
                return
            self.stream.feed(data)

    def until(self, shown: str, seconds: float = 60.0) -> None:
        """Read until some words are on the screen. Raises AssertionError with the screen otherwise."""
        end = time.monotonic() + seconds
        while shown not in self.text:
            assert time.monotonic() < end, f"never saw {shown!r} on\n{self.text}"
            self.read(0.005)

    def send(self, data: bytes) -> None:
        """Send bytes as a keyboard would, all in one write where the terminal takes them."""
        while data:
            _, ready, _ = select.select([], [self.fd], [], 0.05)
            if ready:
                data = data[os.write(self.fd, data[:4096]) :]
            self.read(0.0001)

    @property
    def text(self) -> str:
        """The screen as text."""
        return "\n".join(line.rstrip() for line in self.screen.display)

    def kill(self) -> None:
        """As when the power goes."""
        with contextlib.suppress(ProcessLookupError):
            os.kill(self.pid, signal.SIGKILL)
        self._reap()

    def close(self) -> None:
        """Leave in good order."""
        with contextlib.suppress(OSError):
            os.write(self.fd, b"\x11")
        end = time.monotonic() + 20
        while time.monotonic() < end:
            self.read(0.05)
            done, _ = os.waitpid(self.pid, os.WNOHANG)
            if done:
                os.close(self.fd)
                return
        self.kill()

    def _reap(self) -> None:
        with contextlib.suppress(ChildProcessError):
            os.waitpid(self.pid, 0)
        with contextlib.suppress(OSError):
            os.close(self.fd)


@contextlib.contextmanager
def terminal(arguments: list[str], size: tuple[int, int] = (80, 24)) -> Iterator[Terminal]:
    """The program in a pseudo-terminal, ended whatever happens."""
    made = Terminal(arguments, size)
    try:
        yield made
    finally:
        made.kill()
