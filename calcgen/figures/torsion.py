"""Figure of torsion of a solid section: the torque, and the largest stresses where they act."""

from dataclasses import dataclass
from math import hypot

from calcgen.figures.labels import Box, Point
from calcgen.figures.notes import draw_near, draw_note, draw_title, obstacles_of
from calcgen.figures.outline import Part, draw_cross, draw_parts, fit
from calcgen.figures.picture import LINE, SMALL, WIDTHS, Label, Picture, Sketch, Stroke, Width, wrap
from calcgen.figures.stress_drawing import Couple
from calcgen.figures.svg import render

OUTSIDE = 6.0  # pixels from the outline to the arrow of a stress


@dataclass(frozen=True)
class TorsionMark:
    """A shear stress at a point of the outline: its way (to the right, up) of any length, and its label."""

    point: Point
    way: Point
    label: str


@dataclass(frozen=True, eq=False)
class TorsionDrawing:
    """Saint-Venant torsion of a section, x right and y up.

    `torque` is positive clockwise as seen. `contours` are lines of equal stress function, closed or not: the
    stress runs along them, and is the larger the closer they lie. An empty label of a mark leaves its arrow
    without a value, for places where the same stress acts again.
    """

    ident: str
    title: str
    parts: tuple[Part, ...]
    centre: Point
    marks: tuple[TorsionMark, ...]
    torque: Couple | None = None
    contours: tuple[tuple[Point, ...], ...] = ()
    note: str = ""
    description: str = ""


def draw_torsion(drawing: TorsionDrawing, width: Width) -> str:
    """SVG of the torsion for a `wide` or a `narrow` place."""
    return render(compose_torsion(drawing, width))


def compose_torsion(drawing: TorsionDrawing, width: Width) -> Picture:
    """Compose the section, its contours, the torque and the marks, no wider than the place."""
    sketch = Sketch()
    room = WIDTHS[width] - 6
    scale, box = fit(drawing.parts, *((260.0, 200.0) if width == "wide" else (130.0, 180.0)))
    draw_parts(sketch, scale, drawing.parts)
    obstacles = obstacles_of(sketch)
    sketch.lines([[scale.at(*p) for p in line] for line in drawing.contours], Stroke("muted", 0.7))
    centre = scale.at(*drawing.centre)
    draw_cross(sketch, centre, 4.0)
    if drawing.torque and drawing.torque.value:
        start, sweep = (125.0, -250.0) if drawing.torque.value > 0 else (55.0, 250.0)
        sketch.curl(centre, 16.0, start, sweep, Stroke("ink", 1.6), 7.0)
    for mark in drawing.marks:
        size = hypot(*mark.way) or 1.0
        across, down = mark.way[0] / size, -mark.way[1] / size
        x, y = _beyond(scale.at(*mark.point), centre)
        ends = ((x - 17 * across, y - 17 * down), (x + 17 * across, y + 17 * down))
        sketch.arrows([ends], Stroke("ink", 2.0), 8.0)
        obstacles.add_line(ends)
    for mark in drawing.marks:
        if mark.label:
            at = _beyond(scale.at(*mark.point), centre)
            draw_note(sketch, Label(0, 0, mark.label, SMALL, bold=True, halo=True), at, box, obstacles, room)
    if drawing.torque:
        x, y = centre
        obstacles.boxes.append(Box(x - 17, y - 17, x + 17, y + 17))
        draw_near(sketch, Label(0, 0, drawing.torque.label, SMALL, halo=True), (x, y + 10), obstacles)
    held = sketch.box()
    middle = (held.left + held.right) / 2
    draw_title(sketch, drawing.title, middle, 10.0, room)
    y = held.bottom + 17
    contours = "Lines of equal stress function: the stress runs along them." if drawing.contours else ""
    for note in filter(None, (contours, drawing.note)):
        for line in wrap(note, SMALL, WIDTHS[width] - 12):
            sketch.label(Label(middle, y, line, SMALL, colour="muted"))
            y += LINE
    return sketch.picture(
        f"{drawing.ident}-{width}", drawing.title, drawing.description or _describe(drawing)
    )


def _beyond(at: Point, centre: Point) -> Point:
    """Give the place of an arrow a little outside the outline, where it does not hide it."""
    across, down = at[0] - centre[0], at[1] - centre[1]
    size = hypot(across, down) or 1.0
    return at[0] + OUTSIDE * across / size, at[1] + OUTSIDE * down / size


def _describe(drawing: TorsionDrawing) -> str:
    said = [mark.label for mark in drawing.marks if mark.label]
    said += [drawing.torque.label] if drawing.torque else []
    return "; ".join(said) + "."
