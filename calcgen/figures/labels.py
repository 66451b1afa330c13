"""Widths of text, boxes, and deterministic ways of keeping labels clear of each other."""

from collections.abc import Iterable, Sequence
from dataclasses import dataclass, field
from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np
from numpy.typing import NDArray

if TYPE_CHECKING:
    from matplotlib.ft2font import FT2Font

Point = tuple[float, float]

ASCENT, DESCENT = 0.77, 0.24  # of the size: DejaVu Sans from its capitals and figures to its descenders


@cache
def _font(bold: bool) -> "FT2Font":  # noqa: FBT001  the cache's key
    import matplotlib as mpl
    from matplotlib.ft2font import FT2Font

    name = "DejaVuSans-Bold.ttf" if bold else "DejaVuSans.ttf"
    font = FT2Font(str(Path(mpl.get_data_path()) / "fonts" / "ttf" / name))
    font.set_size(100, 72)
    return font


@cache
def _advance(character: str, bold: bool) -> float:  # noqa: FBT001  the cache's key
    """Width of one character at size 1; one that the font lacks is taken as square."""
    font = _font(bold)
    index = font.get_char_index(ord(character))
    return float(font.load_glyph(index).linearHoriAdvance) / 65536 / 100 if index else 1.0


@cache
def text_width(text: str, size: float, *, bold: bool = False) -> float:
    """Width of `text` in pixels, set in DejaVu Sans without kerning."""
    return size * sum(_advance(character, bold) for character in text)


@dataclass(frozen=True)
class Box:
    """A rectangle in pixels, y down."""

    left: float
    top: float
    right: float
    bottom: float

    def overlaps(self, other: "Box", gap: float = 0.0) -> bool:
        """Tell whether the boxes come nearer to each other than `gap`."""
        return (
            self.left < other.right + gap
            and other.left < self.right + gap
            and self.top < other.bottom + gap
            and other.top < self.bottom + gap
        )

    def crosses(self, start: NDArray[np.float64], end: NDArray[np.float64]) -> bool:
        """Tell whether any segment from `start` to `end`, shapes (n, 2), meets the box (slab method)."""
        step = end - start
        with np.errstate(divide="ignore", invalid="ignore"):
            near = (np.array([self.left, self.top]) - start) / step
            far = (np.array([self.right, self.bottom]) - start) / step
        inside = (start >= [self.left, self.top]) & (start <= [self.right, self.bottom])
        parallel = step == 0
        low = np.where(parallel, np.where(inside, -np.inf, np.inf), np.minimum(near, far)).max(axis=1)
        high = np.where(parallel, np.where(inside, np.inf, -np.inf), np.maximum(near, far)).min(axis=1)
        return bool(np.any((low <= high) & (high >= 0) & (low <= 1)))

    def moved(self, dx: float, dy: float) -> "Box":
        """Give the box shifted by (`dx`, `dy`)."""
        return Box(self.left + dx, self.top + dy, self.right + dx, self.bottom + dy)

    def into(self, left: float, right: float) -> float:
        """Give the shift sideways into [`left`, `right`], or to start at `left` if the box is too long."""
        return max(min(0.0, right - self.right), left - self.left)

    def grown(self, by: float) -> "Box":
        """Give the box with a margin of `by` on every side."""
        return Box(self.left - by, self.top - by, self.right + by, self.bottom + by)


def around(boxes: Iterable[Box]) -> Box:
    """Give the smallest box that holds all of `boxes`, which must not be empty."""
    held = list(boxes)
    return Box(
        min(b.left for b in held),
        min(b.top for b in held),
        max(b.right for b in held),
        max(b.bottom for b in held),
    )


@dataclass
class Obstacles:
    """What the next label must keep clear of: boxes, line segments, and the frame's two sides."""

    left: float
    right: float
    boxes: list[Box] = field(default_factory=list)
    segments: list[tuple[Box, NDArray[np.float64], NDArray[np.float64]]] = field(default_factory=list)

    def add_line(self, points: Sequence[Point] | NDArray[np.float64]) -> None:
        """Add a polyline in pixels to keep clear of."""
        vertices = np.asarray(points, dtype=float)
        (left, top), (right, bottom) = vertices.min(axis=0).tolist(), vertices.max(axis=0).tolist()
        self.segments.append((Box(left, top, right, bottom), vertices[:-1], vertices[1:]))

    def clear(self, box: Box, gap: float = 2.0) -> bool:
        """Tell whether `box` is inside the frame and free of everything placed so far."""
        return box.left >= self.left and box.right <= self.right and self.free(box, gap)

    def free(self, box: Box, gap: float = 2.0) -> bool:
        """Tell whether `box` is free of everything placed so far, inside the frame or not."""
        if any(box.overlaps(other, gap) for other in self.boxes):
            return False
        grown = box.grown(gap / 2)
        near = (line for line in self.segments if grown.overlaps(line[0], 1e-9))
        return not any(grown.crosses(start, end) for _, start, end in near)


def spread(wanted: Sequence[float], widths: Sequence[float], low: float, high: float) -> list[float] | None:
    """Centres for intervals side by side in [`low`, `high`], each as near to its wanted place as can be.

    `wanted` must not decrease. Neighbours that would overlap form a cluster about the mean of their wishes
    (pool adjacent violators, the least-squares solution; Barlow et al., Statistical Inference under Order
    Restrictions, 1972). None when they don't fit.
    """
    if sum(widths) > high - low:
        return None
    starts, before = [], 0.0  # with the widths before an interval taken off, order is the only constraint
    for centre, width in zip(wanted, widths, strict=True):
        starts.append(centre - width / 2 - before)
        before += width
    clusters: list[tuple[float, int]] = []
    for start in starts:
        mean, count = start, 1
        while clusters and clusters[-1][0] > mean:
            other, members = clusters.pop()
            mean, count = (other * members + mean * count) / (members + count), members + count
        clusters.append((mean, count))
    placed, before = [], 0.0
    means = [mean for mean, count in clusters for _ in range(count)]
    for mean, width in zip(means, widths, strict=True):
        placed.append(min(max(mean, low), high - sum(widths)) + before + width / 2)
        before += width
    return placed


def two_lanes(wanted: Sequence[float], breadth: float, low: float, high: float) -> list[float] | None:
    """Centres for upright labels, the odd ones in a lane beyond, whose leaders pass between the even ones."""
    widths = [breadth if n % 2 == 0 else max(4.0, breadth / 3) for n in range(len(wanted))]
    return spread(wanted, widths, low, high)
