"""File events → set of changes (pure) → rebuild, soon after the last of a burst of events."""

from __future__ import annotations

import os
import queue
import time
from collections.abc import Callable, Collection, Iterable
from contextlib import suppress
from dataclasses import dataclass
from pathlib import Path
from threading import Event
from typing import Literal

from watchdog.events import FileSystemEvent, FileSystemEventHandler
from watchdog.observers import Observer
from watchdog.observers.api import BaseObserver, ObservedWatch
from watchdog.observers.polling import PollingObserver

QUIET = 0.03  # seconds without events after which a burst is over
CEILING = 0.5  # seconds after which a burst is taken as it is
_TICK = 0.2  # seconds between looks at the stop event and at the root itself

_DROPPING_ENDS = ("~", ".swp", ".swx", ".tmp", ".temp", ".bak", ".part", "_jb_tmp___", "_jb_old___")
_DROPPING_STARTS = (".", "#", "~$")
_DROPPING_NAMES = frozenset({"4913", "__pycache__", "Thumbs.db", "desktop.ini"})


@dataclass(frozen=True)
class RawEvent:
    """One event as the system reports it; `destination` is that of a move."""

    kind: Literal["created", "modified", "moved", "deleted"]
    path: Path
    destination: Path | None = None
    is_directory: bool = False


@dataclass(frozen=True, order=True)
class Change:
    """What became of a file or folder; `path` is relative to the root, with '/'; '.' is the root itself."""

    path: str
    kind: Literal["changed", "removed"]


def settle(events: Iterable[RawEvent], root: Path, ignore: Collection[Path] = ()) -> frozenset[Change]:
    """Return what a burst of events comes to.

    A file that came and went within the burst is no change, so that a save by a second file renamed over
    the first is a change of the first alone. Left out: what lies outside `root` or in a folder of `ignore`
    (without any, `root/package`), hidden files, editors' droppings, the trail.
    """
    found: dict[str, Literal["changed", "removed"]] = {}
    new: set[str] = set()  # paths that did not exist before the burst

    def come(path: Path, *, is_new: bool) -> None:
        name = _name(path, root, ignore)
        if name is not None:
            if is_new and name not in found:
                new.add(name)
            found[name] = "changed"

    def go(path: Path) -> None:
        name = _name(path, root, ignore)
        if name is not None:
            for known in [name, *(inner for inner in found if inner.startswith(f"{name}/"))]:
                found[known] = "removed"

    for event in events:
        match event.kind:
            case "deleted":
                go(event.path)
            case "moved":
                go(event.path)
                if event.destination is not None:
                    come(event.destination, is_new=False)  # what stood there before is not known
            case "created":
                come(event.path, is_new=True)
            case "modified" if not event.is_directory:
                come(event.path, is_new=False)
    return frozenset(
        Change(name, kind) for name, kind in found.items() if not (kind == "removed" and name in new)
    )


def _name(path: Path, root: Path, ignore: Collection[Path]) -> str | None:
    """Return the path relative to the root, or None when it is nothing that a build reads."""
    folders = ignore or (root / "package",)
    if not path.is_relative_to(root) or any(path.is_relative_to(folder) for folder in folders):
        return None
    relative = path.relative_to(root)
    if any(_is_dropping(part) for part in relative.parts):
        return None
    name = relative.as_posix()
    return None if name == "trail.jsonl" or name.startswith("trail.torn-") else name


def _is_dropping(name: str) -> bool:
    return name in _DROPPING_NAMES or name.startswith(_DROPPING_STARTS) or name.endswith(_DROPPING_ENDS)


class Debouncer:
    """Gathers events into bursts; `put` may be called from any thread."""

    def __init__(self, quiet: float = QUIET, ceiling: float = CEILING) -> None:
        self._quiet = quiet
        self._ceiling = ceiling
        self._events: queue.SimpleQueue[RawEvent] = queue.SimpleQueue()

    def put(self, event: RawEvent) -> None:
        """Add an event."""
        self._events.put(event)

    def burst(self, patience: float) -> tuple[RawEvent, ...]:
        """Return the next burst, ended by quiet or the ceiling; empty if none begins within `patience` s."""
        events: list[RawEvent] = []
        try:
            events.append(self._events.get(timeout=patience))
            end = time.monotonic() + self._ceiling
            while (left := end - time.monotonic()) > 0:
                events.append(self._events.get(timeout=min(self._quiet, left)))
        except queue.Empty:
            pass
        return tuple(events)


