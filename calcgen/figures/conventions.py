"""Figure of the axes and signs in force, each drawn in a cell of its own with a sentence under it."""

from collections.abc import Callable
from dataclasses import dataclass
from typing import Literal

import numpy as np

from calcgen.figures.beam_supports import draw_support
from calcgen.figures.labels import Box, Point
from calcgen.figures.outline import (
    AMERICAN,
    EUROCODE,
    AxisNames,
    Part,
    draw_axes,
    draw_cross,
    draw_parts,
    place,
)
from calcgen.figures.picture import (
    CHAIN,
    DASH,
    FIRM,
    LINE,
    SMALL,
    WIDTHS,
    Colour,
    Label,
    Picture,
    Sketch,
    Stroke,
    Width,
    wrap,
)
from calcgen.figures.svg import render

CELL = 152.0  # height of the drawing in a cell, in pixels
FORCE = Stroke("ink", 1.6)
HALF_B, HALF_H = 32.0, 46.0  # of the section drawn, in pixels


@dataclass(frozen=True)
class ConventionDrawing:
    """The project's axes and the sense in which depth from the neutral axis is measured."""

    ident: str
    title: str
    axes: Literal["eurocode", "american"]
    depth: Literal["down", "up"]

    @property
    def names(self) -> AxisNames:
        """The names of the section's axes."""
        return EUROCODE if self.axes == "eurocode" else AMERICAN


@dataclass(frozen=True)
class _Cell:
    """One convention: what draws it about the middle of its cell, and the sentence that says it."""

    draw: Callable[[Sketch, Point], None]
    sentence: str


def draw_conventions(drawing: ConventionDrawing, width: Width) -> str:
    """SVG of the conventions for a `wide` or a `narrow` place."""
    return render(compose_conventions(drawing, width))


def compose_conventions(drawing: ConventionDrawing, width: Width) -> Picture:
    """Compose the cells, three in a row where the place is wide and two where it is narrow."""
    sketch = Sketch()
    room = WIDTHS[width]
    columns = 3 if width == "wide" else 2
    breadth = room / columns
    cells = _cells(drawing)
    y = 0.0
    for first in range(0, len(cells), columns):
        ends = [y]
        for column, cell in enumerate(cells[first : first + columns]):
            middle = (column + 0.5) * breadth
            cell.draw(sketch, (middle, y + CELL / 2))
            line_y = y + CELL + 10
            for line in wrap(cell.sentence, SMALL, breadth - 16):
                sketch.label(Label(column * breadth + 8, line_y, line, SMALL, "left"))
                line_y += LINE
            ends.append(line_y)
        y = max(ends) + 6
    sentences = " ".join(cell.sentence for cell in cells)
    return sketch.picture(f"{drawing.ident}-{width}", drawing.title, sentences, width=room)


def _cells(drawing: ConventionDrawing) -> list[_Cell]:
    names = drawing.names
    h, v = (f"{name}–{name}" for name in (names.horizontal, names.vertical))
    down = drawing.depth == "down"
    return [
        _Cell(
            lambda sketch, at: _draw_section(sketch, at, names),
            f"The section seen along the beam from its start. Axis {h} is horizontal, {v} vertical;"
            " coordinates run x to the right and y up.",
        ),
        _Cell(
            lambda sketch, at: _draw_bending(sketch, at, lateral=False),
            f"M bends about {h}, the horizontal axis. Positive: tension at the bottom.",
        ),
        _Cell(
            lambda sketch, at: _draw_bending(sketch, at, lateral=True),
            f"M_lat bends about {v}, the vertical axis. Positive: tension on the right.",
        ),
        _Cell(
            _draw_element,
            "A piece of the beam with positive N, V and M: N tension, V where the left part is pushed up,"
            " M sagging.",
        ),
        _Cell(
            _draw_beam,
            "Loads and the deflection w are positive down, reactions R up; lateral ones to the right.",
        ),
        _Cell(
            lambda sketch, at: _draw_depth(sketch, at, down=down),
            f"A coordinate measured from the neutral axis is positive {'down' if down else 'up'}.",
        ),
    ]


def _i_shape(at: Point) -> tuple[Part, float, float]:
    """Part of an I, and the pixel of its top left corner when its middle is at `at`."""
    b, h, t, w = HALF_B, HALF_H, 8.0, 3.5
    right = [(b, -h), (b, -h + t), (w, -h + t), (w, h - t), (b, h - t), (b, h)]
    ring = np.array(right + [(-x, y) for x, y in reversed(right)])
    return Part((ring,)), at[0] - b, at[1] - h


def _draw_section(sketch: Sketch, at: Point, names: AxisNames) -> None:
    part, left, top = _i_shape((at[0] - 16, at[1]))
    scale, box = place([part], 1.0, left, top)
    draw_parts(sketch, scale, [part])
    draw_axes(sketch, box, scale.at(0.0, 0.0), names)
    draw_cross(sketch, scale.at(0.0, 0.0), 4.0)
    x, y = at[0] + 52, at[1] + 46
    sketch.arrows([((x, y), (x + 24, y)), ((x, y), (x, y - 24))], Stroke("ink", 1.1), 6.0)
    sketch.label(Label(x + 30, y + 3, "x", SMALL))
    sketch.label(Label(x, y - 28, "y", SMALL))


