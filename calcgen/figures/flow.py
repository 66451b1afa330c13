"""Figure of the shear flow along thin walls: arrows on the mid-lines, amounts offset from the walls."""

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from math import cos, hypot, radians, sin

import numpy as np
from numpy.typing import NDArray

from calcgen.figures.labels import Box, Obstacles, Point, around
from calcgen.figures.notes import draw_near, draw_note, draw_title, obstacles_of
from calcgen.figures.outline import Scale, draw_cross
from calcgen.figures.picture import LINE, SMALL, WIDTHS, Label, Picture, Sketch, Stroke, Width, wrap
from calcgen.figures.stress_drawing import Couple
from calcgen.figures.svg import render

Line = NDArray[np.float64]

DIAGRAM = 34.0  # pixels from a wall to the largest flow
PITCH = 26.0  # pixels from one arrow to the next
LEAST_WALL = 3.0  # pixels of thickness
FACE_NOTE = "As it acts on the face seen looking along the beam from its start."
TINY = 0.04  # of the largest flow: below it no arrow is drawn


@dataclass(frozen=True, eq=False)
class Wall:
    """A wall by its mid-line, x right and y up, with the flow along it.

    `points` has shape (n, 2), `flow` shape (n,): shear flow or stress at those points, positive from the
    first point to the last; enough points for a curved diagram. `label` is the largest amount with its unit,
    written at it; empty where the wall needs none. `turning` is for Saint-Venant torsion of an open wall: the
    stress runs along one face and back along the other, `flow` is that at the faces, positive where it runs
    to the last point on the left of the wall's way.
    """

    points: Line
    flow: Line
    thickness: float
    label: str = ""
    turning: bool = False


@dataclass(frozen=True)
class FlowForce:
    """A transverse force through the shear centre: its components to the right and up, and its label."""

    right: float
    up: float
    label: str


@dataclass(frozen=True, eq=False)
class FlowDrawing:
    """Shear flow of a thin-walled section, in shown units.

    `quantity` names what is drawn with its unit: 'shear flow q, N/mm'. `force` is drawn through the shear
    centre, or the centroid where none is given, `torque` around it (positive clockwise), both as they act on
    the face seen looking along the beam from its start.
    """

    ident: str
    title: str
    walls: tuple[Wall, ...]
    centroid: Point
    quantity: str = "shear flow q"
    shear_centre: Point | None = None
    shear_centre_label: str = "shear centre"
    force: FlowForce | None = None
    torque: Couple | None = None
    note: str = ""
    description: str = ""


def draw_flow(drawing: FlowDrawing, width: Width) -> str:
    """SVG of the flow for a `wide` or a `narrow` place."""
    return render(compose_flow(drawing, width))


def compose_flow(drawing: FlowDrawing, width: Width) -> Picture:
    """Compose walls, diagrams, arrows and labels, no wider than the place."""
    sketch = Sketch()
    scale, box = _fit(drawing, *((270.0, 220.0) if width == "wide" else (150.0, 190.0)))
    lines = [scale.ring(wall.points) for wall in drawing.walls]
    sides = [_side(line, np.array(scale.at(*drawing.centroid))) for line in lines]
    largest = max((float(np.abs(wall.flow).max()) for wall in drawing.walls), default=0.0)
    for wall, line, side in zip(drawing.walls, lines, sides, strict=True):
        if largest and not wall.turning:
            _draw_amount(sketch, line, np.abs(wall.flow) * DIAGRAM / largest, side, scale, wall)
    bands = _bands(drawing.walls, lines, scale)
    sketch.fill(bands, "section", stroke=Stroke("muted", 1.8))
    for band in bands:  # over the strokes, which so remain on the outside alone
        sketch.fill([band], "section")
    for wall, line in zip(drawing.walls, lines, strict=True):
        if largest:
            _draw_arrows(sketch, wall, line, largest, _half(scale, wall))
    draw_cross(sketch, scale.at(*drawing.centroid), 4.0)
    outer = around([box, sketch.box()])
    obstacles = obstacles_of(sketch)
    obstacles.boxes = []  # heads of arrows lie on the lines
    for wall, line, side in zip(drawing.walls, lines, sides, strict=True):
        for filling in _filling(wall, line, side, _half(scale, wall), largest):
            obstacles.add_line(filling)
    _draw_actions(sketch, drawing, scale, obstacles)
    for wall, line, side in zip(drawing.walls, lines, sides, strict=True):
        if wall.label and largest:
            offset = 0.0 if wall.turning else DIAGRAM / largest
            tip = _largest_at(line, wall.flow, side, offset, _half(scale, wall))
            note = Label(0, 0, wall.label, SMALL, bold=True, halo=True)
            draw_note(sketch, note, tip, outer, obstacles, WIDTHS[width] - 6)
    if drawing.shear_centre is not None:
        name = Label(0, 0, drawing.shear_centre_label, SMALL, halo=True)
        at = scale.at(*drawing.shear_centre)
        draw_note(sketch, name, at, outer, obstacles, WIDTHS[width] - 6)
        sketch.dot(at, 3.0, "paper", Stroke("ink", 1.2))
    _draw_text(sketch, drawing, width)
    return sketch.picture(
        f"{drawing.ident}-{width}", drawing.title, drawing.description or _describe(drawing)
    )


