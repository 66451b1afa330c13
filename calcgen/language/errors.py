"""A fault of the user's text, on its way from where it is seen to the line that it spoils."""

from __future__ import annotations

from calcgen.text import Related, Report, Span


class ReadingError(Exception):
    """Raised inside this room only: each line catches its own and hands it to the report."""

    def __init__(
        self,
        code: str,
        span: Span,
        message: str,
        *,
        hint: str = "",
        label: str = "",
        related: tuple[Related, ...] = (),
    ) -> None:
        super().__init__(message)
        self.code = code
        self.span = span
        self.message = message
        self.hint = hint
        self.label = label
        self.related = related

    def report_to(self, report: Report) -> None:
        """Add the fault to a report."""
        report.error(
            self.code, self.span, self.message, hint=self.hint, label=self.label, related=self.related
        )
