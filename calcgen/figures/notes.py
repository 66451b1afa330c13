"""Notes with leaders around a section, each in the nearest clear place."""

from collections.abc import Iterator
from dataclasses import replace
from math import inf

import numpy as np

from calcgen.figures.labels import Box, Obstacles, Point
from calcgen.figures.picture import THIN, Label, Sketch

REACH = 400.0  # pixels from a point to the end of its leader, at most
DIRECTIONS = ((0.9, 0.45), (0.9, -0.45), (1.0, 0.0), (0.5, 0.9), (0.5, -0.9))


def obstacles_of(sketch: Sketch) -> Obstacles:
    """Give everything drawn so far as obstacles: labels and dark fills as boxes, all else by its lines."""
    obstacles = Obstacles(-inf, inf)
    for item in sketch.items:
        if isinstance(item, Label) or item.fill == "ink":
            obstacles.boxes.append(item.box)
        elif not item.clip:
            for ring in item.rings:
                obstacles.add_line([*ring, ring[0]] if item.closed else ring)
    return obstacles


def draw_note(
    sketch: Sketch, note: Label, point: Point, around: Box, obstacles: Obstacles, room: float
) -> None:
    """Draw `note` beside `point` with a leader, on the outer side of the box `around` where it can be.

    The whole picture stays within `room` pixels across, unless the note alone is too wide for that.
    """
    held = sketch.box()
    obstacles.left, obstacles.right = held.right - room, held.left + room
    others = _others(obstacles, point)

    def open_to(elbow: Point) -> bool:
        return not any(box.crosses(np.array([point]), np.array([elbow])) for box in others)

    places = list(_places(note, point, around))
    clear = ((label, at) for label, at in places if obstacles.clear(label.box, 3.0) and open_to(at))
    free = ((label, at) for label, at in places if obstacles.free(label.box, 3.0))
    label, elbow = next(clear, None) or next(free)  # a note wider than the frame goes beyond it
    sketch.line([point, elbow], THIN)
    obstacles.add_line([point, elbow])
    obstacles.boxes.append(sketch.label(label).box)


def _others(obstacles: Obstacles, point: Point) -> list[Box]:
    """Boxes that the leader must not cross: all but the one that it starts in."""
    x, y = point
    return [b for b in obstacles.boxes if not (b.left <= x <= b.right and b.top <= y <= b.bottom)]


def _places(note: Label, point: Point, around: Box) -> Iterator[tuple[Label, Point]]:
    x, y = point
    outer = 1 if x >= (around.left + around.right) / 2 else -1
    for reach in np.arange(14.0, REACH, 6.0):
        for across, up in DIRECTIONS:
            for sign in (outer, -outer):
                elbow = (float(x + sign * reach * across), float(y - reach * up))
                yield (
                    replace(
                        note,
                        x=elbow[0] + 3 * sign,
                        y=elbow[1] + 0.36 * note.size,
                        anchor="left" if sign > 0 else "right",
                    ),
                    elbow,
                )
