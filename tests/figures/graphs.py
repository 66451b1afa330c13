"""Calcs that feed each other at random, for the tests of the map."""

from random import Random

from hypothesis import strategies as st

from calcgen.figures.map_drawing import MapArrow, MapCalc, MapDrawing, MapValue, Standing

STANDINGS: tuple[Standing, ...] = ("satisfied", "exceeded", "no checks", "not evaluated", "in error")
NUMBERS = ("W-{:02d}", "M-{:02d}f-trains-of-several-axles-and-more", "B{}")
TITLES = (
    "Beam",
    "Trestle crossbeam under the walkway between the northern and the southern lock head, third revision",
    "Gegengewichtsausgleichsvorrichtung",
)
VALUES = (
    MapValue("M_Ed", "33.93 kN·m"),
    MapValue("main", "IPE 220", ": "),
    MapValue("R", ""),
    MapValue("q_k", "5.000 kPa", was="was 4.000 kPa at P1"),
    MapValue(
        "a_name_that_goes_on_and_on_and_on", "−1.234 × 10⁻⁵ 1/K", was="was −1.230 × 10⁻⁵ 1/K on 2026-12-01"
    ),
    MapValue("slab", "parts rib, flange, haunch with bars tension", ": ", was="was something else " * 6),
)


def graph(pairs: list[tuple[int, int]], count: int, *, values: int = 1, kind: int = 0) -> MapDrawing:
    """Return a map of `count` calcs with arrows between those of the numbers given."""
    names = [NUMBERS[(n * kind) % len(NUMBERS)].format(n) for n in range(count)]
    calcs = (
        MapCalc(
            name,
            TITLES[(n * kind) % len(TITLES)],
            STANDINGS[n * kind % len(STANDINGS)],
            "0.627",
            f"{name}.html",
        )
        for n, name in enumerate(names)
    )
    arrows = (
        MapArrow(
            names[a],
            names[b],
            tuple(VALUES[(a + b * kind + v) % len(VALUES)] for v in range(1 + (a + b) % values)),
            f"map.html#{names[a]}.{names[b]}",
        )
        for a, b in sorted(set(pairs))
    )
    ordered = sorted(calcs, key=lambda calc: calc.number)
    return MapDrawing(
        "map", "which calc feeds which", tuple(ordered), tuple(sorted(arrows, key=lambda a: a.ends))
    )


@st.composite
def graphs(draw: st.DrawFn, most: int = 14) -> MapDrawing:
    """Give maps, mostly of calcs that feed later ones, some with loops."""
    count = draw(st.integers(1, most))
    calc = st.integers(0, count - 1)
    pairs = draw(st.lists(st.tuples(calc, calc), min_size=draw(st.integers(0, 2 * count)), max_size=3 * most))
    if draw(st.booleans()):
        pairs = [(min(pair), max(pair)) for pair in pairs if pair[0] != pair[1]]
    return graph(pairs, count, values=draw(st.integers(1, 6)), kind=draw(st.integers(0, 3)))


def seeded(seed: int) -> MapDrawing:
    """Return one of many maps, of which a third have loops."""
    random = Random(seed)  # noqa: S311  a sample, always the same
    count = random.randint(3, 16)
    pairs = []
    for _ in range(random.randint(2, 24)):
        low, high = sorted(random.sample(range(count), 2))
        pairs.append((high, low) if seed % 3 == 0 and random.random() < 0.2 else (low, high))
    return graph(pairs, count, values=random.randint(1, 6), kind=seed % 2)


CHAIN = graph([(n, n + 1) for n in range(9)] + [(n, n + 2) for n in range(8)], 10, values=3)
LOOP = graph([(0, 1), (1, 2), (2, 0), (2, 3), (4, 4), (3, 5)], 6)
BASIS = graph([(0, n) for n in range(1, 10)] + [(1, 2), (2, 3), (4, 5)], 11, values=6, kind=1)
GATHERED = graph([(n, 20) for n in range(20)] + [(n, 21) for n in range(4)], 22)
MAPS = {"chain": CHAIN, "loop": LOOP, "basis": BASIS, "gathered": GATHERED}
