"""The trail file: reads it, and appends to it so that no entry once written is lost."""

from __future__ import annotations

import errno
import hashlib
import os
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager, suppress
from dataclasses import dataclass
from io import FileIO
from pathlib import Path

from calcgen.disk import is_at, sync_folder, try_lock
from calcgen.trail.entry import Entry, write_line
from calcgen.trail.errors import TrailBusyError, TrailConflictError, TrailWriteError
from calcgen.trail.reading import Fault, read_trail
from calcgen.trail.trail import Trail

TRAIL = "trail.jsonl"
PATIENCE = 10.0  # seconds to wait for another build
_PAUSE = 0.01  # seconds between two attempts


@dataclass(frozen=True)
class Appended:
    """What `append` did.

    Attributes
    ----------
    trail : the trail as it now stands.
    entry : the new entry; None when there was nothing to add.
    set_aside : the file that took a torn last line; None when there was none.
    faults : the faults found in the trail before.
    """

    trail: Trail
    entry: Entry | None
    set_aside: Path | None
    faults: tuple[Fault, ...]


def load(path: Path) -> tuple[Trail, tuple[Fault, ...]]:
    """Return the trail at `path` and its faults; a file that does not exist is an empty trail.

    Raises
    ------
    TrailWriteError
        When the file cannot be read.
    """
    try:
        return read_trail(_decoded(path.read_bytes()))
    except FileNotFoundError:
        return Trail(), ()
    except OSError as error:
        raise TrailWriteError(path, error) from error


def append(path: Path, make: Callable[[Trail], Entry | None], *, patience: float = PATIENCE) -> Appended:
    """Append the entry that `make` returns for the trail as it stands while no other build can write to it.

    A torn last line is first set aside in `trail.torn-<digest>.jsonl`. The entry is one write at the end of
    the file, taken back if the disk does not take it whole, and waited for until the disk has it.

    Raises
    ------
    TrailConflictError, TrailBusyError, TrailWriteError
        Each a TrailError; what stood in the trail still does.
    ValueError
        When the entry's parents are not the heads of the trail that `make` was given.
    """
    try:
        with _held(path, patience) as file:
            data = file.readall()
            trail, faults = read_trail(_decoded(data))
            for fault in faults:
                if fault.code == "trail-conflict":
                    raise TrailConflictError(path, fault.line, fault.hint)
            torn = _encoded(trail.torn)
            kept = data.removesuffix(torn)
            aside = None
            if torn:
                aside = _set_aside(path, torn)
                file.truncate(len(kept))
            entry = make(trail)
            if entry is not None:
                if entry.parents != trail.heads:
                    msg = "the entry does not follow the heads of the trail"
                    raise ValueError(msg)
                missing_end = b"" if not kept or kept.endswith(b"\n") else b"\n"
                _write_whole(file, missing_end + write_line(entry).encode() + b"\n", end=len(kept))
                if not kept:
                    sync_folder(path.parent)
    except TimeoutError as error:
        raise TrailBusyError(path, patience) from error
    except OSError as error:
        raise TrailWriteError(path, error) from error
    return Appended(Trail((*trail.entries, *([entry] if entry else []))), entry, aside, faults)


def _decoded(data: bytes) -> str:
    """Bytes to text and, by `_encoded`, back without loss, even where they are no UTF-8."""
    return data.decode("utf-8", "surrogateescape")


def _encoded(text: str) -> bytes:
    return text.encode("utf-8", "surrogateescape")


def _write_whole(file: FileIO, line: bytes, end: int) -> None:
    try:
        written = file.write(line)
        if written != len(line):
            raise OSError(errno.ENOSPC, os.strerror(errno.ENOSPC))
        os.fsync(file.fileno())
    except OSError:
        with suppress(OSError):
            file.truncate(end)
        raise


def _set_aside(path: Path, torn: bytes) -> Path:
    digest = hashlib.sha256(torn).hexdigest()[:12]
    aside = path.with_name(f"{path.stem}.torn-{digest}{path.suffix}")
    with aside.open("wb") as file:  # one name, one content: writing it twice is harmless
        file.write(torn)
        file.flush()
        os.fsync(file.fileno())
    sync_folder(path.parent)
    return aside


@contextmanager
def _held(path: Path, patience: float) -> Iterator[FileIO]:
    """Open the trail for appending, locked against other builds; it is at its start for reading."""
    deadline = time.monotonic() + patience
    while True:
        file = path.open("a+b", buffering=0)
        try:
            if try_lock(file.fileno()):
                # A checkout may have put another file in its place while we waited.
                if is_at(path, file.fileno()):
                    file.seek(0)
                    yield file
                    return
            elif time.monotonic() >= deadline:
                raise TimeoutError
        finally:
            file.close()
        time.sleep(_PAUSE)
