"""What a package says of itself, and when it counts as current."""

from __future__ import annotations

import json
from collections.abc import Callable
from pathlib import Path

import pytest

from calcgen.publishing import MANIFEST, altered_files, build_key, is_current, publish, read_manifest

FILES = {"index.html": b"<p>cover</p>", "calcs/W-12.html": b"<p>W-12</p>"}


@pytest.fixture
def package(tmp_path: Path) -> Path:
    folder = tmp_path / "package"
    publish(FILES, folder, {"key": "k1", "trail_head": "abc"}, durable=False)
    return folder


def test_manifest_lists_program_extra_and_digest_of_each_file(package: Path) -> None:
    manifest = json.loads((package / MANIFEST).read_bytes())
    assert manifest["program"]["name"] == "calcgen"
    assert manifest["key"] == "k1"
    assert manifest["trail_head"] == "abc"
    # SHA-256 of the bytes, from coreutils: printf '<p>W-12</p>' | sha256sum
    expected = "f56c95e5f0cc425b7b86b24982262f7b90cf701f13be331ad4f442da996e16b8"
    assert manifest["files"]["calcs/W-12.html"] == expected
    assert list(manifest["files"]) == sorted(FILES)


def test_same_input_gives_same_bytes(package: Path, tmp_path: Path) -> None:
    other = tmp_path / "other"
    publish(dict(reversed(FILES.items())), other, {"trail_head": "abc", "key": "k1"}, durable=False)
    for path in [*FILES, MANIFEST]:
        assert (other / path).read_bytes() == (package / path).read_bytes()


def test_a_fresh_package_is_current_for_its_key_alone(package: Path) -> None:
    assert is_current(package, "k1")
    assert not is_current(package, "k2")
    assert not is_current(package, "")
    assert not is_current(package.parent / "absent", "k1")


def rewrite_manifest(**changed: object) -> Callable[[Path], object]:
    def apply(folder: Path) -> None:
        data = json.loads((folder / MANIFEST).read_bytes())
        (folder / MANIFEST).write_text(json.dumps({**data, **changed}))

    return apply


DOUBTFUL: dict[str, Callable[[Path], object]] = {
    "file altered": lambda p: (p / "index.html").write_bytes(b"<p>cover!</p>"),
    "same size, other byte": lambda p: (p / "index.html").write_bytes(b"<p>kover</p>"),
    "file missing": lambda p: (p / "calcs/W-12.html").unlink(),
    "file added": lambda p: (p / "calcs/extra.html").write_bytes(b""),
    "manifest missing": lambda p: (p / MANIFEST).unlink(),
    "manifest cut short": lambda p: (p / MANIFEST).write_bytes((p / MANIFEST).read_bytes()[:-9]),
    "manifest no object": lambda p: (p / MANIFEST).write_text("[]"),
    "manifest nested deep": lambda p: (p / MANIFEST).write_text("[" * 100_000),
    "manifest of another program": rewrite_manifest(program={"name": "other", "version": "1"}),
    "manifest of another version": rewrite_manifest(program={"name": "calcgen", "version": "0.0.0"}),
    "manifest without key": rewrite_manifest(key=None),
    "path out of the package": rewrite_manifest(files={"../x": "00"}),
}


@pytest.mark.parametrize("damage", DOUBTFUL.values(), ids=DOUBTFUL.keys())
def test_a_doubtful_package_is_not_current(package: Path, damage: Callable[[Path], object]) -> None:
    damage(package)
    assert not is_current(package, "k1")


def test_a_file_managers_droppings_are_no_doubt(package: Path) -> None:
    (package / ".DS_Store").write_bytes(b"\0")
    assert is_current(package, "k1")


def test_altered_files_are_named(package: Path) -> None:
    (package / "index.html").write_bytes(b"other")
    (package / "calcs/W-12.html").unlink()
    manifest = read_manifest(package)
    assert manifest is not None
    assert altered_files(package, manifest) == ("calcs/W-12.html", "index.html")


def test_the_key_depends_on_paths_contents_and_settings_but_not_on_their_order() -> None:
    key = build_key({"a": b"1", "b": b"2"}, {"out": "x"})
    assert key == build_key({"b": b"2", "a": b"1"}, {"out": "x"})
    others = [
        build_key({"a": b"2", "b": b"1"}, {"out": "x"}),
        build_key({"a": b"1", "b": b"2"}, {"out": "y"}),
        build_key({"a": b"1"}, {"out": "x"}),
    ]
    assert len({key, *others}) == 4


@pytest.mark.parametrize("extra", [{"files": {}}, {"program": "x"}, {"x": float("nan")}])
def test_extra_that_the_manifest_cannot_hold_is_refused(tmp_path: Path, extra: dict[str, object]) -> None:
    with pytest.raises(ValueError, match=r"manifest|JSON"):
        publish(FILES, tmp_path / "package", extra)
    assert not list(tmp_path.iterdir())
