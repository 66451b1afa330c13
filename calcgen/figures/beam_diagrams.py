"""Diagrams along a beam: V, M and w, or their envelopes, with extremes labelled clear of everything."""

from collections.abc import Callable, Sequence
from dataclasses import dataclass
from itertools import pairwise

import numpy as np
from numpy.typing import NDArray

from calcgen.figures.beam_governing import Strip
from calcgen.figures.labels import Obstacles, Point, spread, text_width, two_lanes
from calcgen.figures.picture import DASH, LINE, SMALL, THIN, Anchor, Label, Sketch, Stroke, thin, wrap
from calcgen.figures.signs import draw_signs

HEIGHT = 78.0  # pixels from the lowest to the highest value
MARK = 6.0  # pixels of a mark on the zero line to either side
CURVE = Stroke("ink", 1.5)
LOWER = Stroke("ink", 1.5, DASH)


@dataclass(frozen=True)
class Extreme:
    """A value to label where it occurs, its label ready: '45.0 kN·m at 3.00 m'."""

    x: float
    value: float
    label: str


@dataclass(frozen=True)
class Diagram:
    """One quantity along the beam as points (x, value); x does not decrease, a jump repeats its x.

    With `lower`, `curve` is the largest and `lower` the least value of an envelope. `down` puts positive
    values below the line, as for a moment drawn on the tension side or a deflection. `signed` tells positive
    from negative parts by their fill and a sign; `mark` is a place to be marked on the zero line. `inner` has
    the curve of each state within an envelope, where they are few; `strips` tell what governs its edges.
    """

    title: str
    curve: tuple[Point, ...]
    lower: tuple[Point, ...] = ()
    extremes: tuple[Extreme, ...] = ()
    down: bool = False
    note: str = ""
    signed: bool = False
    mark: float | None = None
    inner: tuple[tuple[Point, ...], ...] = ()
    strips: tuple[Strip, ...] = ()


@dataclass(frozen=True)
class _Placed:
    """A label with its leader, which begins at the point that the label tells of."""

    label: Label
    leader: tuple[Point, ...]


def draw_diagram(
    sketch: Sketch, diagram: Diagram, top: float, across: Callable[[float], float], width: float
) -> float:
    """Draw the diagram below `top`, and give the height at which it ends."""
    y = _draw_head(sketch, diagram, top, width)
    values = [v for _, v in (*diagram.curve, *diagram.lower)]
    span = max(*values, 0.0) - min(*values, 0.0)
    factor = (HEIGHT / span if span else 0.0) * (1 if diagram.down else -1)
    curve = _pixels(diagram.curve, across, factor)
    lower = _pixels(diagram.lower, across, factor) if diagram.lower else None
    ends = ((across(diagram.curve[0][0]), 0.0), (across(diagram.curve[-1][0]), 0.0))
    lines = [curve] if lower is None else [curve, lower]
    points = [(across(extreme.x), factor * extreme.value) for extreme in diagram.extremes]
    labels = _placed(diagram, lines, ends, points, width)
    heights = np.concatenate([line[:, 1] for line in lines])
    boxes = [placed.label.box for placed in labels]
    least = 0.0 if diagram.mark is None else MARK
    highest = min(float(heights.min()), -least, *(box.top for box in boxes))
    lowest = max(float(heights.max()), least, *(box.bottom for box in boxes))
    zero = y + 8 - highest
    drop = np.array([0.0, zero])
    inner = [_pixels(points, across, factor) + drop for points in diagram.inner]
    _draw_curves(sketch, curve + drop, None if lower is None else lower + drop, inner, ends, zero)
    for placed in labels:
        leader = [(x, at + zero) for x, at in placed.leader]
        if len(leader) > 1:
            sketch.line(leader, THIN)
        sketch.dot(leader[0], 2.2, "ink")
        sketch.label(placed.label.moved(0, zero))
    if diagram.mark is not None:
        x = across(diagram.mark)
        sketch.line([(x, zero - MARK), (x, zero + MARK)], Stroke("ink", 2.2))
    if diagram.signed:
        boxes = [box.moved(0, zero) for box in boxes]
        draw_signs(sketch, curve + drop, zero, boxes, 1 if diagram.down else -1)
    return zero + lowest


def _draw_head(sketch: Sketch, diagram: Diagram, top: float, width: float) -> float:
    """Write the title, the key of an envelope and the note; give the height below them."""
    y = top + SMALL
    title = sketch.label(Label(3, y, diagram.title, SMALL, "left", bold=True, halo=True))
    x = title.box.right + 14
    if diagram.lower:
        if x + 110 > width:
            x, y = 3.0, y + LINE
        for name, stroke in (("max", CURVE), ("min", LOWER)):
            sketch.line([(x, y - 3.5), (x + 22, y - 3.5)], stroke)
            x = sketch.label(Label(x + 26, y, name, SMALL, "left")).box.right + 12
    if diagram.note:
        note = Label(x, y, diagram.note, SMALL, "left", colour="muted", halo=True)
        if note.box.right <= width - 3:
            sketch.label(note)
        else:
            for line in wrap(diagram.note, SMALL, width - 6):
                y += LINE
                sketch.label(Label(3, y, line, SMALL, "left", colour="muted", halo=True))
    return y


