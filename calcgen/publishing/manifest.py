"""The manifest of a package: the digest of each file, and the key of the inputs that it was built from."""

from __future__ import annotations

import hashlib
import json
import os
from collections.abc import Mapping
from dataclasses import dataclass
from pathlib import Path, PurePosixPath

from calcgen import __version__

MANIFEST = "manifest.json"
PROGRAM = {"name": "calcgen", "version": __version__}

# Left in folders by file managers, by no one's wish.
_DROPPINGS = frozenset({".DS_Store", "Thumbs.db", "desktop.ini"})
_OWN_KEYS = frozenset({"files", "program"})


@dataclass(frozen=True)
class Manifest:
    """What a package says of itself.

    Attributes
    ----------
    files : path in the package, with '/', to sha256 in hexadecimal; the manifest itself is not listed.
    key : key of the build's inputs; empty when none was given.
    data : the whole manifest as read.
    """

    files: Mapping[str, str]
    key: str
    data: Mapping[str, object]


def digest_of(data: bytes) -> str:
    """Return the sha256 of `data` in hexadecimal."""
    return hashlib.sha256(data).hexdigest()


def build_key(inputs: Mapping[str, bytes], settings: Mapping[str, str] | None = None) -> str:
    """Return the key of a build: same program, inputs and settings give the same key.

    `inputs` are the files that the build reads, by path; `settings` is all else that it depends on.
    """
    stated = {
        "inputs": {path: digest_of(data) for path, data in inputs.items()},
        "program": PROGRAM,
        "settings": dict(settings or {}),
    }
    return digest_of(json.dumps(stated, sort_keys=True).encode())


def check_path(path: str) -> None:
    """Refuse a path that could leave the package or means different files on different machines.

    Raises
    ------
    ValueError
        When `path` is not relative, plain and made of '/'-separated names.
    """
    pure = PurePosixPath(path)
    plain = str(pure) == path and pure.parts and not pure.is_absolute() and ".." not in pure.parts
    if not plain or any(c in path for c in '\\:*?"<>|\0'):
        msg = f"not a path inside a package: {path!r}"
        raise ValueError(msg)


def compose(files: Mapping[str, bytes], extra: Mapping[str, object]) -> bytes:
    """Return the bytes of the manifest of `files`.

    Raises
    ------
    ValueError
        When `extra` holds a key that is the manifest's own, or a value that JSON has not.
    """
    if clash := sorted(_OWN_KEYS & extra.keys()):
        msg = f"the manifest sets these itself: {', '.join(clash)}"
        raise ValueError(msg)
    data = {
        **extra,
        "program": PROGRAM,
        "files": {path: digest_of(content) for path, content in files.items()},
    }
    return (json.dumps(data, ensure_ascii=False, sort_keys=True, indent=1, allow_nan=False) + "\n").encode()


def read_manifest(folder: Path) -> Manifest | None:
    """Return the manifest of the package in `folder`, or None when that is no package of this program."""
    try:
        data = json.loads((folder / MANIFEST).read_bytes())
        files, key, program = data["files"], data.get("key", ""), data["program"]["name"]
        for path, digest in files.items():
            check_path(path)
            if not isinstance(digest, str):
                return None
    # Whatever else may be wrong with a file of that name, it is then not ours.
    except (OSError, ValueError, LookupError, TypeError, AttributeError, RecursionError):
        return None
    return Manifest(files, key, data) if program == PROGRAM["name"] and isinstance(key, str) else None


def altered_files(folder: Path, manifest: Manifest) -> tuple[str, ...]:
    """Return the listed files that are missing or are not as they were built, sorted."""
    return tuple(
        path for path, digest in sorted(manifest.files.items()) if _digest_at(folder / path) != digest
    )


def unlisted_files(folder: Path, manifest: Manifest) -> tuple[str, ...]:
    """Return the files in the package's folder that the manifest does not list, sorted."""
    found = set()
    for parent, folders, files in os.walk(folder):
        links = [name for name in folders if Path(parent, name).is_symlink()]
        found |= {Path(parent, name).relative_to(folder).as_posix() for name in [*links, *files]}
    extra = found - manifest.files.keys() - {MANIFEST}
    return tuple(sorted(path for path in extra if PurePosixPath(path).name not in _DROPPINGS))


def is_current(destination: Path, key: str) -> bool:
    """Tell whether the package at `destination` was built from `key` and each file is still as built.

    Contents decide, never file times; whatever is doubtful is not current.
    """
    manifest = read_manifest(destination)
    return (
        manifest is not None
        and manifest.key == key != ""
        and manifest.data["program"] == PROGRAM
        and not altered_files(destination, manifest)
        and not unlisted_files(destination, manifest)
    )


def _digest_at(path: Path) -> str | None:
    try:
        with path.open("rb") as file:
            return hashlib.file_digest(file, "sha256").hexdigest()
    except OSError:
        return None
