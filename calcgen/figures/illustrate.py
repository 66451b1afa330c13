"""Evaluated blocks -> drawings in the units shown, and their SVG for both places."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from typing import Literal

from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.section import SectionResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.evaluation.results.vary import VaryResult
from calcgen.figures.adapt_beam import beam_drawings
from calcgen.figures.adapt_influence import influence_drawings
from calcgen.figures.adapt_section import section_drawing, title_of
from calcgen.figures.adapt_shear import (
    flow_drawings,
    interaction_drawing,
    shear_drawings,
    torsion_drawing,
)
from calcgen.figures.adapt_stress import field_drawing, stress_drawing
from calcgen.figures.adapt_vary import vary_drawing
from calcgen.figures.beam import compose_beam
from calcgen.figures.beam_sheets import beam_sheets
from calcgen.figures.conventions import ConventionDrawing, compose_conventions
from calcgen.figures.field import compose_field
from calcgen.figures.flow import compose_flow
from calcgen.figures.influence import compose_influence
from calcgen.figures.interaction import compose_interaction
from calcgen.figures.map import compose_map
from calcgen.figures.map_drawing import MapDrawing
from calcgen.figures.map_sheets import MapSheet, sheets_of
from calcgen.figures.picture import Picture
from calcgen.figures.section import compose_section
from calcgen.figures.shear import compose_shear
from calcgen.figures.stress import compose_stress
from calcgen.figures.svg import render
from calcgen.figures.torsion import compose_torsion
from calcgen.figures.vary import compose_vary
from calcgen.quantities.display import Style


@dataclass(frozen=True)
class Figure:
    """A figure composed for a wide and for a narrow place."""

    wide: Picture
    narrow: Picture


@dataclass(frozen=True)
class Drawn:
    """A figure as SVG text, with its title, its description in words, and what has no room in it."""

    title: str
    description: str
    wide: str
    narrow: str
    listed: tuple[str, ...] = ()


def illustrate(calc: EvaluatedCalc, axes: Axes, style: Style) -> dict[str, tuple[Figure, ...]]:
    """Return the figures of a calc by the name of their block."""
    figures: dict[str, tuple[Figure, ...]] = {}
    for segment in calc.segments:
        ident = f"{calc.number}-{getattr(segment, 'name', '')}"
        match segment:
            case SectionResult():
                drawing = section_drawing(segment, ident, axes, style)
                figures[segment.name] = (
                    Figure(compose_section(drawing, "wide"), compose_section(drawing, "narrow")),
                )
            case BeamResult():
                figures[segment.name] = tuple(
                    Figure(wide, compose_beam(part, "narrow"))
                    for b in beam_drawings(segment, ident, style)
                    for part, wide in beam_sheets(b)
                ) + tuple(
                    Figure(compose_influence(i, "wide"), compose_influence(i, "narrow"))
                    for i in influence_drawings(segment, ident, style)
                )
            case StressResult():
                figures[segment.name] = tuple(_of_stress(segment, ident, axes, style))
            case VaryResult():
                curves = vary_drawing(segment, ident, style)
                if curves is not None:
                    figures[segment.name] = (
                        Figure(compose_vary(curves, "wide"), compose_vary(curves, "narrow")),
                    )
            case _:
                pass
    return figures


def _of_stress(stress: StressResult, ident: str, axes: Axes, style: Style) -> Iterable[Figure]:
    """Compose normal stress, the interaction of N and M, shear, flow along walls, torsion: what there is."""
    forces, of = stress.forces, title_of(stress.section)
    if forces.N or forces.M or forces.M_lat or not stress.shear:
        title = f"normal stress of {of}"
        if stress.plane.g_x == 0.0 or stress.curved is not None:
            depth = stress_drawing(stress, ident, style)
            yield _titled(compose_stress(depth, "wide"), compose_stress(depth, "narrow"), title)
        else:
            field = field_drawing(stress, ident, axes, style)
            yield _titled(compose_field(field, "wide"), compose_field(field, "narrow"), title)
    limit = interaction_drawing(stress, ident, style)
    if limit is not None:
        title = f"{limit.title}, {of}"
        yield _titled(compose_interaction(limit, "wide"), compose_interaction(limit, "narrow"), title)
    for shear in shear_drawings(stress, ident, style):
        under = shear.force.label if shear.force is not None else ""
        title = f"shear stress of {of} under {under}"
        yield _titled(compose_shear(shear, "wide"), compose_shear(shear, "narrow"), title)
    for flow in flow_drawings(stress, ident, style):
        title = f"{flow.quantity.partition(',')[0]} along the walls of {of}"
        yield _titled(compose_flow(flow, "wide"), compose_flow(flow, "narrow"), title)
    torsion = torsion_drawing(stress, ident, style)
    if torsion is not None:
        title = f"torsion of {of}"
        yield _titled(compose_torsion(torsion, "wide"), compose_torsion(torsion, "narrow"), title)


def _titled(wide: Picture, narrow: Picture, title: str) -> Figure:
    """Return a figure whose title tells it from the others of its block."""
    return Figure(replace(wide, title=title), replace(narrow, title=title))


def conventions(axes: Axes, depth: Literal["down", "up"]) -> Figure:
    """Return the figure of the axes and signs in force."""
    drawing = ConventionDrawing("conventions", "Axes and signs", axes, depth)
    return Figure(compose_conventions(drawing, "wide"), compose_conventions(drawing, "narrow"))


class Studio:
    """Draws figures and remembers them, so that a figure that has not changed is not drawn again."""

    def __init__(self) -> None:
        self._composed: dict[str, tuple[EvaluatedCalc, Axes, Style, dict[str, tuple[Figure, ...]]]] = {}
        self._drawn: dict[Figure, Drawn] = {}
        self._map: tuple[MapDrawing, dict[MapSheet, Drawn]] | None = None

    def draw(self, calc: EvaluatedCalc, axes: Axes, style: Style) -> dict[str, tuple[Drawn, ...]]:
        """Return the figures of a calc as SVG by the name of their block."""
        kept = self._composed.get(calc.number)
        if kept is None or kept[0] is not calc or kept[1:3] != (axes, style):
            kept = (calc, axes, style, illustrate(calc, axes, style))
            self._composed[calc.number] = kept
        return {name: tuple(self.draw_one(figure) for figure in row) for name, row in kept[3].items()}

    def draw_map(self, drawing: MapDrawing) -> tuple[Drawn, ...]:
        """Return the sheets of the map of which calc feeds which as SVG."""
        if self._map is None or self._map[0] != drawing:
            kept = self._map[1] if self._map is not None else {}
            drawn = {sheet: kept.get(sheet) or self._sheet(sheet) for sheet in sheets_of(drawing)}
            self._map = (drawing, drawn)
        return tuple(self._map[1].values())

    def _sheet(self, sheet: MapSheet) -> Drawn:
        return self.draw_one(Figure(compose_map(sheet, "wide"), compose_map(sheet, "narrow")))

    def draw_one(self, figure: Figure) -> Drawn:
        """Return the SVG of a figure."""
        drawn = self._drawn.get(figure)
        if drawn is None:
            wide, narrow = render(figure.wide), render(figure.narrow)
            listed = figure.wide.listed or figure.narrow.listed
            drawn = Drawn(figure.wide.title, figure.wide.description, wide, narrow, listed)
            self._drawn[figure] = drawn
        return drawn
