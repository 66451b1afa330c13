"""A block of which nothing can be shown."""

from __future__ import annotations

from dataclasses import dataclass

from calcgen.language.calc import FailedBlock
from calcgen.site.context import Context


@dataclass(frozen=True)
class FailedView:
    """The text of a block as typed, with the line on which it starts."""

    kind: str
    text: str
    line: int
    template: str = "blocks/failed.html"


def failed_view(block: FailedBlock, context: Context) -> FailedView:
    """Return a block that failed."""
    start = block.span.start
    whole = next(s.span for s in context.calc.calc.segments if s.span.start <= start < s.span.end)
    return FailedView(block.kind, context.source.slice(whole), context.source.line_number(whole))
