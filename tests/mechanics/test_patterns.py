"""Loads cut into those of each span, and the adverse ones found by their signs."""

from __future__ import annotations

from itertools import product

import numpy as np
import pytest

from calcgen.mechanics.actions import Actions, Combination, Effect, Pattern
from calcgen.mechanics.beam import (
    BeamModel,
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    PointLoad,
    PointMoment,
    Quantity,
    Settlement,
    fixed,
    pin,
    prismatic,
    scaled,
    solve,
    spring,
)
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.envelope import Effects, effects
from calcgen.mechanics.patterns import by_length, loaded_lengths

EI = 2e7
SIDEWAYS = BendingStiffness(EI, EI / 4)
SPANS = (6.0, 8.0, 5.0, 7.0, 6.0)
PLACES = (0.0, *np.cumsum(SPANS).tolist())


@pytest.mark.parametrize(
    ("model", "lengths"),
    [
        (prismatic(6.0, EI, (pin(0.0), pin(6.0))), [(0, 6)]),
        (prismatic(9.0, EI, (pin(1.0), pin(4.0), pin(7.0))), [(0, 1), (1, 4), (4, 7), (7, 9)]),
        (prismatic(3.0, EI, (fixed(0.0),)), [(0, 3)]),
        (prismatic(6.0, EI, (fixed(3.0),)), [(0, 3), (3, 6)]),
        (prismatic(9.0, EI, (pin(0.0), pin(4.0, ("lateral",)), spring(9.0, 1e6))), [(0, 9)]),
    ],
)
def test_each_span_and_each_overhang_is_loaded_by_itself(
    model: BeamModel, lengths: list[tuple[float, float]]
) -> None:
    assert loaded_lengths(model) == tuple(lengths)


def test_sideways_loads_are_parted_by_what_holds_sideways() -> None:
    model = prismatic(6.0, SIDEWAYS, (pin(0.0), pin(3.0, ("lateral",)), pin(6.0)))
    assert loaded_lengths(model, {"lateral"}) == ((0.0, 3.0), (3.0, 6.0))
    wind = Actions({"W": (DistributedLoad(0.0, 6.0, 2e3, 2e3, "lateral"),)}, frozenset({"W"}))
    worst = effects(model, wind, (Combination("C", {"W": 1.0}),)).extremes("M_lat")
    # One of two equal spans loaded: 0.0957 w L² (beam tables of AISC Manual 3-23, from memory: 49/512).
    assert worst.max.value == pytest.approx(49 / 512 * 2e3 * 3.0**2, rel=1e-12)
    assert worst.max.patterns in ((Pattern("W", (0,)),), (Pattern("W", (1,)),))


def test_loads_are_cut_at_the_supports() -> None:
    lengths = ((0.0, 2.0), (2.0, 6.0))
    loads = (
        DistributedLoad(1.0, 5.0, 0.0, 8.0),
        DistributedMoment(0.0, 6.0, 3.0, 3.0),
        FreeCurvature(2.0, 4.0, 1e-3),
        PointLoad(2.0, 5.0),
        PointMoment(6.0, 4.0),
        PointLoad(0.0, 1.0),
    )
    assert by_length(loads, lengths) == (
        (DistributedLoad(1.0, 2.0, 0.0, 2.0), DistributedMoment(0.0, 2.0, 3.0, 3.0), PointLoad(0.0, 1.0)),
        (
            DistributedLoad(2.0, 5.0, 2.0, 8.0),
            DistributedMoment(2.0, 6.0, 3.0, 3.0),
            FreeCurvature(2.0, 4.0, 1e-3),
            PointLoad(2.0, 5.0),
            PointMoment(6.0, 4.0),
        ),
    )


def test_what_lies_on_no_length() -> None:
    with pytest.raises(ValueError, match="settlement"):
        by_length((Settlement(1, 0.01),), ((0.0, 6.0),))
    with pytest.raises(ValueError, match="outside"):
        by_length((PointLoad(7.0, 1.0),), ((0.0, 6.0),))


@pytest.mark.parametrize(
    ("place", "coefficient", "spans"),
    [
        ("M_max in span 1", 0.100, (0, 2, 4)),
        ("M_max in span 2", 0.079, (1, 3)),
        ("M_max in span 3", 0.086, (0, 2, 4)),
        ("M at support 2", -0.120, (0, 1, 3)),
        ("M at support 3", -0.111, (1, 2, 4)),
    ],
)
def test_five_equal_spans(place: str, coefficient: float, spans: tuple[int, ...]) -> None:
    """Coefficients of q·l², the adverse spans loaded, from tables of three decimals (from memory)."""
    model = prismatic(5.0, EI, tuple(pin(float(x)) for x in range(6)))
    actions = Actions({"Q": (DistributedLoad.uniform(0.0, 5.0, 1.0),)}, frozenset({"Q"}))
    found = effects(model, actions, (Combination("Q", {"Q": 1.0}),))
    number = int(place[-1])
    if "span" in place:
        effect = found.extremes("M", number - 1.0, float(number)).max
    else:
        effect = found.at("M", number - 1.0).min
    assert effect.value == pytest.approx(coefficient, abs=5.5e-4)
    assert effect.patterns == (Pattern("Q", spans),)


