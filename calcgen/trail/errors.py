"""Why an entry could not be appended, in words for the user; each error carries its fields."""

from __future__ import annotations

from pathlib import Path


class TrailError(Exception):
    """The trail was left as it was.

    Attributes
    ----------
    path : the trail file.
    message : one phrase.
    hint : the likely way out; may be empty.
    """

    def __init__(self, path: Path, message: str, hint: str = "") -> None:
        super().__init__(f"{message}; {hint}" if hint else message)
        self.path = path
        self.message = message
        self.hint = hint


class TrailConflictError(TrailError):
    """A merge left its markers in the trail; an entry after them could be lost when they are resolved."""

    def __init__(self, path: Path, line: int, hint: str) -> None:
        super().__init__(path, f"{path}:{line}: a merge left its conflict marker in the trail", hint)
        self.line = line


class TrailBusyError(TrailError):
    """Another build held the trail for too long."""

    def __init__(self, path: Path, waited: float) -> None:
        super().__init__(
            path,
            f"another build has been writing {path} for {waited:g} s",
            "wait for it to end, or stop it, and build again",
        )
        self.waited = waited


class TrailWriteError(TrailError):
    """The system refused to read or write: full disk, permissions and the like."""

    def __init__(self, path: Path, cause: OSError) -> None:
        reason = (cause.strerror or str(cause)).lower()
        hint = "check the disk's room and your rights to the file, and build again"
        super().__init__(path, f"cannot read or write {path}: {reason}", hint)
        self.cause = cause
