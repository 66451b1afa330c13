"""A picture before it is rendered: frozen lines, shapes and labels in pixels, x right, y down."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field, replace
from math import atan2, cos, hypot, pi, sin
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from calcgen.figures.labels import ASCENT, DESCENT, Box, Point, around, text_width

Width = Literal["wide", "narrow"]
Colour = Literal["ink", "muted", "rule", "paper", "section", "tension", "compression"]
Anchor = Literal["left", "center", "right"]
Points = Sequence[Point] | NDArray[np.float64]

WIDTHS: dict[Width, float] = {"wide": 640.0, "narrow": 350.0}
TEXT, SMALL = 11.0, 10.0  # sizes of type, the same at every width
LINE = 14.0  # from one line of text to the next

CHAIN = (9.0, 2.5, 2.0, 2.5)
DASH = (4.0, 2.5)
DOT = (1.0, 2.5)


@dataclass(frozen=True)
class Stroke:
    """How a line is drawn."""

    colour: Colour = "ink"
    weight: float = 1.0
    dash: tuple[float, ...] = ()


FIRM = Stroke("ink", 1.4)
THIN = Stroke("muted", 0.7)
HAIR = Stroke("rule", 0.8)


@dataclass(frozen=True)
class Shape:
    """One or more rings or polylines that share a stroke and a fill; rings fill by their winding.

    `href` is where the shape leads, '' for nowhere.
    """

    rings: tuple[tuple[Point, ...], ...]
    closed: bool
    stroke: Stroke | None
    fill: Colour | None = None
    opacity: float = 1.0
    clip: tuple[tuple[Point, ...], ...] = ()
    href: str = ""

    @property
    def box(self) -> Box:
        """The smallest box around the shape, or around its clip."""
        vertices = np.array([point for ring in (self.clip or self.rings) for point in ring])
        (left, top), (right, bottom) = vertices.min(axis=0), vertices.max(axis=0)
        return Box(float(left), float(top), float(right), float(bottom))


@dataclass(frozen=True)
class Label:
    """A line of text at the baseline point (x, y); `turned` reads from the bottom to the top.

    `href` is where the text leads, '' for nowhere.
    """

    x: float
    y: float
    text: str
    size: float = TEXT
    anchor: Anchor = "center"
    colour: Colour = "ink"
    bold: bool = False
    turned: bool = False
    halo: bool = False
    href: str = ""

    @property
    def box(self) -> Box:
        """The box that the text fills."""
        width = text_width(self.text, self.size, bold=self.bold)
        before = {"left": 0.0, "center": width / 2, "right": width}[self.anchor]
        up, down = ASCENT * self.size, DESCENT * self.size
        if self.turned:
            return Box(self.x - up, self.y + before - width, self.x + down, self.y + before)
        return Box(self.x - before, self.y - up, self.x - before + width, self.y + down)

    def moved(self, dx: float, dy: float) -> "Label":
        """Give the label shifted by (`dx`, `dy`)."""
        return replace(self, x=self.x + dx, y=self.y + dy)

    def within(self, left: float, right: float) -> "Label":
        """Give the label shifted sideways into [`left`, `right`], or to start at `left` if it is too long."""
        return self.moved(self.box.into(left, right), 0.0)


Item = Shape | Label


@dataclass(frozen=True)
class Picture:
    """A finished picture: `frame` is the part of the plane shown, `ident` prefixes the ids of its SVG.

    `listed` is what belongs to the picture and has no room in it.
    """

    ident: str
    title: str
    description: str
    frame: Box
    items: tuple[Item, ...]
    listed: tuple[str, ...] = ()


def label_boxes(picture: Picture) -> tuple[tuple[str, Box], ...]:
    """Text and box of every label, in the order of drawing."""
    return tuple((item.text, item.box) for item in picture.items if isinstance(item, Label))


def _ring(points: Points) -> tuple[Point, ...]:
    return tuple((float(x), float(y)) for x, y in points)


@dataclass
class Sketch:
    """Collects the items of a picture; every method draws on top of what is there."""

    items: list[Item] = field(default_factory=list)

    def line(self, points: Points, stroke: Stroke = THIN) -> None:
        """Draw an open polyline."""
        self.items.append(Shape((_ring(points),), closed=False, stroke=stroke))

    def lines(self, several: Iterable[Points], stroke: Stroke = THIN, *, clip: Iterable[Points] = ()) -> None:
        """Draw open polylines that share a stroke, within `clip` if there is one."""
        rings = tuple(_ring(points) for points in several)
        if rings:
            within = tuple(_ring(points) for points in clip)
            self.items.append(Shape(rings, closed=False, stroke=stroke, clip=within))

    def fill(
        self,
        rings: Iterable[Points],
        colour: Colour | None,
        *,
        opacity: float = 1.0,
        stroke: Stroke | None = None,
        clip: Iterable[Points] = (),
    ) -> None:
        """Fill closed rings, and draw their edges if there is a `stroke`."""
        outer, within = tuple(_ring(points) for points in rings), tuple(_ring(points) for points in clip)
        self.items.append(Shape(outer, closed=True, stroke=stroke, fill=colour, opacity=opacity, clip=within))

    def arrows(self, several: Iterable[tuple[Point, Point]], stroke: Stroke, head: float = 5.0) -> None:
        """Draw straight arrows from tail to tip."""
        pairs = list(several)
        self.lines(([tail, _short_of(tip, tail, head * 0.6)] for tail, tip in pairs), stroke)
        self.heads(pairs, stroke.colour, head)

    def heads(self, several: Iterable[tuple[Point, Point]], colour: Colour, head: float = 5.0) -> None:
        """Draw arrow heads alone, at the second point of each pair."""
        rings = [_head(tail, tip, head) for tail, tip in several if tail != tip]
        if rings:
            self.fill(rings, colour)

    def curl(
        self, centre: Point, radius: float, start: float, sweep: float, stroke: Stroke, head: float = 6.0
    ) -> None:
        """Draw a curved arrow; angles in degrees, counter-clockwise as seen, from the right."""
        points = arc(centre, radius, start, sweep)
        self.line(points[:-1], stroke)
        # the chord over one head's length, so that the head lies along the arc
        chord = float(np.copysign(min(abs(sweep), np.degrees(head / radius)), sweep))
        tail = arc(centre, radius, start + sweep - chord, 0.0, steps=1)[0]
        self.heads([(tail, points[-1])], stroke.colour, head)

    def dot(self, centre: Point, radius: float, colour: Colour, stroke: Stroke | None = None) -> None:
        """Draw a filled circle."""
        self.fill([arc(centre, radius, 0, 360, steps=20)[:-1]], colour, stroke=stroke)

    def label(self, label: Label) -> Label:
        """Draw a line of text, and give it back."""
        self.items.append(label)
        return label

    def lead(self, first: int, href: str) -> None:
        """Make a link of all that was drawn from the item `first` on."""
        self.items[first:] = [replace(item, href=href) for item in self.items[first:]]

    def box(self) -> Box:
        """Give the smallest box around everything drawn."""
        return around(item.box for item in self.items)

    def picture(self, ident: str, title: str, description: str, *, width: float | None = None) -> Picture:
        """Frame the picture: over [0, `width`], or as what is drawn needs if that is wider or not given."""
        held = self.box()
        left, right = held.left - 3.0, held.right + 3.0
        if width is not None:
            left, right = min(held.left, 0.0), max(held.right, width)
        frame = Box(round(left, 1), round(held.top - 3.0, 1), round(right, 1), round(held.bottom + 3.0, 1))
        return Picture(ident, title, description, frame, tuple(self.items))


def wrap(text: str, size: float, width: float) -> list[str]:
    """Break text into lines no wider than `width`, as far as its words allow."""
    lines: list[str] = []
    for word in filter(None, text.split(" ")):  # a no-break space holds number and unit together
        longer = f"{lines[-1]} {word}" if lines else word
        if lines and text_width(longer, size) <= width:
            lines[-1] = longer
        else:
            lines.append(word)
    return lines


def thin(points: Points, tolerance: float = 0.1) -> NDArray[np.float64]:
    """Leave out points that lie within `tolerance` pixels of the lines through the rest (Douglas–Peucker)."""
    given = np.asarray(points, dtype=float)
    keep = np.zeros(len(given), dtype=bool)
    keep[[0, -1]] = True
    while True:  # all lines between points that are kept are halved at once
        ends = np.flatnonzero(keep)
        line = np.repeat(np.arange(len(ends) - 1), np.diff(ends))
        (dx, dy), (x, y) = np.diff(given[ends], axis=0)[line].T, (given[:-1] - given[ends[line]]).T
        length = np.hypot(dx, dy)
        apart = np.abs(dx * y - dy * x) / np.where(length, length, 1.0)
        apart = np.where(length, apart, np.hypot(x, y))
        farthest = np.maximum.reduceat(apart, ends[:-1])[line]
        found = np.flatnonzero((apart == farthest) & (farthest > tolerance))
        if not len(found):
            return given[keep]
        keep[found[np.unique(line[found], return_index=True)[1]]] = True


def arc(centre: Point, radius: float, start: float, sweep: float, steps: int = 24) -> tuple[Point, ...]:
    """Points along a circle; angles in degrees, counter-clockwise as seen, from the right."""
    angles = np.radians(start + sweep * np.linspace(0.0, 1.0, steps + 1))
    return tuple((centre[0] + radius * cos(a), centre[1] - radius * sin(a)) for a in angles)


def _short_of(tip: Point, tail: Point, by: float) -> Point:
    """Give the end of an arrow's shaft, so that it does not show beyond the point of the head."""
    length = hypot(tip[0] - tail[0], tip[1] - tail[1])
    share = min(by / length, 1.0) if length else 0.0
    return tip[0] + (tail[0] - tip[0]) * share, tip[1] + (tail[1] - tip[1]) * share


def _head(tail: Point, tip: Point, size: float) -> tuple[Point, Point, Point]:
    away = atan2(tail[1] - tip[1], tail[0] - tip[0])
    half = pi / 10
    return (
        tip,
        (tip[0] + size * cos(away + half), tip[1] + size * sin(away + half)),
        (tip[0] + size * cos(away - half), tip[1] + size * sin(away - half)),
    )
