"""Relations that hold for every beam: second route, superposition, reciprocity, mirror symmetry."""

from __future__ import annotations

from dataclasses import replace
from itertools import pairwise

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    NO_SHEAR,
    PARTS,
    PLANES,
    QUANTITIES,
    RIGID,
    BeamModel,
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    Plane,
    PointLoad,
    PointMoment,
    Quantity,
    Settlement,
    ShearStiffness,
    Stretch,
    Support,
    combine,
    combined,
    solve,
)
from calcgen.mechanics.second_route.beam import beam_residuals

E = 210e9
parts = st.floats(0.05, 0.95)
sizes = st.integers(-10_000, 10_000).map(float)
planes: st.SearchStrategy[Plane] = st.sampled_from(PLANES)
restraints = st.one_of(st.just(RIGID), st.floats(1e4, 1e8))
rotations = st.one_of(st.just(0.0), st.just(RIGID), st.floats(1e4, 1e7))


shears = st.one_of(st.just(NO_SHEAR), st.builds(ShearStiffness, st.floats(1e5, 1e9), st.floats(1e5, 1e9)))


@st.composite
def stiffnesses(draw: st.DrawFn) -> BendingStiffness:
    I_h, I_v = draw(st.floats(1e-6, 1e-4)), draw(st.floats(1e-6, 1e-4))
    return BendingStiffness.of_section(E, I_h, I_v, draw(st.floats(-0.9, 0.9)) * (I_h * I_v) ** 0.5)


@st.composite
def models(draw: st.DrawFn) -> BeamModel:
    """Two to four supports, the first and last of them anywhere, one change of stiffness, perhaps a hinge."""
    length = draw(st.floats(2.0, 40.0))
    places = sorted(draw(st.lists(st.integers(0, 20), min_size=2, max_size=4, unique=True)))
    supports = tuple(
        Support(length * i / 20, draw(restraints), draw(rotations), draw(restraints), draw(rotations))
        for i in places
    )
    first = supports[0]
    step = length * draw(parts)
    stretches = (
        Stretch(0.0, step, draw(stiffnesses()), draw(shears)),
        Stretch(step, length, draw(stiffnesses()), draw(shears)),
    )
    hinges: tuple[float, ...] = ()
    if draw(st.booleans()):
        # Clamped on its left and held twice on its right, the hinge leaves nothing loose.
        supports = (replace(first, rotation=RIGID, lateral_rotation=RIGID), *supports[1:])
        if len(supports) > 2:
            hinges = ((first.x + supports[1].x) / 2,)
    return BeamModel(length, stretches, supports, hinges)


@st.composite
def loads_on(draw: st.DrawFn, model: BeamModel) -> Load:
    plane: Plane = draw(planes)
    a, b = sorted(draw(st.lists(st.integers(0, 30), min_size=2, max_size=2, unique=True)))
    start, end = model.length * a / 30, model.length * b / 30
    v1, v2 = draw(sizes), draw(sizes)
    kinds: list[Load] = [
        PointLoad(start, v1, plane),
        DistributedLoad(start, end, v1, v2, plane),
        DistributedMoment(start, end, v1, v2, plane),
        FreeCurvature(start, end, v1 * 1e-7, plane),
        Settlement(draw(st.integers(0, len(model.supports) - 1)), v1 * 1e-6, plane),
    ]
    if not any(model.same(start, hinge) for hinge in model.hinges):
        kinds.append(PointMoment(start, v1, plane))
    return draw(st.sampled_from(kinds))


@st.composite
def beams(draw: st.DrawFn) -> tuple[BeamModel, tuple[Load, ...], tuple[Load, ...]]:
    """Draw a model and two load cases."""
    model = draw(models())
    cases = st.lists(loads_on(model), min_size=1, max_size=3).map(tuple)
    return model, draw(cases), draw(cases)


def sampled(solution: CaseSolution) -> dict[Quantity, tuple[FloatArray, float]]:
    """Values along the beam, and their largest magnitude in the two planes together.

    One system gives both planes, so the rounding of the weaker plane's results is that of the stronger;
    likewise a shear force that is zero beside a moment M rounds as M over a length.
    """
    found: dict[Quantity, tuple[FloatArray, float]] = {}
    for part in range(len(PARTS)):
        pair = QUANTITIES[part], QUANTITIES[part + len(PARTS)]
        lines = [solution.polyline(quantity, 4)[1] for quantity in pair]
        size = max(float(np.abs(line).max()) for line in lines)
        if pair[0] == "V":
            size = max(size, found["M"][1] / solution.model.length)
        found.update({quantity: (line, size) for quantity, line in zip(pair, lines, strict=True)})
    return found


@given(beams())
@settings(max_examples=60, deadline=None)
def test_the_second_route_agrees(beam: tuple[BeamModel, tuple[Load, ...], tuple[Load, ...]]) -> None:
    model, loads, _ = beam
    for residual in beam_residuals(model, loads, solve(model, {"case": loads})["case"]):
        assert residual.holds, residual


@given(beams(), st.floats(-2, 2), st.floats(-2, 2))
@settings(max_examples=40, deadline=None)
def test_cases_add(beam: tuple[BeamModel, tuple[Load, ...], tuple[Load, ...]], f: float, g: float) -> None:
    model, first, second = beam
    cases = {"a": first, "b": second}
    factors = {"a": f, "b": g}
    solutions = solve(model, {**cases, "sum": combined(cases, factors)})
    direct, added = sampled(solutions["sum"]), sampled(combine(solutions, factors))
    size = {q: max(sampled(solutions["a"])[q][1], sampled(solutions["b"])[q][1]) for q in direct}
    for q, (values, _) in direct.items():
        assert added[q][0] == pytest.approx(values, rel=1e-9, abs=1e-9 * size[q]), q


