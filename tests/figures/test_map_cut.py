"""Bands against their definition: the first layers cut off one by one, what is left laid out again."""

from collections.abc import Sequence
from itertools import pairwise

from hypothesis import given
from hypothesis import strategies as st

from calcgen.figures.map_cut import LAYERS, MOST_LAYERS, bands
from calcgen.figures.map_layout import Arrow, joined, layers_of

CALCS = [f"C-{n:02d}" for n in range(30)]
PLACE = {calc: n for n, calc in enumerate(CALCS)}


@st.composite
def forward(draw: st.DrawFn) -> list[Arrow]:
    """Give arrows to calcs that stand not far behind, in an order of layers that is not that of numbers."""
    order = draw(st.permutations(CALCS))
    steps = st.tuples(st.integers(0, len(order) - 1), st.integers(1, draw(st.integers(1, 6))))
    pairs = draw(st.lists(steps, min_size=20, max_size=70))
    return sorted({(order[at], order[at + step]) for at, step in pairs if at + step < len(order)})


def within(calcs: Sequence[str], arrows: Sequence[Arrow]) -> list[Arrow]:
    held = set(calcs)
    return [arrow for arrow in arrows if held.issuperset(arrow)]


def one_by_one(calcs: Sequence[str], arrows: Sequence[Arrow]) -> list[list[str]]:
    layers = layers_of(calcs, arrows)
    if len(layers) <= MOST_LAYERS:
        return [sorted(calcs)]
    rest = sorted(calc for layer in layers[LAYERS:] for calc in layer)
    groups = joined(rest, within(rest, arrows))
    after = [part for group in groups for part in one_by_one(group, within(group, arrows))]
    return [sorted(calc for layer in layers[:LAYERS] for calc in layer), *after]


@given(forward())
def test_bands_are_those_cut_off_one_by_one(arrows: list[Arrow]) -> None:
    for group in joined(CALCS, arrows):
        own = within(group, arrows)
        found = [sorted(part) for part in bands(layers_of(group, own), own, PLACE)]
        assert found == one_by_one(group, own)


def test_a_chain_is_cut_into_bands_and_what_fits_at_its_end() -> None:
    arrows = list(pairwise(CALCS[:11]))
    parts = bands(layers_of(CALCS[:11], arrows), arrows, PLACE)
    assert [len(part) for part in parts] == [3, 3, 5]


def test_a_way_back_over_the_cuts_loses_no_calc() -> None:
    arrows = [*pairwise(CALCS), (CALCS[-1], CALCS[0])]
    parts = bands([[calc] for calc in CALCS], arrows, PLACE)
    assert sorted(calc for part in parts for calc in part) == CALCS
    assert all(len(part) <= MOST_LAYERS for part in parts)
