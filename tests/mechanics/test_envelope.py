"""Envelopes of combinations with patterns and trains, each governing arrangement solved again."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings

from calcgen.mechanics.actions import Actions, Combination, Effect, Pattern
from calcgen.mechanics.beam import (
    QUANTITIES,
    BeamModel,
    BendingStiffness,
    DistributedLoad,
    Load,
    PointLoad,
    Quantity,
    Settlement,
    combine,
    fixed,
    pin,
    prismatic,
    solve,
)
from calcgen.mechanics.combinations import Envelope
from calcgen.mechanics.envelope import Effects, effects
from calcgen.mechanics.influence import influence
from calcgen.mechanics.moving_loads import Crossing
from calcgen.mechanics.second_route.moving import along_residual, extreme_residuals, reaction_residuals
from calcgen.mechanics.trains import Train
from tests.mechanics.test_trains import crossings

EI = 2e7
KIP, FT = 4448.2216152605, 0.3048
VERTICAL: tuple[Quantity, ...] = QUANTITIES[: len(QUANTITIES) // 2]
THREE_SPANS = prismatic(22.0, EI, (pin(0.0), pin(6.0), pin(14.0), pin(20.0)))
TRAIN = Train((80e3, 80e3, 40e3), (1.2, 3.6))


def test_fixed_cases_give_the_envelope_of_the_combinations() -> None:
    cases: dict[str, tuple[Load, ...]] = {
        "G": (DistributedLoad.uniform(0.0, 22.0, 2e3), Settlement(1, 0.004)),
        "Q": (DistributedLoad.uniform(0.0, 6.0, 5e3), PointLoad(10.0, 8e3)),
    }
    factors = {"U1": {"G": 1.35, "Q": 1.5}, "U2": {"G": 1.0}, "U3": {"G": 0.9, "Q": -1.5}}
    solved = solve(THREE_SPANS, cases)
    expected = Envelope({name: combine(solved, each) for name, each in factors.items()})
    found = effects(THREE_SPANS, Actions(cases), [Combination(n, f) for n, f in factors.items()])
    for quantity in VERTICAL:
        for start, end in ((0.0, 22.0), (3.0, 12.0)):
            here, there = found.extremes(quantity, start, end), expected.extremes(quantity, start, end)
            for a, b in ((here.max, there.max), (here.min, there.min)):
                assert a.value == pytest.approx(b.value, rel=1e-10)
                assert a.x == pytest.approx(b.x, abs=1e-5)
                assert a.combination == b.combination
        at, other = found.at(quantity, 10.0), expected.at(quantity, 10.0)
        assert (at.max.value, at.min.value) == pytest.approx((other.max.value, other.min.value), rel=1e-10)
        band, line = found.band(quantity, 8), expected.band(quantity, 8)
        assert np.interp(5.1, band.x, band.high) == pytest.approx(np.interp(5.1, line.x, line.high), rel=1e-9)
    assert found.reaction(1).max.value == pytest.approx(expected.reaction(1).max.value, rel=1e-10)
    assert found.extremes("M").max.patterns == ()
    assert found.extremes("M").max.trains == ()


@pytest.mark.parametrize(("span", "M"), [(20, 122), (40, 308)])
def test_lane_load(span: float, M: float) -> None:
    """Open case BM-MOVING-H20: 0.64 kip/ft and one load of 18 kip, at midspan; Khan, table 6.7."""
    model = prismatic(span * FT, EI, (pin(0.0), pin(span * FT)))
    lane = DistributedLoad.uniform(0.0, span * FT, 0.64 * KIP / FT)
    actions = Actions({"lane": (lane,)}, frozenset({"lane"}), {"load": (Train((18 * KIP,)),)})
    found = effects(model, actions, (Combination("H20", {"lane": 1.0, "load": 1.0}),)).extremes("M").max
    assert found.value / (KIP * FT) == pytest.approx(M, rel=1.1e-3)
    assert found.x == pytest.approx(span * FT / 2, rel=1e-6)
    assert found.patterns == (Pattern("lane", (0,)),)


def everything(model: BeamModel, train: Train) -> Effects:
    L = model.length
    actions = Actions(
        {
            "G": (DistributedLoad.uniform(0.0, L, 3e3),),
            "Q": (DistributedLoad(0.0, L, 5e3, 8e3), PointLoad(9.0, 2e4)),
        },
        frozenset({"Q"}),
        {"T": (train,)},
    )
    combinations = (
        Combination("U1", {"G": 1.35, "Q": 1.5, "T": 1.35}),
        Combination("U2", {"G": 1.0, "T": 1.5}),
        Combination("U3", {"G": 1.35, "Q": 1.5}),
        Combination("U4", {"G": 1.0, "T": -0.5}),  # as where the train pulls
    )
    return effects(model, actions, combinations)


@pytest.fixture(scope="module")
def bridge() -> Effects:
    return everything(THREE_SPANS, TRAIN)


@pytest.mark.parametrize("quantity", VERTICAL)
def test_what_governs_is_solved_again(bridge: Effects, quantity: Quantity) -> None:
    ranges = [bridge.extremes(quantity), bridge.extremes(quantity, 7.0, 13.0)]
    ranges += [bridge.at(quantity, x) for x in (0.0, 2.7, 6.0, 10.0, 22.0)]
    for found in ranges:
        if max(abs(found.max.value), abs(found.min.value)) > 0.0:
            residuals = extreme_residuals(bridge, quantity, found)
            assert all(residual.holds for residual in residuals), residuals


def test_reactions_are_solved_again(bridge: Effects) -> None:
    for number in range(4):
        residuals = reaction_residuals(bridge, number, bridge.reaction(number))
        assert all(residual.holds for residual in residuals), residuals


def test_the_second_route_sees_a_wrong_arrangement(bridge: Effects) -> None:
    found = bridge.extremes("M")

    def with_max(effect: Effect) -> bool:
        return all(r.holds for r in extreme_residuals(bridge, "M", replace(found, max=effect)))

    assert with_max(found.max)
    assert not with_max(replace(found.max, value=1.0001 * found.max.value))
    (pattern,) = found.max.patterns
    fewer = replace(found.max, patterns=(replace(pattern, lengths=pattern.lengths[1:]),))
    assert not with_max(fewer)
    # An arrangement with the value that it gives, but not the governing one.
    plain = solve(bridge.model, {"case": bridge.loads(fewer)})["case"]
    assert not with_max(replace(fewer, value=plain.at("M", fewer.x)))
    (placed,) = found.max.trains
    moved = replace(placed, position=replace(placed.position, x=placed.position.x + 0.3))
    away = replace(found.max, trains=(moved,))
    plain = solve(bridge.model, {"case": bridge.loads(away)})["case"]
    assert not with_max(replace(away, value=plain.at("M", away.x)))


@pytest.mark.parametrize("quantity", VERTICAL)
def test_no_place_on_a_fine_division_exceeds_the_extremes(bridge: Effects, quantity: Quantity) -> None:
    found = bridge.extremes(quantity)
    band = bridge.band(quantity, 150)
    size = max(abs(found.max.value), abs(found.min.value))
    assert band.high.max() <= found.max.value + 1e-9 * size
    assert band.low.min() >= found.min.value - 1e-9 * size
    assert band.high.max() == pytest.approx(found.max.value, abs=2e-3 * size)
    assert band.low.min() == pytest.approx(found.min.value, abs=2e-3 * size)


def test_extremes_of_a_train_alone_are_those_of_its_crossing() -> None:
    """Closed in on here, and roots of polynomials there."""
    model = prismatic(22.0, EI, (fixed(0.0), pin(6.0), pin(14.0), pin(20.0)))
    alone = effects(model, Actions({}, trains={"T": (TRAIN,)}), (Combination("T", {"T": 1.0}),))
    cross = Crossing(influence(model), TRAIN)
    for quantity in ("M", "V"):
        here, there = alone.extremes(quantity), cross.absolute(quantity)
        for a, b in ((here.max, there.max), (here.min, there.min)):
            assert a.value == pytest.approx(b.value, rel=1e-10)
            assert a.x == pytest.approx(b.x, abs=1e-5)


def test_shares_add_up_at_a_place(bridge: Effects) -> None:
    """The combination with train and pattern is the sum of its parts, each at its own worst."""

    def part(factors: dict[str, float]) -> Effect:
        return effects(bridge.model, bridge.actions, (Combination("part", factors),)).at("M", 10.0).max

    parts = [part({"G": 1.35}), part({"Q": 1.5}), part({"T": 1.35})]
    whole = part({"G": 1.35, "Q": 1.5, "T": 1.35})
    assert whole.value == pytest.approx(sum(each.value for each in parts), rel=1e-12)
    assert whole.patterns == parts[1].patterns
    assert whole.trains == parts[2].trains


def test_several_trains_of_a_case_cross_independently() -> None:
    one, two = (
        effects(THREE_SPANS, Actions({}, trains={"T": (TRAIN,) * n}), (Combination("T", {"T": 1.0}),))
        for n in (1, 2)
    )
    assert two.at("M", 10.0).max.value == pytest.approx(2 * one.at("M", 10.0).max.value, rel=1e-12)
    assert [placed.train for placed in two.at("M", 10.0).max.trains] == [0, 1]


def test_a_crane_runway() -> None:
    """A tenth of the wheel loads acts sideways, on a section that is off its principal axes."""
    model = prismatic(14.0, BendingStiffness(4e7, 6e6, 5e6), (pin(0.0), pin(7.0), pin(14.0)))
    runway = everything(model, Train((120e3, 120e3), (3.6,), lateral=0.1))
    quantities: tuple[Quantity, ...] = ("M", "M_lat", "w", "w_lat")
    for quantity in quantities:
        found = runway.extremes(quantity)
        residuals = extreme_residuals(runway, quantity, found)
        assert all(residual.holds for residual in residuals), residuals
    sideways = runway.reaction(1, "force_lat")
    assert all(r.holds for r in reaction_residuals(runway, 1, sideways, "force_lat"))


@given(crossings())
@settings(max_examples=5, deadline=None)
def test_on_any_beam_what_governs_is_solved_again_and_never_exceeded(drawn: tuple[BeamModel, Train]) -> None:
    model, train = drawn
    actions = Actions(
        {"Q": (DistributedLoad(0.0, model.length, 5e3, 8e3),)}, frozenset({"Q"}), {"T": (train,)}
    )
    found = effects(model, actions, (Combination("U", {"Q": 1.5, "T": 200.0}),))
    for quantity in VERTICAL:
        extremes, band = found.extremes(quantity), found.band(quantity, 61)
        size = max(abs(extremes.max.value), abs(extremes.min.value))
        assert band.high.max() <= extremes.max.value + 1e-9 * size
        assert band.low.min() >= extremes.min.value - 1e-9 * size
        residuals = extreme_residuals(found, quantity, extremes)
        assert all(residual.holds for residual in residuals), residuals


def test_a_narrow_peak_of_the_envelope_is_found() -> None:
    """Between two others that are a little lower, where a division of the beam may step over it."""
    model = prismatic(11.125, 2e6, (fixed(0.0), pin(4.0), pin(7.625), pin(9.625)))
    actions = Actions(
        {"Q": (DistributedLoad(0.0, 11.125, 5e3, 8e3),)},
        frozenset({"Q"}),
        {"T": (Train((36.0, 12.0, 19.0), (1.765625, 3.75)),)},
    )
    found = effects(model, actions, (Combination("U", {"Q": 1.5, "T": 200.0}),))
    largest = found.extremes("M").max
    assert found.band("M", 2000).high.max() <= largest.value * (1.0 + 1e-12)
    assert largest.value == pytest.approx(found.at("M", largest.x).max.value, rel=1e-12)
    assert largest.x == pytest.approx(5.609375, abs=1e-6)  # the last axle at the free end of the overhang


def test_extremes_between_cuts_are_those_of_each_range() -> None:
    """Found together, range by range and combination by combination, and one by one."""
    actions = Actions(
        {"G": (DistributedLoad.uniform(0.0, 22.0, 4e3),), "Q": (DistributedLoad.uniform(0.0, 22.0, 8e3),)},
        frozenset({"Q"}),
        {"T": (TRAIN,)},
    )
    combinations = (
        Combination("U1", {"G": 1.35, "Q": 1.5, "T": 1.5}),
        Combination("U2", {"G": 1.0, "T": 1.5}),
        Combination("U3", {"G": 1.0, "Q": 1.5}),
    )
    cuts = (0.0, 6.0, 14.0, 20.0, 22.0)
    together = effects(THREE_SPANS, actions, combinations, cuts=cuts)
    alone = effects(THREE_SPANS, actions, combinations)
    for names in (("U1", "U2", "U3"), ("U2",), ("U3",)):
        group, other = together.only(names), alone.only(names)
        for quantity in VERTICAL:
            for start, end in ((0.0, 22.0), (6.0, 14.0), (6.0, 22.0)):
                here, there = group.extremes(quantity, start, end), other.extremes(quantity, start, end)
                for a, b in ((here.max, there.max), (here.min, there.min)):
                    assert a.value == pytest.approx(b.value, rel=1e-12)
                    assert a.combination == b.combination


def test_a_case_with_trains_alone_leaves_a_beam_at_rest_without_them() -> None:
    found = effects(THREE_SPANS, Actions({}, trains={"T": (TRAIN,)}), (Combination("T", {"T": 1.0}),))
    tip = found.at("M", 22.0)
    assert (tip.max.value, tip.min.value, tip.max.trains) == (0.0, 0.0, ())


def test_what_cannot_be_asked(bridge: Effects) -> None:
    actions = bridge.actions
    with pytest.raises(ValueError, match="at least one"):
        effects(THREE_SPANS, actions, ())
    with pytest.raises(KeyError, match="S"):
        effects(THREE_SPANS, actions, (Combination("U1", {"S": 1.0}),))
    with pytest.raises(KeyError, match="T"):
        effects(THREE_SPANS, replace(actions, patterned=frozenset({"T"})), bridge.combinations)
    with pytest.raises(ValueError, match="vertical axis"):
        bridge.extremes("M_lat")
    with pytest.raises(ValueError, match="vertical axis"):
        bridge.reaction(0, "force_lat")
    with pytest.raises(ValueError, match="length"):
        bridge.extremes("M", 3.0, 3.0)
    with pytest.raises(ValueError, match="outside"):
        bridge.extremes("M", 3.0, 23.0)
    with pytest.raises(ValueError, match="settlement"):
        effects(
            THREE_SPANS,
            Actions({"S": (Settlement(1, 0.01),)}, frozenset({"S"})),
            (Combination("U1", {"S": 1.0}),),
        )


@pytest.mark.parametrize("quantity", ["M", "V", "w"])
def test_an_extreme_that_is_exceeded_along_the_beam_is_noticed(quantity: Quantity) -> None:
    actions = Actions({"Q": (DistributedLoad.uniform(0.0, 22.0, 5e3),)}, frozenset({"Q"}), {"T": (TRAIN,)})
    found_in = effects(THREE_SPANS, actions, [Combination("U", {"Q": 1.5, "T": 1.35})])
    found = found_in.extremes(quantity)
    assert along_residual(found_in, quantity, found).holds
    less = replace(found, max=replace(found.max, value=0.9 * found.max.value))
    assert not along_residual(found_in, quantity, less).holds
