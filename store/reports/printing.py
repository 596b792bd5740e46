"""Handing a printed report to the system's printer through `lp`, in clear words where there is none.

The file is always saved first: where printing fails, the message says where it is.
"""

from __future__ import annotations

import os
import re
import shutil
import subprocess
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path

from store.errors import Refused, brief
from store.reports.contents import Frozen
from store.reports.saving import save_many

WAIT_S = 60
"""How long `lp` may take to accept a file; a server that does not answer is not waited for."""

_REQUEST = re.compile(r"request id is (\S+)-(\d+)")
_NO_QUEUE = re.compile(
    r"no default destination|no such|does not exist|no destinations|unknown destination", re.IGNORECASE
)
_NO_SERVER = re.compile(
    r"scheduler not responding|connection refused|unable to connect|bad file descriptor", re.IGNORECASE
)


@dataclass(frozen=True, slots=True)
class HandedOver:
    """A file that a printer's queue has accepted; `request` is the queue's own number for it, "" where it names none."""

    file: Path
    queue: str
    request: str

    def __str__(self) -> str:
        number = f" as request {self.request}" if self.request else ""
        return f"{self.file.name} went to the printer {self.queue or 'of the system'}{number}; the file is {self.file}"


class NotPrinted(Refused):
    """The file is there but no printer took it; `file` says where."""

    def __init__(self, why: str, file: Path) -> None:
        self.why, self.file = why, file
        super().__init__(f"{why}; the report is saved as {file}")


def hand_over(file: Path, queue: str = "") -> HandedOver:
    """Give a file to a printer's queue, the system's own where none is named. Raises NotPrinted, saying why and where."""
    lp = shutil.which("lp")
    if lp is None:
        raise NotPrinted("nothing was printed: this system has no `lp` to print with", file)
    command = [lp, *(("-d", queue) if queue else ()), "-t", file.stem, "--", str(file)]
    try:
        done = subprocess.run(  # noqa: S603 - no shell; the file's name follows `--`
            command, capture_output=True, text=True, errors="replace", timeout=WAIT_S, check=False,
            stdin=subprocess.DEVNULL, env={**os.environ, "LC_ALL": "C"},
        )  # fmt: skip
    except subprocess.TimeoutExpired:
        raise NotPrinted(f"nothing was printed: the printer did not answer within {WAIT_S} s", file) from None
    except OSError as fault:
        raise NotPrinted(f"nothing was printed: {fault.strerror or fault}", file) from None
    if done.returncode != 0:
        raise NotPrinted(_why(done.stderr or done.stdout, queue), file)
    found = _REQUEST.search(done.stdout)
    return HandedOver(file, found[1] if found else queue, found[2] if found else "")


def print_many(reports: Iterable[Frozen], folder: Path, queue: str = "") -> Iterator[HandedOver]:
    """Save each report to `folder` and hand it over, yielding each as the queue takes it, in order.

    Raises NotPrinted at the first that no printer takes, Refused where one cannot be drawn or saved; those before it
    are printed. Closing the iterator ends the batch.
    """
    for file in save_many(reports, folder):
        yield hand_over(file, queue)


def queues() -> tuple[str, ...]:
    """The printers that the system knows, by name; none where there is no printing system."""
    lpstat = shutil.which("lpstat")
    if lpstat is None:
        return ()
    try:
        done = subprocess.run(  # noqa: S603
            [lpstat, "-e"], capture_output=True, text=True, errors="replace", timeout=WAIT_S, check=False,
            stdin=subprocess.DEVNULL, env={**os.environ, "LC_ALL": "C"},
        )  # fmt: skip
    except (OSError, subprocess.TimeoutExpired):
        return ()
    return tuple(done.stdout.split()) if done.returncode == 0 else ()


def _why(said: str, queue: str) -> str:
    if _NO_SERVER.search(said):
        return "nothing was printed: the printing system does not answer"
    if _NO_QUEUE.search(said):
        named = f"there is no printer {brief(queue, 40)!r}" if queue else "no printer is set up as the usual one"
        known = queues()
        return f"nothing was printed: {named}" + (f"; there are {', '.join(known)}" if known else "")
    return f"nothing was printed: {brief(said.strip() or 'lp gave no reason', 120)}"
