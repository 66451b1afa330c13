"""From file events to changes, by a table; then with real files and a real observer."""

from __future__ import annotations

import queue
import shutil
import threading
import time
from collections.abc import Callable, Iterator
from pathlib import Path

import pytest

from calcgen.watch import Change, Debouncer, RawEvent, settle, watch

ROOT = Path("/p")


def created(path: str) -> RawEvent:
    return RawEvent("created", ROOT / path)


def modified(path: str) -> RawEvent:
    return RawEvent("modified", ROOT / path)


def deleted(path: str, *, folder: bool = False) -> RawEvent:
    return RawEvent("deleted", ROOT / path, None, folder)


def moved(path: str, destination: str, *, folder: bool = False) -> RawEvent:
    return RawEvent("moved", ROOT / path, ROOT / destination, folder)


W = "calcs/W-12.md"
CHANGED = {(W, "changed")}
REMOVED = {(W, "removed")}

SETTLED: dict[str, tuple[list[RawEvent], set[tuple[str, str]]]] = {
    "nothing": ([], set()),
    "saved in place": ([modified(W), modified(W)], CHANGED),
    "new file": ([created(W), modified(W)], CHANGED),
    "deleted": ([deleted(W)], REMOVED),
    "deleted and written again": ([deleted(W), created(W)], CHANGED),
    "written and deleted": ([modified(W), deleted(W)], REMOVED),
    "came and went": ([created(W), modified(W), deleted(W)], set()),
    "went, came, went": ([deleted(W), created(W), deleted(W)], REMOVED),
    "renamed": ([moved(W, "calcs/W-13.md")], {(W, "removed"), ("calcs/W-13.md", "changed")}),
    "renamed there and back": (
        [moved(W, "calcs/x.md"), moved("calcs/x.md", W)],
        {*CHANGED, ("calcs/x.md", "removed")},
    ),
    "saved by a hidden file renamed over": (
        [created("calcs/.W-12.md.k3"), moved("calcs/.W-12.md.k3", W)],
        CHANGED,
    ),
    "saved by a plain file renamed over": (
        [created(f"{W}.aB3xYz"), modified(f"{W}.aB3xYz"), moved(f"{W}.aB3xYz", W)],
        CHANGED,
    ),
    "saved with the old one kept as a backup": (
        [moved(W, f"{W}~"), created(W), modified(W), deleted(f"{W}~")],
        CHANGED,
    ),
    "saved after a trial of the folder": (
        [created("calcs/4913"), deleted("calcs/4913"), moved(W, f"{W}~"), created(W)],
        CHANGED,
    ),
    "moved in from outside": ([moved("/elsewhere.md", W)], CHANGED),
    "moved out": ([moved(W, "/elsewhere.md")], REMOVED),
    "moved out, destination not told": ([RawEvent("moved", ROOT / W)], REMOVED),
    "folder touched": ([RawEvent("modified", ROOT / "calcs", None, is_directory=True)], set()),
    "folder deleted": ([modified(W), deleted("calcs", folder=True)], {*REMOVED, ("calcs", "removed")}),
    "folder renamed": ([moved("calcs", "old", folder=True)], {("calcs", "removed"), ("old", "changed")}),
    "root deleted": ([deleted("", folder=True)], {(".", "removed")}),
    "project file": ([modified("project.toml")], {("project.toml", "changed")}),
    "the package": (
        [created("package/index.html"), moved(".package.calcgen-staging", "package", folder=True)],
        set(),
    ),
    "a name that begins like the package": ([modified("package.md")], {("package.md", "changed")}),
    "beside the package": (
        [created(".package.calcgen-lock"), created(".package.calcgen-staging/a/x.html")],
        set(),
    ),
    "the trail": ([modified("trail.jsonl"), created("trail.torn-0a1b.jsonl")], set()),
    "a file of the trail's name elsewhere": (
        [modified("calcs/trail.jsonl")],
        {("calcs/trail.jsonl", "changed")},
    ),
    "outside": ([modified("/q/calcs/A.md"), modified("/p2/calcs/A.md")], set()),
    "version control": ([modified(".git/index"), created(".git/index.lock")], set()),
}


@pytest.mark.parametrize(("events", "expected"), SETTLED.values(), ids=SETTLED.keys())
def test_what_a_burst_comes_to(events: list[RawEvent], expected: set[tuple[str, str]]) -> None:
    assert {(change.path, change.kind) for change in settle(events, ROOT)} == expected


@pytest.mark.parametrize(
    "name",
    [
        ".W-12.md.swp", ".W-12.md.swx", "W-12.md~", "#W-12.md#", ".#W-12.md", "4913", "W-12.tmp",
        "W-12.md.bak", ".goutputstream-X1Y2Z3", "W-12.md___jb_tmp___", "~$sections.csv", ".DS_Store",
        "W-12.md.part",
    ],
)  # fmt: skip
def test_editors_droppings_are_no_change(name: str) -> None:
    assert settle([created(f"calcs/{name}"), modified(f"calcs/{name}")], ROOT) == frozenset()


def test_folders_to_ignore_replace_the_usual_one() -> None:
    events = [modified("out/index.html"), modified("package/readme.md")]
    assert settle(events, ROOT, [ROOT / "out"]) == {Change("package/readme.md", "changed")}


# Bursts


