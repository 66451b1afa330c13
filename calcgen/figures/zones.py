"""Zones of a section over its depth: at yield, cracked, or without contact, each with a mark of its own."""

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Literal

import numpy as np

from calcgen.figures.labels import Box, Point
from calcgen.figures.outline import Part, Ring, Scale, box_of, pixels, slanted
from calcgen.figures.picture import DASH, Sketch, Stroke

ZoneKind = Literal["yielded", "cracked", "open"]


@dataclass(frozen=True)
class Zone:
    """What the section is between two heights, with its words for the legend.

    `yielded`: dense lines that fall to the right. `cracked`: cracks from the outer edge to the neutral axis.
    `open`: no fill and a dashed outline, for what is out of contact or carries nothing.
    """

    low: float
    high: float
    kind: ZoneKind
    label: str


def draw_zone(sketch: Sketch, scale: Scale, parts: Sequence[Part], zone: Zone) -> None:
    """Draw a zone over parts that are drawn already."""
    for part in parts:
        rings = pixels(scale, part)
        held = box_of(rings)
        top, bottom = max(scale.at(0, zone.high)[1], held.top), min(scale.at(0, zone.low)[1], held.bottom)
        if bottom - top > 0.2:
            draw_zone_mark(sketch, rings, Box(held.left, top, held.right, bottom), zone.kind)


def draw_zone_mark(sketch: Sketch, rings: Sequence[Ring], strip: Box, kind: ZoneKind) -> None:
    """Draw the mark of a zone on the rings of a part, in pixels, within a level strip."""
    inside = cut_to(rings, strip)
    if not inside:
        return
    if kind == "yielded":
        sketch.lines(slanted(strip, 3.5, falling=True), Stroke("ink", 0.7), clip=inside)
    elif kind == "cracked":
        sketch.lines(_cracks(strip), Stroke("muted", 0.8), clip=inside)
    else:
        sketch.fill(inside, "paper", stroke=Stroke("paper", 2.2))
        sketch.fill(inside, None, stroke=Stroke("ink", 1.0, DASH))


def _cracks(strip: Box) -> list[list[Point]]:
    """Give jagged lines upright across the strip, every second one shorter."""
    lines = []
    count = max(int((strip.right - strip.left) / 9.0), 1)
    for number in range(count):
        x = strip.left + (strip.right - strip.left) * (number + 0.5) / count
        top = strip.top + (0.35 * (strip.bottom - strip.top) if number % 2 else 0.0)
        ys = np.linspace(strip.bottom, top, max(int((strip.bottom - top) / 7.0), 1) + 1)
        lines.append([(x + (1.3 if n % 2 else -1.3), float(y)) for n, y in enumerate(ys)])
    return lines


def cut_to(rings: Sequence[Ring], strip: Box) -> list[Ring]:
    """Cut rings to a level strip (Sutherland–Hodgman, one straight cut after the other)."""
    cut = [_below(_below(ring, strip.top, 1.0), strip.bottom, -1.0) for ring in rings]
    return [ring for ring in cut if len(ring) > 2]


def _below(ring: Ring, level: float, sign: float) -> Ring:
    """Keep the part of a ring where sign·(y − level) ≥ 0."""
    if not len(ring):
        return ring
    height = sign * (ring[:, 1] - level)
    kept: list[tuple[float, float]] = []
    for here, there, h_1, h_2 in zip(
        ring, np.roll(ring, -1, axis=0), height, np.roll(height, -1), strict=True
    ):
        if h_1 >= 0:
            kept.append((float(here[0]), float(here[1])))
        if h_1 * h_2 < 0:
            x, y = here + (there - here) * h_1 / (h_1 - h_2)
            kept.append((float(x), float(y)))
    return np.array(kept).reshape(-1, 2)
