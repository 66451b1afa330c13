"""Symbols of supports and hinges under a beam drawn as a line."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from calcgen.figures.labels import Point
from calcgen.figures.picture import Sketch, Stroke, arc

Kind = Literal["pin", "roller", "fixed", "spring"]

LINE = Stroke("ink", 1.1)
GROUND = Stroke("ink", 0.8)
DROP = 24.0  # pixels from the beam down to the foot of the lowest symbol


@dataclass(frozen=True)
class Support:
    """A support at `x` along the beam; `turning` says that a rotation spring acts there too."""

    x: float
    kind: Kind
    label: str = ""
    turning: bool = False


def draw_support(sketch: Sketch, kind: Kind, at: Point, end: Literal["left", "right", "inner"]) -> None:
    """Draw the support under, or for a fixed end beside, the point `at` of the beam."""
    x, y = at
    if kind == "fixed":
        _draw_fixed(sketch, at, end)
    elif kind == "spring":
        sketch.line(_coil(x, y + 2, y + 18), LINE)
        _draw_ground(sketch, x, y + 18)
    else:
        foot = y + (15 if kind == "pin" else 12)
        sketch.fill([[(x, y + 1), (x + 7.5, foot), (x - 7.5, foot)]], "paper", stroke=LINE)
        if kind == "roller":
            for side in (-4.5, 4.5):
                sketch.dot((x + side, foot + 2.6), 2.3, "paper", Stroke("ink", 0.9))
        _draw_ground(sketch, x, foot if kind == "pin" else foot + 5.5)


def draw_rotation_spring(sketch: Sketch, at: Point) -> None:
    """Draw a spiral about the point of support."""
    turns = np.linspace(0.0, 2.25, 46)
    spiral = [arc(at, 2.0 + 3.4 * t, 360 * t + 90, 0.0, steps=1)[0] for t in turns]
    sketch.line(spiral, Stroke("ink", 0.9))


def draw_hinge(sketch: Sketch, at: Point) -> None:
    """Draw an open circle on the beam."""
    sketch.dot(at, 3.4, "paper", Stroke("ink", 1.2))


def _draw_ground(sketch: Sketch, x: float, y: float) -> None:
    sketch.line([(x - 11, y), (x + 11, y)], LINE)
    sketch.lines((((x + i, y), (x + i - 4, y + 4)) for i in np.arange(-8.0, 12.0, 4.5)), GROUND)


def _draw_fixed(sketch: Sketch, at: Point, end: Literal["left", "right", "inner"]) -> None:
    x, y = at
    if end == "inner":  # a clamp above and below
        for side in (-1, 1):
            sketch.line([(x - 8, y + side * 4), (x + 8, y + side * 4)], Stroke("ink", 1.8))
            ticks = np.arange(-7.0, 8.0, 4.5)
            sketch.lines((((x + i, y + side * 4), (x + i + 3, y + side * 8)) for i in ticks), GROUND)
        return
    out = -1 if end == "left" else 1
    sketch.line([(x, y - 14), (x, y + 14)], Stroke("ink", 1.8))
    sketch.lines((((x, y + i), (x + out * 5, y + i + 5)) for i in np.arange(-14.0, 12.0, 4.5)), GROUND)


def _coil(x: float, top: float, foot: float) -> list[Point]:
    heights = np.linspace(top + 2, foot - 2, 8)
    sides = [0.0, -5.0, 5.0, -5.0, 5.0, -5.0, 5.0, 0.0]
    return [(x, top), *((x + side, float(h)) for side, h in zip(sides, heights, strict=True)), (x, foot)]