def test_a_burst_ends_with_quiet() -> None:
    debouncer = Debouncer(quiet=0.02, ceiling=5)
    debouncer.put(modified("a"))
    debouncer.put(modified("b"))
    begun = time.monotonic()
    assert debouncer.burst(patience=1) == (modified("a"), modified("b"))
    assert time.monotonic() - begun < 1
    assert debouncer.burst(patience=0.01) == ()


def test_a_burst_without_quiet_ends_at_the_ceiling() -> None:
    debouncer = Debouncer(quiet=1, ceiling=0.1)
    stop = threading.Event()

    def write_on() -> None:
        while not stop.wait(0.005):
            debouncer.put(modified("a"))

    writer = threading.Thread(target=write_on)
    writer.start()
    debouncer.burst(patience=1)
    begun = time.monotonic()
    assert debouncer.burst(patience=1)
    assert 0.09 < time.monotonic() - begun < 0.9
    stop.set()
    writer.join()


# With real files


class Watched:
    """A project under watch, and what its rebuilds were told."""

    def __init__(self, root: Path) -> None:
        self.root = root
        self.told: queue.SimpleQueue[frozenset[Change]] = queue.SimpleQueue()
        self.stop = threading.Event()
        self.thread = threading.Thread(
            target=watch, args=(root, [root / "package"], self.told.put, self.stop)
        )

    def next(self, patience: float = 5) -> set[tuple[str, str]]:
        return {(change.path, change.kind) for change in self.told.get(timeout=patience)}

    def is_quiet(self) -> bool:
        time.sleep(0.15)
        return self.told.empty()


@pytest.fixture
def watched(tmp_path: Path) -> Iterator[Watched]:
    root = tmp_path / "project"
    (root / "calcs").mkdir(parents=True)
    (root / W).write_text("# Stringer\n")
    project = Watched(root)
    project.thread.start()
    assert project.next() == {(".", "changed")}
    yield project
    project.stop.set()
    project.thread.join(timeout=5)
    assert not project.thread.is_alive()


def save_in_place(path: Path) -> None:
    path.write_text("# Stringer, bay 3\n")


def save_by_rename(path: Path) -> None:
    new = path.with_name(f"{path.name}.aB3xYz")
    new.write_text("# Stringer, bay 3\n")
    new.replace(path)


def save_with_backup(path: Path) -> None:
    path.rename(f"{path}~")
    path.write_text("# Stringer, bay 3\n")
    Path(f"{path}~").unlink()


@pytest.mark.parametrize("save", [save_in_place, save_by_rename, save_with_backup])
def test_a_save_is_one_rebuild_of_the_file_and_soon(watched: Watched, save: Callable[[Path], None]) -> None:
    begun = time.monotonic()
    save(watched.root / W)
    assert watched.next() == CHANGED
    assert time.monotonic() - begun < 1  # about 0.06 s on a machine at rest
    assert watched.is_quiet()


def test_what_the_build_writes_causes_no_rebuild(watched: Watched) -> None:
    staging = watched.root / ".package.calcgen-staging"
    staging.mkdir()
    (staging / "index.html").write_text("x")
    staging.rename(watched.root / "package")
    (watched.root / "trail.jsonl").write_text("{}\n")
    assert watched.is_quiet()


def test_packages_are_written_without_a_word(watched: Watched, recwarn: pytest.WarningsRecorder) -> None:
    """Their folders are not watched: the observer's threads would warn, or be late, when they come and go."""
    for _ in range(5):
        staging = watched.root / ".package.calcgen-staging"
        (staging / "assets/fonts").mkdir(parents=True)
        shutil.rmtree(watched.root / "package", ignore_errors=True)
        staging.rename(watched.root / "package")
    assert watched.is_quiet()
    assert [str(warning.message) for warning in recwarn] == []


def test_a_folder_that_went_and_came_again_is_watched_too(watched: Watched) -> None:
    shutil.rmtree(watched.root / "calcs")
    assert ("calcs", "removed") in watched.next()
    (watched.root / "calcs").mkdir()
    assert watched.next() == {("calcs", "changed")}
    (watched.root / W).write_text("# Stringer\n")
    assert watched.next() == CHANGED


def test_a_new_folder_is_watched_too(watched: Watched) -> None:
    (watched.root / "methods").mkdir()
    assert watched.next() == {("methods", "changed")}
    (watched.root / "methods/ltb.md").write_text("# Method\n")
    assert watched.next() == {("methods/ltb.md", "changed")}


def test_a_project_deleted_and_made_again_is_watched_again(watched: Watched) -> None:
    shutil.rmtree(watched.root)
    time.sleep(0.3)
    while not watched.told.empty():
        watched.told.get()
    (watched.root / "calcs").mkdir(parents=True)
    (watched.root / W).write_text("# Stringer\n")
    while (".", "changed") not in watched.next():
        pass
    assert watched.is_quiet()
    save_in_place(watched.root / W)
    assert watched.next() == CHANGED


def test_ctrl_c_ends_the_watch_cleanly(tmp_path: Path) -> None:
    def interrupt(_: frozenset[Change]) -> None:
        raise KeyboardInterrupt

    threads = threading.active_count()
    watch(tmp_path, [], interrupt, threading.Event())
    assert threading.active_count() == threads


def test_a_fault_of_the_rebuild_is_not_swallowed(tmp_path: Path) -> None:
    def fail(_: frozenset[Change]) -> None:
        msg = "a fault of the program"
        raise RuntimeError(msg)

    with pytest.raises(RuntimeError, match="of the program"):
        watch(tmp_path, [], fail, threading.Event())
