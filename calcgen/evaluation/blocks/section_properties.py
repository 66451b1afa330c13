"""A section laid out -> its result: the values in force, where they come from, and both routes to them."""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import replace

from calcgen.evaluation.blocks.section_bars import PlacedBars
from calcgen.evaluation.blocks.section_composite import bars_of, composite_findings, elastic, pieces_of
from calcgen.evaluation.blocks.section_findings import Findings
from calcgen.evaluation.blocks.section_materials import Materials
from calcgen.evaluation.blocks.section_parts import Layout, PlacedPart
from calcgen.evaluation.blocks.section_published import in_force, oriented
from calcgen.evaluation.blocks.section_results import (
    bars_results,
    dimension_results,
    material_results,
    overall_results,
    part_results,
    property_results,
    published_rows,
)
from calcgen.evaluation.blocks.section_standards import by_standard
from calcgen.evaluation.blocks.section_torsion import ELEMENTS, torsional
from calcgen.evaluation.conventions import PROPERTIES, Axes
from calcgen.evaluation.results.common import Result, SecondRoute
from calcgen.evaluation.results.section import BarsPart, SectionPart, SectionResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import SectionBlock
from calcgen.language.nodes import Column
from calcgen.mechanics.boolean import separate_pieces
from calcgen.mechanics.composite import transformed_inertia, transformed_properties
from calcgen.mechanics.field import Piece
from calcgen.mechanics.second_route.residual import Residual
from calcgen.mechanics.second_route.section import PUBLISHED, published_residuals, section_residuals
from calcgen.mechanics.section import section_properties
from calcgen.quantities.display import Style
from calcgen.quantities.symbols import plain


def section_result(
    block: SectionBlock, layout: Layout, materials: Materials, scope: Scope, axes: Axes
) -> SectionResult:
    """Find the properties of a section and name them by the project's axes."""
    name, style = block.target.name, scope.style
    parts = tuple(_part(part, materials) for part in layout.parts)
    bars = tuple(_bars(line, materials) for line in layout.bars)
    sole = layout.parts[0] if len(parts) == 1 else None
    composite = materials.several or bool(bars)
    if composite:
        found = composite_findings(name, materials, parts, bars)
    else:
        found = _of_one_material(block, layout, scope, axes)
    parts, bars = _with_results(parts, bars, style, axes)
    return SectionResult(
        name=name,
        shape=parts[0].shape if sole else "",
        designation=parts[0].designation if sole else "",
        source=parts[0].source if sole else "",
        parts=parts,
        bars=bars,
        composite=composite,
        reference_material=materials.reference.name,
        modulus=materials.reference.modulus,
        computed=found.computed,
        values=found.values,
        results=property_results(found, style, axes),
        further=dimension_results(sole.shape.dimensions, parts[0].shape, style)
        if sole
        else overall_results([outline for part in parts for outline in part.outlines], style),
        absent={
            p.name(axes): found.absent[p.key] for p in PROPERTIES if p.key in found.absent and p.name(axes)
        },
        published=published_rows(found, style, axes),
        second_route=_second_route(name, found.residuals, axes),
        notes=(
            *layout.notes,
            *_unpublished(layout, composite=composite),
            *_pieces(parts, axes, composite=composite),
        ),
        lines=_lines(block, scope),
        line=scope.report.source.line_number(block.head_span),
        span=block.head_span,
    )


def _part(part: PlacedPart, materials: Materials) -> SectionPart:
    material, profile = materials.of[part.name], part.profile
    return SectionPart(
        name=part.name,
        shape=part.kind,
        designation=profile.designation if profile is not None else "",
        source=profile.source if profile is not None else "",
        outlines=part.outlines,
        marks=part.shape.marks,
        walls=part.shape.walls if part.whole else (),
        material=material.name,
        factor=materials.factor(part.name),
        modulus=material.modulus,
        strength=material.strength,
    )


def _bars(bars: PlacedBars, materials: Materials) -> BarsPart:
    material = materials.of[bars.name]
    return BarsPart(
        name=bars.name,
        points=bars.points,
        area=bars.area,
        diameter=bars.diameter,
        material=material.name,
        factor=materials.factor(bars.name),
        modulus=material.modulus,
        strength=material.strength,
        hosts=bars.hosts,
    )


def _with_results(
    parts: tuple[SectionPart, ...], bars: tuple[BarsPart, ...], style: Style, axes: Axes
) -> tuple[tuple[SectionPart, ...], tuple[BarsPart, ...]]:
    """Give parts with a name, and bars, their own properties, to be read as `main.cap.A`."""
    if not parts[0].name:
        return parts, bars

    def material(owner: SectionPart | BarsPart) -> tuple[Result, ...]:
        factor = owner.factor if bars or len({part.material for part in parts}) > 1 else None
        return material_results(factor, owner.modulus, owner.strength, style)

    moduli = transformed_properties(pieces_of(parts, elastic), bars_of(bars, parts, elastic)).parts
    return tuple(
        replace(part, results=part_results(own, of_part, material(part), style, axes))
        for part, of_part in zip(parts, moduli, strict=True)
        for own in [transformed_inertia([Piece(part.name, part.outlines)])]
    ), tuple(
        replace(line, results=bars_results(line.area * len(line.points), material(line), style, axes))
        for line in bars
    )


