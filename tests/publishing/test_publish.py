"""Replacement of a package: all of it or nothing, whatever stands there and whenever it is cut short."""

from __future__ import annotations

import errno
import multiprocessing
import os
import signal
import subprocess
import sys
import threading
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path

import pytest

from calcgen.publishing import (
    MANIFEST,
    NotAPackageError,
    PackageBusyError,
    UnlistedFilesError,
    WriteError,
    is_current,
    publish,
    recover,
)
from calcgen.publishing.lock import locked

OLD = {"index.html": b"old", "calcs/W-1.html": b"old"}
NEW = {"index.html": b"new", "calcs/W-2.html": b"new", "figures/a/b.svg": b"<svg/>"}


def contents(folder: Path) -> dict[str, bytes]:
    files = (path for path in folder.rglob("*") if path.is_file() and path.name != MANIFEST)
    return {path.relative_to(folder).as_posix(): path.read_bytes() for path in files}


@pytest.fixture
def package(tmp_path: Path) -> Path:
    folder = tmp_path / "package"
    publish(OLD, folder, {"key": "old"}, durable=False)
    return folder


PLACES: dict[str, Callable[[Path], object]] = {
    "nothing there": lambda _: None,
    "empty folder": lambda p: p.mkdir(),
    "older package": lambda p: publish(OLD, p, {}, durable=False),
}


@pytest.mark.parametrize("prepare", PLACES.values(), ids=PLACES.keys())
def test_the_destination_holds_the_new_files_and_nothing_else(
    tmp_path: Path, prepare: Callable[[Path], object]
) -> None:
    folder = tmp_path / "out" / "package"
    folder.parent.mkdir()
    prepare(folder)
    publish(NEW, folder, {"key": "new"})
    assert contents(folder) == NEW
    assert is_current(folder, "new")
    assert [path.name for path in folder.parent.iterdir()] == ["package"]


def test_missing_parent_folders_are_made(tmp_path: Path) -> None:
    publish(NEW, tmp_path / "a/b/package", {})
    assert contents(tmp_path / "a/b/package") == NEW


def test_a_link_to_the_package_stays_a_link(package: Path) -> None:
    link = package.with_name("link")
    link.symlink_to(package)
    publish(NEW, link, {})
    assert link.is_symlink()
    assert contents(package) == NEW


FOREIGN = {
    "folder of someone's files": {"mine/thesis.odt": b"x"},
    "manifest of something else": {"mine/manifest.json": b'{"name": "app"}'},
    "a file": {"mine": b"x"},
}


@pytest.mark.parametrize("there", FOREIGN.values(), ids=FOREIGN.keys())
def test_what_is_no_package_is_not_replaced(tmp_path: Path, there: dict[str, bytes]) -> None:
    for path, content in there.items():
        (tmp_path / path).parent.mkdir(exist_ok=True)
        (tmp_path / path).write_bytes(content)
    with pytest.raises(NotAPackageError, match="not a calcgen package"):
        publish(NEW, tmp_path / "mine", {})
    assert {path: (tmp_path / path).read_bytes() for path in there} == there
    assert [path.name for path in tmp_path.iterdir()] == ["mine"]


def test_the_root_of_the_disk_is_refused() -> None:
    with pytest.raises(NotAPackageError):
        publish(NEW, Path(Path.cwd().anchor), {})


def test_a_file_that_someone_put_into_the_package_is_not_lost(package: Path) -> None:
    (package / "calcs/my marks.toml").write_bytes(b"x")
    with pytest.raises(UnlistedFilesError, match=r"calcs/my marks\.toml") as caught:
        publish(NEW, package, {})
    assert caught.value.names == ("calcs/my marks.toml",)
    assert contents(package) == {**OLD, "calcs/my marks.toml": b"x"}


@pytest.mark.parametrize(
    "path",
    ["", ".", "/etc/x", "../x", "a/../x", "a//x", "./x", "a\\x", "C:/x", "a\0", MANIFEST, "index.html/x"],
)
def test_a_path_that_is_not_one_of_a_package_is_refused_before_anything_is_written(
    tmp_path: Path, path: str
) -> None:
    with pytest.raises(ValueError, match="package"):
        publish({"index.html": b"", path: b""}, tmp_path / "package", {})
    assert not list(tmp_path.iterdir())


# Crashes. The process is killed for good at a step, as by a power cut; nothing of its clean-up runs.

KILLED = """
import os, pathlib, signal, sys
from calcgen.publishing import publish

step, folder = int(sys.argv[1]), pathlib.Path(sys.argv[2])
seen = 0

def count(event, arguments):
    # Called before the system is: each open for writing, mkdir, rename, rmdir and remove is a step.
    global seen
    writes = event == "open" and ".calcgen-staging" in str(arguments[0]) and "x" in str(arguments[1])
    if writes or event in ("os.mkdir", "os.rename", "os.rmdir", "os.remove"):
        seen += 1
        if seen == step:
            os.kill(os.getpid(), signal.SIGKILL)

sys.addaudithook(count)
publish({"index.html": b"new", "calcs/W-2.html": b"new"}, folder, {"key": "new"}, durable=False)
"""


