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
    return [sorted(_reached(calc, near, seen), key=order.__getitem__) for calc in near if calc not in seen]


def on_loops(arrows: Iterable[Arrow]) -> frozenset[Arrow]:
    """Return the arrows that are part of a loop: those within a strong component.

    M. Sharir, A strong-connectivity algorithm and its applications in data flow analysis, Computers &
    Mathematics with Applications 7 (1981) 67-72 (from memory).
    """
    pairs = list(arrows)
    fed: dict[str, list[str]] = {calc: [] for pair in pairs for calc in pair}
    given: dict[str, list[str]] = {calc: [] for calc in fed}
    for giver, taker in pairs:
        fed[giver].append(taker)
        given[taker].append(giver)
    left, _ = _in_depth(fed, fed)
    seen: set[str] = set()
    component: dict[str, str] = {}
    for calc in reversed(left):
        if calc not in seen:
            component.update(dict.fromkeys(_reached(calc, given, seen), calc))
    return frozenset(pair for pair in pairs if component[pair[0]] == component[pair[1]])


def _reached(start: str, near: Mapping[str, Sequence[str]], seen: set[str]) -> list[str]:
    """Return where one comes from a start without passing what was seen before; it is seen now."""
    found = [start]
    seen.add(start)
    for calc in found:  # grows
        new = [other for other in dict.fromkeys(near[calc]) if other not in seen]
        seen.update(new)
        found += new
    return found


def backward(calcs: Sequence[str], arrows: Iterable[Arrow]) -> frozenset[Arrow]:
    """Return arrows without which there is no loop: those that close one in a search in depth."""
    fed: dict[str, list[str]] = {calc: [] for calc in calcs}
    free = set(calcs)
    for giver, taker in arrows:
        fed[giver].append(taker)
        free.discard(taker)
    _, closing = _in_depth((*(c for c in calcs if c in free), *calcs), fed)
    return frozenset(closing)


def _in_depth(starts: Iterable[str], fed: Mapping[str, Sequence[str]]) -> tuple[list[str], list[Arrow]]:
    """Search in depth; return the calcs in the order in which they are left, and arrows back to the path."""
    left: list[str] = []
    closing: list[Arrow] = []
    done: set[str] = set()
    for start in starts:
        if start in done:
            continue
        path = {start: iter(fed[start])}
        done.add(start)
        while path:
            calc = next(reversed(path))
            after = next(path[calc], None)
            if after is None:
                path.popitem()
                left.append(calc)
            elif after in path:
                closing.append((calc, after))
            elif after not in done:
                done.add(after)
                path[after] = iter(fed[after])
    return left, closing


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
    unplaced = {calc: len(givers) for calc, givers in given.items()}
    ready = [calc for calc in calcs if not unplaced[calc]]
    for calc in ready:  # grows
        layer[calc] = 1 + max((layer[g] for g in given[calc]), default=-1)
        for taker in fed[calc]:
            unplaced[taker] -= 1
            if not unplaced[taker]:
                ready.append(taker)
    if len(layer) < len(given):
        raise ValueError("the arrows have a loop")
    for calc in calcs:
        if not given[calc] and fed[calc]:
            layer[calc] = min(layer[t] for t in fed[calc]) - 1
    found: list[list[str]] = [[] for _ in range(1 + max(layer.values(), default=-1))]
    for calc in calcs:
        found[layer[calc]].append(calc)
    return tuple(tuple(row) for row in found)


Rows = list[list[Stop]]
Links = list[tuple[Stop, Stop]]


def stops(layers: Sequence[Sequence[str]], arrows: Iterable[Arrow]) -> tuple[Rows, Links]:
    """Return the stops of each layer, and the links between stops of neighbouring layers.

    The arrows of one calc share the stops that they pass through.
    """
    layer = {calc: n for n, calcs in enumerate(layers) for calc in calcs}
    rows: Rows = [[(calc, n) for calc in calcs] for n, calcs in enumerate(layers)]
    passed: set[Stop] = set()
    links: dict[tuple[Stop, Stop], None] = {}
    for giver, taker in arrows:
        for n in range(layer[giver] + 1, layer[taker]):
            if (giver, n) not in passed:
                passed.add((giver, n))
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
