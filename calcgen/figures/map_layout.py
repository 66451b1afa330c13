"""Layered drawing of a directed graph: loops cut, layers, an order with few crossings, places, tracks.

K. Sugiyama, S. Tagawa, M. Toda, Methods for visual understanding of hierarchical system structures, IEEE
Transactions on Systems, Man, and Cybernetics 11 (1981) 109-125 (from memory). Layers are by the longest path;
within a layer the barycentres of neighbours decide, swept to and fro.
"""

from __future__ import annotations

from bisect import bisect_right, insort
from collections.abc import Iterable, Mapping, Sequence
from math import floor

from calcgen.figures.labels import spread

Arrow = tuple[str, str]
"""From a calc to one that it feeds."""

Stop = tuple[str, int]
"""A calc in its layer, or in a later one, which its arrows pass through."""

GRID = 12.0  # pixels: places are multiples of it, and so are heights
SWEEPS = 6  # to and fro; more of them hardly ever find a better order


def joined(calcs: Iterable[str], arrows: Iterable[Arrow]) -> list[list[str]]:
    """Return the groups of calcs that arrows join, in the order given."""
    near: dict[str, list[str]] = {calc: [] for calc in calcs}
    for giver, taker in arrows:
        near[giver].append(taker)
        near[taker].append(giver)
    order = {calc: place for place, calc in enumerate(near)}
    seen: set[str] = set()
    groups = []
    for calc in near:
        if calc not in seen:
            group = _reached(calc, near)
            seen |= group
            groups.append(sorted(group, key=order.__getitem__))
    return groups


def on_loops(arrows: Iterable[Arrow]) -> frozenset[Arrow]:
    """Return the arrows that are part of a loop: those from whose tip a way leads back to their tail."""
    left = list(arrows)
    count = len(left) + 1
    while len(left) < count:  # what leads nowhere, or comes from nowhere, is on no loop
        count = len(left)
        givers, takers = {giver for giver, _ in left}, {taker for _, taker in left}
        left = [(giver, taker) for giver, taker in left if giver in takers and taker in givers]
    fed: dict[str, list[str]] = {giver: [] for giver, _ in left}
    for giver, taker in left:
        fed[giver].append(taker)
    ahead = {calc: _reached(calc, fed) for calc in fed}
    return frozenset((giver, taker) for giver in fed for taker in fed[giver] if giver in ahead[taker])


def _reached(start: str, near: Mapping[str, Sequence[str]]) -> set[str]:
    found, waiting = {start}, [start]
    while waiting:
        new = [calc for calc in near[waiting.pop()] if calc not in found]
        found.update(new)
        waiting += new
    return found


def backward(calcs: Sequence[str], arrows: Iterable[Arrow]) -> frozenset[Arrow]:
    """Return arrows without which there is no loop: those that close one in a search in depth."""
    fed: dict[str, list[str]] = {calc: [] for calc in calcs}
    free = set(calcs)
    for giver, taker in arrows:
        fed[giver].append(taker)
        free.discard(taker)
    closing: set[Arrow] = set()
    done: set[str] = set()
    for start in (*(c for c in calcs if c in free), *calcs):
        path = [(start, iter(fed[start]))] if start not in done else []
        done.add(start)
        while path:
            calc, ahead = path[-1]
            after = next(ahead, None)
            if after is None:
                path.pop()
            elif any(after == before for before, _ in path):
                closing.add((calc, after))
            elif after not in done:
                done.add(after)
                path.append((after, iter(fed[after])))
    return frozenset(closing)


def layers_of(calcs: Sequence[str], arrows: Iterable[Arrow]) -> tuple[tuple[str, ...], ...]:
    """Return calcs by layers, a fed one after all that feed it.

    A calc that nothing feeds stands right before the first that it feeds.

    Raises
    ------
    ValueError
        The arrows have a loop.
    """
    given: dict[str, list[str]] = {calc: [] for calc in calcs}
    fed: dict[str, list[str]] = {calc: [] for calc in calcs}
    for giver, taker in arrows:
        given[taker].append(giver)
        fed[giver].append(taker)
    layer: dict[str, int] = {}
    waiting = list(calcs)
    while waiting:
        ready = [c for c in waiting if all(g in layer for g in given[c])]
        if not ready:
            raise ValueError("the arrows have a loop")
        for calc in ready:
            layer[calc] = 1 + max((layer[g] for g in given[calc]), default=-1)
        waiting = [c for c in waiting if c not in layer]
    for calc in calcs:
        if not given[calc] and fed[calc]:
            layer[calc] = min(layer[t] for t in fed[calc]) - 1
    count = 1 + max(layer.values(), default=-1)
    return tuple(tuple(c for c in calcs if layer[c] == n) for n in range(count))


