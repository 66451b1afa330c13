"""`section`: lines as typed, figure, properties, parts and bars, what a catalogue publishes, second route."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from markupsafe import Markup, escape

from calcgen.evaluation.results.common import Result
from calcgen.evaluation.results.section import BarsPart, Published, SectionPart, SectionResult
from calcgen.language.nodes import Column
from calcgen.quantities.symbols import plain
from calcgen.site.context import Context
from calcgen.site.equations import stated
from calcgen.site.figure import FigureSvg
from calcgen.site.views import RouteRow, RowView, ValueRow, lettered, route_row


@dataclass(frozen=True)
class TypedLine:
    """A line of the block as typed, with its columns."""

    row: RowView
    text: str


@dataclass(frozen=True)
class OwnedRow:
    """A property of the parts and bars: its symbol, and text and address for each that has it."""

    symbol: Markup
    note: str
    cells: tuple[tuple[str, str], ...]


@dataclass(frozen=True)
class OwnersView:
    """Parts and bars side by side: what each is in words, and their properties."""

    heads: tuple[tuple[str, str], ...]
    rows: tuple[OwnedRow, ...]


@dataclass(frozen=True)
class SectionView:
    """A section; `heading` is that of its properties."""

    name: str
    row: RowView
    lines: tuple[TypedLine, ...]
    source: str
    figures: tuple[FigureSvg, ...]
    heading: str
    properties: tuple[ValueRow, ...]
    owners: OwnersView | None
    notes: tuple[str, ...]
    second_route: tuple[RouteRow, ...]
    template: str = "blocks/section.html"


def section_view(result: SectionResult, context: Context) -> SectionView:
    """Return a section."""
    beside = {p.name: p for p in result.published}
    return SectionView(
        name=result.name,
        row=RowView(result.name, Markup(""), Markup(""), result.line, context.was(result.name)),
        lines=tuple(_line(*line, context) for line in result.lines),
        source=result.source,
        figures=context.figures(result.name),
        heading=f"properties, transformed to {plain(result.reference_material)}"
        if result.composite
        else "properties",
        properties=tuple(_property(result.name, r, beside, result.line) for r in result.results),
        owners=_owners(result),
        notes=result.notes,
        second_route=tuple(route_row(r) for r in result.second_route),
    )


def _line(typed: str, note: Column, reference: Column, number: int, context: Context) -> TypedLine:
    return TypedLine(RowView("", context.words(note), context.words(reference), number), typed)


def _property(owner: str, result: Result, beside: Mapping[str, Published], line: int) -> ValueRow:
    published = beside.get(result.name)
    where = escape(result.provenance)
    if published is not None:
        where += escape(f"; outline {published.outline.number}")
    row = RowView(f"{owner}.{result.name}", escape(result.meaning), where, line)
    return ValueRow(row, stated(result.name, result.shown))


def _owners(section: SectionResult) -> OwnersView | None:
    """Return parts and bars with names, None where there are none; a row for each property that one has."""
    owners = [owner for owner in section.owners if owner.results]
    if not owners:
        return None
    first = {r.name: r for owner in reversed(owners) for r in owner.results}
    order = dict.fromkeys(r.name for owner in owners for r in owner.results)
    return OwnersView(
        tuple((plain(owner.name), _kind(owner)) for owner in owners),
        tuple(
            OwnedRow(
                lettered((name,)),
                first[name].meaning,
                tuple(_cell(section, owner, name) for owner in owners),
            )
            for name in order
        ),
    )


def _kind(owner: SectionPart | BarsPart) -> str:
    """Return what a part is: 'rectangle of oak', 'IPE 300', '4 bars of steel'."""
    if isinstance(owner, SectionPart):
        kind = owner.designation or owner.shape.replace("_", " ")
    else:
        kind = "bars as one area" if owner.diameter is None else f"{len(owner.points)} bars"
    return f"{kind} of {plain(owner.material)}" if owner.material else kind


def _cell(section: SectionResult, owner: SectionPart | BarsPart, name: str) -> tuple[str, str]:
    """Return a property's value and its address, both '' where it has none."""
    found = next((r for r in owner.results if r.name == name), None)
    return ("", "") if found is None else (found.shown.text, f"{section.name}.{owner.name}.{name}")
