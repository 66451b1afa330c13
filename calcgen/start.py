"""`calcgen start`: a small project that builds, copied into a new folder."""

from __future__ import annotations

from importlib.resources import files
from importlib.resources.abc import Traversable
from pathlib import Path


class FolderNotEmptyError(Exception):
    """The folder that a new project should go into holds something already."""


def start(folder: Path) -> tuple[str, ...]:
    """Write the starter project into `folder`, new or empty; return the files written.

    Raises
    ------
    FolderNotEmptyError
        When the folder holds something: nothing is overwritten.
    OSError
        When the folder cannot be written.
    """
    if folder.exists() and (not folder.is_dir() or any(folder.iterdir())):
        raise FolderNotEmptyError(folder)
    written = []
    for path, content in sorted(_contents(files("calcgen") / "starter").items()):
        target = folder / path
        target.parent.mkdir(parents=True, exist_ok=True)
        target.write_bytes(content)
        written.append(path)
    return tuple(written)


def _contents(folder: Traversable, prefix: str = "") -> dict[str, bytes]:
    found: dict[str, bytes] = {}
    for item in folder.iterdir():
        if item.is_dir():
            found |= _contents(item, f"{prefix}{item.name}/")
        elif item.name.endswith((".md", ".toml")):
            found[f"{prefix}{item.name}"] = item.read_bytes()
    return found
