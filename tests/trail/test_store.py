"""The trail on disk: what was once written is never lost."""

from __future__ import annotations

import errno
import hashlib
import multiprocessing
import resource
import signal
import threading
import time
from pathlib import Path

import pytest

from calcgen.trail import (
    TRAIL,
    Entry,
    State,
    Trail,
    TrailBusyError,
    TrailConflictError,
    TrailWriteError,
    append,
    load,
    replay,
)
from tests.trail.specimens import CHECK, HEAVIER, LOAD, build, chain, text_of, whole

FIRST: State = {"W-12#q_k": LOAD}
SECOND: State = {"W-12#q_k": HEAVIER}


@pytest.fixture
def path(tmp_path: Path) -> Path:
    return tmp_path / TRAIL


def test_no_file_is_an_empty_trail(path: Path) -> None:
    assert load(path) == (Trail(), ())


def test_an_entry_is_one_line_at_the_end(path: Path) -> None:
    done = append(path, lambda trail: build(trail, FIRST))
    before = path.read_bytes()
    append(path, lambda trail: build(trail, SECOND, hour=1))
    assert path.read_bytes().startswith(before)
    assert path.read_text("utf-8") == text_of(chain([FIRST, SECOND]))
    assert done.entry == load(path)[0].entries[0]
    assert done.trail.heads == load(path)[0].entries[1].parents


def test_nothing_to_add_leaves_the_file_as_it_is(path: Path) -> None:
    append(path, lambda trail: build(trail, FIRST))
    before = path.read_bytes()
    assert append(path, lambda trail: build(trail, FIRST)).entry is None
    assert path.read_bytes() == before


@pytest.mark.parametrize("cut", [1, 7, 60, "every byte of a sign"])
def test_a_torn_last_line_is_set_aside_and_reported(path: Path, cut: int | str) -> None:
    whole_line = text_of(chain([{"W-12#τ": {"text": "τ = 3 N/mm²"}}])).encode()
    torn = whole_line[: whole_line.index("τ".encode()) + 1 if isinstance(cut, str) else cut]
    append(path, lambda trail: build(trail, FIRST))
    kept = path.read_bytes()
    path.write_bytes(kept + torn)

    (fault,) = load(path)[1]
    assert (fault.code, fault.severity, fault.line) == ("trail-torn", "warning", 2)
    done = append(path, lambda trail: build(trail, SECOND, hour=1))

    assert done.set_aside == path.with_name(f"trail.torn-{hashlib.sha256(torn).hexdigest()[:12]}.jsonl")
    assert done.set_aside.read_bytes() == torn
    assert path.read_bytes().startswith(kept)
    assert load(path)[1] == ()
    assert replay(load(path)[0]) == SECOND


def test_an_entry_whose_line_feed_was_lost_is_kept(path: Path) -> None:
    append(path, lambda trail: build(trail, FIRST))
    path.write_bytes(path.read_bytes()[:-1])
    done = append(path, lambda trail: build(trail, SECOND, hour=1))
    assert done.set_aside is None
    assert path.read_text("utf-8") == text_of(chain([FIRST, SECOND]))


def test_a_line_that_is_no_utf8_is_reported_and_kept(path: Path) -> None:
    append(path, lambda trail: build(trail, FIRST))
    with path.open("ab") as file:
        file.write(b'"\xff"\n')
    done = append(path, lambda trail: build(trail, SECOND, hour=1))
    assert [(fault.code, fault.line) for fault in done.faults] == [("trail-unreadable", 2)]
    assert b'"\xff"\n' in path.read_bytes()
    assert replay(load(path)[0]) == SECOND


def test_conflict_markers_stop_the_append(path: Path) -> None:
    append(path, lambda trail: build(trail, FIRST))
    path.write_text(path.read_text("utf-8") + "<<<<<<< HEAD\n", "utf-8")
    before = path.read_bytes()
    with pytest.raises(TrailConflictError, match=r"trail\.jsonl:2: .*merge=union"):
        append(path, lambda trail: build(trail, SECOND))
    assert path.read_bytes() == before


def test_an_entry_for_another_trail_is_refused(path: Path) -> None:
    append(path, lambda trail: build(trail, FIRST))
    stranger = build(Trail(), SECOND)
    with pytest.raises(ValueError, match="heads"):
        append(path, lambda _: stranger)


def test_a_disk_that_takes_half_a_line_leaves_the_trail_whole(path: Path) -> None:
    append(path, lambda trail: build(trail, FIRST))
    before = path.read_bytes()
    limits = resource.getrlimit(resource.RLIMIT_FSIZE)
    handler = signal.signal(signal.SIGXFSZ, signal.SIG_IGN)
    resource.setrlimit(resource.RLIMIT_FSIZE, (len(before) + 50, limits[1]))
    try:
        with pytest.raises(TrailWriteError, match="cannot read or write") as caught:
            append(path, lambda trail: build(trail, SECOND, hour=1))
    finally:
        resource.setrlimit(resource.RLIMIT_FSIZE, limits)
        signal.signal(signal.SIGXFSZ, handler)
    assert caught.value.cause.errno in (errno.ENOSPC, errno.EFBIG)
    assert path.read_bytes() == before
    append(path, lambda trail: build(trail, SECOND, hour=1))
    assert whole(path.read_text("utf-8")) == chain([FIRST, SECOND])


def test_a_folder_in_the_trails_place_is_said_in_words(path: Path) -> None:
    path.mkdir()
    with pytest.raises(TrailWriteError, match="is a directory"):
        append(path, lambda trail: build(trail, FIRST))
    with pytest.raises(TrailWriteError, match="is a directory"):
        load(path)


# Two builds at once


def test_a_build_waits_for_another_and_then_gives_up(path: Path) -> None:
    def meanwhile(trail: Trail) -> Entry | None:
        with pytest.raises(TrailBusyError, match="another build"):
            append(path, lambda other: build(other, SECOND), patience=0.05)
        return build(trail, FIRST)

    assert append(path, meanwhile).entry is not None


def test_a_file_that_took_the_trails_place_meanwhile_gets_the_entry(path: Path) -> None:
    """As by a checkout while a build waits: the entry must not go into the file that is no longer there."""
    append(path, lambda trail: build(trail, FIRST))
    other = path.with_name("other")
    waiting = threading.Thread(target=append, args=(path, lambda trail: build(trail, SECOND, hour=1)))

    def replace(_: Trail) -> None:
        waiting.start()
        time.sleep(0.03)
        other.write_bytes(path.read_bytes())
        other.replace(path)

    append(path, replace)
    waiting.join()
    assert replay(load(path)[0]) == SECOND


def append_often(path: Path, name: str, count: int) -> None:
    for number in range(count):
        item = {f"{name}#{number}": CHECK}
        append(path, lambda trail, item=item: build(trail, {**replay(trail), **item}))  # type: ignore[misc]


def test_all_entries_of_two_processes_survive_in_one_chain(path: Path) -> None:
    context = multiprocessing.get_context("spawn")
    builds = [context.Process(target=append_often, args=(path, name, 20)) for name in ("A", "B")]
    for process in builds:
        process.start()
    for process in builds:
        process.join()
    assert [process.exitcode for process in builds] == [0, 0]

    trail = whole(path.read_text("utf-8"))
    assert len(trail.entries) == 40
    assert replay(trail).keys() == {f"{name}#{number}" for name in "AB" for number in range(20)}
    assert [entry.parents for entry in trail.entries] == [
        (),
        *((entry.digest,) for entry in trail.entries[:-1]),
    ]
