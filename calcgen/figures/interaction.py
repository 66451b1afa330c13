"""Figure of the interaction of axial force and bending: the limit, the forces, and the ray between them."""

from collections.abc import Sequence
from dataclasses import dataclass

import numpy as np

from calcgen.figures.labels import Box, Obstacles, Point
from calcgen.figures.legend import Entry, draw_legend
from calcgen.figures.notes import draw_note, draw_title
from calcgen.figures.picture import (
    DASH,
    HAIR,
    LINE,
    SMALL,
    WIDTHS,
    Label,
    Picture,
    Sketch,
    Stroke,
    Width,
    thin,
    wrap,
)
from calcgen.figures.svg import render
from calcgen.figures.ticks import ticks

SIDES: dict[Width, float] = {"wide": 250.0, "narrow": 205.0}  # pixels of the square panel
AROUND = 0.08  # of the panel, between the curve and its edge


@dataclass(frozen=True)
class ForcePoint:
    """A pair of forces (M, N) in the units of the axes, with its label."""

    moment: float
    axial: float
    label: str


@dataclass(frozen=True, eq=False)
class InteractionDrawing:
    """Interaction of N and M: M to the right, N up, tension positive.

    `limit` is the closed curve of what the section resists, points (M, N). `elastic` is the closed curve of
    first yield within it, drawn dashed, empty where none is given. `acting` is the pair of forces of the
    case, `reached` the point of `limit` on the ray through it (None where there is no force). `marks` name
    further points of the limit, such as those of M_pl and N_pl. `utilisation` is a sentence: 'utilisation
    0.62'.
    """

    ident: str
    title: str
    limit: tuple[Point, ...]
    acting: ForcePoint
    reached: ForcePoint | None = None
    elastic: tuple[Point, ...] = ()
    marks: tuple[ForcePoint, ...] = ()
    moment_title: str = "M, kN·m"
    axial_title: str = "N, kN, tension positive"
    limit_label: str = "plastic resistance"
    elastic_label: str = "first yield"
    utilisation: str = ""
    note: str = ""
    description: str = ""


@dataclass(frozen=True)
class _Plane:
    """From (M, N) to pixels."""

    side: float
    low: Point
    high: Point

    def at(self, moment: float, axial: float) -> Point:
        """Give the pixel of a pair of forces."""
        across = (moment - self.low[0]) / (self.high[0] - self.low[0])
        up = (axial - self.low[1]) / (self.high[1] - self.low[1])
        return self.side * across, self.side * (1 - up)


def draw_interaction(drawing: InteractionDrawing, width: Width) -> str:
    """SVG of the interaction for a `wide` or a `narrow` place."""
    return render(compose_interaction(drawing, width))


def compose_interaction(drawing: InteractionDrawing, width: Width) -> Picture:
    """Compose a square panel with ticked axes, the curves, the ray and its points."""
    sketch = Sketch()
    plane = _plane(drawing, SIDES[width])
    panel = Box(0.0, 0.0, plane.side, plane.side)
    obstacles = Obstacles(-np.inf, np.inf)
    _draw_ticks(sketch, plane, panel, drawing)
    for curve, stroke in ((drawing.limit, Stroke("ink", 1.5)), (drawing.elastic, Stroke("ink", 1.0, DASH))):
        if curve:
            points = thin([plane.at(*pair) for pair in (*curve, curve[0])])
            if not stroke.dash:
                sketch.fill([points], "section", opacity=0.6)
            sketch.line(points, stroke)
            obstacles.add_line(points)
    origin = plane.at(0.0, 0.0)
    axes = [
        [(panel.left, origin[1]), (panel.right, origin[1])],
        [(origin[0], panel.top), (origin[0], panel.bottom)],
    ]
    sketch.lines(axes, Stroke("ink", 0.9))
    for axis in axes:
        obstacles.add_line(axis)
    obstacles.boxes += [item.box for item in sketch.items if isinstance(item, Label)]
    _draw_ray(sketch, drawing, plane, origin, obstacles)
    named = [mark for mark in drawing.marks if mark.label]
    at = plane.at(drawing.acting.moment, drawing.acting.axial)
    room = WIDTHS[width] - 6
    draw_note(
        sketch, Label(0, 0, drawing.acting.label, SMALL, bold=True, halo=True), at, panel, obstacles, room
    )
    if drawing.reached:
        named.insert(0, drawing.reached)
    for mark in named:
        tip = plane.at(mark.moment, mark.axial)
        if mark.label:
            draw_note(sketch, Label(0, 0, mark.label, SMALL, halo=True), tip, panel, obstacles, room)
        sketch.dot(tip, 2.6, "paper", Stroke("ink", 1.2))
    sketch.dot(at, 3.4, "ink")
    _draw_text(sketch, drawing, panel, width)
    return sketch.picture(
        f"{drawing.ident}-{width}", drawing.title, drawing.description or _describe(drawing)
    )


