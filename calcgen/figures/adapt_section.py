"""Evaluated sections and stresses -> drawings in the units shown."""

from __future__ import annotations

import math
from collections.abc import Iterable

from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results import SectionResult, StressResult
from calcgen.figures.dimensions import Dimension, Side
from calcgen.figures.field import FieldDrawing, FieldMark, FieldPart
from calcgen.figures.outline import AMERICAN, EUROCODE, AxisNames, Part
from calcgen.figures.section import SectionDrawing
from calcgen.figures.stress_drawing import Couple, Force, Mark, StressDrawing
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


def field_drawing(stress: StressResult, ident: str, axes: Axes, style: Style) -> FieldDrawing:
    """Return the drawing of a stress that varies across the section."""
    factor, section, plane = _factor(style), stress.section, stress.plane
    unit = next(r.shown.unit for r in stress.results if r.name == "σ_max")
    size = magnitude_in(from_si(1.0, "Pa"), unit)
    by_x, by_y = plane.g_x * size / factor, plane.g_y * size / factor
    constant = plane.sigma_0 * size - by_x * plane.x_bar * factor - by_y * plane.y_bar * factor
    (part,) = parts_of(section, factor)
    shown = {r.name: r.shown for r in stress.results}
    largest, smallest = plane.extremes(section.outline)
    marks = [
        FieldMark((e.x * factor, e.y * factor), e.value, f"{plain(name)} = {_signed(shown[name], e.value)}")
        for e, name in ((largest, "σ_max"), (smallest, "σ_min"))
    ]
    for name, (x, y) in stress.points.items():
        value = next(r.value.si for r in stress.results if r.name == name)
        marks.append(
            FieldMark((x * factor, y * factor), value, f"{plain(name)}: {_signed(shown[name], value)}")
        )
    names = axis_names(axes)
    return FieldDrawing(
        ident=ident,
        title=title_of(section),
        parts=(FieldPart(part, constant, by_x, by_y),),
        centroid=(section.computed.x_bar * factor, section.computed.y_bar * factor),
        marks=tuple(marks),
        unit=unit,
        axes=names,
        neutral_axis_label=_field_axis(stress, style),
        actions=tuple(_actions(stress, names)),
    )


def _field_axis(stress: StressResult, style: Style) -> str:
    """Return where the neutral axis of a field lies, in words."""
    axis = stress.plane.neutral_axis
    if axis is None:
        return "no neutral axis: the stress is uniform"
    text = f"neutral axis at {number_text(math.degrees(axis.angle), style.digits)}° from the horizontal"
    if stress.plane.sigma_0 == 0.0:
        return f"{text}, through the centroid"
    distance = math.hypot(axis.x - stress.plane.x_bar, axis.y - stress.plane.y_bar) * _factor(style)
    return f"{text}, {number_text(distance, style.digits)} {length_unit(style)} from the centroid"


def _actions(stress: StressResult, names: AxisNames) -> Iterable[str]:
    """Return each force with its axis and the side it puts in tension."""
    forces, shown = stress.forces, stress.forces_shown
    if forces.M:
        side = "bottom" if forces.M > 0 else "top"
        axis = f"{names.horizontal}–{names.horizontal}"
        yield f"M = {shown['M'].text} about {axis} (horizontal): tension at the {side}"
    if forces.M_lat:
        side = "right" if forces.M_lat > 0 else "left"
        axis = f"{names.vertical}–{names.vertical}"
        yield f"M_lat = {shown['M_lat'].text} about {axis} (vertical): tension on the {side}"
    if forces.N:
        word = "tension" if forces.N > 0 else "compression"
        yield f"N = {shown['N'].text}, {word}, at the centroid"


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
