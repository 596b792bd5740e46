"""Where a record may lie: not on a network share, where write-ahead logging loses data."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

_SHARES = {
    "nfs", "nfs4", "cifs", "smb3", "smbfs", "smb2", "afpfs", "webdav", "davfs", "fuse.sshfs", "fuse.davfs2", "ncpfs",
    "afs", "ceph", "fuse.glusterfs", "glusterfs", "fuse.rclone", "fuse.s3fs",
}  # fmt: skip


def share(path: Path, mounts: str | None = None) -> str | None:
    """The kind of network file system that holds `path`, or None when it is local or unknown.

    `mounts` has lines as in /proc/mounts; None asks this machine (Linux, macOS, Windows).
    """
    if mounts is None:
        if sys.platform == "win32":
            return _windows_share(path)
        mounts = _mounts()
    full = path.absolute()
    best, kind = -1, ""
    for line in mounts.splitlines():
        parts = line.split(" ")
        if len(parts) < 3:
            continue
        point = Path(parts[1].encode("latin-1", "replace").decode("unicode_escape"))
        if (full == point or point in full.parents) and len(point.parts) >= best:
            best, kind = len(point.parts), parts[2]
    return kind if kind in _SHARES else None


def _mounts() -> str:
    proc = Path("/proc/mounts")
    if proc.exists():
        return proc.read_text(encoding="utf-8", errors="replace")
    if sys.platform == "darwin":
        listed = subprocess.run(["/sbin/mount"], capture_output=True, text=True, check=False).stdout
        lines = []
        for line in listed.splitlines():
            device, _, rest = line.partition(" on ")
            point, _, options = rest.rpartition(" (")
            lines.append(f"{device} {point} {options.split(',')[0].rstrip(')')}")
        return "\n".join(lines)
    return ""


def _windows_share(path: Path) -> str | None:
    if str(path.absolute()).startswith("\\\\"):
        return "network share"
    import ctypes

    remote = 4
    windll = getattr(ctypes, "windll", None)
    drive = path.absolute().drive + "\\"
    return "network drive" if windll and windll.kernel32.GetDriveTypeW(drive) == remote else None