@pytest.fixture(scope="module")
def patterned() -> Effects:
    """Five unequal spans, an overhang, loads of either sign; one combination takes the pattern negative."""
    model = prismatic(PLACES[-1] + 2.0, EI, tuple(pin(x) for x in PLACES))
    actions = Actions(
        {
            "G": (DistributedLoad.uniform(0.0, model.length, 3e3),),
            "Q": (DistributedLoad(0.0, model.length, 5e3, 8e3), PointLoad(9.0, 2e4), PointLoad(16.0, -9e3)),
            "W": (DistributedLoad.uniform(0.0, 15.0, -4e3),),
        },
        frozenset({"Q"}),
    )
    combinations = (
        Combination("U1", {"G": 1.35, "Q": 1.5}),
        Combination("U2", {"G": 1.0, "Q": 1.5, "W": 1.5}),
        Combination("U3", {"G": 1.0, "Q": -1.0}),
    )
    return effects(model, actions, combinations)


@pytest.fixture(scope="module")
def subsets(patterned: Effects) -> list[CaseSolution]:
    """Every subset of the loaded lengths under every combination: 3 · 2⁶ plain solutions."""
    parts = by_length(patterned.actions.cases["Q"], patterned.lengths)
    cases: dict[str, list[Load]] = {}
    for combination in patterned.combinations:
        for taken in product((False, True), repeat=len(parts)):
            loads = [load for part, takes in zip(parts, taken, strict=True) if takes for load in part]
            factored = [scaled(load, combination.factors["Q"]) for load in loads]
            for name, factor in combination.factors.items():
                if name != "Q":
                    factored += [scaled(load, factor) for load in patterned.actions.cases[name]]
            cases[f"{combination.name} {taken}"] = factored
    return list(solve(patterned.model, cases).values())


def sides(solution: CaseSolution, quantity: Quantity, x: float) -> list[float]:
    both: tuple[Side, ...] = ("left", "right")
    return [float(solution.values(quantity, np.array([x]), side)[0]) for side in both]


def reproduced(found: Effects, quantity: Quantity, effect: Effect) -> float:
    solution = solve(found.model, {"case": found.loads(effect)})["case"]
    return float(solution.values(quantity, np.array([effect.x]), effect.side)[0])


@pytest.mark.parametrize("quantity", ["w", "slope", "rotation", "M", "V"])
def test_no_subset_of_the_spans_does_worse(
    patterned: Effects, subsets: list[CaseSolution], quantity: Quantity
) -> None:
    found = patterned.extremes(quantity)
    each = [solution.extremes(quantity) for solution in subsets]
    assert found.max.value == pytest.approx(max(e.max for e in each), rel=1e-10)
    assert found.min.value == pytest.approx(min(e.min for e in each), rel=1e-10)
    assert reproduced(patterned, quantity, found.max) == pytest.approx(found.max.value, rel=1e-10)
    assert reproduced(patterned, quantity, found.min) == pytest.approx(found.min.value, rel=1e-10)
    for x in (0.0, 2.0, 6.0, 9.0, 20.0, 33.0, 34.0):
        at = patterned.at(quantity, x)
        values = [value for solution in subsets for value in sides(solution, quantity, x)]
        size = max(abs(found.max.value), abs(found.min.value))
        assert at.max.value == pytest.approx(max(values), abs=1e-10 * size)
        assert at.min.value == pytest.approx(min(values), abs=1e-10 * size)
    inner = patterned.extremes(quantity, 7.0, 17.0)
    each = [solution.extremes(quantity, 7.0, 17.0) for solution in subsets]
    assert inner.max.value == pytest.approx(max(e.max for e in each), rel=1e-10)
    assert inner.min.value == pytest.approx(min(e.min for e in each), rel=1e-10)


def test_no_subset_gives_a_larger_reaction(patterned: Effects, subsets: list[CaseSolution]) -> None:
    for number in range(len(PLACES)):
        forces = [solution.reactions[number].force for solution in subsets]
        found = patterned.reaction(number)
        assert found.max.value == pytest.approx(max(forces), rel=1e-10)
        assert found.min.value == pytest.approx(min(forces), rel=1e-10)
        plain = solve(patterned.model, {"case": patterned.loads(found.max)})["case"]
        assert plain.reactions[number].force == pytest.approx(found.max.value, rel=1e-10)


def test_the_label_of_a_stretch_is_the_governing_pattern(patterned: Effects) -> None:
    band = patterned.band("M")
    assert (band.governs_high[0].start, band.governs_high[-1].end) == (0.0, patterned.model.length)
    for stretch in band.governs_high:
        x = (stretch.start + stretch.end) / 2
        effect = patterned.at("M", x).max
        assert effect.combination == stretch.combination
        assert effect.patterns == stretch.patterns
