"""`section`: figure, properties, what a catalogue publishes beside the outline, the second route."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from markupsafe import Markup, escape

from calcgen.evaluation.results import Published, Result, SectionResult
from calcgen.site.context import Context
from calcgen.site.equations import stated
from calcgen.site.figure import FigureSvg
from calcgen.site.views import RouteRow, RowView, ValueRow, route_row


@dataclass(frozen=True)
class SectionView:
    """A section; `typed` is its shape as written."""

    name: str
    title: str
    typed: str
    row: RowView
    source: str
    figures: tuple[FigureSvg, ...]
    properties: tuple[ValueRow, ...]
    second_route: tuple[RouteRow, ...]
    template: str = "blocks/section.html"


def section_view(result: SectionResult, context: Context) -> SectionView:
    """Return a section."""
    note, reference = context.words(result.note), context.words(result.reference)
    beside = {p.name: p for p in result.published}
    return SectionView(
        name=result.name,
        title=result.designation or result.shape.replace("_", " "),
        typed=_typed(result, context),
        row=RowView(result.name, note, reference, result.line, context.was(result.name)),
        source=result.source,
        figures=context.figures(result.name),
        properties=tuple(_property(result.name, r, beside, result.line) for r in result.results),
        second_route=tuple(route_row(r) for r in result.second_route),
    )


def _typed(result: SectionResult, context: Context) -> str:
    """Return the lines of the block as typed, without their columns."""
    block = next(s.span for s in context.calc.calc.segments if s.span.start <= result.span.start < s.span.end)
    lines = context.source.slice(block).splitlines()[1:-1]
    shown = (line.partition("|")[0].strip() for line in lines if line.strip() and not line.startswith("#"))
    return "\n".join(text for text in shown if text)


def _property(owner: str, result: Result, beside: Mapping[str, Published], line: int) -> ValueRow:
    published = beside.get(result.name)
    where: Markup
    if published is not None:
        where = escape(f"published; outline {published.outline.number}")
    else:
        where = escape({"published": "published", "outline": "from the outline"}.get(result.provenance, ""))
    row = RowView(f"{owner}.{result.name}", escape(result.meaning), where, line)
    return ValueRow(row, stated(result.name, result.shown))
