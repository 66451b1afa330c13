"""Trains of axles against closed forms, published tables and dense stepping."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.mechanics.beam import (
    PLANES,
    QUANTITIES,
    BeamModel,
    BendingStiffness,
    CaseSolution,
    Quantity,
    ShearStiffness,
    Stretch,
    fixed,
    pin,
    prismatic,
    solve,
    spring,
)
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import influence
from calcgen.mechanics.moving_loads import Crossing, TrainEffect
from calcgen.mechanics.trains import Position, Train

EXACT = 1e-10
EI = 2e6
KIP, FT = 4448.2216152605, 0.3048
SKEW = BeamModel(
    17.0,
    (
        Stretch(0.0, 5.0, BendingStiffness(2e6, 1e6, 3e5), ShearStiffness(1e6, 2e6)),
        Stretch(5.0, 17.0, BendingStiffness(3e6, 2e6, -5e5)),
    ),
    (fixed(0.0), pin(6.0), spring(11.0, 2e6, 3e5), pin(15.0)),
    (8.0,),
)


def simple(length: float) -> BeamModel:
    return prismatic(length, EI, (pin(0.0), pin(length)))


def crossing(model: BeamModel, train: Train) -> Crossing:
    return Crossing(influence(model, PLANES if train.lateral else PLANES[:1]), train)


def test_two_axles_on_a_simple_beam() -> None:
    """The heavier axle and the resultant stand at equal distances from midspan: M = R(L - e)²/4L.

    e from the resultant to the axle; Hibbeler, Structural Analysis, absolute maximum moment (from memory).
    """
    L, d, P1, P2 = 12.0, 4.0, 80e3, 40e3
    R, e = P1 + P2, P2 * d / (P1 + P2)
    found = crossing(simple(L), Train((P1, P2), (d,))).absolute("M").max
    assert found.value == pytest.approx(R * (L - e) ** 2 / (4 * L), rel=EXACT)
    assert min(abs(found.x - (L + e) / 2), abs(found.x - (L - e) / 2)) < 1e-9
    assert found.position is not None
    assert found.x in found.position.places(Train((P1, P2), (d,)))


@pytest.mark.parametrize(("span", "M"), [(20, 160.0), (30, 246.61), (40, 345.96), (55, 495.43)])
def test_truck_h20(span: float, M: float) -> None:
    """Open case BM-MOVING-H20: Khan, Bridge and Highway Structure Rehabilitation and Repair, table 6.7."""
    truck = Train((8 * KIP, 32 * KIP), (14 * FT,))
    found = crossing(simple(span * FT), truck).absolute("M").max
    assert found.value / (KIP * FT) == pytest.approx(M, rel=5e-4)


@pytest.mark.parametrize(("span", "M", "V"), [(40, 449.8, 55.2), (60, 806.5, 60.8), (80, 1164.9, 63.6)])
def test_truck_hs20(span: float, M: float, V: float) -> None:
    """AASHTO Standard Specifications for Highway Bridges, appendix A, HS20-44 (from memory).

    One lane, without impact; axles 8, 32 and 32 kip, 14 ft apart; the table rounds to 0.1 kip and kip-ft.
    """
    found = crossing(simple(span * FT), Train((8 * KIP, 32 * KIP, 32 * KIP), (14 * FT, 14 * FT)))
    assert found.absolute("M").max.value / (KIP * FT) == pytest.approx(M, abs=0.06)
    assert found.absolute("V").max.value / KIP == pytest.approx(V, abs=0.051)
    assert found.reaction(0).max.value / KIP == pytest.approx(V, abs=0.051)


@pytest.mark.parametrize("length", [4.0, 10.0, 25.0])
def test_tandem_of_load_model_1(length: float) -> None:
    """Two axles of 300 kN at 1.2 m, EN 1991-2 4.3.2: M = P(L - d/2)²/2L under one of them."""
    P, d = 300e3, 1.2
    tandem = Train((P, P), (d,))
    found = crossing(simple(length), tandem).absolute("M").max
    assert found.value == pytest.approx(P * (length - d / 2) ** 2 / (2 * length), rel=EXACT)
    assert found.x == pytest.approx(length / 2 - d / 4, rel=1e-9)  # of the two the left one is named
    assert tandem.directions == ("right",)


def test_one_axle_on_two_spans() -> None:
    """Least moment at the middle support: -0.0962 PL, the axle at L/√3 (from memory; 1/6√3)."""
    L, P = 8.0, 50e3
    cross = crossing(prismatic(2 * L, EI, (pin(0.0), pin(L), pin(2 * L))), Train((P,)))
    least = cross.at("M", L).min
    assert least.value == pytest.approx(-P * L / (6 * 3**0.5), rel=EXACT)
    assert least.position is not None
    assert least.position.x == pytest.approx(L / 3**0.5, rel=1e-9)
    assert cross.absolute("M").min.value == pytest.approx(least.value, rel=EXACT)


def test_the_shear_at_a_place_has_the_axle_on_one_side_of_it() -> None:
    P, L, x = 50e3, 10.0, 3.0
    found = crossing(simple(L), Train((P,))).at("V", x)
    assert found.max.value == pytest.approx(P * (L - x) / L, rel=EXACT)
    assert found.min.value == pytest.approx(-P * x / L, rel=EXACT)
    assert found.max.position == Position(x, "right", "right")
    assert found.min.position == Position(x, "right", "left")


def test_axles_off_the_beam_do_not_count() -> None:
    """A train longer than the beam: only one of its equal axles stands on it at a time."""
    train = Train((10e3, 10e3, 10e3), (20.0, 20.0))
    found = crossing(simple(8.0), train)
    assert found.absolute("M").max.value == pytest.approx(10e3 * 8.0 / 4, rel=EXACT)
    assert found.absolute("M").min == TrainEffect(0.0, 0.0, None)
    assert len(Position(25.0, "right").loads(train, simple(8.0))) == 1


def test_an_axle_that_leaves_a_free_end_is_seen_beside_it() -> None:
    """At midspan the load on the overhang relieves: the worst is when that axle has just left."""
    model = prismatic(10.0, EI, (pin(0.0), pin(8.0)))
    train = Train((30e3, 50e3), (6.0,))
    found = crossing(model, train).at("M", 4.0).max
    assert found.value == pytest.approx(50e3 * 8 / 4, rel=EXACT)
    assert found.position == Position(10.0, "right", "right")
    assert [load.value for load in found.position.loads(train, model)] == [50e3]


def plain(model: BeamModel, train: Train, position: Position) -> CaseSolution:
    return solve(model, {"case": position.loads(train, model)})["case"]


def sides(solution: CaseSolution, quantity: Quantity, x: float) -> list[float]:
    both: tuple[Side, ...] = ("left", "right")
    return [float(solution.values(quantity, np.array([x]), side)[0]) for side in both]


@dataclass(frozen=True)
class Stepped:
    """A train that steps across a beam: the oracle that knows no influence line."""

    model: BeamModel
    train: Train
    solutions: list[CaseSolution]

    @classmethod
    def across(cls, model: BeamModel, train: Train, steps: int) -> Stepped:
        length = train.offsets[-1]
        positions = [Position(float(u), "right") for u in np.linspace(0.0, model.length + length, steps)]
        positions += [Position(float(u), "left") for u in np.linspace(-length, model.length, steps)]
        cases = {str(i): position.loads(train, model) for i, position in enumerate(positions)}
        return cls(model, train, list(solve(model, cases).values()))


TRAINS = {
    "uplift and lateral forces": (SKEW, Train((80.0, -15.0, 40.0, 60.0), (1.2, 4.1, 2.0), lateral=0.1)),
    "Gerber": (
        prismatic(15.0, EI, (pin(0.0), pin(6.0), pin(12.0)), (8.0,)),
        Train((80.0, 80.0, 40.0), (1.2, 3.6)),
    ),
}


@pytest.mark.parametrize("name", TRAINS)
def test_stepping_never_exceeds_the_extremes_and_comes_near_them(name: str) -> None:
    model, train = TRAINS[name]
    cross = crossing(model, train)
    stepped = Stepped.across(model, train, 100)
    for quantity in QUANTITIES[: len(QUANTITIES) // 2 * len(model.planes)]:
        size = max(
            float(np.abs(s.values(quantity, np.linspace(0, model.length, 60))).max())
            for s in stepped.solutions
        )
        for x in (0.0, 2.3, 6.0, 8.0, 9.3, 11.0, 13.7, model.length):
            found = cross.at(quantity, x)
            values = [value for s in stepped.solutions for value in sides(s, quantity, x)]
            assert found.min.value - 1e-9 * size <= min(values), (quantity, x)
            assert max(values) <= found.max.value + 1e-9 * size, (quantity, x)
            for effect in (found.max, found.min):
                if effect.position is None:
                    assert effect.value == 0.0
                    continue
                reached = sides(plain(model, train, effect.position), quantity, x)
                slack = 1e-10 if effect.position.beside is None else 1e-5
                assert min(abs(value - effect.value) for value in reached) <= slack * size, (quantity, x)


@pytest.mark.parametrize("quantity", ["M", "V", "M_lat", "V_lat"])
def test_the_largest_of_all_places_and_positions(quantity: Quantity) -> None:
    model, train = TRAINS["uplift and lateral forces"]
    found = crossing(model, train).absolute(quantity)
    stepped = [s.extremes(quantity) for s in Stepped.across(model, train, 60).solutions]
    assert max(e.max for e in stepped) <= found.max.value * (1 + 1e-9)
    assert min(e.min for e in stepped) >= found.min.value * (1 + 1e-9)
    for effect, sign in ((found.max, 1.0), (found.min, -1.0)):
        assert effect.position is not None
        assert crossing(model, train).at(quantity, effect.x).max.value >= effect.value * (1 - 1e-9)
        reached = plain(model, train, effect.position).extremes(quantity)
        assert (reached.max if sign > 0 else reached.min) == pytest.approx(effect.value, rel=1e-5)
        # around the position no smaller step helps either
        near = [
            Position(effect.position.x + u, effect.position.direction) for u in np.linspace(-1e-4, 1e-4, 20)
        ]
        values = [plain(model, train, p).extremes(quantity) for p in near]
        best = max(sign * (e.max if sign > 0 else e.min) for e in values)
        assert best <= sign * effect.value * (1 + 1e-9)
        assert best == pytest.approx(sign * effect.value, rel=1e-4)


@st.composite
def crossings(draw: st.DrawFn) -> tuple[BeamModel, Train]:
    spans = draw(st.lists(st.floats(2.0, 9.0), min_size=1, max_size=4))
    places = np.concatenate([[0.0], np.cumsum(spans)])
    overhang = draw(st.sampled_from([0.0, 1.5]))
    first = draw(st.sampled_from([pin(0.0), fixed(0.0), spring(0.0, 4e6)]))
    supports = (first, *(pin(float(x)) for x in places[1:]))
    axles = draw(st.lists(st.floats(5.0, 100.0), min_size=1, max_size=4))
    spacings = [draw(st.floats(0.5, 6.0)) for _ in axles[1:]]
    return prismatic(float(places[-1]) + overhang, EI, supports), Train(tuple(axles), tuple(spacings))


@given(crossings())
@settings(max_examples=15, deadline=None)
def test_no_step_exceeds_on_any_beam(drawn: tuple[BeamModel, Train]) -> None:
    model, train = drawn
    cross = crossing(model, train)
    stepped = Stepped.across(model, train, 25)
    M, R = cross.absolute("M"), cross.reaction(0)
    slack = 1e-9 * (abs(M.max.value) + abs(M.min.value))
    assert max(s.extremes("M").max for s in stepped.solutions) <= M.max.value + slack
    assert min(s.extremes("M").min for s in stepped.solutions) >= M.min.value - slack
    assert max(s.reactions[0].force for s in stepped.solutions) <= R.max.value * (1 + 1e-9)


@given(crossings())
@settings(max_examples=15, deadline=None)
def test_a_mirrored_beam_has_the_same_largest_moment(drawn: tuple[BeamModel, Train]) -> None:
    model, train = drawn
    L = model.length
    supports = tuple(
        type(s)(L - s.x, s.w, s.rotation, s.lateral, s.lateral_rotation) for s in reversed(model.supports)
    )
    mirrored = prismatic(L, EI, supports)
    here, there = (crossing(each, train) for each in (model, mirrored))
    size = here.absolute("M").max.value
    assert there.absolute("M").max.value == pytest.approx(size, rel=1e-8)
    assert there.absolute("M").min.value == pytest.approx(
        here.absolute("M").min.value, rel=1e-8, abs=1e-8 * size
    )
    assert there.absolute("V").max.value == pytest.approx(-here.absolute("V").min.value, rel=1e-8)


def test_a_crane_runway() -> None:
    """Two wheels of 120 kN at 3.6 m on a span of 10 m, each with a tenth of its load sideways.

    M = P(L - d/2)²/2L; sideways it is a tenth of that, at the same place and position.
    """
    P, d, L = 120e3, 3.6, 10.0
    model = prismatic(L, BendingStiffness(4e7, 3e6), (pin(0.0), pin(L)))
    crane = crossing(model, Train((P, P), (d,), lateral=0.1))
    M, M_lat = crane.absolute("M").max, crane.absolute("M_lat").max
    assert M.value == pytest.approx(P * (L - d / 2) ** 2 / (2 * L), rel=EXACT)
    assert (M_lat.value, M_lat.x) == pytest.approx((M.value / 10, M.x), rel=1e-9)
    assert M_lat.position == M.position
    assert crane.reaction(0, "force_lat").max.value == pytest.approx(0.1 * P * (1 + (L - d) / L), rel=EXACT)
    away = crossing(model, Train((P, P), (d,), lateral=-0.1))
    assert away.absolute("M_lat").min.value == pytest.approx(-M.value / 10, rel=1e-9)


def test_extremes_of_a_range_take_its_inner_side() -> None:
    cross = crossing(simple(10.0), Train((50e3,)))
    assert cross.absolute("M", 0.0, 3.0).max.value == pytest.approx(50e3 * 3 * 7 / 10, rel=EXACT)
    assert cross.absolute("V", 2.0, 4.0).max.value == pytest.approx(50e3 * 0.8, rel=EXACT)
    values = [cross.absolute("M", 0.0, x).max.value for x in (1.0, 2.0, 4.0)]
    assert all(a < b for a, b in pairwise(values))


PARTS: tuple[ReactionPart, ...] = ("force", "moment")


@pytest.mark.parametrize("part", PARTS)
def test_reactions_over_all_positions(part: ReactionPart) -> None:
    train = Train((80.0, 40.0), (3.0,))
    cross = crossing(SKEW, train)
    stepped = Stepped.across(SKEW, train, 150)
    for number in (0, 2):
        found = cross.reaction(number, part)
        values = [getattr(s.reactions[number], part) for s in stepped.solutions]
        size = max(abs(value) for value in values)
        assert max(values) <= found.max.value + 1e-9 * size
        assert min(values) >= found.min.value - 1e-9 * size
        assert max(values) == pytest.approx(found.max.value, abs=2e-2 * size)


def test_what_is_no_train() -> None:
    with pytest.raises(ValueError, match="axles of finite"):
        Train(())
    with pytest.raises(ValueError, match="one distance less"):
        Train((1.0, 2.0))
    with pytest.raises(ValueError, match="must be positive"):
        Train((1.0, 2.0), (0.0,))
    with pytest.raises(ValueError, match="lateral"):
        Crossing(influence(simple(5.0)), Train((1.0,), lateral=0.1))
    with pytest.raises(ValueError, match="moment and the shear"):
        crossing(simple(5.0), Train((1.0,))).absolute("w")
    with pytest.raises(ValueError, match="length"):
        crossing(simple(5.0), Train((1.0,))).absolute("M", 2.0, 2.0)


def test_no_cubic_is_laid_over_a_jump() -> None:
    # V near 5.25 m under the train above: 0.4e-15 m off a place where an axle meets it, one more interval.
    model = prismatic(5.625, 4e7, (pin(3.75), pin(5.625)))
    train = Train((5e3, 43e3, 45e3, 10e3, 71e3), (1.5, 0.625, 2.125, 2.5))
    places = np.array([5.25, np.nextafter(5.25, 6.0), 5.25 + 1e-12])
    found = Crossing(influence(model), train).reach("V", places, right=np.zeros(3, dtype=bool))
    assert found.high == pytest.approx([found.high[0]] * 3, rel=1e-9)
