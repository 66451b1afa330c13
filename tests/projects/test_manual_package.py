"""The manual builds into a package, and its results are those of the examples."""

from __future__ import annotations

import json
from datetime import UTC, datetime
from pathlib import Path

import pytest

from calcgen.outcome import Outcome, Request
from calcgen.pipeline import Workshop, build
from calcgen.quantities.measure import Measure, magnitude_in
from tests.projects.evaluating import evaluated_manual
from tests.projects.manual import MANUAL, Message, chapters, messages
from tests.projects.manual_values import CASES

WHEN = datetime(2026, 12, 1, tzinfo=UTC)
PROJECT = {
    "project.toml": b'title = "A project"\naxes = "eurocode"\n',
    "references.toml": b'["DWG-201"]\ntitle = "Plan"\n',
    "calcs/D-1.md": b"# Example\n",
}
USES_PROFILE = b'# Example\n\n```section main\nshape = rolled("J 200")\n```\n'
WITHOUT_EXAMPLE: dict[str, dict[str, bytes]] = {
    "no-project": {"calcs/D-1.md": b"# Example\n"},
    "no-calcs": {"project.toml": PROJECT["project.toml"]},
    "not-utf-8": PROJECT | {"calcs/D-1.md": b"# Tr\xe4ger\n"},
}


def codes_of(files: dict[str, bytes], folder: Path) -> list[str]:
    """Write a project and return the codes of what its build finds."""
    root = folder / "project"
    for path, content in files.items():
        (root / path).parent.mkdir(parents=True, exist_ok=True)
        (root / path).write_bytes(content)
    request = Request(root, folder / "package", WHEN, "A. Reed", records=False, durable=False)
    return [d.code for d in build(request, Workshop()).diagnostics]


@pytest.fixture(scope="module")
def package(tmp_path_factory: pytest.TempPathFactory) -> tuple[Outcome, Path]:
    out = tmp_path_factory.mktemp("manual") / "package"
    request = Request(MANUAL, out, WHEN, "A. Reed", records=False, durable=False)
    return build(request, Workshop()), out


def test_the_manual_builds(package: tuple[Outcome, Path]) -> None:
    outcome, out = package
    assert outcome.published
    assert outcome.diagnostics == ()
    assert all((out / f"{chapter}.html").is_file() for chapter in chapters())


def test_the_package_gives_the_same_values(package: tuple[Outcome, Path]) -> None:
    written = json.loads((package[1] / "results.json").read_text(encoding="utf-8"))["calcs"]
    for case in CASES:
        value = evaluated_manual()[case.calc].values[case.name][0]
        assert isinstance(value, Measure)
        row = {**written[case.calc]["inputs"], **written[case.calc]["values"]}[case.name]
        assert magnitude_in(value, row["unit"]) == pytest.approx(row["value"], rel=1e-11, abs=1e-15)


OF_FILES = [m for m in messages() if m.kind not in ("", "file")]


@pytest.mark.parametrize("message", OF_FILES, ids=lambda m: m.code)
def test_the_bad_file_gives_the_message_and_the_good_one_gives_none(message: Message, tmp_path: Path) -> None:
    uses = {"calcs/D-1.md": USES_PROFILE} if message.kind.startswith("profiles/") else {}
    assert message.code in codes_of(PROJECT | uses | {message.kind: message.bad.encode()}, tmp_path / "bad")
    assert codes_of(PROJECT | uses | {message.kind: message.good.encode()}, tmp_path / "good") == []


@pytest.mark.parametrize("code", WITHOUT_EXAMPLE)
def test_messages_about_a_folder_or_file_as_such(code: str, tmp_path: Path) -> None:
    assert code in codes_of(WITHOUT_EXAMPLE[code], tmp_path)


UNREADABLE = Path("/proc/self/mem")  # a file by all appearances, whose first byte cannot be read


@pytest.mark.skipif(not UNREADABLE.is_file(), reason="needs Linux's /proc")
def test_a_file_that_cannot_be_read(tmp_path: Path) -> None:
    calcs = tmp_path / "project" / "calcs"
    calcs.mkdir(parents=True)
    (calcs / "D-2.md").symlink_to(UNREADABLE)
    assert codes_of(PROJECT, tmp_path) == ["unreadable-file"]
