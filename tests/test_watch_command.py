"""`calcgen watch` in a process of its own: saves, broken files, calcs that come and go, Ctrl-C."""

from __future__ import annotations

import os
import queue
import re
import signal
import subprocess
import sys
import threading
import time
import urllib.error
import urllib.request
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path

import pytest

from calcgen.start import start

PATIENCE = 30.0  # seconds; a rebuild takes a fraction of one, a busy machine much longer


@dataclass
class Watched:
    """A running `watch` with the lines it prints."""

    process: subprocess.Popen[str]
    project: Path
    lines: queue.Queue[str]
    url: str = ""

    def expect(self, pattern: str) -> str:
        """Wait for a line that holds the pattern; return it."""
        seen: list[str] = []
        deadline = time.monotonic() + PATIENCE
        while time.monotonic() < deadline:
            try:
                line = self.lines.get(timeout=0.2)
            except queue.Empty:
                assert self.process.poll() is None, seen
                continue
            seen.append(line)
            if re.search(pattern, line):
                return line
        raise AssertionError((pattern, seen))

    def page(self, name: str) -> str:
        with urllib.request.urlopen(f"{self.url}/{name}", timeout=10) as answer:  # noqa: S310  our own preview
            text: str = answer.read().decode()
        return text

    @property
    def calc(self) -> Path:
        return self.project / "calcs" / "B-01.md"

    def edit(self, old: str, new: str) -> None:
        text = self.calc.read_text(encoding="utf-8")
        assert old in text
        self.calc.write_text(text.replace(old, new), encoding="utf-8")


@contextmanager
def watching(project: Path) -> Iterator[Watched]:
    command = [sys.executable, "-u", "-m", "calcgen", "watch", str(project), "--port", "0"]
    process = subprocess.Popen(
        command, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True, start_new_session=True
    )
    lines: queue.Queue[str] = queue.Queue()

    def read() -> None:
        assert process.stdout is not None
        for line in process.stdout:
            lines.put(line)

    reader = threading.Thread(target=read, daemon=True)
    reader.start()
    watched = Watched(process, project, lines)
    try:
        found = re.search(r"http://[\d.:]+", watched.expect("http://"))
        assert found
        watched.url = found[0]
        yield watched
    finally:
        if process.poll() is None:
            process.kill()
        process.wait()
        reader.join(timeout=5)
        assert process.stdout is not None
        process.stdout.close()


@pytest.fixture
def watched(tmp_path: Path) -> Iterator[Watched]:
    project = tmp_path / "landing"
    start(project)
    with watching(project) as found:
        found.expect("1 satisfied")
        yield found


def test_a_save_reaches_the_page_and_nothing_is_recorded(watched: Watched) -> None:
    assert "3.000" in watched.page("B-01.html")
    watched.edit("q_k  = 3.0 kPa", "q_k  = 3.7 kPa")
    watched.expect(r"ms .*1 (satisfied|exceeded).*B-01\.md")
    assert "3.700" in watched.page("B-01.html")
    assert not (watched.project / "trail.jsonl").exists()


def test_every_kind_of_broken_file_is_survived(watched: Watched) -> None:
    good = watched.calc.read_bytes()
    for broken in (
        b"",
        b"\xff\xfe\x00",
        b"# T\n```working\nx = (1 +\n```\n",
        b"```" * 5000,
        b"# T\n```inputs\n" + b"(" * 9000,
    ):
        watched.calc.write_bytes(broken)
        watched.expect(r" ms ")
    watched.calc.write_bytes(good)
    watched.expect("1 satisfied")
    settings = watched.project / "project.toml"
    text = settings.read_bytes()
    settings.write_bytes(b"title = ")
    watched.expect("not built")
    page = watched.page("B-01.html")
    assert "Landing beam" in page  # the last good package is still served, and says that it is old
    assert re.search(r">Not rebuilt since \d\d:\d\d:\d\d: project\.toml:1:\d+: error: ", page)
    settings.write_bytes(text)
    watched.expect("1 satisfied")
    assert "Not rebuilt" not in watched.page("B-01.html")


def test_a_save_by_rename_and_calcs_that_come_and_go(watched: Watched) -> None:
    temporary = watched.calc.with_name("B-01.md.tmp")
    temporary.write_text(
        watched.calc.read_text(encoding="utf-8").replace("3.0 kPa", "2.0 kPa"), encoding="utf-8"
    )
    temporary.replace(watched.calc)
    watched.expect(r"B-01\.md")
    assert "2.000" in watched.page("B-01.html")
    second = watched.project / "calcs" / "B-02.md"
    second.write_text("# Second\n\n```inputs\nL of B-01\n```\n", encoding="utf-8")
    watched.expect("1 no checks, 1 satisfied")
    assert "4.200" in watched.page("B-02.html")
    second.rename(second.with_name("B-03.md"))
    watched.expect(r"B-0[23]\.md")
    assert "Second" in watched.page("B-03.html")
    second.with_name("B-03.md").unlink()
    watched.expect(r" 1 satisfied")
    with pytest.raises(urllib.error.HTTPError) as fault:
        watched.page("B-03.html")
    fault.value.close()


def test_what_depends_on_a_change_is_rebuilt_and_what_is_fed_by_an_error_is_not_evaluated(
    watched: Watched,
) -> None:
    second = watched.project / "calcs" / "B-02.md"
    second.write_text("# Second\n\n```inputs\nL of B-01\n```\n", encoding="utf-8")
    watched.expect("1 no checks, 1 satisfied")
    watched.edit("L    = 4.2 m", "L    = 4.3 m")
    watched.expect(" ms ")
    assert "4.300" in watched.page("B-02.html")
    watched.edit("L    = 4.3 m", "L    = 4.3 kN")
    watched.expect("1 in error, 1 not evaluated")
    assert "4.300" not in watched.page("B-02.html")


@pytest.mark.skipif(os.name == "nt", reason="no SIGINT to another process there")
def test_ctrl_c_ends_it_cleanly(watched: Watched) -> None:
    watched.process.send_signal(signal.SIGINT)
    assert watched.process.wait(timeout=PATIENCE) == 0
    watched.expect("ended") if watched.lines.qsize() else None