def _draw_bending(sketch: Sketch, at: Point, *, lateral: bool) -> None:
    """Draw the section with its two sides tinted and named by what the moment does to them."""
    x, y = at
    b, h = HALF_B, HALF_H
    halves: tuple[tuple[Colour, Box], tuple[Colour, Box]]
    if lateral:
        halves = (("compression", Box(x - b, y - h, x, y + h)), ("tension", Box(x, y - h, x + b, y + h)))
    else:
        halves = (("compression", Box(x - b, y - h, x + b, y)), ("tension", Box(x - b, y, x + b, y + h)))
    for colour, box in halves:
        ring = _corners(box)
        sketch.fill([ring], "section")
        sketch.fill([ring], colour, opacity=0.3)
    sketch.fill([_corners(Box(x - b, y - h, x + b, y + h))], None, stroke=FIRM)
    if lateral:
        sketch.line([(x, y - h - 10), (x, y + h + 10)], Stroke("ink", 1.0, CHAIN))
        sketch.label(Label(x - 4, y - h - 5, "compression", SMALL, "right", "compression"))
        sketch.label(Label(x + 4, y - h - 5, "tension", SMALL, "left", "tension"))
    else:
        sketch.line([(x - b - 10, y), (x + b + 10, y)], Stroke("ink", 1.0, CHAIN))
        sketch.label(Label(x, y - h - 5, "compression", SMALL, colour="compression"))
        sketch.label(Label(x, y + h + 12, "tension", SMALL, colour="tension"))


def _draw_element(sketch: Sketch, at: Point) -> None:
    x, y = at
    half, deep = 30.0, 17.0
    sketch.fill([_corners(Box(x - half, y - deep, x + half, y + deep))], "section", stroke=FIRM)
    sketch.arrows(
        [
            ((x - half, y), (x - half - 30, y)),
            ((x + half, y), (x + half + 30, y)),
            ((x - half - 5, y + 15), (x - half - 5, y - 15)),
            ((x + half + 5, y - 15), (x + half + 5, y + 15)),
        ],
        FORCE,
        7.0,
    )
    for side, start in ((-1, 235.0), (1, -55.0)):
        sketch.curl((x + side * half, y), 38.0, start, side * 110.0, FORCE, 7.0)
        sketch.label(Label(x + side * (half + 38), y - 32, "M", SMALL))
        sketch.label(Label(x + side * (half + 26), y + 13, "N", SMALL))
        sketch.label(Label(x + side * (half + 5), y - 20 if side < 0 else y + 26, "V", SMALL))


def _draw_beam(sketch: Sketch, at: Point) -> None:
    x, y = at
    half = 66.0
    left, right = x - half, x + half
    draw_support(sketch, "pin", (left, y), "inner")
    draw_support(sketch, "roller", (right, y), "inner")
    for end in (left, right):
        sketch.arrows([((end, y + 50), (end, y + 26))], FORCE, 7.0)
        sketch.label(Label(end + 9, y + 46, "R", SMALL, "left"))
    xs = np.linspace(-half, half, 41)
    sagging = np.column_stack([x + xs, y + 22 * np.cos(np.pi * xs / (2 * half))])
    sketch.line(sagging, Stroke("muted", 1.1, DASH))
    sketch.line([(left, y), (right, y)], Stroke("ink", 2.6))
    sketch.arrows(
        (((x + d, y - 30), (x + d, y - 3)) for d in np.linspace(-half, half, 7)), Stroke("ink", 0.9), 5.0
    )
    sketch.line([(left, y - 30), (right, y - 30)], Stroke("ink", 0.9))
    sketch.label(Label(x, y - 35, "load", SMALL))
    sketch.arrows([((x, y + 2), (x, y + 21))], Stroke("ink", 1.1), 5.0)
    sketch.label(Label(x + 6, y + 15, "w", SMALL, "left"))


def _draw_depth(sketch: Sketch, at: Point, *, down: bool) -> None:
    x, y = at
    part, left, top = _i_shape((x - 22, y))
    scale, box = place([part], 1.0, left, top)
    draw_parts(sketch, scale, [part])
    axis = y + 10.0
    sketch.line([(box.left - 10, axis), (box.right + 44, axis)], Stroke("ink", 1.0, CHAIN))
    tip = axis + (32.0 if down else -32.0)
    sketch.arrows([((box.right + 22, axis), (box.right + 22, tip))], FORCE, 7.0)
    sketch.label(Label(box.right + 28, (axis + tip) / 2 + 3.5, "positive", SMALL, "left"))
    sketch.label(Label(box.right + 14, axis + (-4 if down else 12), "neutral axis", SMALL, "left", halo=True))


def _corners(box: Box) -> tuple[Point, ...]:
    return ((box.left, box.top), (box.right, box.top), (box.right, box.bottom), (box.left, box.bottom))
