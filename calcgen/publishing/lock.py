"""One build at a time at a destination, by a lock of the system that ends with the process holding it."""

from __future__ import annotations

import os
import sys
import time
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from pathlib import Path

if sys.platform == "win32":
    import msvcrt
else:
    import fcntl

_PAUSE = 0.02  # seconds between two attempts


@contextmanager
def locked(path: Path, patience: float) -> Iterator[None]:
    """Hold the lock file `path`, waiting for it up to `patience` seconds.

    Raises
    ------
    TimeoutError
        When someone else held it all that time.
    """
    descriptor = _take(path, patience)
    try:
        yield
    finally:
        # Unlinked while still held; whoever waits for it finds that the name is gone and makes a new one.
        with suppress(OSError):
            path.unlink()
        os.close(descriptor)


def _take(path: Path, patience: float) -> int:
    deadline = time.monotonic() + patience
    while True:
        descriptor = os.open(path, os.O_RDWR | os.O_CREAT, 0o666)
        if _try_lock(descriptor) and _is_at(path, descriptor):
            return descriptor
        os.close(descriptor)
        if time.monotonic() >= deadline:
            raise TimeoutError
        time.sleep(_PAUSE)


def _try_lock(descriptor: int) -> bool:
    try:
        if sys.platform == "win32":
            msvcrt.locking(descriptor, msvcrt.LK_NBLCK, 1)
        else:
            fcntl.flock(descriptor, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except (BlockingIOError, PermissionError):
        return False
    return True


def _is_at(path: Path, descriptor: int) -> bool:
    """Tell whether the open file still is the one of that name."""
    try:
        return os.path.samestat(path.stat(), os.fstat(descriptor))
    except FileNotFoundError:
        return False
