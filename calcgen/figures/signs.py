"""Positive and negative parts of a diagram told apart: negative ones are hatched, and each has its sign."""

from collections.abc import Iterator, Sequence

import numpy as np
from numpy.typing import NDArray

from calcgen.figures.labels import Box, Point
from calcgen.figures.outline import box_of, slanted
from calcgen.figures.picture import TEXT, Label, Sketch, Stroke

PITCH = 5.0  # pixels between lines of the hatch
ROOM = 15.0  # pixels of height from which a part has room for its sign
HALF = 7.0  # pixels from the middle of a sign to what it stands clear of


def draw_signs(
    sketch: Sketch, curve: NDArray[np.float64], zero: float, labels: Sequence[Box], way: int
) -> None:
    """Hatch the negative parts between a curve and its zero line, and write signs clear of `labels`.

    `curve` (n, 2) in pixels, from left to right; positive values lie on the side `way` of the line: 1 below.
    """
    for part in _parts(curve, zero):
        middle = part[:, 1].sum() / len(part) - zero
        positive = bool(middle * way > 0)
        ring = np.array([(part[0, 0], zero), *part, (part[-1, 0], zero)])
        if not positive:
            sketch.lines(slanted(box_of([ring]), PITCH), Stroke("muted", 0.7), clip=[ring])
        at = _widest(part, zero, labels)
        if at is not None:
            sign = Label(at[0], at[1] + 0.36 * TEXT, "+" if positive else "−", TEXT, bold=True, halo=True)
            sketch.label(sign)


def _parts(curve: NDArray[np.float64], zero: float) -> Iterator[NDArray[np.float64]]:
    """Give the stretches of a curve on one side of the line, cut where it crosses."""
    part: list[Point] = []
    side = 0.0
    before: Point | None = None
    for x, y in curve.tolist():
        here = float(np.sign(y - zero))
        if part and here not in (side, 0.0):
            if before is not None and before[1] != y:
                crossing = before[0] + (x - before[0]) * (zero - before[1]) / (y - before[1])
                part.append((crossing, zero))
                yield np.array(part)
                part = [(crossing, zero)]
            else:
                yield np.array(part)
                part = []
            side = here
        elif here == 0.0 and part:
            part.append((x, y))
            yield np.array(part)
            part = []
        elif here != 0.0 and not part:
            part = [] if before is None else [before]
            side = here
        if here != 0.0:
            part.append((x, y))
        before = (x, y)
    if part:
        yield np.array(part)


def _widest(part: NDArray[np.float64], zero: float, labels: Sequence[Box]) -> Point | None:
    """Give the middle of a part where it is highest and no label stands; None where there is no room."""
    left, right = float(part[0, 0]) + HALF, float(part[-1, 0]) - HALF
    if right < left:
        return None
    places = np.linspace(left, right, 41)
    beside = [np.abs(np.interp(places + step, *part.T) - zero) for step in (-HALF, 0.0, HALF)]
    heights = np.min(beside, axis=0) * np.sign(part[:, 1].mean() - zero)
    for number in np.argsort(-np.abs(heights), kind="stable"):
        x, height = float(places[number]), float(heights[number])
        if abs(height) < ROOM:
            return None
        box = Box(x - HALF, zero + height / 2 - HALF, x + HALF, zero + height / 2 + HALF)
        if not any(box.overlaps(other, 1.0) for other in labels):
            return x, zero + height / 2
    return None