def _pixels(
    points: tuple[Point, ...], across: Callable[[float], float], factor: float
) -> NDArray[np.float64]:
    x, values = np.array(points).T
    left, right = across(points[0][0]), across(points[-1][0])
    length = (x[-1] - x[0]) or 1.0
    return thin(np.column_stack([left + (x - x[0]) / length * (right - left), factor * values]))


def _draw_curves(
    sketch: Sketch,
    curve: NDArray[np.float64],
    lower: NDArray[np.float64] | None,
    inner: Sequence[NDArray[np.float64]],
    ends: tuple[Point, Point],
    zero: float,
) -> None:
    base = [(ends[0][0], zero), (ends[1][0], zero)]
    other = np.array(base) if lower is None else lower
    sketch.fill([np.vstack([curve, other[::-1]])], "section", opacity=0.9)
    sketch.lines(inner, THIN)
    sketch.line(base, Stroke("ink", 0.9))
    if lower is None:
        sketch.line([base[0], *curve, base[1]], CURVE)
    else:
        sketch.line(lower, LOWER)
        sketch.line(curve, CURVE)


def _placed(
    diagram: Diagram,
    lines: Sequence[NDArray[np.float64]],
    ends: tuple[Point, Point],
    points: Sequence[Point],
    width: float,
) -> list[_Placed]:
    """Place the labels about the zero line: beside their points, or in lanes where that is too dense."""
    if sum(text_width(extreme.label, SMALL) + 4 for extreme in diagram.extremes) > 3 * width:
        return _in_lanes(diagram, lines, points, width)
    obstacles = Obstacles(3.0, width - 3.0)
    obstacles.add_line(ends)
    for line in lines:
        obstacles.add_line([ends[0], *line, ends[1]])
    placed: list[_Placed] = []
    for extreme, point in zip(diagram.extremes, points, strict=True):
        found = _beside(extreme.label, point, obstacles)
        if found is None or not _in_order([*placed, found]):
            return _in_lanes(diagram, lines, points, width)
        obstacles.boxes.append(found.label.box)
        if len(found.leader) > 1:
            obstacles.add_line(found.leader)
        placed.append(found)
    return placed


def _in_order(placed: Sequence[_Placed]) -> bool:
    """Tell whether the labels on each side of the zero line follow each other as their points do."""
    along = sorted(placed, key=lambda p: p.leader[0][0])
    sides = [p for p in along if p.label.y > 0], [p for p in along if p.label.y <= 0]
    return all(
        a.label.x <= b.label.x or a.leader[0][0] == b.leader[0][0]
        for side in sides
        for a, b in pairwise(side)
    )


def _beside(text: str, point: Point, obstacles: Obstacles) -> _Placed | None:
    """Give the nearest clear place for a label, outward from the zero line before inward."""
    x, y = point
    out = 1.0 if y > 0 else -1.0
    half = Label(0, 0, text, SMALL).box.right + 1
    places = [
        (gap + 0.12 * abs(shift) + (0.0 if way == out else 10.0), gap, shift, way)
        for gap in np.arange(4.0, 64.0, 4.0)
        for shift in half * np.array([0.0, -0.5, 0.5, -1.1, 1.1, -1.6, 1.6])
        for way in (out, -out)
    ]
    for _, gap, shift, way in sorted(places, key=lambda place: place[0]):
        baseline = y + way * gap + (0.77 * SMALL if way > 0 else -0.24 * SMALL)
        label = Label(x + shift, baseline, text, SMALL, halo=True).within(obstacles.left, obstacles.right)
        if not obstacles.clear(label.box):
            continue
        near = min(max(x, label.box.left), label.box.right)
        foot = (near, label.box.top - 1 if way > 0 else label.box.bottom + 1)
        if gap <= 8 and near == x:
            return _Placed(label, (point,))
        if not any(box.crosses(np.array([point]), np.array([foot])) for box in obstacles.boxes):
            return _Placed(label, (point, foot))
    return None


def _in_lanes(
    diagram: Diagram, lines: Sequence[NDArray[np.float64]], points: Sequence[Point], width: float
) -> list[_Placed]:
    """Stand the labels upright side by side, in a lane above the curves and in one below them.

    Where one lane has no room for its labels, every other one goes beyond; what still has none is left out.
    """
    heights = np.concatenate([line[:, 1] for line in lines])
    placed = []
    for way, start in ((-1.0, min(float(heights.min()), 0.0)), (1.0, max(float(heights.max()), 0.0))):
        chosen = sorted(
            (point, extreme.label)
            for extreme, point in zip(diagram.extremes, points, strict=True)
            if (point[1] > 0) == (way > 0)
        )
        wanted = [x for (x, _), _ in chosen]
        places = spread(wanted, [SMALL + 3] * len(wanted), 3, width - 3)
        beyond = 0.0
        if places is None:
            places = two_lanes(wanted, SMALL + 3, 3, width - 3) or []
            beyond = max(text_width(text, SMALL) for _, text in chosen) + 8
        anchor: Anchor = "left" if way < 0 else "right"
        for number, ((point, text), x) in enumerate(zip(chosen, places, strict=False)):
            level = start + way * (16 + beyond * (number % 2))
            label = Label(x + 0.36 * SMALL, level, text, SMALL, anchor, turned=True, halo=True)
            knee = (x, start + way * 13)
            placed.append(_Placed(label, (point, knee, (x, level - way * 3))))
    return placed
