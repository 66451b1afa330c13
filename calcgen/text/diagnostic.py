"""A diagnostic is data; how it looks on a terminal or a page is decided elsewhere."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from calcgen.text.source import SourceFile, Span

Severity = Literal["error", "warning"]


@dataclass(frozen=True)
class Related:
    """A second place that explains the first: a definition, the other reading."""

    span: Span
    label: str


@dataclass(frozen=True)
class Diagnostic:
    """One fault of the user's text.

    Attributes
    ----------
    code : stable name of the kind of fault; the manual explains each.
    message : one phrase.
    span : the place, in `source`.
    label : a few words under the caret; may be empty.
    hint : the likely fix; may be empty.
    """

    code: str
    severity: Severity
    message: str
    source: SourceFile
    span: Span
    label: str = ""
    hint: str = ""
    related: tuple[Related, ...] = ()

    @property
    def line(self) -> int:
        """Line of the fault, counted from 1."""
        return self.source.place(self.span.start)[0]

    @property
    def column(self) -> int:
        """Column of the fault, counted from 1."""
        return self.source.place(self.span.start)[1]

    @property
    def order(self) -> tuple[str, int, int, str]:
        """Key that sorts diagnostics by file and place."""
        return (self.source.path, self.span.start, self.span.end, self.message)


class Report:
    """Collects the diagnostics of one source file while a stage reads it."""

    def __init__(self, source: SourceFile) -> None:
        self.source = source
        self._found: list[Diagnostic] = []

    def without(self, codes: frozenset[str]) -> Report:
        """Return a report that adds to this one, and passes over the faults of some codes."""
        return _PartialReport(self, codes)

    def add(self, diagnostic: Diagnostic) -> None:
        """Add a diagnostic."""
        self._found.append(diagnostic)

    def error(
        self,
        code: str,
        span: Span,
        message: str,
        *,
        hint: str = "",
        label: str = "",
        related: tuple[Related, ...] = (),
    ) -> None:
        """Add an error."""
        self.add(error(code, self.source, span, message, hint=hint, label=label, related=related))

    def warning(self, code: str, span: Span, message: str, *, hint: str = "", label: str = "") -> None:
        """Add a warning."""
        self.add(warning(code, self.source, span, message, hint=hint, label=label))

    @property
    def diagnostics(self) -> tuple[Diagnostic, ...]:
        """What was found, sorted by place, each once."""
        return tuple(sorted(dict.fromkeys(self._found), key=lambda d: d.order))

    @property
    def failed(self) -> bool:
        """Whether an error was found."""
        return any(d.severity == "error" for d in self._found)


class _PartialReport(Report):
    """A report that hands on to another what is not left out."""

    def __init__(self, whole: Report, left_out: frozenset[str]) -> None:
        super().__init__(whole.source)
        self._whole = whole
        self._left_out = left_out

    def add(self, diagnostic: Diagnostic) -> None:
        if diagnostic.code not in self._left_out:
            super().add(diagnostic)
            self._whole.add(diagnostic)


def error(
    code: str,
    source: SourceFile,
    span: Span,
    message: str,
    *,
    hint: str = "",
    label: str = "",
    related: tuple[Related, ...] = (),
) -> Diagnostic:
    """Return an error."""
    return Diagnostic(code, "error", message, source, span, label, hint, related)


def warning(
    code: str, source: SourceFile, span: Span, message: str, *, hint: str = "", label: str = ""
) -> Diagnostic:
    """Return a warning."""
    return Diagnostic(code, "warning", message, source, span, label, hint)
