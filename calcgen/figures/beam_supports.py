"""Symbols of supports and hinges under a beam drawn as a line."""

from dataclasses import dataclass
from typing import Literal

import numpy as np

from calcgen.figures.labels import Point
from calcgen.figures.picture import Sketch, Stroke, arc

Kind = Literal["pin", "roller", "fixed", "spring", "turning"]
End = Literal["left", "right", "inner"]

LINE = Stroke("ink", 1.1)
GROUND = Stroke("ink", 0.8)
DROP = 24.0  # pixels from the beam down to the foot of the lowest symbol
FULL = 26.0  # pixels from one support to the next from which symbols have their full size
LEAST = 0.2  # of the full size, however near to each other they are


@dataclass(frozen=True)
class Support:
    """A support at `x` along the beam; its `label` may have several lines.

    `turning` says that a rotation spring acts there too; of the kind 'turning' it acts alone.
    """

    x: float
    kind: Kind
    label: str = ""
    turning: bool = False


def draw_support(sketch: Sketch, kind: Kind, at: Point, end: End, size: float = 1.0) -> None:
    """Draw the support under, or for a fixed end beside, the point `at` of the beam."""
    x, y = at
    if kind == "turning":
        return
    if kind == "fixed":
        _draw_fixed(sketch, at, end, size)
    elif kind == "spring":
        sketch.line(_coil(x, y + 2 * size, y + 18 * size, size), LINE)
        _draw_ground(sketch, x, y + 18 * size, size)
    else:
        foot = y + (15 if kind == "pin" else 12) * size
        half = 7.5 * size
        sketch.fill([[(x, y + size), (x + half, foot), (x - half, foot)]], "paper", stroke=LINE)
        if kind == "roller" and size > 0.5:
            for side in (-4.5, 4.5):
                sketch.dot((x + side * size, foot + 2.6 * size), 2.3 * size, "paper", Stroke("ink", 0.9))
        _draw_ground(sketch, x, foot if kind == "pin" else foot + 5.5 * size, size)


def draw_rotation_spring(sketch: Sketch, at: Point, size: float = 1.0) -> None:
    """Draw a spiral about the point of support."""
    turns = np.linspace(0.0, 2.25, 46)
    spiral = [arc(at, size * (2.0 + 3.4 * t), 360 * t + 90, 0.0, steps=1)[0] for t in turns]
    sketch.line(spiral, Stroke("ink", 0.9))


def draw_hinge(sketch: Sketch, at: Point, size: float = 1.0) -> None:
    """Draw an open circle on the beam."""
    sketch.dot(at, max(3.4 * size, 1.6), "paper", Stroke("ink", 1.2))


def _draw_ground(sketch: Sketch, x: float, y: float, size: float) -> None:
    half = 11 * size
    sketch.line([(x - half, y), (x + half, y)], LINE)
    if size > 0.5:
        ticks = np.arange(-8.0, 12.0, 4.5) * size
        sketch.lines((((x + i, y), (x + i - 4 * size, y + 4 * size)) for i in ticks), GROUND)


def _draw_fixed(sketch: Sketch, at: Point, end: End, size: float) -> None:
    x, y = at
    if end == "inner":  # a clamp above and below
        half = 8 * size
        for side in (-1, 1):
            sketch.line([(x - half, y + side * 4), (x + half, y + side * 4)], Stroke("ink", 1.8))
            ticks = np.arange(-7.0, 8.0, 4.5) * size
            sketch.lines((((x + i, y + side * 4), (x + i + 3 * size, y + side * 8)) for i in ticks), GROUND)
        return
    out = -1 if end == "left" else 1
    sketch.line([(x, y - 14), (x, y + 14)], Stroke("ink", 1.8))
    sketch.lines((((x, y + i), (x + out * 5, y + i + 5)) for i in np.arange(-14.0, 12.0, 4.5)), GROUND)


def _coil(x: float, top: float, foot: float, size: float) -> list[Point]:
    heights = np.linspace(top + 2 * size, foot - 2 * size, 8)
    sides = size * np.array([0.0, -5.0, 5.0, -5.0, 5.0, -5.0, 5.0, 0.0])
    turns = [(x + float(side), float(h)) for side, h in zip(sides, heights, strict=True)]
    return [(x, top), *turns, (x, foot)]
