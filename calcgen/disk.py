"""Locks and folders of the file system, for the rooms that write files."""

from __future__ import annotations

import os
import sys
from pathlib import Path

if sys.platform == "win32":
    import msvcrt
else:
    import fcntl


def try_lock(descriptor: int) -> bool:
    """Lock an open file against other processes, until it is closed; tell whether it could be had."""
    try:
        if sys.platform == "win32":
            # Locked bytes cannot be read by others there, so the one locked lies far beyond the text.
            os.lseek(descriptor, 1 << 40, os.SEEK_SET)
            msvcrt.locking(descriptor, msvcrt.LK_NBLCK, 1)
        else:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except (BlockingIOError, PermissionError):
        return False
    return True


def is_at(path: Path, descriptor: int) -> bool:
    """Tell whether the open file still is the one of that name."""
    try:
        return os.path.samestat(path.stat(), os.fstat(descriptor))
    except FileNotFoundError:
        return False


def sync_folder(folder: Path) -> None:
    """Wait until the disk has the names in a folder."""
    if os.name == "nt":  # folders cannot be opened there
        return
    descriptor = os.open(folder, os.O_RDONLY)
    try:
        os.fsync(descriptor)
    finally:
        os.close(descriptor)
