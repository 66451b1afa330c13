"""The section drawn to scale: parts, centroid and axes, shared by every figure that shows a section."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from math import cos, radians, sin
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from calcgen.figures.labels import Box, Point, around
from calcgen.figures.picture import CHAIN, FIRM, SMALL, Label, Sketch, Stroke, thin

Ring = NDArray[np.float64]
Tone = Literal["plain", "hatched", "crossed", "ruled", "solid"]

MANY, UNSEEN = 500, 0.1  # vertices of a ring, and the pixels within which more of them are left out
LEAST_BAR = 1.6  # pixels of radius
AXIS = Stroke("muted", 0.8, CHAIN)
OVERRUN = 14.0  # of an axis beyond the outline


@dataclass(frozen=True, eq=False)
class Part:
    """Rings of one part, each of shape (n, 2), x right and y up; a hole runs against its exterior.

    `label` names the part's material in the legend; materials are told apart by `tone`.
    """

    rings: tuple[Ring, ...]
    label: str = ""
    tone: Tone = "plain"


@dataclass(frozen=True)
class Bar:
    """A round bar, drawn as a solid dot and never too small to see: its centre and its diameter."""

    x: float
    y: float
    diameter: float


@dataclass(frozen=True)
class AxisNames:
    """Names of the horizontal and the vertical axis."""

    horizontal: str
    vertical: str


EUROCODE, AMERICAN = AxisNames("y", "z"), AxisNames("x", "y")


@dataclass(frozen=True)
class Scale:
    """From section coordinates (y up) to pixels (y down); `across` is the factor of x, often the same."""

    factor: float
    across: float
    x_0: float
    y_0: float

    def at(self, x: float, y: float) -> Point:
        """Give the pixel of a point of the section."""
        return self.x_0 + self.across * x, self.y_0 - self.factor * y

    def radius(self, diameter: float) -> float:
        """Give the radius in pixels of a round bar, which stays round and is never too small to see."""
        return max(diameter / 2 * min(self.factor, self.across), LEAST_BAR)

    def ring(self, ring: Ring) -> Ring:
        """Give the pixels of a ring, shape (n, 2)."""
        return np.column_stack([self.x_0 + self.across * ring[:, 0], self.y_0 - self.factor * ring[:, 1]])


def bounds(parts: Sequence[Part]) -> tuple[float, float, float, float]:
    """Left, bottom, right and top of all parts, in section coordinates."""
    points = np.vstack([ring for part in parts for ring in part.rings])
    (left, bottom), (right, top) = points.min(axis=0), points.max(axis=0)
    return float(left), float(bottom), float(right), float(top)


def fit(parts: Sequence[Part], width: float, height: float) -> tuple[Scale, Box]:
    """Scale at which the parts fill `width` by `height` pixels from (0, 0), and the box that they fill."""
    left, bottom, right, top = bounds(parts)
    factor = min(width / max(right - left, 1e-300), height / max(top - bottom, 1e-300))
    return place(parts, factor, 0.0, 0.0)


def place(
    parts: Sequence[Part], factor: float, x: float, y: float, *, across: float | None = None
) -> tuple[Scale, Box]:
    """Scale with the top left of the parts at pixel (x, y), and the box that they fill."""
    left, bottom, right, top = bounds(parts)
    wide = factor if across is None else across
    scale = Scale(factor, wide, x - wide * left, y + factor * top)
    return scale, Box(x, y, x + wide * (right - left), y + factor * (top - bottom))


def pixels(scale: Scale, part: Part) -> list[Ring]:
    """Rings of a part in pixels; of very many vertices only those that can be seen."""
    rings = [scale.ring(ring) for ring in part.rings]
    return [thin(ring, UNSEEN) if len(ring) > MANY else ring for ring in rings]


def draw_parts(sketch: Sketch, scale: Scale, parts: Iterable[Part]) -> None:
    """Draw each part: a light fill by its tone, a firm outline."""
    for part in parts:
        draw_tone(sketch, pixels(scale, part), part.tone)


def draw_bars(sketch: Sketch, scale: Scale, bars: Iterable[Bar]) -> None:
    """Draw bars as solid dots to scale."""
    for bar in bars:
        sketch.dot(scale.at(bar.x, bar.y), scale.radius(bar.diameter), "ink")


def draw_tone(sketch: Sketch, rings: Sequence[Ring], tone: Tone) -> None:
    """Fill rings given in pixels by their tone, and draw their outline."""
    sketch.fill(rings, "ink" if tone == "solid" else "section")
    held = box_of(rings)
    lines = slanted(held, 6.0) if tone in ("hatched", "crossed") else []
    if tone == "crossed":
        lines += slanted(held, 6.0, falling=True)
    if tone == "ruled":
        lines = [((held.left, y), (held.right, y)) for y in np.arange(held.top + 2.5, held.bottom, 4.0)]
    sketch.lines(lines, Stroke("muted", 0.6), clip=rings)
    sketch.fill(rings, None, stroke=FIRM)


def box_of(rings: Sequence[Ring]) -> Box:
    """Give the smallest box around rings in pixels."""
    points = np.vstack(rings)
    (left, top), (right, bottom) = points.min(axis=0), points.max(axis=0)
    return Box(float(left), float(top), float(right), float(bottom))


def slanted(held: Box, pitch: float, *, falling: bool = False) -> list[tuple[Point, Point]]:
    """Lines at 45 degrees over a box, `pitch` pixels apart; they rise to the right, or fall."""
    rise = held.bottom - held.top
    low, high = (held.top, held.bottom) if falling else (held.bottom, held.top)
    starts = np.arange(np.floor((held.left - rise) / pitch) * pitch, held.right, pitch)
    return [((float(x), low), (float(x) + rise, high)) for x in starts]


def draw_cross(sketch: Sketch, centre: Point, reach: float = 4.5) -> None:
    """Mark the centroid."""
    x, y = centre
    sketch.lines([((x - reach, y), (x + reach, y)), ((x, y - reach), (x, y + reach))], FIRM)


def draw_axes(sketch: Sketch, box: Box, centre: Point, names: AxisNames) -> None:
    """Draw the chain-dotted axes through the centroid, named at both ends."""
    x, y = centre
    reach = box.grown(OVERRUN)
    left, right, top, bottom = reach.left, reach.right, reach.top, reach.bottom
    sketch.lines([((left, y), (right, y)), ((x, top), (x, bottom))], AXIS)
    for text, at_x, at_y in (
        (names.horizontal, left - 6, y + 3.5),
        (names.horizontal, right + 6, y + 3.5),
        (names.vertical, x, top - 4),
        (names.vertical, x, bottom + 10.5),
    ):
        sketch.label(Label(at_x, at_y, text, SMALL, colour="muted"))


def draw_principal(sketch: Sketch, box: Box, centre: Point, angle: float) -> None:
    """Draw the principal axes; `angle` in degrees from the horizontal, counter-clockwise, to axis 1."""
    # bars beside the outline can pull the centroid out of its box
    frame = around([box, Box(*centre, *centre)]).grown(OVERRUN - 4)
    for name, turn in (("1", radians(angle)), ("2", radians(angle + 90))):
        along = cos(turn), -sin(turn)
        ends = [_exit(frame, centre, (sign * along[0], sign * along[1])) for sign in (-1, 1)]
        sketch.line(ends, Stroke("ink", 0.8, CHAIN))
        taken = [item.box for item in sketch.items if isinstance(item, Label)]
        for (x, y), sign in zip(ends, (-1, 1), strict=True):
            label = Label(x + sign * 7 * along[0], y + sign * 7 * along[1] + 3.5, name, SMALL, bold=True)
            while any(label.box.overlaps(other, 1) for other in taken):
                label = label.moved(sign * 3 * along[0], sign * 3 * along[1])
            sketch.label(label)


def _exit(box: Box, start: Point, along: Point) -> Point:
    """Give the point where a ray from inside the box leaves it."""
    reach = min(
        ((limit - at) / step)
        for at, step, limits in (
            (start[0], along[0], (box.left, box.right)),
            (start[1], along[1], (box.top, box.bottom)),
        )
        for limit in limits
        if abs(step) > 1e-12 and (limit - at) / step >= 0
    )
    return start[0] + reach * along[0], start[1] + reach * along[1]
