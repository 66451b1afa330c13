"""One build at a time at a destination, by a lock of the system that ends with the process holding it."""

from __future__ import annotations

import os
import time
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from pathlib import Path

from calcgen.disk import is_at, try_lock

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
        if try_lock(descriptor) and is_at(path, descriptor):
            return descriptor
        os.close(descriptor)
        if time.monotonic() >= deadline:
            raise TimeoutError
        time.sleep(_PAUSE)
