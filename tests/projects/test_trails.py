"""The projects that ship with the program agree with their trails: building them records nothing."""

from __future__ import annotations

import shutil
from pathlib import Path

import pytest
from click.testing import CliRunner

from calcgen.cli import main
from calcgen.trail import TRAIL, load, replay

PROJECTS = Path(__file__).parents[2] / "projects"


@pytest.mark.parametrize("name", ["heron-lock", "mill-loft", "manual"])
def test_a_shipped_project_builds_and_records_nothing(name: str, tmp_path: Path) -> None:
    project = tmp_path / name
    shutil.copytree(PROJECTS / name, project, ignore=shutil.ignore_patterns("package"))
    before = (project / TRAIL).read_bytes()
    result = CliRunner().invoke(main, ["build", str(project)])
    assert result.exit_code == 0, result.output
    assert "warning" not in result.output
    assert (project / TRAIL).read_bytes() == before, "build it with --because and commit its trail"


@pytest.mark.parametrize("name", ["heron-lock", "mill-loft", "manual"])
def test_its_trail_is_whole(name: str) -> None:
    trail, faults = load(PROJECTS / name / TRAIL)
    assert faults == ()
    assert all(entry.intact and entry.why for entry in trail.entries)


def test_the_history_of_heron_lock_is_worth_reading() -> None:
    trail, _ = load(PROJECTS / "heron-lock" / TRAIL)
    assert len(trail.entries) >= 5
    exceeded = []
    for entry in trail.order:
        state = replay(trail, entry.digest)
        exceeded.append([a for a, i in state.items() if i["kind"] == "check" and not i["satisfied"]])
    assert exceeded[-1] == ["P-05#check-bending-at-the-wall"]
    assert len(max(exceeded, key=len)) > 1  # a raised load exceeded more, and one was put right
