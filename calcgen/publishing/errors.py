"""Why a package could not be put in place, in words for the user; each error carries its fields."""

from __future__ import annotations

import errno
from pathlib import Path

_HINTS = {
    errno.ENOSPC: "make room on the disk and build again",
    errno.EDQUOT: "your quota on this disk is used up: make room and build again",
    errno.EACCES: "check that you may write there, and that no other program has the package open",
    errno.EPERM: "check that you may write there, and that no other program has the package open",
    errno.EROFS: "the disk is read-only: choose another place with --out",
    errno.EBUSY: "the folder is in use or a mount point: choose a folder inside it with --out",
    errno.ENAMETOOLONG: "choose a shorter place with --out",
}


class PublishError(Exception):
    """A package was not put in place; the one that stood there still does.

    Attributes
    ----------
    path : the file or folder concerned.
    message : one phrase.
    hint : the likely way out; may be empty.
    """

    def __init__(self, path: Path, message: str, hint: str = "") -> None:
        super().__init__(f"{message}; {hint}" if hint else message)
        self.path = path
        self.message = message
        self.hint = hint


class NotAPackageError(PublishError):
    """The destination holds something that calcgen did not build."""

    def __init__(self, path: Path) -> None:
        super().__init__(
            path,
            f"{path} is not a calcgen package and not an empty folder, so it is not replaced",
            "choose another place with --out, or move what is there away",
        )


class UnlistedFilesError(PublishError):
    """The package there holds files that calcgen did not put in it, and replacing it would lose them."""

    def __init__(self, path: Path, names: tuple[str, ...]) -> None:
        shown = ", ".join(names[:3]) + (f" and {len(names) - 3} more" if len(names) > 3 else "")
        super().__init__(
            path,
            f"{path} holds files that are no part of the package: {shown}",
            "move them elsewhere and build again",
        )
        self.names = names


class PackageBusyError(PublishError):
    """Another build held the package for too long."""

    def __init__(self, path: Path, waited: float) -> None:
        super().__init__(
            path,
            f"another build has been writing {path} for {waited:g} s",
            "wait for it to end, or stop it, and build again",
        )
        self.waited = waited


class WriteError(PublishError):
    """The system refused to write: full disk, permissions and the like."""

    def __init__(self, path: Path, cause: OSError) -> None:
        reason = (cause.strerror or str(cause)).lower()
        super().__init__(path, f"cannot write {path}: {reason}", _HINTS.get(cause.errno or 0, ""))
        self.cause = cause
