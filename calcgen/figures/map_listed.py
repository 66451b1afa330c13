"""A plan of calcs one below the other, for a narrow place: arrows run up and down left of them."""

from collections.abc import Collection, Iterable, Mapping, Sequence
from dataclasses import replace

from calcgen.figures.labels import Point
from calcgen.figures.map_drawing import BOX, LABEL, Cell, Placed, Plan, Route
from calcgen.figures.map_layout import GRID, Arrow, on_loops, tracks

TRACK = 8.0  # from one upright line to the next
MOST_TRACKS = 8  # upright lines side by side
WORDS = MOST_TRACKS * TRACK + 4.0  # where the words on arrows start
SIDE = WORDS + LABEL  # of the boxes, where arrows enter and leave


def listed(calcs: Sequence[str], cells: Mapping[str, Cell], arrows: Iterable[Arrow]) -> Plan:
    """Return the plan of calcs in the order given.

    Where too many lines would run side by side, the longest arrows are short; those of loops stay.
    """
    given = list(dict.fromkeys(arrows))
    loops = on_loops(given)
    fed: dict[str, list[str]] = {}
    for giver, taker in given:
        fed.setdefault(giver, []).append(taker)
    placed: dict[str, Placed] = {}
    below = 0.0
    for calc in calcs:
        height = cells[calc].height + (GRID if calc in fed else 0.0)
        placed[calc] = Placed(cells[calc], WORDS, LABEL, below, height)
        below += height + GRID
    leaves = {giver: placed[giver].top + placed[giver].height - GRID / 2 for giver in fed}
    levels = {g: [placed[t].top + cells[t].entry(g) for t in takers] for g, takers in fed.items()}
    spans = {g: (min(leaves[g], *levels[g]), max(leaves[g], *levels[g])) for g in fed}
    looped = {giver for giver, _ in loops}
    nearest = sorted(fed, key=lambda g: (g not in looped, spans[g][1] - spans[g][0], spans[g]))
    found = zip(nearest, tracks(spans[g] for g in nearest), strict=True)
    track = {giver: number for giver, number in found if number < MOST_TRACKS}
    routes: list[Route] = []
    dots: list[Point] = []
    for giver, number in track.items():
        x, start = WORDS - TRACK * (number + 1), leaves[giver]
        for taker, level in zip(fed[giver], levels[giver], strict=True):
            points = ((SIDE, start), (x, start), (x, level), (SIDE, level))
            routes.append(Route((giver, taker), points, (giver, taker) in loops))
        low, high = spans[giver]
        dots += [(x, level) for level in (start, *levels[giver]) if low < level < high]
    shown = tuple(_with_short(placed[calc], fed.keys() - track.keys()) for calc in calcs)
    return Plan(shown, tuple(routes), tuple(dots), SIDE + BOX, below - GRID)


def _with_short(placed: Placed, givers: Collection[str]) -> Placed:
    """Return a cell in which the arrows of some calcs are drawn short."""
    slots = (replace(slot, short=slot.short or slot.giver in givers) for slot in placed.cell.slots)
    return replace(placed, cell=replace(placed.cell, slots=tuple(slots)))
