"""Commands as a new user runs them: exit codes, what is printed, typing mistakes."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest
from click.testing import CliRunner, Result

from calcgen.cli import main


def run(*arguments: str | Path) -> Result:
    return CliRunner().invoke(main, [str(a) for a in arguments])


@pytest.fixture
def project(tmp_path: Path) -> Path:
    folder = tmp_path / "landing"
    assert run("start", folder).exit_code == 0
    return folder


def edit(project: Path, old: str, new: str) -> None:
    calc = project / "calcs" / "B-01.md"
    text = calc.read_text(encoding="utf-8")
    assert old in text
    calc.write_text(text.replace(old, new), encoding="utf-8")


def test_start_build_and_build_again(project: Path) -> None:
    first = run("build", project)
    assert first.exit_code == 0, first.output
    assert "B-01  satisfied" in first.output
    assert "built" in first.output
    assert (project / "package" / "index.html").is_file()
    again = run("build", project)
    assert again.exit_code == 0
    assert "is up to date" in again.output
    assert "B-01  satisfied" in again.output


def test_an_edit_builds_again_and_is_recorded_with_its_reason(project: Path) -> None:
    run("build", project)
    edit(project, "q_k  = 3.0 kPa", "q_k  = 4.0 kPa")
    result = run("build", project, "--because", "crowd load asked for by the client")
    assert result.exit_code == 0
    assert "recorded" in result.output
    entries = [
        json.loads(line) for line in (project / "trail.jsonl").read_text(encoding="utf-8").splitlines()
    ]
    assert len(entries) == 2
    assert entries[1]["why"] == "crowd load asked for by the client"
    changed = {c["address"]: (c["before"], c["after"]) for c in entries[1]["changes"]}
    before, after = changed["B-01#q_k"]
    assert (before["value"], after["value"]) == (3.0, 4.0)
    assert after["unit"] == "kPa"
    assert changed["B-01#check-bending-at-midspan"][1]["utilisation"] > 0.7


def test_strict_fails_on_an_exceeded_check_only(project: Path) -> None:
    assert run("build", project, "--strict").exit_code == 0
    edit(project, "q_k  = 3.0 kPa", "q_k  = 30 kPa")
    assert run("build", project).exit_code == 0
    result = run("build", project, "--strict")
    assert result.exit_code == 1
    assert "exceeded" in result.output
    assert run("build", project, "--strict").exit_code == 1  # up to date, and still exceeded


def test_an_error_exits_1_and_the_package_shows_no_old_number(project: Path) -> None:
    run("build", project)
    edit(project, "main.W_pl_y*f_y", "main.W_ply*f_y")
    result = run("build", project)
    assert result.exit_code == 1
    assert "calcs/B-01.md:" in result.output
    assert "the nearest property is 'W_pl_y'" in result.output
    page = (project / "package" / "B-01.html").read_text(encoding="utf-8")
    assert "in error" in page
    results = json.loads((project / "package" / "results.json").read_text(encoding="utf-8"))
    assert "M_c_Rd" not in results["calcs"]["B-01"]["values"]
    assert run("build", project).exit_code == 1  # an unchanged error is an error still


def test_a_broken_project_file_leaves_the_last_package(project: Path) -> None:
    run("build", project)
    page = (project / "package" / "index.html").read_bytes()
    (project / "project.toml").write_text("title = ", encoding="utf-8")
    result = run("build", project)
    assert result.exit_code == 1
    assert "project.toml:1:" in result.output
    assert (project / "package" / "index.html").read_bytes() == page


def test_the_same_sources_give_the_same_bytes(project: Path, tmp_path: Path) -> None:
    run("build", project)
    trail = (project / "trail.jsonl").read_bytes()
    run("build", project, "--out", tmp_path / "a")
    (tmp_path / "b" / "x").mkdir(parents=True)
    run("build", project, "--out", tmp_path / "b" / "x" / "package")
    assert (project / "trail.jsonl").read_bytes() == trail
    first = {
        p.relative_to(tmp_path / "a"): p.read_bytes() for p in (tmp_path / "a").rglob("*") if p.is_file()
    }
    second = tmp_path / "b" / "x" / "package"
    assert first == {p.relative_to(second): p.read_bytes() for p in second.rglob("*") if p.is_file()}


OFFICE = """\
# axes = eurocode
# shape = rectangle
designation,h [mm],b [mm]
plank 50,50,200
plank 75,75,{}
"""


def test_profiles_lists_families_and_sections(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.chdir(tmp_path)
    listed = run("profiles")
    assert listed.exit_code == 0
    assert "IPE " in listed.output
    sections = run("profiles", "ipe", "2?0")  # words are joined
    assert sections.exit_code == 0
    assert sections.output == run("profiles", "IPE 2?0").output
    assert [line.split()[1] for line in sections.output.splitlines()[3:]] == ["200", "220", "240", "270"]
    assert "about the horizontal axis y-y" in sections.output
    manual = Path(__file__).parent.parent / "projects" / "manual" / "calcs" / "M-17-commands.md"
    assert f"\n```\n{sections.output}```\n" in manual.read_text(encoding="utf-8")


def test_profiles_holds_those_of_the_project(project: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    (project / "profiles").mkdir()
    (project / "profiles" / "timber.csv").write_text(OFFICE.format(200), encoding="utf-8")
    listed = run("profiles", "plank *", "--project", project)
    assert listed.exit_code == 0, listed.output
    assert "not published" in listed.output  # its properties are of the outline
    assert "timber" in run("profiles", "--project", project).output
    assert run("profiles", "plank *").exit_code == 1
    monkeypatch.chdir(project)
    assert run("profiles", "plank *").output == listed.output


def test_profiles_lists_what_is_sound_beside_a_fault(project: Path) -> None:
    (project / "profiles").mkdir()
    (project / "profiles" / "timber.csv").write_text(OFFICE.format("2OO"), encoding="utf-8")
    listed = run("profiles", "plank *", "--project", project)
    assert listed.exit_code == 1
    assert "profiles/timber.csv:5:13: error: '2OO' is not a number" in listed.output
    assert "plank 50" in listed.output


@pytest.mark.parametrize(
    ("pattern", "hint"),
    [("IPE 245", "the nearest are IPE 240,"), ("IPF *", "the nearest are IPE"), ("oak", "families are C,")],
)
def test_profiles_without_a_match_tells_what_is_near(pattern: str, hint: str) -> None:
    result = run("profiles", pattern)
    assert result.exit_code == 1
    assert f"no section matches '{pattern}'; {hint}" in result.output


@pytest.mark.parametrize(
    ("arguments", "said"),
    [
        (["profiles", "IPE *", "--project", "no-such-folder"], "there is no folder"),
        (["biuld"], "Did you mean 'build'?"),
        (["build", "--becuase", "x"], "--because"),
        (["build", "no-such-folder"], "there is no folder"),
        (["watch", "--port", "notanumber"], "notanumber"),
    ],
)
def test_wrong_usage_exits_2_with_a_hint(arguments: list[str], said: str) -> None:
    result = run(*arguments)
    assert result.exit_code == 2
    assert said in result.output


def test_a_folder_without_project_is_wrong_usage(tmp_path: Path) -> None:
    result = run("build", tmp_path)
    assert result.exit_code == 2
    assert "no project.toml" in result.output


def test_a_near_folder_is_named(project: Path) -> None:
    assert "did you mean" in run("build", project.parent / "landnig").output


def test_start_overwrites_nothing(project: Path) -> None:
    result = run("start", project)
    assert result.exit_code == 2
    assert "not empty" in result.output


def test_a_folder_that_is_no_package_is_not_replaced(project: Path, tmp_path: Path) -> None:
    mine = tmp_path / "mine"
    mine.mkdir()
    (mine / "letter.txt").write_text("keep", encoding="utf-8")
    result = run("build", project, "--out", mine)
    assert result.exit_code == 1
    assert "error" in result.output
    assert (mine / "letter.txt").read_text(encoding="utf-8") == "keep"


def test_as_a_module_in_a_process_of_its_own() -> None:
    found = subprocess.run(
        [sys.executable, "-m", "calcgen", "--version"], capture_output=True, text=True, check=True
    )
    assert found.stdout.startswith("calcgen")