def _plane(drawing: InteractionDrawing, side: float) -> _Plane:
    """Give the plane that holds the origin, the curves and the points, with a margin."""
    pairs = [(0.0, 0.0), *drawing.limit, *drawing.elastic, (drawing.acting.moment, drawing.acting.axial)]
    given = np.array(pairs)
    low, high = given.min(axis=0), given.max(axis=0)
    span = np.where(high > low, high - low, 1.0)
    low, high = low - AROUND * span, high + AROUND * span
    return _Plane(side, (float(low[0]), float(low[1])), (float(high[0]), float(high[1])))


def _draw_ticks(sketch: Sketch, plane: _Plane, panel: Box, drawing: InteractionDrawing) -> None:
    """Draw a hairline at each round value, its number outside the panel, and the names of the axes."""
    lines = []
    free = -np.inf
    for value, text in ticks(plane.low[0], plane.high[0]):
        x, _ = plane.at(value, 0.0)
        lines.append([(x, panel.top), (x, panel.bottom)])
        label = Label(x, panel.bottom + 13, text, SMALL, colour="muted")
        if label.box.left > free:
            free = sketch.label(label).box.right + 6
    for value, text in ticks(plane.low[1], plane.high[1]):
        _, y = plane.at(0.0, value)
        lines.append([(panel.left, y), (panel.right, y)])
        sketch.label(Label(panel.left - 5, y + 3.5, text, SMALL, "right", colour="muted"))
    sketch.lines(lines, HAIR)
    sketch.label(Label(panel.right, panel.bottom + 28, drawing.moment_title, SMALL, "right"))
    sketch.label(Label(panel.left, panel.top - 8, drawing.axial_title, SMALL, "left"))


def _draw_ray(
    sketch: Sketch, drawing: InteractionDrawing, plane: _Plane, origin: Point, obstacles: Obstacles
) -> None:
    """Draw the ray from the origin to the forces, and on to the limit if that lies beyond."""
    at = plane.at(drawing.acting.moment, drawing.acting.axial)
    ends = [at]
    if drawing.reached:
        ends.append(plane.at(drawing.reached.moment, drawing.reached.axial))
    far = max(ends, key=lambda p: abs(p[0] - origin[0]) + abs(p[1] - origin[1]))
    if far != origin:
        sketch.line([at, far], Stroke("ink", 1.0, (2.0, 2.0)))
        sketch.line([origin, at], Stroke("ink", 1.4))
        obstacles.add_line([origin, far])


def _draw_text(sketch: Sketch, drawing: InteractionDrawing, panel: Box, width: Width) -> None:
    held = sketch.box()
    middle = (panel.left + panel.right) / 2
    draw_title(sketch, drawing.title, middle, 10.0, WIDTHS[width] - 6)
    entries: Sequence[Entry] = [Entry(drawing.limit_label, "line")]
    if drawing.elastic:
        entries = [*entries, Entry(drawing.elastic_label, "dashes")]
    room = WIDTHS[width] - 12
    left = max(min(held.left, middle - 150), held.right - room) if width == "wide" else held.left
    y = draw_legend(sketch, entries, left, held.bottom + 10, left + room - 10) + 17
    for line, bold in ((drawing.utilisation, True), (drawing.note, False)):
        for text in wrap(line, SMALL, room - 10):
            sketch.label(Label(left, y, text, SMALL, "left", "ink" if bold else "muted", bold=bold))
            y += LINE


def _describe(drawing: InteractionDrawing) -> str:
    said = [drawing.acting.label, drawing.reached.label if drawing.reached else "", drawing.utilisation]
    said += [mark.label for mark in drawing.marks]
    return "; ".join(part for part in said if part) + "."