def _fit(drawing: FlowDrawing, width: float, height: float) -> tuple[Scale, Box]:
    """Scale at which the walls, and the shear centre if it is near, fill the room."""
    points = np.vstack([wall.points for wall in drawing.walls])
    if drawing.shear_centre is not None:
        points = np.vstack([points, drawing.shear_centre])
    (left, bottom), (right, top) = points.min(axis=0).tolist(), points.max(axis=0).tolist()
    factor = min(width / max(right - left, 1e-300), height / max(top - bottom, 1e-300))
    scale = Scale(factor, factor, -factor * left, factor * top)
    return scale, Box(0.0, 0.0, factor * (right - left), factor * (top - bottom))


def _half(scale: Scale, wall: Wall) -> float:
    return max(scale.factor * wall.thickness, LEAST_WALL) / 2


def _normals(line: Line) -> Line:
    """Give unit normals to the left of the way of a line in pixels as seen, mitred at its corners."""
    steps = np.diff(line, axis=0)
    lengths = np.maximum(np.hypot(*steps.T), 1e-9)
    flat = np.column_stack([steps[:, 1], -steps[:, 0]]) / lengths[:, None]
    before, after = np.vstack([flat[:1], flat]), np.vstack([flat, flat[-1:]])
    mean = before + after
    # a mitre is 1/cos of half the turn longer, within reason
    mitred: Line = mean / np.maximum((mean**2).sum(axis=1) / 2, 0.5)[:, None]
    return mitred


def _side(line: Line, centre: Line) -> float:
    """1 to draw the amount on the left of the line, −1 on its right: away from the centroid."""
    outward = float(((line - centre) * _normals(line)).sum(axis=1).mean())
    return -1.0 if outward < -0.5 else 1.0


def _draw_amount(sketch: Sketch, line: Line, amount: Line, side: float, scale: Scale, wall: Wall) -> None:
    """Fill between the face of the wall and the amount of the flow."""
    normals = _normals(line) * side
    face = line + normals * _half(scale, wall)
    edge = face + normals * amount[:, None]
    sketch.fill([np.vstack([face, edge[::-1]])], "compression", opacity=0.14)
    sketch.line(np.vstack([face[:1], edge, face[-1:]]), Stroke("compression", 0.9))


def _bands(walls: Sequence[Wall], lines: Sequence[Line], scale: Scale) -> list[Line]:
    """Give the walls with their thickness, each longer by half the other wall's where it meets one."""
    halves = [_half(scale, wall) for wall in walls]
    bands = []
    for line, half in zip(lines, halves, strict=True):
        longer = line.copy()
        for end, inner in ((0, 1), (-1, -2)):
            met = [
                other
                for wall, other in zip(lines, halves, strict=True)
                if wall is not line and np.hypot(*(wall[[0, -1]] - line[end]).T).min() < 0.5
            ]
            way = line[end] - line[inner]
            longer[end] += way / max(float(np.hypot(*way)), 1e-9) * max(met, default=0.0)
        offset = _normals(longer) * half
        bands.append(np.vstack([longer + offset, (longer - offset)[::-1]]))
    return bands


def _draw_arrows(sketch: Sketch, wall: Wall, line: Line, largest: float, half: float) -> None:
    """Draw the way of the flow along the mid-line, or along both faces where it turns back."""
    arrows = []
    for at, way, normal, flow in _stations(line, wall.flow):
        if abs(flow) < TINY * largest:
            continue
        reach = np.sign(flow) * way * 9.0
        if wall.turning:
            aside = normal * (half + 4.0)
            arrows += [(at + aside - reach, at + aside + reach), (at - aside + reach, at - aside - reach)]
        else:
            arrows.append((at - reach, at + reach))
    pairs = [((float(a[0]), float(a[1])), (float(b[0]), float(b[1]))) for a, b in arrows]
    sketch.arrows(pairs, Stroke("ink", 1.2), 6.0)