Rows = list[list[Stop]]
Links = list[tuple[Stop, Stop]]


def stops(layers: Sequence[Sequence[str]], arrows: Iterable[Arrow]) -> tuple[Rows, Links]:
    """Return the stops of each layer, and the links between stops of neighbouring layers.

    The arrows of one calc share the stops that they pass through.
    """
    layer = {calc: n for n, calcs in enumerate(layers) for calc in calcs}
    rows: Rows = [[(calc, n) for calc in calcs] for n, calcs in enumerate(layers)]
    links: dict[tuple[Stop, Stop], None] = {}
    for giver, taker in arrows:
        for n in range(layer[giver] + 1, layer[taker]):
            if (giver, n) not in rows[n]:
                rows[n].append((giver, n))
            links[(giver, n - 1), (giver, n)] = None
        links[(giver, layer[taker] - 1), (taker, layer[taker])] = None
    return rows, list(links)


def ordered(rows: Rows, links: Links) -> Rows:
    """Return the stops of each layer in an order in which few links cross."""
    before: dict[Stop, list[Stop]] = {}
    after: dict[Stop, list[Stop]] = {}
    for start, end in links:
        before.setdefault(end, []).append(start)
        after.setdefault(start, []).append(end)
    best, fewest = rows, crossings(rows, links)
    now = [list(row) for row in rows]
    for sweep in range(2 * SWEEPS):
        if not fewest:
            break
        near = after if sweep % 2 else before
        for n in reversed(range(len(now) - 1)) if sweep % 2 else range(1, len(now)):
            place = {stop: p for p, stop in enumerate(now[n + 1 if sweep % 2 else n - 1])}
            own = {stop: float(p) for p, stop in enumerate(now[n])}
            middle = {s: sum(place[o] for o in near[s]) / len(near[s]) if s in near else own[s] for s in own}
            now[n].sort(key=middle.__getitem__)
        count = crossings(now, links)
        if count < fewest:
            best, fewest = [list(row) for row in now], count
    return best


def crossings(rows: Rows, links: Links) -> int:
    """Return how many pairs of links cross between neighbouring layers."""
    place = {stop: p for row in rows for p, stop in enumerate(row)}
    ends: dict[int, list[tuple[int, int]]] = {}
    for start, end in links:
        ends.setdefault(end[1], []).append((place[start], place[end]))
    count = 0
    for pairs in ends.values():
        passed: list[int] = []
        for _, end_place in sorted(pairs):
            count += len(passed) - bisect_right(passed, end_place)
            insort(passed, end_place)
    return count


def tops(rows: Rows, links: Links, heights: Mapping[Stop, float], gap: float) -> dict[Stop, float]:
    """Return the tops of stops in pixels, each as near to the middle of its neighbours as there is room.

    Heights and `gap` are multiples of GRID, and so are the tops; 0 is the highest.
    """
    near: dict[Stop, list[Stop]] = {stop: [] for row in rows for stop in row}
    for start, end in links:
        near[end].append(start)
        near[start].append(end)
    full = max(sum(heights[s] + gap for s in row) for row in rows)
    middle: dict[Stop, float] = {}
    for row in rows:
        below = (full - sum(heights[s] + gap for s in row)) / 2 if links else 0.0
        for stop in row:
            middle[stop] = below + (heights[stop] + gap) / 2
            below += heights[stop] + gap
    onward = range(len(rows))
    for order in (onward, reversed(onward), onward):
        for n in order:
            row = rows[n]
            others = [[middle[o] for o in near[stop]] or [middle[stop]] for stop in row]
            wanted = [sum(of) / len(of) for of in others]
            placed = spread(wanted, [heights[s] + gap for s in row], 0.0, full)
            middle.update(zip(row, placed or wanted, strict=True))
    # rounding keeps the distances, which are multiples of the grid
    found = {s: GRID * floor((m - (heights[s] + gap) / 2) / GRID + 0.5) for s, m in middle.items()}
    highest = min(found.values())
    return {stop: top - highest for stop, top in found.items()}


def tracks(spans: Iterable[tuple[float, float]], apart: float = 4.0) -> list[int]:
    """Return a track for each span, the first in which it keeps clear of those before it."""
    taken: list[list[tuple[float, float]]] = []
    found = []
    for low, high in spans:
        free = (n for n, row in enumerate(taken) if all(high + apart < a or b + apart < low for a, b in row))
        track = next(free, len(taken))
        if track == len(taken):
            taken.append([])
        taken[track].append((low, high))
        found.append(track)
    return found