@given(models(), parts, parts, planes, planes)
@settings(max_examples=40, deadline=None)
def test_reciprocal_deflections_are_equal(
    model: BeamModel, a: float, b: float, plane_a: Plane, plane_b: Plane
) -> None:
    """Maxwell and Betti: a load at A moves B as the same load at B moves A, across the planes too."""
    x_a, x_b = a * model.length, b * model.length
    s = solve(model, {"a": (PointLoad(x_a, 1e3, plane_a),), "b": (PointLoad(x_b, 1e3, plane_b),)})
    moved_b = s["a"].at("w" if plane_b == "vertical" else "w_lat", x_b)
    moved_a = s["b"].at("w" if plane_a == "vertical" else "w_lat", x_a)
    size = max(solution.extremes(q).abs for solution in s.values() for q in ("w", "w_lat"))
    assert moved_a == pytest.approx(moved_b, rel=1e-9, abs=1e-9 * size)


def mirrored(model: BeamModel) -> BeamModel:
    L = model.length
    return BeamModel(
        L,
        tuple(Stretch(L - s.end, L - s.start, s.stiffness, s.shear) for s in reversed(model.stretches)),
        tuple(replace(s, x=L - s.x) for s in reversed(model.supports)),
        tuple(L - x for x in reversed(model.hinges)),
    )


def mirrored_load(load: Load, model: BeamModel) -> Load:
    """Seen from the other end: forces stay, couples turn the other way.

    The lateral plane keeps its own sense of 'right', so only the order along x changes.
    """
    L = model.length
    match load:
        case PointLoad():
            return replace(load, x=L - load.x)
        case PointMoment():
            return replace(load, x=L - load.x, value=-load.value)
        case DistributedLoad():
            return DistributedLoad(L - load.end, L - load.start, load.value_end, load.value_start, load.plane)
        case DistributedMoment():
            return DistributedMoment(
                L - load.end, L - load.start, -load.value_end, -load.value_start, load.plane
            )
        case FreeCurvature():
            return replace(load, start=L - load.end, end=L - load.start)
        case Settlement():
            return replace(load, support=len(model.supports) - 1 - load.support)


@given(beams())
@settings(max_examples=40, deadline=None)
def test_a_mirrored_beam_has_mirrored_results(
    beam: tuple[BeamModel, tuple[Load, ...], tuple[Load, ...]],
) -> None:
    model, loads, _ = beam
    there = sampled(solve(model, {"case": loads})["case"])
    back = sampled(solve(mirrored(model), {"case": [mirrored_load(load, model) for load in loads]})["case"])
    for q, (values, size) in there.items():
        sign = -1 if q.startswith(("V", "slope", "rotation")) else 1
        assert sign * back[q][0][::-1] == pytest.approx(values, rel=1e-9, abs=1e-9 * size), q


def test_a_mirrored_beam_rounds_alike() -> None:
    """A coupling so weak that w_lat is a billionth of w: both directions find it, with all its digits.

    A generated example; its spans are short beside its length, and the noise of w lies well below w_lat.
    """
    stretches = (
        Stretch(0.0, 1.0, BendingStiffness(210000.0, 12012028.574226677)),
        Stretch(1.0, 2.0, BendingStiffness(210000.0, 10357393.015878586, -0.08790528361416719)),
    )
    model = BeamModel(2.0, stretches, (Support(0.5), Support(1.1)))
    load = DistributedLoad(0.0, 0.9333333333333333, 0.0, 1.0)
    there = sampled(solve(model, {"case": (load,)})["case"])["w_lat"][0]
    back = sampled(solve(mirrored(model), {"case": (mirrored_load(load, model),)})["case"])["w_lat"][0]
    size = float(np.abs(there).max())
    assert size > 1e-17
    assert back[::-1] == pytest.approx(there, rel=1e-9, abs=1e-9 * size)


@pytest.mark.parametrize("seed", range(40))
def test_what_is_zero_by_statics_is_given_as_zero(seed: int) -> None:
    """Settlements and gradients leave a determinate beam without moment, however its spans are graded."""
    rng = np.random.default_rng(seed)
    spans = int(rng.integers(1, 13))
    places = np.concatenate([[0.0], np.cumsum(10.0 ** rng.uniform(-2.0, 1.3, spans))])
    hinges = tuple(float(a + rng.uniform(0.1, 0.9) * (b - a)) for a, b in pairwise(places[1:]))
    length = float(places[-1])
    step = length * rng.uniform(0.1, 0.9)
    stiff, soft = (
        BendingStiffness(float(v), float(lat), 0.7 * float(np.sqrt(v * lat)))
        for v, lat in 10.0 ** rng.uniform(4.0, 8.0, (2, 2))
    )
    model = BeamModel(
        length,
        (Stretch(0.0, step, stiff), Stretch(step, length, soft, ShearStiffness(1e6, 1e6))),
        tuple(Support(float(x)) for x in places),
        hinges,
    )
    cases: dict[str, tuple[Load, ...]] = {
        "S": (Settlement(int(rng.integers(0, spans + 1)), 0.01),),
        "C": (FreeCurvature(0.0, length, 1e-4),),
    }
    for solution in solve(model, cases).values():
        assert solution.extremes("w").abs > 0.0
        found = {q: solution.extremes(q).abs for q in ("M", "V", "M_lat", "V_lat")}
        assert found == dict.fromkeys(found, 0.0)
        assert all((r.force, r.moment) == (0.0, 0.0) for r in solution.reactions)
