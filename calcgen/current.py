"""Tells whether a package is as a build would make it, from digests alone and without loading the stages."""

from __future__ import annotations

import hashlib
from collections.abc import Iterable
from pathlib import Path

from calcgen.outcome import Outcome, Request, Summary
from calcgen.publishing import build_key, is_current, read_manifest

_READ = ("project.toml", "references.toml", "trail.jsonl", "calcs/*.md", "profiles/*.csv")


def key_of(root: Path, images: Iterable[str], *, records: bool) -> str:
    """Return the key of a build: a digest of every file it reads, of the program, and of what is asked."""
    paths = {p.relative_to(root).as_posix() for pattern in _READ for p in root.glob(pattern) if p.is_file()}
    inputs = {path: _bytes(root / path) for path in sorted(paths | set(images))}
    return build_key(inputs, {"records": str(records), "program": _program()})


def _bytes(path: Path) -> bytes:
    """Return what is in a file; nothing where it is missing or cannot be read, which is said elsewhere."""
    try:
        return path.read_bytes()
    except OSError:
        return b""


def _program() -> str:
    """Return the digest of the program itself: a version number does not tell an edited template."""
    package = Path(__file__).parent
    digest = hashlib.sha256()
    for folder in (package, package.parent / "site_templates"):
        for path in sorted(p for p in folder.rglob("*") if p.is_file() and "__pycache__" not in p.parts):
            digest.update(path.relative_to(folder).as_posix().encode() + b"\0" + path.read_bytes())
    return digest.hexdigest()


def standing_package(request: Request) -> Outcome | None:
    """Return the outcome of the package that stands, where it is current and nothing was to be told of it.

    Whatever is doubtful is not current: a file that differs, a diagnostic that has to be shown again.
    """
    manifest = read_manifest(request.out)
    if manifest is None or manifest.data.get("clean") is not True or not request.records:
        return None
    images, rows = manifest.data.get("images"), manifest.data.get("calcs")
    if not isinstance(images, list) or not isinstance(rows, list):
        return None
    try:
        if not is_current(request.out, key_of(request.root, map(str, images), records=True)):
            return None
        return Outcome(tuple(Summary(**row) for row in rows), (), published=False, current=True)
    except (OSError, TypeError):
        return None
