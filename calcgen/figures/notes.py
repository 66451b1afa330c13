"""Notes with leaders around a section, each in the nearest clear place."""

from collections.abc import Iterator
from dataclasses import dataclass, replace
from functools import partial
from math import inf

import numpy as np

from calcgen.figures.labels import Box, Obstacles, Point
from calcgen.figures.picture import LINE, TEXT, THIN, Label, Sketch, wrap

REACH = 400.0  # pixels from a point to the end of its leader, at most
NEAR = 56.0  # pixels of a leader up to which an optional note is drawn
LONG = 50.0  # pixels that a leader may be longer before its note is shifted over its end
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

    places = partial(_places, note, point, around)  # most notes stand at one of the first
    found = next((p for p in places() if obstacles.clear(p.label.box, 3.0) and open_to(p.elbow)), None)
    if found is None or found.reach > LONG:
        inside = (p for p in places() if obstacles.left <= p.elbow[0] <= obstacles.right)
        aside = (replace(p, label=_aside(p, point, obstacles)) for p in inside)
        near = [p for p in aside if obstacles.clear(p.label.box, 2.0)]
        other = next((p for p in near if open_to(p.elbow)), None)
        if other and (found is None or other.reach < found.reach - LONG):
            found = other
        elif found is None and near:
            found = near[0]
    # a note wider than the frame goes beyond it; in a crowd without end the farthest place must do
    if found is None:
        every = list(places())
        found = next((p for p in every if obstacles.free(p.label.box, 3.0)), every[-1])
    sketch.line([point, found.elbow], THIN)
    obstacles.add_line([point, found.elbow])
    obstacles.boxes.append(sketch.label(found.label).box)


def draw_title(sketch: Sketch, title: str, middle: float, above: float, room: float) -> None:
    """Write a title `above` pixels over everything drawn, about `middle`, the picture within `room`."""
    held = sketch.box()
    y = held.top - above
    for line in reversed(wrap(title, TEXT, room)):
        sketch.label(Label(middle, y, line).within(held.right - room, held.left + room))
        y -= LINE


def draw_optional(
    sketch: Sketch, note: Label, point: Point, around: Box, obstacles: Obstacles, room: float
) -> None:
    """Draw `note` with a short leader as `draw_note` does, or leave it out where there is no room for it."""
    held = sketch.box()
    obstacles.left, obstacles.right = held.right - room, held.left + room
    near = (p for p in _places(note, point, around) if p.reach <= NEAR and obstacles.clear(p.label.box, 3.0))
    others = _others(obstacles, point)
    for place in near:
        leader = np.array([point]), np.array([place.elbow])
        if not any(box.crosses(*leader) for box in others):
            sketch.line([point, place.elbow], THIN)
            obstacles.add_line([point, place.elbow])
            obstacles.boxes.append(sketch.label(place.label).box)
            return


def draw_near(sketch: Sketch, note: Label, point: Point, obstacles: Obstacles) -> None:
    """Write a note in the nearest clear place around a point, without a leader."""
    half = (note.box.right - note.box.left) / 2
    ways = ((0, 1), (0, -1), (1, 0), (-1, 0), (1, 1), (-1, 1), (1, -1), (-1, -1))
    steps = ((r, across, down) for r in np.arange(6.0, REACH, 4.0) for across, down in ways)
    moved = [
        note.moved(float(point[0] + across * (half + r)), float(point[1] + 3.5 + down * (5 + r)))
        for r, across, down in steps
    ]
    place = next((label for label in moved if obstacles.free(label.box, 2.0)), moved[-1])
    obstacles.boxes.append(sketch.label(place).box)


def _aside(place: "_Place", point: Point, obstacles: Obstacles) -> Label:
    """Shift a note over or under the end of its leader, into the frame."""
    up = place.elbow[1] < point[1]
    size = place.label.size
    baseline = place.elbow[1] - 0.4 * size if up else place.elbow[1] + 1.1 * size
    return replace(place.label, y=baseline).within(obstacles.left, obstacles.right)


@dataclass(frozen=True)
class _Place:
    """A note at the end of a leader of `reach` pixels or so."""

    label: Label
    elbow: Point
    reach: float


def _others(obstacles: Obstacles, point: Point) -> list[Box]:
    """Boxes that the leader must not cross: all but the one that it starts in."""
    x, y = point
    return [b for b in obstacles.boxes if not (b.left <= x <= b.right and b.top <= y <= b.bottom)]


def _places(note: Label, point: Point, around: Box) -> Iterator[_Place]:
    x, y = point
    outer = 1 if x >= (around.left + around.right) / 2 else -1
    for reach in np.arange(14.0, REACH, 6.0):
        for across, up in DIRECTIONS:
            for sign in (outer, -outer):
                elbow = (float(x + sign * reach * across), float(y - reach * up))
                beside = replace(
                    note,
                    x=elbow[0] + 3 * sign,
                    y=elbow[1] + 0.36 * note.size,
                    anchor="left" if sign > 0 else "right",
                )
                yield _Place(beside, elbow, float(reach))
