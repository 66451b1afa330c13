"""Prose between the live blocks."""

from __future__ import annotations

from dataclasses import dataclass

from markupsafe import Markup

from calcgen.evaluation.results.lines import ProseResult
from calcgen.site.context import Context


@dataclass(frozen=True)
class ProseView:
    """A run of prose."""

    anchor: str
    html: Markup
    template: str = "blocks/prose.html"


def prose_view(result: ProseResult, context: Context) -> ProseView:
    """Return a run of prose; runs are rendered in order, since headings count on."""
    line = context.source.line_number(result.prose.span)
    return ProseView(f"text-{line}", context.prose.render_prose(result))
