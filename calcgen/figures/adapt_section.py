"""Evaluated sections -> drawings in the units shown."""

from __future__ import annotations

import math
from collections.abc import Iterable

from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.results.section import SectionResult
from calcgen.figures.dimensions import Dimension, Side
from calcgen.figures.outline import AMERICAN, EUROCODE, AxisNames, Bar, Part, Tone
from calcgen.figures.section import SectionDrawing
from calcgen.mechanics.shapes import DimensionMark
from calcgen.quantities.display import Style, number_text
from calcgen.quantities.measure import from_si, magnitude_in
from calcgen.quantities.symbols import plain

_APART = 1e-3  # of the section's size: nearer than this to the centroid, the shear centre is not marked
_TONES: tuple[Tone, ...] = ("plain", "hatched", "crossed", "ruled")


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
    """Return the outlines in the unit of `factor` a metre; materials are told apart by their tone."""
    materials = list(dict.fromkeys(part.material for part in section.parts))
    several = section.composite
    return tuple(
        Part(
            tuple(ring * factor for ring in outline.rings),
            plain(part.material) if several else "",
            _TONES[materials.index(part.material) % len(_TONES)] if several else "plain",
        )
        for part in section.parts
        for outline in part.outlines
    )


def bars_of(section: SectionResult, factor: float) -> tuple[Bar, ...]:
    """Return the bars as dots of their area, in the unit of `factor` a metre."""
    return tuple(
        Bar(x * factor, y * factor, math.sqrt(4.0 * line.area / math.pi) * factor)
        for line in section.bars
        for x, y in line.points
    )


def section_drawing(section: SectionResult, ident: str, axes: Axes, style: Style) -> SectionDrawing:
    """Return the drawing of a section with its dimensions and axes."""
    factor = length_factor(style)
    p = section.computed
    return SectionDrawing(
        ident=ident,
        title=title_of(section),
        parts=parts_of(section, factor),
        centroid=(p.x_bar * factor, p.y_bar * factor),
        unit_note="dimensions in inches" if style.system == "US" else "dimensions in mm",
        axes=axis_names(axes),
        dimensions=_dimensions(section.marks, factor),
        principal_angle=math.degrees(p.alpha) if p.I_hv != 0.0 else None,
        shear_centre=_shear_centre(section, factor),
        bars=bars_of(section, factor),
        bars_label=bars_label(section),
    )


def bars_label(section: SectionResult) -> str:
    """Return the materials of the bars, for the legend."""
    return ", ".join(dict.fromkeys(plain(line.material) for line in section.bars))


def _shear_centre(section: SectionResult, factor: float) -> tuple[float, float] | None:
    """Return the shear centre where it is known and is not the centroid."""
    x, y = section.values.get("x_s"), section.values.get("y_s")
    if x is None or y is None:
        return None
    size = max(section.bounds.width, section.bounds.height)
    apart = math.hypot(x - section.computed.x_bar, y - section.computed.y_bar)
    return (x * factor, y * factor) if apart > _APART * size else None


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


def length_factor(style: Style) -> float:
    """Return the lengths of a drawing a metre."""
    return magnitude_in(from_si(1.0, "m"), length_unit(style))