class _Handler(FileSystemEventHandler):
    """Passes on the events that matter, so that writing the package prolongs no burst.

    Of the folders in the root those alone are watched that a build may read, also when they come later.
    """

    def __init__(self, put: Callable[[RawEvent], None], root: Path, ignore: Collection[Path]) -> None:
        self._put = put
        self._root = root
        self._ignore = ignore
        self._folders: dict[Path, ObservedWatch] = {}

    def attach(self, observer: BaseObserver) -> None:
        """Watch the root and its folders by an observer; call it once for each observer."""
        self._observer = observer
        self._folders.clear()
        observer.schedule(self, str(self._root), recursive=False)
        for path in self._root.glob("*"):  # none where the root is gone
            self._come(path)

    def on_any_event(self, event: FileSystemEvent) -> None:
        raw = _raw(event)
        if raw is None or not settle([raw], self._root, self._ignore):
            return
        if raw.kind in ("moved", "deleted"):
            self._go(raw.path)
        # Before it is passed on: what comes into a new folder later is seen, the rest the rebuild reads.
        for path in (raw.path, raw.destination):
            if raw.kind in ("created", "moved") and path is not None and path.parent == self._root:
                self._come(path)
        self._put(raw)

    def _come(self, path: Path) -> None:
        if path.is_dir() and _name(path, self._root, self._ignore) is not None:
            self._go(path)
            with suppress(FileNotFoundError, NotADirectoryError):  # gone again
                self._folders[path] = self._observer.schedule(self, str(path), recursive=True)

    def _go(self, path: Path) -> None:
        if path in self._folders:
            self._observer.unschedule(self._folders.pop(path))


def watch(
    root: Path,
    ignore: Collection[Path],
    rebuild: Callable[[frozenset[Change]], None],
    stop: Event,
    *,
    say: Callable[[str], None] = lambda _: None,
) -> None:
    """Call `rebuild` with what changed under `root`, until `stop` is set or Ctrl-C.

    The first call comes at once, with the root as changed, when the watch stands: no change between a first
    build and the watch is lost. `rebuild` runs in the caller's thread, never twice at once, and handles the
    faults of a build itself; events meanwhile make the next burst. A root that is deleted is waited for.

    Parameters
    ----------
    ignore : folders that the builds write to.
    say : takes a line for the user.
    """
    root = root.resolve()
    ignore = tuple(folder.resolve() for folder in ignore)
    try:
        while not stop.is_set():
            if not root.is_dir():
                stop.wait(_TICK)
                continue
            debouncer = Debouncer()
            observer = _observer(_Handler(debouncer.put, root, ignore), say)
            try:
                debouncer.put(RawEvent("created", root, is_directory=True))
                _follow(root, ignore, debouncer, rebuild, stop)
            finally:
                observer.stop()
                observer.join()
    except KeyboardInterrupt:
        pass


def _follow(
    root: Path,
    ignore: Collection[Path],
    debouncer: Debouncer,
    rebuild: Callable[[frozenset[Change]], None],
    stop: Event,
) -> None:
    """Turn bursts into rebuilds while `root` is the folder that it was."""
    identity = _identity(root)
    while not stop.is_set():
        changes = settle(debouncer.burst(_TICK), root, ignore)
        if _identity(root) != identity or Change(".", "removed") in changes:
            return
        if changes and not stop.is_set():
            rebuild(changes)


def _identity(root: Path) -> tuple[int, int] | None:
    try:
        status = root.stat()
    except OSError:
        return None
    return status.st_dev, status.st_ino


def _observer(handler: _Handler, say: Callable[[str], None]) -> BaseObserver:
    """Start an observer; where the system has no more watches to give, one that looks at the files itself."""
    observer: BaseObserver = Observer()
    try:
        handler.attach(observer)
        observer.start()
    except OSError as error:
        say(f"the system cannot report changes here ({error}); looking for them twice a second instead")
        observer = PollingObserver(timeout=0.5)
        handler.attach(observer)
        observer.start()
    return observer


def _raw(event: FileSystemEvent) -> RawEvent | None:
    path = Path(os.fsdecode(event.src_path))
    match event.event_type:
        case "created" | "deleted" as kind:
            return RawEvent(kind, path, None, event.is_directory)
        case "modified" | "closed":  # closed after writing: the content is whole now
            return RawEvent("modified", path, None, event.is_directory)
        case "moved":
            destination = Path(os.fsdecode(event.dest_path)) if event.dest_path else None
            return RawEvent("moved", path, destination, event.is_directory)
        case _:
            return None
