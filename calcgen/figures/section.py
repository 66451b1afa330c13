"""Figure of a section: outline to scale, dimensions, centroid, axes."""

from dataclasses import dataclass

from calcgen.figures.dimensions import Dimension, draw_dimensions
from calcgen.figures.labels import Box, Point
from calcgen.figures.legend import draw_legend, entries_of, legend_width
from calcgen.figures.notes import draw_note, draw_optional, draw_title, obstacles_of
from calcgen.figures.outline import (
    EUROCODE,
    AxisNames,
    Bar,
    Part,
    Scale,
    draw_axes,
    draw_bars,
    draw_cross,
    draw_parts,
    draw_principal,
    fit,
)
from calcgen.figures.picture import (
    DASH,
    SMALL,
    WIDTHS,
    Label,
    Picture,
    Sketch,
    Stroke,
    Width,
)
from calcgen.figures.svg import render

DIMENSIONS_AT = 36.0  # pixels outside the outline: beyond the names of the axes


@dataclass(frozen=True)
class Leader:
    """A note that points at a place of the section: a radius, a bar, a weld, the size of a part.

    An `optional` one is left out where there is no room for it near its point.
    """

    label: str
    point: Point
    optional: bool = False


@dataclass(frozen=True, eq=False)
class SectionDrawing:
    """A section in the unit shown, x right and y up.

    `ident` is the figure's address on its page. `principal_angle` is in degrees from the horizontal to
    axis 1, counter-clockwise, None where the principal axes are the reference axes. `plastic_axis` is the
    height of the plastic neutral axis of bending about the horizontal axis. Parts need not touch each other;
    their materials are named in the legend by their labels and told apart by tone, `bars` by `bars_label`.
    `kern` is the outline of the kern, drawn dashed; empty where it is not shown.
    """

    ident: str
    title: str
    parts: tuple[Part, ...]
    centroid: Point
    unit_note: str = "dimensions in mm"
    axes: AxisNames = EUROCODE
    dimensions: tuple[Dimension, ...] = ()
    leaders: tuple[Leader, ...] = ()
    principal_angle: float | None = None
    shear_centre: Point | None = None
    plastic_axis: float | None = None
    bars: tuple[Bar, ...] = ()
    bars_label: str = ""
    kern: tuple[Point, ...] = ()
    description: str = ""


def draw_section(drawing: SectionDrawing, width: Width) -> str:
    """SVG of the section for a `wide` or a `narrow` place."""
    return render(compose_section(drawing, width))


def compose_section(drawing: SectionDrawing, width: Width) -> Picture:
    """Compose the section as a picture, no wider than its place."""
    sketch = Sketch()
    scale, box = fit(drawing.parts, *((300.0, 250.0) if width == "wide" else (170.0, 220.0)))
    centre = scale.at(*drawing.centroid)
    draw_parts(sketch, scale, drawing.parts)
    draw_bars(sketch, scale, drawing.bars)
    draw_axes(sketch, box, centre, drawing.axes)
    if drawing.principal_angle is not None:
        draw_principal(sketch, box, centre, drawing.principal_angle)
    if drawing.kern:
        ring = [scale.at(*point) for point in drawing.kern]
        sketch.line([*ring, ring[0]], Stroke("ink", 1.0, DASH))
    draw_cross(sketch, centre)
    if drawing.shear_centre is not None:
        sketch.dot(scale.at(*drawing.shear_centre), 3.0, "paper", Stroke("ink", 1.1))
    draw_dimensions(sketch, scale, box, drawing.dimensions, DIMENSIONS_AT)
    _draw_notes(sketch, scale, box, drawing, WIDTHS[width] - 6)
    _draw_frame_text(sketch, box, drawing, width)
    description = drawing.description or _describe(drawing)
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, description)


def _draw_notes(sketch: Sketch, scale: Scale, box: Box, drawing: SectionDrawing, room: float) -> None:
    """Leaders, the shear centre's name and the plastic neutral axis, each where there is room."""
    if drawing.plastic_axis is not None:
        y = scale.at(0.0, drawing.plastic_axis)[1]
        sketch.line([(box.left - 8, y), (box.right + 8, y)], Stroke("ink", 0.9, DASH))
    obstacles = obstacles_of(sketch)
    notes = [(leader.label, scale.at(*leader.point)) for leader in drawing.leaders if not leader.optional]
    if drawing.shear_centre is not None:
        notes.append(("shear centre", scale.at(*drawing.shear_centre)))
    if drawing.plastic_axis is not None:
        notes.append(("plastic neutral axis", (box.right + 8, scale.at(0.0, drawing.plastic_axis)[1])))
    if drawing.kern:
        notes.append(("kern", scale.at(*max(drawing.kern))))
    for text, point in notes:
        draw_note(sketch, Label(0, 0, text, SMALL, halo=True), point, box, obstacles, room)
    for leader in drawing.leaders:
        if leader.optional:
            note = Label(0, 0, leader.label, SMALL, halo=True)
            draw_optional(sketch, note, scale.at(*leader.point), box, obstacles, room)


def _draw_frame_text(sketch: Sketch, box: Box, drawing: SectionDrawing, width: Width) -> None:
    """Title above, legend of materials and note of units below."""
    held = sketch.box()
    middle = (box.left + box.right) / 2
    draw_title(sketch, drawing.title, middle, 8.0, WIDTHS[width] - 6)
    y = held.bottom + 8
    for entry in entries_of(drawing.parts, (), drawing.bars_label):
        left = max(min(box.left, middle - legend_width([entry]) / 2), held.left)
        y = draw_legend(sketch, [entry], left, y, held.left + WIDTHS[width] - 6) + 5
    if drawing.unit_note:
        sketch.label(Label(middle, y + 10, drawing.unit_note, SMALL, colour="muted"))


def _describe(drawing: SectionDrawing) -> str:
    names = drawing.axes
    said = [
        "Section seen along the beam from its start; axis"
        f" {names.horizontal}–{names.horizontal} is horizontal, {names.vertical}–{names.vertical} vertical."
    ]
    if drawing.principal_angle is not None:
        said.append(f"Axis 1 lies at {drawing.principal_angle:.1f}° from the horizontal, counter-clockwise.")
    if drawing.dimensions:
        said.append("Dimensions: " + ", ".join(d.label for d in drawing.dimensions) + ".")
    return " ".join(said)
