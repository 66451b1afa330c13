"""The section at the left of a figure over the depth: parts, bars, zones, dimensions, and its axes."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from calcgen.figures.dimensions import Dimension, draw_dimensions
from calcgen.figures.labels import Box, Obstacles, Point
from calcgen.figures.notes import obstacles_of
from calcgen.figures.outline import Bar, Part, Scale, bounds, draw_bars, draw_cross, draw_parts, place
from calcgen.figures.picture import CHAIN, DASH, SMALL, Label, Sketch, Stroke
from calcgen.figures.zones import Zone, draw_zone

LEAST_DEPTH = 76.0  # pixels; a shallower section is drawn narrower than to scale, and that is said
LEAST_BREADTH = 16.0  # pixels; a narrower section is drawn wider than to scale
DIMENSIONS_AT = 10.0  # pixels outside the outline
KEPT = 28.0  # pixels of a panel that dimensions leave to the section


@dataclass(frozen=True, eq=False)
class DepthSection:
    """What is drawn of a section beside profiles over its depth."""

    parts: tuple[Part, ...]
    centroid: Point
    bars: tuple[Bar, ...] = ()
    zones: tuple[Zone, ...] = ()
    dimensions: tuple[Dimension, ...] = ()
    edges: tuple[str, str] = ("top", "bottom")
    centre: Literal["top", "bottom"] | None = None


@dataclass(frozen=True, eq=False)
class PlacedSection:
    """A section where it stands: its scale, its box and the box with its dimensions, all in pixels."""

    scale: Scale
    box: Box
    outer: Box
    dimensions: tuple[Dimension, ...]
    to_scale: bool

    def y(self, height: float) -> float:
        """Give the pixel down of a height."""
        return self.scale.at(0.0, height)[1]


def place_section(
    section: DepthSection, span: tuple[float, float], height: float, top: float, least: float = LEAST_DEPTH
) -> PlacedSection:
    """Find the scale at which a section and its dimensions fit a panel, without those that have no room.

    The section is `height` pixels deep, or less if it is too broad for that, but no less than `least`.
    """
    left, bottom, right, upper = bounds(section.parts)
    depth, breadth = max(upper - bottom, 1e-300), max(right - left, 1e-300)
    dimensions = section.dimensions
    overhang = 0.0
    while True:
        room = span[1] - span[0] - overhang
        factor = max(min(height / depth, room / breadth), least / depth)
        across = max(min(factor, room / breadth), min(LEAST_BREADTH, room) / breadth)
        x = span[0] + overhang + (room - across * breadth) / 2
        scale, box = place(section.parts, factor, x, top, across=across)
        needed = box.left - _outer(scale, box, dimensions).left
        if needed <= overhang + 0.5 or not dimensions:
            return PlacedSection(scale, box, _outer(scale, box, dimensions), dimensions, across == factor)
        overhang = needed
        if span[1] - span[0] - overhang < KEPT:
            dimensions, overhang = dimensions[:-1], 0.0


def _outer(scale: Scale, box: Box, dimensions: Sequence[Dimension]) -> Box:
    """Give the box of a section with its dimensions."""
    trial = Sketch()
    trial.fill([[(box.left, box.top), (box.right, box.top), (box.right, box.bottom)]], None)
    draw_dimensions(trial, scale, box, dimensions, DIMENSIONS_AT)
    return trial.box()


def draw_placed(sketch: Sketch, section: DepthSection, placed: PlacedSection, obstacles: Obstacles) -> None:
    """Draw the section and its dimensions."""
    box, scale = placed.box, placed.scale
    draw_parts(sketch, scale, section.parts)
    for zone in section.zones:
        draw_zone(sketch, scale, section.parts, zone)
    draw_bars(sketch, scale, section.bars)
    draw_cross(sketch, scale.at(*section.centroid), 4.0)
    obstacles.boxes.append(box)
    beside = Sketch()
    draw_dimensions(beside, scale, box, placed.dimensions, DIMENSIONS_AT)
    sketch.items += beside.items
    around = obstacles_of(beside)
    obstacles.boxes += around.boxes
    obstacles.segments += around.segments


def draw_words(
    sketch: Sketch, section: DepthSection, title: str, placed: PlacedSection, top: float, obstacles: Obstacles
) -> None:
    """Write the section's title at `top`, and what is to be said of its edges, its curve and its scale."""
    box = placed.box
    middle = (box.left + box.right) / 2
    write(sketch, Label(middle, top, title), obstacles, -1)
    named = section.edges != ("top", "bottom")
    for side, text, edge, way in (
        ("top", section.edges[0], box.top, -1),
        ("bottom", section.edges[1], box.bottom, 1),
    ):
        y = edge + (5 if way < 0 else 12) * way
        if named:
            write(sketch, Label(middle, y, text, SMALL, colour="muted"), obstacles, way)
        if section.centre == side:
            start = edge + (17 if named else 4) * way
            ends = ((middle, start), (middle, start + 15 * way))
            sketch.arrows([ends], Stroke("ink", 1.2), 6.0)
            obstacles.add_line(ends)
            y = start + (18 if way < 0 else 25) * way
            write(sketch, Label(middle, y, "centre of curvature", SMALL), obstacles, way)
    if not placed.to_scale:
        y = box.bottom + 25
        write(sketch, Label(middle, y, "width not to scale", SMALL, colour="muted"), obstacles, 1)


