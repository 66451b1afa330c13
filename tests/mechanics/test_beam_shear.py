"""Shear deformation after Timoshenko against closed forms, singularity functions and a collocation solver."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from scipy.integrate import solve_bvp

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    QUANTITIES,
    RIGID,
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
    ShearStiffness,
    Stretch,
    Support,
    fixed,
    pin,
    prismatic,
    roller,
    solve,
    spring,
)
from calcgen.mechanics.second_route.beam import beam_residuals

EXACT = 1e-10
L, EI, GA_s, W, P, C = 4.0, 2e6, 1.5e6, 5e3, 7e3, 3e3
PHI = 12 * EI / (GA_s * L**2)
"""Of the stiffness matrix of a beam with shear: Przemieniecki, Theory of Matrix Structural Analysis, 5.6."""


def solved(model: BeamModel, *loads: Load) -> CaseSolution:
    return solve(model, {"case": loads})["case"]


@dataclass(frozen=True)
class ClosedForm:
    """A beam of length 4 m with EI = 2e6 N·m² and GA_s = 1.5e6 N, and one number that a formula gives."""

    name: str
    supports: tuple[Support, ...]
    loads: tuple[Load, ...]
    read: Callable[[CaseSolution], float]
    value: float


CANTILEVER = (fixed(0.0),)
SIMPLE = (pin(0.0), roller(L))
FIXED = (fixed(0.0), fixed(L))
PROPPED = (fixed(0.0), pin(L))
FULL = DistributedLoad.uniform(0.0, L, W)
MIDDLE = PointLoad(L / 2, P)

# Bending parts as in Roark's Formulas for Stress and Strain, Table 8.1, from memory. The shear part of a
# statically determinate beam is ∫V dx/GA_s; redundant reactions follow by adding flexibilities.
CLOSED_FORMS = [
    ClosedForm(
        "cantilever, tip load",
        CANTILEVER,
        (PointLoad(L, P),),
        lambda s: s.at("w", L),
        P * L**3 / (3 * EI) + P * L / GA_s,
    ),
    ClosedForm(
        "cantilever, tip load: slope of the axis",
        CANTILEVER,
        (PointLoad(L, P),),
        lambda s: s.at("slope", L),
        P * L**2 / (2 * EI) + P / GA_s,
    ),
    ClosedForm(
        "cantilever, tip load: rotation of the section",
        CANTILEVER,
        (PointLoad(L, P),),
        lambda s: s.at("rotation", L),
        P * L**2 / (2 * EI),
    ),
    ClosedForm(
        "a wall holds the section upright, and the axis leaves it with a slope",
        CANTILEVER,
        (PointLoad(L, P),),
        lambda s: s.at("slope", 0.0) - s.at("rotation", 0.0),
        P / GA_s,
    ),
    ClosedForm(
        "cantilever, uniform",
        CANTILEVER,
        (FULL,),
        lambda s: s.at("w", L),
        W * L**4 / (8 * EI) + W * L**2 / (2 * GA_s),
    ),
    ClosedForm(
        "cantilever, tip couple: no shear",
        CANTILEVER,
        (PointMoment(L, C),),
        lambda s: s.at("w", L),
        C * L**2 / (2 * EI),
    ),
    ClosedForm(
        "simple span, uniform",
        SIMPLE,
        (FULL,),
        lambda s: s.at("w", L / 2),
        5 * W * L**4 / (384 * EI) + W * L**2 / (8 * GA_s),
    ),
    ClosedForm(
        "simple span, middle load",
        SIMPLE,
        (MIDDLE,),
        lambda s: s.at("w", L / 2),
        P * L**3 / (48 * EI) + P * L / (4 * GA_s),
    ),
    ClosedForm(
        "simple span, middle load: the slope jumps by P/GA_s under it",
        SIMPLE,
        (MIDDLE,),
        lambda s: s.at("slope", L / 2, "left") - s.at("slope", L / 2, "right"),
        P / GA_s,
    ),
    ClosedForm(
        "simple span, distributed couple: sections turn by V/GA_s, the axis stays straight",
        SIMPLE,
        (DistributedMoment.uniform(0.0, L, C),),
        lambda s: s.at("rotation", 1.0),
        C / GA_s,
    ),
    ClosedForm(
        "fixed ends, uniform",
        FIXED,
        (FULL,),
        lambda s: s.at("w", L / 2),
        W * L**4 / (384 * EI) + W * L**2 / (8 * GA_s),
    ),
    ClosedForm(
        "fixed ends, uniform: moments as without", FIXED, (FULL,), lambda s: s.at("M", L), -W * L**2 / 12
    ),
    ClosedForm(
        "fixed ends, middle load",
        FIXED,
        (MIDDLE,),
        lambda s: s.at("w", L / 2),
        P * L**3 / (192 * EI) + P * L / (4 * GA_s),
    ),
    ClosedForm(
        "fixed ends, settlement",
        FIXED,
        (Settlement(1, 0.01),),
        lambda s: s.at("M", 0.0),
        -6 * EI * 0.01 / (L**2 * (1 + PHI)),
    ),
    ClosedForm(
        "propped cantilever, uniform: prop",
        PROPPED,
        (FULL,),
        lambda s: s.reactions[1].force,
        (W * L**4 / (8 * EI) + W * L**2 / (2 * GA_s)) / (L**3 / (3 * EI) + L / GA_s),
    ),
    ClosedForm(
        "propped cantilever, middle load: prop",
        PROPPED,
        (MIDDLE,),
        lambda s: s.reactions[1].force,
        (5 * P * L**3 / (48 * EI) + P * L / (2 * GA_s)) / (L**3 / (3 * EI) + L / GA_s),
    ),
    ClosedForm(
        "propped cantilever, couple at the prop: stiffness (4 + Φ)/(1 + Φ)·EI/L",
        PROPPED,
        (PointMoment(L, C),),
        lambda s: s.at("rotation", L),
        C * L / EI * (1 + PHI) / (4 + PHI),
    ),
    ClosedForm(
        "two spans, uniform: middle reaction",
        (pin(0.0), pin(L / 2), pin(L)),
        (FULL,),
        lambda s: s.reactions[1].force,
        (5 * W * L**4 / (384 * EI) + W * L**2 / (8 * GA_s)) / (L**3 / (48 * EI) + L / (4 * GA_s)),
    ),
    ClosedForm(
        "a wall that yields turns the section",
        (spring(0.0, RIGID, 5e5),),
        (PointLoad(L, P),),
        lambda s: s.at("rotation", 0.0),
        P * L / 5e5,
    ),
]


@pytest.mark.parametrize("case", CLOSED_FORMS, ids=lambda case: case.name)
def test_closed_forms(case: ClosedForm) -> None:
    model = prismatic(L, EI, case.supports, shear=ShearStiffness(GA_s))
    solution = solved(model, *case.loads)
    assert case.read(solution) == pytest.approx(case.value, rel=EXACT)
    assert all(r.holds for r in beam_residuals(model, case.loads, solution))


def test_stretches_shear_on_their_own() -> None:
    """A tip load: bending as in one piece, shear P·(a/GA_1 + b/GA_2)."""
    B = BendingStiffness(EI)
    stretches = (Stretch(0.0, 1.5, B, ShearStiffness(4e6)), Stretch(1.5, L, B, ShearStiffness(1e6)))
    w = solved(BeamModel(L, stretches, CANTILEVER), PointLoad(L, P)).at("w", L)
    assert w == pytest.approx(P * L**3 / (3 * EI) + P * (1.5 / 4e6 + 2.5 / 1e6), rel=EXACT)


def test_the_planes_shear_on_their_own() -> None:
    model = prismatic(L, BendingStiffness(EI, EI / 4), CANTILEVER, shear=ShearStiffness(GA_s, 2 * GA_s))
    s = solved(model, PointLoad(L, P), PointLoad(L, 2 * P, "lateral"))
    assert s.at("w", L) == pytest.approx(P * L**3 / (3 * EI) + P * L / GA_s, rel=EXACT)
    assert s.at("w_lat", L) == pytest.approx(2 * P * (L**3 / (3 * EI / 4) + L / (2 * GA_s)), rel=EXACT)


@pytest.mark.parametrize("quantity", QUANTITIES)
def test_a_beam_stiff_in_shear_bends_as_without(quantity: Quantity) -> None:
    B = BendingStiffness(EI, EI / 3, EI / 5)
    supports, loads = (fixed(0.0), spring(3.0, 2e6), pin(9.0)), (FULL, PointLoad(7.0, P, "lateral"))
    plain = solved(prismatic(9.0, B, supports, (5.0,)), *loads)
    stiff = solved(prismatic(9.0, B, supports, (5.0,), ShearStiffness(1e18, 1e18)), *loads)
    x = np.linspace(0.0, 9.0, 37)
    expected = plain.values(quantity, x)
    assert stiff.values(quantity, x) == pytest.approx(expected, rel=1e-9, abs=1e-9 * np.abs(expected).max())


def test_without_shear_the_section_turns_with_the_axis() -> None:
    s = solved(prismatic(L, EI, PROPPED), FULL, PointLoad(1.0, P))
    x = np.linspace(0.0, L, 21)
    assert np.array_equal(s.values("slope", x), s.values("rotation", x))


def macaulay(x: FloatArray, a: float, power: int) -> FloatArray:
    """Singularity function <x - a>^n."""
    return np.where(x > a, np.abs(x - a) ** power, 0.0)


@given(
    st.lists(st.floats(0.5, 6.0), min_size=1, max_size=5),
    st.lists(st.tuples(st.floats(0.02, 0.98), st.integers(-9000, 9000)), min_size=1, max_size=4),
    st.tuples(st.floats(0.0, 0.4), st.floats(0.5, 1.0), st.integers(-9000, 9000)),
    st.floats(0.05, 50.0),
)
@settings(max_examples=40, deadline=None)
def test_against_singularity_functions(
    spans: list[float],
    forces: list[tuple[float, int]],
    spread: tuple[float, float, int],
    softness: float,
) -> None:
    """w = w_0 + θ_0 x + Σ force·(<x - a>/GA_s - <x - a>³/(6EI)) over pins; unknown: reactions, w_0, θ_0."""
    places = np.concatenate([[0.0], np.cumsum(spans)])
    length = float(places[-1])
    shear = EI / (softness * length**2)
    start, end, q = spread[0] * length, spread[1] * length, float(spread[2])
    model = prismatic(length, EI, tuple(pin(float(x)) for x in places), shear=ShearStiffness(shear))
    loads = [PointLoad(part * length, float(force)) for part, force in forces]
    s = solved(model, *loads, DistributedLoad.uniform(start, end, q))

    def of_force(x: FloatArray, a: float) -> FloatArray:
        return macaulay(x, a, 1) / shear - macaulay(x, a, 3) / (6 * EI)

    def of_loads(x: FloatArray) -> FloatArray:
        total = np.zeros_like(x)
        for load in loads:
            total -= load.value * of_force(x, load.x)
        for a, sign in ((start, 1.0), (end, -1.0)):
            total -= sign * q * (macaulay(x, a, 2) / (2 * shear) - macaulay(x, a, 4) / (24 * EI))
        return total

    n = len(places)
    scale = length**3 / EI  # of a reaction's column, so that the matrix is well scaled
    columns = [np.ones(n), places / length, *(of_force(places, float(a)) / scale for a in places)]
    force = sum(load.value for load in loads) + q * (end - start)
    moment = sum(load.value * (length - load.x) for load in loads)
    moment += q * (end - start) * (length - (start + end) / 2)
    rows = np.vstack(
        [
            np.array(columns).T,
            np.concatenate([[0.0, 0.0], np.ones(n)]),
            np.concatenate([[0.0, 0.0], (length - places) / length]),
        ]
    )
    known = np.concatenate([-of_loads(places), [force * scale, moment * scale / length]])
    w_0, theta_0, *reactions = np.linalg.solve(rows, known)
    x = np.linspace(0.0, length, 41)
    expected = w_0 + theta_0 * x / length + of_loads(x)
    for a, reaction in zip(places, reactions, strict=True):
        expected += reaction / scale * of_force(x, float(a))
    size = max(float(np.abs(expected).max()), 1e-12 * scale)
    assert s.values("w", x) == pytest.approx(expected, rel=1e-9, abs=1e-9 * size)


@pytest.mark.parametrize("seed", range(6))
def test_against_a_collocation_solver_in_two_planes(seed: int) -> None:
    """solve_bvp on a beam with coupled planes, shear, a free curvature, a wall and yielding springs."""
    rng = np.random.default_rng(seed)
    length = rng.uniform(1, 6)
    v, lat = rng.uniform(1e6, 1e7, 2)
    B = BendingStiffness(v, lat, rng.uniform(-0.8, 0.8) * np.sqrt(v * lat))
    shear = rng.uniform(5e5, 5e6, 2)
    k, k_rotation = rng.uniform(1e4, 1e6, 2)
    a, b, m, side, tip, couple = rng.uniform(-5e3, 9e3, 6)
    kappa_0 = rng.uniform(-1e-3, 1e-3)
    model = prismatic(length, B, (fixed(0.0), spring(length, k, k_rotation)), shear=ShearStiffness(*shear))
    loads: tuple[Load, ...] = (
        DistributedLoad(0.0, length, a, b),
        DistributedMoment.uniform(0.0, length, m),
        DistributedLoad.uniform(0.0, length, side, "lateral"),
        FreeCurvature(0.0, length, kappa_0),
        PointLoad(length, tip),
        PointMoment(length, couple, "lateral"),
    )
    s = solved(model, *loads)
    flexibility = np.linalg.inv(np.array([[v, B.coupling], [B.coupling, lat]])) * 1e3  # forces in kN

    def rates(x: FloatArray, z: FloatArray) -> FloatArray:
        w, turn, M, V = z[:2], z[2:4], z[4:6], z[6:8]
        curvature = flexibility @ M + np.array([[kappa_0], [0.0]])
        slope = turn + V * 1e3 / shear[:, None]
        q = np.array([(a + (b - a) * x / length) / 1e3, np.full_like(x, side / 1e3)])
        return np.concatenate([slope + 0 * w, -curvature, V + np.array([[m / 1e3], [0.0]]), -q])

    def ends(start: FloatArray, end: FloatArray) -> FloatArray:
        w, turn, M, V = end[:2], end[2:4], end[4:6], end[6:8]
        load, moment = np.array([tip, 0.0]) / 1e3, np.array([0.0, couple]) / 1e3
        free = np.concatenate([V - load + k * w / 1e3, M + moment - k_rotation * turn / 1e3])
        return np.concatenate([start[:4], free])

    x = np.linspace(0.0, length, 40)
    oracle = solve_bvp(rates, ends, x, np.zeros((8, 40)), tol=1e-9)
    assert oracle.success
    z = oracle.sol(x)
    found: dict[Quantity, FloatArray] = {
        "w": z[0],
        "w_lat": z[1],
        "rotation": z[2],
        "rotation_lat": z[3],
        "M": z[4] * 1e3,
        "M_lat": z[5] * 1e3,
        "V": z[6] * 1e3,
        "V_lat": z[7] * 1e3,
        "slope": z[2] + z[6] * 1e3 / shear[0],
    }
    for quantity, values in found.items():
        assert s.values(quantity, x) == pytest.approx(values, rel=1e-6, abs=1e-6 * np.abs(values).max())
    assert all(r.holds for r in beam_residuals(model, loads, s))


@pytest.mark.parametrize("value", [0.0, -1.0, float("nan")])
def test_a_shear_stiffness_must_be_positive(value: float) -> None:
    with pytest.raises(ValueError, match="positive"):
        ShearStiffness(value)