def _of_one_material(block: SectionBlock, layout: Layout, scope: Scope, axes: Axes) -> Findings:
    """Find the properties of the outlines; a catalogue's values are in force for one whole profile alone."""
    outlines = tuple(outline for part in layout.parts for outline in part.outlines)
    whole = layout.parts[0] if len(layout.parts) == 1 and layout.parts[0].whole else None
    computed = section_properties(*outlines)
    own = {p.key: float(getattr(computed, p.key)) for p in PROPERTIES if hasattr(computed, p.key)}
    profile = whole.profile if whole is not None else None
    published, tolerances = (
        (oriented(table, whole.text, scope) for table in (profile.published, profile.tolerances))
        if whole is not None and profile is not None
        else ({}, {})
    )
    twist = torsional(
        computed,
        outlines,
        whole.kind if whole is not None else "",
        whole.shape.dimensions if whole is not None else {},
        whole.shape.walls if whole is not None else (),
    )
    if not twist.meshed:
        scope.report.warning(
            "not-meshed",
            block.head_span,
            f"the outline of '{plain(block.target.name)}' could not be meshed",
            hint="torsion, warping and shear areas by finite elements are missing; leave out what is minute",
        )
    tables = by_standard(whole, computed.area, profile.published if profile is not None else {}, scope, axes)
    beside = twist.beside | {
        key: (ELEMENTS, twist.elements[key]) for key in ("I_t", "I_w") if key in tables.values
    }
    values = in_force(own, published, computed)
    known = twist.values | tables.values | values
    return Findings(
        computed=computed,
        values=known,
        provenance=twist.provenance
        | tables.provenance
        | {key: _route(key, value, own, published) for key, value in values.items()},
        beside={key: other for key, other in beside.items() if key not in published},
        absent={key: why for key, why in twist.absent.items() if key not in known} | tables.absent,
        published=published,
        own={key: float(getattr(computed, attribute)) for key, (attribute, _) in PUBLISHED.items()}
        | twist.elements,
        tolerances=tolerances,
        residuals=(
            *section_residuals(computed, *outlines),
            *twist.residuals,
            *published_residuals(published, computed, tolerances),
        ),
    )


def _route(key: str, value: float, own: Mapping[str, float], published: Mapping[str, float]) -> str:
    if published.get(key) == value:
        return "published"
    return "from the outline" if value == own.get(key) else "from published values"


def _second_route(name: str, residuals: Iterable[Residual], axes: Axes) -> tuple[SecondRoute, ...]:
    symbols = {p.key: p.name(axes) for p in PROPERTIES if p.name(axes)}
    symbols["J"] = symbols["I_t"]
    return tuple(
        SecondRoute.found(name, symbols.get(r.what, r.what), r.residual, r.tolerance, r.quantity)
        for r in residuals
    )


def _unpublished(layout: Layout, *, composite: bool) -> tuple[str, ...]:
    """Say of catalogued profiles that the published values are not those of this section."""
    alone = len(layout.parts) == 1 and layout.parts[0].whole and not composite
    profiles = dict.fromkeys(p.profile.designation for p in layout.parts if p.profile is not None)
    if alone or not profiles:
        return ()
    return (f"{' and '.join(profiles)} with the outline's properties, not the published ones",)


def _pieces(parts: tuple[SectionPart, ...], axes: Axes, *, composite: bool) -> tuple[str, ...]:
    """Say where parts are taken to be joined, and where a section does not hang together."""
    outlines = [outline for part in parts for outline in part.outlines]
    count = separate_pieces(outlines)
    notes = []
    if count < len(outlines) and not composite:  # the properties named are those of one material
        twist, warping = (
            plain(next(p.name(axes) for p in PROPERTIES if p.key == key)) for key in ("I_t", "I_w")
        )
        notes.append(
            f"parts that touch count as joined along their whole contact: {twist}, {warping}, shear centre "
            "and areas of shear deformation hold where welds, glue or connectors make them so"
        )
    if count > 1:
        notes.append(
            f"in {count} separate pieces: its properties hold where something else makes them act together"
        )
    return tuple(notes)


def _lines(block: SectionBlock, scope: Scope) -> tuple[tuple[str, Column, Column, int], ...]:
    source = scope.report.source
    return tuple(
        (
            " ".join(source.slice(line.statement_span).split()),
            line.annotations.note,
            line.annotations.reference,
            source.line_number(line.span),
        )
        for line in block.items
    )
