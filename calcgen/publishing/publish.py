"""Writes a package beside its destination and puts it there in one step.

The steps, with what a crash leaves after each; `recover` and the next `publish` take it from there:

1. write the new package into the staging folder: the old package stands;
2. rename the old package aside: no package stands, the old one is whole under another name;
3. rename the staging folder to the destination: the new package stands;
4. delete the old package.
"""

from __future__ import annotations

import os
import shutil
from collections.abc import Iterator, Mapping
from contextlib import contextmanager
from dataclasses import dataclass
from pathlib import Path, PurePosixPath

from calcgen.disk import sync_folder
from calcgen.publishing.errors import NotAPackageError, PackageBusyError, UnlistedFilesError, WriteError
from calcgen.publishing.lock import locked
from calcgen.publishing.manifest import MANIFEST, check_path, compose, read_manifest, unlisted_files

PATIENCE = 10.0  # seconds to wait for another build


@dataclass(frozen=True)
class _Places:
    """The destination and its neighbours; the names beside it are fixed, since the lock lets in one build."""

    destination: Path
    staging: Path
    old: Path
    lock: Path

    @classmethod
    def of(cls, destination: Path) -> _Places:
        # A link to a folder is followed, so that the link stays and the folder it means is replaced.
        real = destination.resolve()
        if not real.name:  # the root of a disk has no beside
            raise NotAPackageError(real)
        beside = [real.with_name(f".{real.name}.calcgen-{role}") for role in ("staging", "old", "lock")]
        return cls(real, *beside)


def publish(
    files: Mapping[str, bytes],
    destination: Path,
    manifest_extra: Mapping[str, object],
    *,
    durable: bool = True,
    patience: float = PATIENCE,
) -> None:
    """Make `destination` a package of exactly these files and their manifest, or leave it as it was.

    Parameters
    ----------
    files : contents by path in the package, with '/'.
    manifest_extra : more of the manifest: `key` (of the inputs, see `build_key`), `sources` (digests by
        path), `trail_head` (digest of the trail's last entry), and what else JSON can hold.
    durable : wait until the disk has it all, so that even a power cut leaves a whole package. Without, a
        power cut soon after can leave damaged files, which `is_current` finds.
    patience : seconds to wait for another build that is writing the same package.

    Raises
    ------
    NotAPackageError, UnlistedFilesError, PackageBusyError, WriteError
        Each a PublishError; the package that stood at the destination still does.
    ValueError
        When a path or the manifest is malformed: a fault of the program, found before anything is written.
    """
    contents = _contents(files, manifest_extra)
    places = _Places.of(destination)
    with _held(places, patience):
        _recover(places)
        _refuse_what_is_not_ours(places.destination)
        try:
            _stage(contents, places.staging, durable=durable)
            _replace(places)
        finally:
            shutil.rmtree(places.staging, ignore_errors=True)
        if durable:
            sync_folder(places.destination.parent)
        shutil.rmtree(places.old, ignore_errors=True)


def recover(destination: Path, *, patience: float = PATIENCE) -> None:
    """Bring back the last package where a crash fell between the two renames, and clear leftovers.

    `publish` does so by itself; a build calls this first, so that a package stands even if the build fails.

    Raises
    ------
    PackageBusyError, WriteError
    """
    places = _Places.of(destination)
    if places.old.exists() or places.staging.exists():
        with _held(places, patience):
            _recover(places)


def _contents(files: Mapping[str, bytes], extra: Mapping[str, object]) -> dict[str, bytes]:
    for path in files:
        check_path(path)
        over = {str(parent) for parent in PurePosixPath(path).parents} & files.keys()
        if over or path == MANIFEST:
            msg = f"two things of one name in the package: {path!r}"
            raise ValueError(msg)
    return {**dict(sorted(files.items())), MANIFEST: compose(files, extra)}


@contextmanager
def _held(places: _Places, patience: float) -> Iterator[None]:
    """Hold the destination's lock; faults of the system come out as errors in words."""
    try:
        places.destination.parent.mkdir(parents=True, exist_ok=True)
        with locked(places.lock, patience):
            yield
    except TimeoutError as error:
        raise PackageBusyError(places.destination, patience) from error
    except OSError as error:
        raise WriteError(Path(error.filename or places.destination), error) from error


def _recover(places: _Places) -> None:
    if places.old.exists():
        if _is_free(places.destination):
            if places.destination.exists():
                places.destination.rmdir()
            places.old.rename(places.destination)
        elif read_manifest(places.destination):
            shutil.rmtree(places.old)
    if places.staging.exists():
        shutil.rmtree(places.staging)


def _is_free(destination: Path) -> bool:
    """Tell whether nothing stands there that a package could replace or lose."""
    return not destination.exists() or (destination.is_dir() and not any(destination.iterdir()))


def _refuse_what_is_not_ours(destination: Path) -> None:
    if _is_free(destination):
        return
    manifest = read_manifest(destination)
    if manifest is None:
        raise NotAPackageError(destination)
    if names := unlisted_files(destination, manifest):
        raise UnlistedFilesError(destination, names)


def _stage(contents: Mapping[str, bytes], staging: Path, *, durable: bool) -> None:
    staging.mkdir()
    for path, content in contents.items():
        target = staging / path
        target.parent.mkdir(parents=True, exist_ok=True)
        try:
            with target.open("xb") as file:
                file.write(content)
                if durable:
                    file.flush()
                    os.fsync(file.fileno())
        except OSError as error:
            # A failed write names no file of its own accord.
            error.filename = error.filename or str(target)
            raise
    if durable:
        for parent, _, _ in os.walk(staging):
            sync_folder(Path(parent))


def _replace(places: _Places) -> None:
    try:
        if places.destination.exists():
            places.destination.rename(places.old)
        places.staging.rename(places.destination)
    except BaseException:  # Ctrl-C as well
        if places.old.exists() and not places.destination.exists():
            places.old.rename(places.destination)
        raise