def test_whenever_the_build_is_killed_a_whole_package_is_there_or_comes_back(tmp_path: Path) -> None:
    folder = tmp_path / "package"
    outcomes = []
    for step in range(1, 40):
        publish(OLD, folder, {"key": "old"}, durable=False)
        done = subprocess.run([sys.executable, "-c", KILLED, str(step), str(folder)], check=False)
        absent = not folder.exists()
        recover(folder)
        assert is_current(folder, "old") or is_current(folder, "new")
        if done.returncode == 0:
            break
        assert done.returncode == -signal.SIGKILL
        outcomes.append("absent" if absent else "new" if is_current(folder, "new") else "old")
    else:
        pytest.fail("the build never ran to its end")
    # Each of the three situations that a crash can leave was met, in this order.
    assert list(dict.fromkeys(outcomes)) == ["old", "absent", "new"]
    publish(NEW, folder, {})
    assert [path.name for path in tmp_path.iterdir()] == ["package"]


def test_recovery_restores_the_old_package_over_an_empty_folder(package: Path) -> None:
    package.rename(package.with_name(".package.calcgen-old"))
    package.mkdir()
    recover(package)
    assert contents(package) == OLD


def test_recovery_deletes_no_old_package_beside_a_foreign_folder(package: Path) -> None:
    old = package.rename(package.with_name(".package.calcgen-old"))
    package.mkdir()
    (package / "notes.txt").write_bytes(b"x")
    recover(package)
    assert contents(old) == OLD
    assert contents(package) == {"notes.txt": b"x"}


def test_a_name_too_long_for_the_disk_leaves_the_old_package_and_says_why(package: Path) -> None:
    with pytest.raises(WriteError, match="name too long") as caught:
        publish({**NEW, "x" * 300: b""}, package, {})
    assert caught.value.cause.errno == errno.ENAMETOOLONG
    assert contents(package) == OLD
    assert [path.name for path in package.parent.iterdir()] == ["package"]


@contextmanager
def file_size_limit(size: int) -> Iterator[None]:
    """Let the system refuse larger files, the nearest thing to a full disk."""
    import resource

    before = resource.getrlimit(resource.RLIMIT_FSIZE)
    handler = signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
    resource.setrlimit(resource.RLIMIT_FSIZE, (size, before[1]))
    try:
        yield
    finally:
        resource.setrlimit(resource.RLIMIT_FSIZE, before)
        signal.signal(signal.SIGXFSZ, handler)


def test_a_write_that_the_disk_refuses_leaves_the_old_package_and_names_the_file(package: Path) -> None:
    with file_size_limit(4096), pytest.raises(WriteError, match=r"cannot write .*big\.html: file too large"):
        publish({**NEW, "big.html": b"x" * 10_000}, package, {})
    assert contents(package) == OLD
    assert [path.name for path in package.parent.iterdir()] == ["package"]


@pytest.mark.parametrize(
    ("number", "words"),
    [
        (errno.ENOSPC, "no space left on device; make room"),
        (errno.EROFS, "read-only file system; the disk is read-only"),
        (errno.EACCES, "permission denied; check that you may write there"),
        (errno.EIO, "input/output error"),
    ],
)
def test_errors_of_the_system_are_said_in_words(number: int, words: str) -> None:
    assert words in str(WriteError(Path("package"), OSError(number, os.strerror(number))))


# Two builds at once.


def test_a_build_waits_for_another_and_then_gives_up_with_a_clear_error(package: Path) -> None:
    with (
        locked(package.with_name(".package.calcgen-lock"), patience=0),
        pytest.raises(PackageBusyError, match="another build"),
    ):
        publish(NEW, package, {}, patience=0.05)
    publish(NEW, package, {}, patience=0)
    assert contents(package) == NEW


def test_a_lock_file_left_by_a_crash_locks_nothing(package: Path) -> None:
    package.with_name(".package.calcgen-lock").touch()
    publish(NEW, package, {}, patience=0)
    assert contents(package) == NEW


def publish_often(folder: Path, mark: int) -> None:
    for number in range(15):
        files = {f"{page}.html": f"{mark} {number}".encode() for page in range(5)}
        publish(files, folder, {"key": f"{mark} {number}"}, durable=False)


def test_builds_at_once_leave_a_package_of_one_of_them_and_no_leftovers(tmp_path: Path) -> None:
    folder = tmp_path / "package"
    context = multiprocessing.get_context("spawn")
    builds = [context.Process(target=publish_often, args=(folder, mark)) for mark in range(2)]
    for build in builds:
        build.start()
    for build in builds:
        build.join()
    assert [build.exitcode for build in builds] == [0, 0]
    assert len(set(contents(folder).values())) == 1
    assert is_current(folder, contents(folder)["0.html"].decode())
    assert [path.name for path in tmp_path.iterdir()] == ["package"]


def test_the_lock_admits_one_thread_at_a_time(tmp_path: Path) -> None:
    inside = 0
    most = 0

    def work() -> None:
        nonlocal inside, most
        for _ in range(20):
            with locked(tmp_path / "lock", patience=10):
                inside += 1
                most = max(most, inside)
                threading.Event().wait(0.0005)
                inside -= 1

    threads = [threading.Thread(target=work) for _ in range(4)]
    for thread in threads:
        thread.start()
    for thread in threads:
        thread.join()
    assert most == 1
