"""What is asked of a build, and what came of it."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import datetime
from pathlib import Path
from typing import Literal

from calcgen.text import Diagnostic


@dataclass(frozen=True)
class Request:
    """What is asked of a build.

    Attributes
    ----------
    root : the project's folder; out : where the package goes.
    when : the time recorded in the trail, with its zone; who and why : as recorded there.
    records : whether the trail gets an entry (`watch` only shows what is pending).
    durable : whether to wait until the disk has it all.
    """

    root: Path
    out: Path
    when: datetime
    who: str
    why: str | None = None
    records: bool = True
    durable: bool = True


@dataclass(frozen=True)
class Summary:
    """A calc as the command line lists it."""

    number: str
    title: str
    standing: Literal["satisfied", "exceeded", "no checks", "not evaluated", "in error"]
    governing: str
    utilisation: float | None


@dataclass(frozen=True)
class Outcome:
    """What came of a build.

    Attributes
    ----------
    published : whether the package was written; False where the project itself is at fault.
    current : whether the package already stood as it would be built.
    notes : what else to tell: a torn line of the trail set aside, changes recorded.
    """

    calcs: tuple[Summary, ...]
    diagnostics: tuple[Diagnostic, ...]
    published: bool
    current: bool = False
    notes: tuple[str, ...] = ()
    trail_at_fault: bool = False

    @property
    def failed(self) -> bool:
        """Whether there is an error."""
        standing = self.published or self.current
        return not standing or self.trail_at_fault or any(d.severity == "error" for d in self.diagnostics)

    @property
    def exceeded(self) -> bool:
        """Whether a check is exceeded."""
        return any(c.standing == "exceeded" for c in self.calcs)