def _stations(line: Line, flow: Line) -> Iterator[tuple[Line, Line, Line, float]]:
    """Places along a line about one pitch apart: point, unit way, unit normal to the left, flow there."""
    steps = np.diff(line, axis=0)
    lengths = np.hypot(*steps.T)
    along = np.concatenate([[0.0], np.cumsum(lengths)])
    count = max(int(along[-1] / PITCH), 1)
    for s in (np.arange(count) + 0.5) * along[-1] / count:
        piece = min(max(int(np.searchsorted(along, s)) - 1, 0), len(steps) - 1)
        way = steps[piece] / max(lengths[piece], 1e-9)
        at = np.array([np.interp(s, along, line[:, 0]), np.interp(s, along, line[:, 1])])
        yield at, way, np.array([way[1], -way[0]]), float(np.interp(s, along, flow))


def _largest_at(line: Line, flow: Line, side: float, offset: float, half: float) -> Point:
    """Give the tip of the diagram at the largest flow, in the middle where it is the same all along."""
    amount = np.abs(flow)
    at = np.flatnonzero(amount >= amount.max() * (1 - 1e-9))
    place = int(at[len(at) // 2])
    tip = line[place] + _normals(line)[place] * side * (half + amount[place] * offset)
    if len(at) == len(line) == 2:
        tip = line.mean(axis=0) + _normals(line)[0] * side * (half + amount[0] * offset)
    return float(tip[0]), float(tip[1])


def _filling(wall: Wall, line: Line, side: float, half: float, largest: float) -> Iterator[Line]:
    """Give lines so close over a wall, its arrows and its diagram that no label fits between."""
    normals = _normals(line)
    if wall.turning:
        yield from (line + normals * offset for offset in (-half - 4.0, 0.0, half + 4.0))
    elif largest:
        amount = np.abs(wall.flow) * DIAGRAM / largest
        yield from (line + normals * side * (amount * n / 5)[:, None] for n in range(6))


def _draw_actions(sketch: Sketch, drawing: FlowDrawing, scale: Scale, obstacles: Obstacles) -> None:
    """Draw the force through the shear centre, and the torque around it."""
    centre = scale.at(*(drawing.shear_centre or drawing.centroid))
    force = drawing.force
    if force and hypot(force.right, force.up) > 0:
        size = hypot(force.right, force.up)
        across, down = force.right / size, -force.up / size
        ends = (
            (centre[0] - 34 * across, centre[1] - 34 * down),
            (centre[0] + 34 * across, centre[1] + 34 * down),
        )
        sketch.arrows([ends], Stroke("ink", 2.0), 9.0)
        obstacles.add_line(ends)
        draw_near(sketch, Label(0, 0, force.label, SMALL, halo=True), ends[1], obstacles)
    if drawing.torque and drawing.torque.value:
        clockwise = drawing.torque.value > 0
        start, sweep = (125.0, -250.0) if clockwise else (-125.0 + 180, 250.0)
        sketch.curl(centre, 20.0, start, sweep, Stroke("ink", 1.6), 7.0)
        obstacles.boxes.append(Box(centre[0] - 20, centre[1] - 20, centre[0] + 20, centre[1] + 20))
        at = (centre[0] + 20 * cos(radians(35)), centre[1] + 20 * sin(radians(35)))
        draw_near(sketch, Label(0, 0, drawing.torque.label, SMALL, halo=True), at, obstacles)


def _draw_text(sketch: Sketch, drawing: FlowDrawing, width: Width) -> None:
    """Title and quantity above, notes below."""
    held = sketch.box()
    middle = (held.left + held.right) / 2
    room = WIDTHS[width] - 12
    turning = all(wall.turning for wall in drawing.walls)
    heading = drawing.quantity if turning else f"{drawing.quantity}, drawn outside each wall"
    y = held.top - 12
    for line in reversed(wrap(heading, SMALL, room)):
        sketch.label(Label(middle, y, line, SMALL, colour="muted"))
        y -= LINE
    draw_title(sketch, drawing.title, middle, 4.0, room)
    y = held.bottom + 17
    force = drawing.force
    none = force.label if force and not force.right and not force.up else ""
    acts = "" if none or not (force or drawing.torque) else FACE_NOTE
    for note in filter(None, (none, drawing.note, acts)):
        for line in wrap(note, SMALL, room):
            sketch.label(Label(middle, y, line, SMALL, colour="muted"))
            y += LINE


def _describe(drawing: FlowDrawing) -> str:
    said = [f"{drawing.quantity}: " + ", ".join(wall.label for wall in drawing.walls if wall.label)]
    said += [drawing.force.label] if drawing.force else []
    said += [drawing.torque.label] if drawing.torque else []
    said += [drawing.shear_centre_label] if drawing.shear_centre else []
    return "; ".join(said) + "."