def write(sketch: Sketch, label: Label, obstacles: Obstacles, way: int) -> None:
    """Write a label inside the frame, moved up (`way` -1) or down (1) until it is clear."""
    placed = stepped(label.within(obstacles.left, obstacles.right), obstacles, way)
    obstacles.boxes.append(sketch.label(placed).box)


def stepped(label: Label, obstacles: Obstacles, way: int) -> Label:
    """Give the label moved up (`way` -1) or down (1) until it is clear."""
    while not obstacles.free(label.box, 1.0):
        label = label.moved(0.0, way * 3.0)
    return label


@dataclass(frozen=True)
class AxisLine:
    """A level axis through every panel; along it stands the first of its `names` that finds room."""

    height: float
    names: tuple[str, ...]
    dashed: bool = False


def axis_ends(placed: PlacedSection, axis: AxisLine, end: float) -> list[Point]:
    """Give the ends of an axis, from a little before the section to `end`."""
    y = placed.y(axis.height)
    return [(max(placed.box.left - 10, 2.0), y), (end, y)]


def draw_axis_lines(
    sketch: Sketch, placed: PlacedSection, axes: Sequence[AxisLine], end: float, obstacles: Obstacles
) -> None:
    """Draw the axes, chain-dotted or dashed, and write their names along them."""
    for axis in axes:
        stroke = Stroke("ink", 0.9, DASH if axis.dashed else CHAIN)
        sketch.line(axis_ends(placed, axis, end), stroke)
    for axis in axes:
        _write_along(sketch, axis, placed.y(axis.height), (placed.box.right + 8, end), obstacles)


def _write_along(
    sketch: Sketch, axis: AxisLine, y: float, ends: tuple[float, float], obstacles: Obstacles
) -> None:
    for text in axis.names:
        for baseline in (y - 5.5, y + 11.5):
            label = Label(0.0, baseline, text, SMALL, "left", halo=True)
            breadth = label.box.right - label.box.left
            for x in np.arange(ends[0], ends[1] - breadth - 2, 4.0):
                placed = label.moved(float(x), 0.0)
                room = placed.box.grown(2.0)
                if all(obstacles.clear(room.moved(aside, 0.0), 0.5) for aside in (-4.0, 4.0)):
                    obstacles.boxes.append(sketch.label(placed).box)
                    return


def untold(sketch: Sketch, sentences: Sequence[str]) -> list[str]:
    """Give the sentences that no label says yet."""
    said = {item.text for item in sketch.items if isinstance(item, Label)}
    return [sentence for sentence in sentences if sentence and sentence not in said]
