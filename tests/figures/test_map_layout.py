"""Layers, orders and tracks against their definitions, brute force and scipy."""

from itertools import pairwise, permutations, product

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from scipy.sparse import coo_matrix
from scipy.sparse.csgraph import connected_components

from calcgen.figures.map_layout import (
    GRID,
    Arrow,
    backward,
    crossings,
    joined,
    layers_of,
    on_loops,
    ordered,
    stops,
    tops,
    tracks,
)

CALCS = [f"C-{n}" for n in range(8)]
arrows = st.lists(st.tuples(st.sampled_from(CALCS), st.sampled_from(CALCS)), max_size=20, unique=True)
forward = arrows.map(lambda pairs: sorted({(min(pair), max(pair)) for pair in pairs if pair[0] != pair[1]}))


def components(pairs: list[Arrow], connection: str) -> dict[str, int]:
    """The number of the component of each calc, by scipy."""
    at = {calc: n for n, calc in enumerate(CALCS)}
    rows, columns = [at[g] for g, _ in pairs], [at[t] for _, t in pairs]
    matrix = coo_matrix((np.ones(len(pairs)), (rows, columns)), shape=(len(CALCS), len(CALCS)))
    _, labels = connected_components(matrix, directed=True, connection=connection)
    return dict(zip(CALCS, labels.tolist(), strict=True))


@given(arrows)
def test_arrows_of_loops_are_those_within_strong_components(pairs: list[Arrow]) -> None:
    strong = components(pairs, "strong")
    assert on_loops(pairs) == {(g, t) for g, t in pairs if strong[g] == strong[t]}


@given(arrows)
def test_groups_are_weak_components(pairs: list[Arrow]) -> None:
    weak = components(pairs, "weak")
    groups = joined(CALCS, pairs)
    assert sorted(calc for group in groups for calc in group) == CALCS
    assert [{weak[calc] for calc in group} for group in groups] == [{weak[group[0]]} for group in groups]
    assert len(groups) == len(set(weak.values()))


@given(arrows)
def test_without_backward_arrows_there_is_no_loop_and_each_is_part_of_one(pairs: list[Arrow]) -> None:
    back = backward(CALCS, pairs)
    assert back <= on_loops(pairs)
    assert on_loops([arrow for arrow in pairs if arrow not in back]) == frozenset()


@given(forward)
def test_a_calc_stands_behind_all_that_feed_it_and_not_farther_than_it_must(pairs: list[Arrow]) -> None:
    layers = layers_of(CALCS, pairs)
    layer = {calc: n for n, calcs in enumerate(layers) for calc in calcs}
    assert sorted(layer) == CALCS
    for calc in CALCS:
        before = [layer[g] for g, t in pairs if t == calc]
        after = [layer[t] for g, t in pairs if g == calc]
        assert all(n < layer[calc] for n in before)
        if before:
            # the longest way to it, where calcs that nothing feeds may have come nearer
            assert layer[calc] >= max(before) + 1
        elif after:
            assert layer[calc] == min(after) - 1
        else:
            assert layer[calc] == 0


def test_layers_of_a_loop_are_refused() -> None:
    with pytest.raises(ValueError, match="loop"):
        layers_of(["A", "B"], [("A", "B"), ("B", "A")])


@given(forward)
def test_links_join_neighbouring_layers_and_lead_from_each_calc_to_what_it_feeds(pairs: list[Arrow]) -> None:
    rows, links = stops(layers_of(CALCS, pairs), pairs)
    assert all(end[1] == start[1] + 1 for start, end in links)
    assert all(start in rows[start[1]] and end in rows[end[1]] for start, end in links)
    after: dict[tuple[str, int], list[tuple[str, int]]] = {}
    for start, end in links:
        after.setdefault(start, []).append(end)
    layer = {calc: n for n, calcs in enumerate(layers_of(CALCS, pairs)) for calc in calcs}
    for calc in CALCS:
        fed, way = set(), [(calc, layer[calc])]
        while way:
            for end in after.get(way.pop(), ()):
                if end[0] == calc:
                    way.append(end)
                else:
                    fed.add(end[0])
        assert fed == {t for g, t in pairs if g == calc}


def crossed(rows: list[list[tuple[str, int]]], links: list[tuple[tuple[str, int], tuple[str, int]]]) -> int:
    """Pairs of links that cross, one by one."""
    at = {stop: n for row in rows for n, stop in enumerate(row)}
    pairs = [(a, b) for n, a in enumerate(links) for b in links[:n] if a[1][1] == b[1][1]]
    return sum((at[a[0]] - at[b[0]]) * (at[a[1]] - at[b[1]]) < 0 for a, b in pairs)


@given(forward)
def test_crossings_are_counted_and_an_order_never_has_more_of_them(pairs: list[Arrow]) -> None:
    rows, links = stops(layers_of(CALCS, pairs), pairs)
    assert crossings(rows, links) == crossed(rows, links)
    better = ordered(rows, links)
    assert [sorted(row) for row in better] == [sorted(row) for row in rows]
    assert crossings(better, links) <= crossings(rows, links)


@pytest.mark.parametrize(
    "pairs",
    [
        [("A", "6"), ("B", "5"), ("C", "4")],
        [("A", "5"), ("A", "6"), ("B", "4"), ("C", "4"), ("C", "5")],
        [("A", "6"), ("B", "5"), ("B", "4"), ("C", "4"), ("A", "C"), ("B", "C")],
    ],
)
def test_the_order_of_these_maps_has_as_few_crossings_as_any(pairs: list[Arrow]) -> None:
    rows, links = stops(layers_of(["A", "B", "C", "4", "5", "6"], pairs), pairs)
    ways = product(*(permutations(row) for row in rows))
    fewest = min(crossed([list(row) for row in way], links) for way in ways)
    assert crossings(ordered(rows, links), links) == fewest


@given(forward, st.lists(st.integers(1, 9), min_size=8, max_size=8))
def test_stops_keep_their_order_and_their_distance_on_the_grid(pairs: list[Arrow], sizes: list[int]) -> None:
    rows, links = stops(layers_of(CALCS, pairs), pairs)
    heights = {stop: GRID * sizes[CALCS.index(stop[0])] for row in rows for stop in row}
    top = tops(rows, links, heights, GRID)
    assert min(top.values()) == 0
    assert all(value % GRID == 0 for value in top.values())
    for row in rows:
        for above, below in pairwise(row):
            assert top[below] >= top[above] + heights[above] + GRID


spans = st.tuples(st.integers(0, 100), st.integers(1, 50)).map(lambda s: (float(s[0]), float(s[0] + s[1])))


@given(st.lists(spans, max_size=20))
def test_spans_on_one_track_keep_clear_of_each_other(lines: list[tuple[float, float]]) -> None:
    found = tracks(lines, apart=4.0)
    for n, (low, high) in enumerate(lines):
        others = [lines[m] for m in range(n) if found[m] == found[n]]
        assert all(high + 4.0 < a or b + 4.0 < low for a, b in others)
        # none is put farther out than it must
        for track in range(found[n]):
            held = [lines[m] for m in range(n) if found[m] == track]
            assert any(not (high + 4.0 < a or b + 4.0 < low) for a, b in held)
