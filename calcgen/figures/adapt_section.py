"""Evaluated sections and stresses -> drawings in the units shown."""

from __future__ import annotations

import math
from collections.abc import Iterable

from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results import SectionResult, StressResult
from calcgen.figures.dimensions import Dimension, Side
from calcgen.figures.outline import AMERICAN, EUROCODE, AxisNames, Part
from calcgen.figures.section import SectionDrawing
from calcgen.figures.stress import Couple, Force, Mark, StressDrawing
from calcgen.mechanics.shapes import DimensionMark
from calcgen.quantities.display import Shown, Style, number_text
from calcgen.quantities.measure import from_si, magnitude_in
from calcgen.quantities.symbols import plain


def length_unit(style: Style) -> str:
    """Return the unit in which sections are drawn."""
    return "in" if style.system == "US" else "mm"


def axis_names(axes: Axes) -> AxisNames:
    """Return the names of the axes under a convention."""
    return EUROCODE if axes == "eurocode" else AMERICAN


def title_of(section: SectionResult) -> str:
    """Return what a section is called on a figure."""
    return section.designation or f"section {plain(section.name)}"


def parts_of(section: SectionResult, factor: float) -> tuple[Part, ...]:
    """Return the outline in the unit of `factor` a metre."""
    return (Part(tuple(ring * factor for ring in section.outline.rings)),)


def section_drawing(section: SectionResult, ident: str, axes: Axes, style: Style) -> SectionDrawing:
    """Return the drawing of a section with its dimensions and axes."""
    factor = _factor(style)
    p = section.computed
    return SectionDrawing(
        ident=ident,
        title=title_of(section),
        parts=parts_of(section, factor),
        centroid=(p.x_bar * factor, p.y_bar * factor),
        unit_note=f"dimensions in {length_unit(style)}",
        axes=axis_names(axes),
        dimensions=_dimensions(section.marks, factor),
        principal_angle=math.degrees(p.alpha) if p.I_hv != 0.0 else None,
    )


def _dimensions(marks: Iterable[DimensionMark], factor: float) -> tuple[Dimension, ...]:
    dimensions = []
    for mark in marks:
        start = (mark.start[0] * factor, mark.start[1] * factor)
        end = (mark.end[0] * factor, mark.end[1] * factor)
        level = abs(end[0] - start[0]) > abs(end[1] - start[1])
        side: Side = mark.side
        if level == (side in ("left", "right")):
            side = "across"
        dimensions.append(Dimension(_trimmed(mark.value * factor), start, end, side))
    return tuple(dimensions)


def _trimmed(value: float) -> str:
    text = number_text(value, 4)
    return text.rstrip("0").rstrip(".") if "." in text else text


def _factor(style: Style) -> float:
    return magnitude_in(from_si(1.0, "m"), length_unit(style))


def stress_drawing(stress: StressResult, ident: str, style: Style) -> StressDrawing:
    """Return the drawing of a stress that varies along the depth only."""
    factor = _factor(style)
    section = stress.section
    bounds = section.outline.bounds
    shown = {r.name: r.shown for r in stress.results}
    values = {r.name: r.value.si for r in stress.results}
    ends = ((bounds.bottom * factor, "σ_bottom"), (bounds.top * factor, "σ_top"))
    axis, axis_label = _neutral_axis(stress, style)
    strain: tuple[tuple[float, float], ...] = ()
    strain_marks: tuple[Mark, ...] = ()
    if stress.modulus is not None:
        strain = tuple((y, values[name] / stress.modulus) for y, name in ends)
        strain_marks = tuple(Mark(y, e, _signed(Shown(number_text(e * 1e3, 3), "‰"), e)) for y, e in strain)
    forces = stress.forces
    return StressDrawing(
        ident=ident,
        title=title_of(section),
        parts=parts_of(section, factor),
        centroid=(section.computed.x_bar * factor, section.computed.y_bar * factor),
        stress=tuple((y, values[name]) for y, name in ends),
        marks=tuple(Mark(y, values[name], _signed(shown[name], values[name])) for y, name in ends),
        neutral_axis=axis,
        neutral_axis_label=axis_label,
        strain=strain,
        strain_marks=strain_marks,
        moment=Couple(forces.M, f"M = {stress.forces_shown['M'].text}") if forces.M else None,
        forces=(Force(section.computed.y_bar * factor, forces.N, f"N = {stress.forces_shown['N'].text}"),)
        if forces.N
        else (),
    )


def _neutral_axis(stress: StressResult, style: Style) -> tuple[float | None, str]:
    """Return the height of the neutral axis where it lies in the section, and what to say of it."""
    axis = stress.plane.neutral_axis
    if axis is None or axis.above is None:
        return None, "no stress" if stress.plane.sigma_0 == 0.0 else "no neutral axis: the stress is uniform"
    factor, unit = _factor(style), length_unit(style)
    bounds, p = stress.section.outline.bounds, stress.section.computed
    height = p.y_bar + axis.above
    offset = abs(axis.above) * factor
    way = "above" if axis.above > 0 else "below"
    where = f"{number_text(offset, style.digits)} {unit} {way} the centroid"
    if not bounds.bottom <= height <= bounds.top:
        return None, f"neutral axis outside the section: {where}"
    if axis.above == 0.0:
        return height * factor, "neutral axis"
    return height * factor, f"neutral axis, {where}"


def _signed(shown: Shown, value: float) -> str:
    return f"+{shown.text}" if value > 0 else shown.text
