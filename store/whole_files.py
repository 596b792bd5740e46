"""Writing a file that is there whole or not at all."""

from __future__ import annotations

import os
import tempfile
from contextlib import suppress
from pathlib import Path

from store.errors import Refused


def write_whole(path: Path, content: bytes) -> None:
    """Write a file beside its place, sync it, then move it there. Raises Refused naming the file and what the system says."""
    half: str | None = None
    try:
        handle, half = tempfile.mkstemp(prefix=f".{path.name[:40]}-", dir=path.absolute().parent)
        with os.fdopen(handle, "wb") as file:
            file.write(content)
            file.flush()
            os.fsync(file.fileno())
        Path(half).chmod(0o644)
        Path(half).replace(path)
    except BaseException as fault:
        if half is not None:
            with suppress(OSError):
                Path(half).unlink()
        if isinstance(fault, OSError):
            raise Refused(f"{path} cannot be written: {(fault.strerror or str(fault)).lower()}") from None
        raise
