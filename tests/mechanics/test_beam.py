"""Beams against published answers, closed forms and independent solvers."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from fractions import Fraction
from math import cos, pi, radians, sin

import numpy as np
import pytest
import sympy
from scipy.integrate import solve_bvp

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import (
    FREE,
    RIGID,
    BeamModel,
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    DistributedMoment,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
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
from tests.exact.beam_cases import CASES, BeamCase

EXACT = 1e-10


def solved(model: BeamModel, *loads: Load) -> CaseSolution:
    return solve(model, {"case": loads})["case"]


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.name)
def test_published_and_worked_examples(case: BeamCase) -> None:
    solution = solved(case.model, *case.loads)
    for expected in case.expected:
        assert expected.read(solution) == pytest.approx(expected.value, rel=expected.tolerance), expected.what
    assert all(r.holds for r in beam_residuals(case.model, case.loads, solution))


L, EI, W, P, C = 4.0, 2e6, 5e3, 7e3, 3e3


@dataclass(frozen=True)
class ClosedForm:
    """A beam of length 4 m and stiffness 2e6 N·m², and one number that a formula gives."""

    name: str
    supports: tuple[Support, ...]
    loads: tuple[Load, ...]
    read: Callable[[CaseSolution], float]
    value: float


CANTILEVER = (fixed(0.0),)
CANTILEVER_FROM_RIGHT = (fixed(L),)
SIMPLE = (pin(0.0), roller(L))
FIXED = (fixed(0.0), fixed(L))
FULL = DistributedLoad.uniform(0.0, L, W)
RISING = DistributedLoad(0.0, L, 0.0, W)

# Beam formulas as in Roark's Formulas for Stress and Strain, Table 8.1, from memory; springs by statics.
CLOSED_FORMS = [
    ClosedForm(
        "cantilever, tip load", CANTILEVER, (PointLoad(L, P),), lambda s: s.at("w", L), P * L**3 / (3 * EI)
    ),
    ClosedForm(
        "cantilever, tip load: slope",
        CANTILEVER,
        (PointLoad(L, P),),
        lambda s: s.at("slope", L),
        P * L**2 / (2 * EI),
    ),
    ClosedForm("cantilever, uniform", CANTILEVER, (FULL,), lambda s: s.at("w", L), W * L**4 / (8 * EI)),
    ClosedForm("cantilever, uniform: moment", CANTILEVER, (FULL,), lambda s: s.at("M", 0.0), -W * L**2 / 2),
    ClosedForm("cantilever, uniform: shear", CANTILEVER, (FULL,), lambda s: s.at("V", 0.0), W * L),
    ClosedForm(
        "cantilever, load rising to the tip",
        CANTILEVER,
        (RISING,),
        lambda s: s.at("w", L),
        11 * W * L**4 / (120 * EI),
    ),
    ClosedForm(
        "cantilever, load rising to the wall",
        CANTILEVER_FROM_RIGHT,
        (RISING,),
        lambda s: s.at("w", 0.0),
        W * L**4 / (30 * EI),
    ),
    ClosedForm(
        "cantilever, clockwise tip couple",
        CANTILEVER,
        (PointMoment(L, C),),
        lambda s: s.at("w", L),
        C * L**2 / (2 * EI),
    ),
    ClosedForm(
        "cantilever, clockwise tip couple: hogging",
        CANTILEVER,
        (PointMoment(L, C),),
        lambda s: s.at("M", 1.0),
        -C,
    ),
    ClosedForm(
        "cantilever from the right, tip load",
        CANTILEVER_FROM_RIGHT,
        (PointLoad(0.0, P),),
        lambda s: s.at("V", 1.0),
        -P,
    ),
    ClosedForm(
        "cantilever from the right: support moment, clockwise on the beam",
        CANTILEVER_FROM_RIGHT,
        (PointLoad(0.0, P),),
        lambda s: s.reactions[0].moment,
        -P * L,
    ),
    ClosedForm(
        "cantilever, distributed couple: acts as a tip force of its intensity, without shear",
        CANTILEVER,
        (DistributedMoment.uniform(0.0, L, C),),
        lambda s: s.at("w", L),
        C * L**3 / (3 * EI),
    ),
    ClosedForm(
        "simple span, distributed couple: constant shear, no moment",
        SIMPLE,
        (DistributedMoment.uniform(0.0, L, C),),
        lambda s: s.at("V", 1.0),
        -C,
    ),
    ClosedForm(
        "simple span, middle load",
        SIMPLE,
        (PointLoad(L / 2, P),),
        lambda s: s.at("w", L / 2),
        P * L**3 / (48 * EI),
    ),
    ClosedForm(
        "simple span, end couple: slope there",
        SIMPLE,
        (PointMoment(0.0, C),),
        lambda s: s.at("slope", 0.0),
        C * L / (3 * EI),
    ),
    ClosedForm(
        "simple span, end couple: slope beyond",
        SIMPLE,
        (PointMoment(0.0, C),),
        lambda s: s.at("slope", L),
        -C * L / (6 * EI),
    ),
    ClosedForm("fixed ends, uniform: w", FIXED, (FULL,), lambda s: s.at("w", L / 2), W * L**4 / (384 * EI)),
    ClosedForm("fixed ends, uniform: M at an end", FIXED, (FULL,), lambda s: s.at("M", L), -W * L**2 / 12),
    ClosedForm(
        "fixed ends, rising load: M at its foot", FIXED, (RISING,), lambda s: s.at("M", 0.0), -W * L**2 / 30
    ),
    ClosedForm(
        "fixed ends, rising load: M at its head", FIXED, (RISING,), lambda s: s.at("M", L), -W * L**2 / 20
    ),
    ClosedForm(
        "fixed ends, settlement of the right",
        FIXED,
        (Settlement(1, 0.01),),
        lambda s: s.at("M", 0.0),
        -6 * EI * 0.01 / L**2,
    ),
    ClosedForm(
        "fixed ends, couple in the middle",
        FIXED,
        (PointMoment(L / 2, C),),
        lambda s: s.at("M", L / 2, "right") - s.at("M", L / 2, "left"),
        C,
    ),
    ClosedForm(
        "propped cantilever, middle load: prop",
        (fixed(0.0), pin(L)),
        (PointLoad(L / 2, P),),
        lambda s: s.reactions[1].force,
        5 * P / 16,
    ),
    ClosedForm(
        "cantilever on a tip spring: k δ = R",
        (fixed(0.0), spring(L, 1e5)),
        (FULL,),
        lambda s: s.reactions[1].force,
        3 * W * L / 8 / (1 + 3 * EI / (1e5 * L**3)),
    ),
    ClosedForm(
        "simple span on springs, middle load: sinks and bends",
        (spring(0.0, 2e5), spring(L, 2e5)),
        (PointLoad(L / 2, P),),
        lambda s: s.at("w", L / 2),
        P * L**3 / (48 * EI) + P / 2 / 2e5,
    ),
    ClosedForm(
        "cantilever with a yielding wall",
        (spring(0.0, RIGID, 5e5),),
        (PointLoad(L, P),),
        lambda s: s.at("w", L),
        P * L**3 / (3 * EI) + P * L / 5e5 * L,
    ),
    ClosedForm(
        "a spring that settles under an unloaded lever follows",
        (pin(0.0), spring(L, 1e5)),
        (Settlement(1, 0.02),),
        lambda s: s.at("w", L / 2),
        0.01,
    ),
    ClosedForm(
        "a guided end shifts without turning",
        (fixed(0.0), Support(L, FREE, RIGID)),
        (PointLoad(L, P),),
        lambda s: s.at("w", L),
        P * L**3 / (12 * EI),
    ),
]


@pytest.mark.parametrize("case", CLOSED_FORMS, ids=lambda case: case.name)
def test_closed_forms(case: ClosedForm) -> None:
    model = prismatic(L, EI, case.supports)
    solution = solved(model, *case.loads)
    assert case.read(solution) == pytest.approx(case.value, rel=EXACT)
    assert all(r.holds for r in beam_residuals(model, case.loads, solution))


def test_cantilever_of_two_stiffnesses() -> None:
    """Tip load: Σ of ∫x²dx·P/EI over the two stretches, x from the tip."""
    a, b, EI_a, EI_b = 1.5, 2.5, 6e6, 2e6
    model = BeamModel(
        4.0,
        (Stretch(0.0, a, BendingStiffness(EI_a)), Stretch(a, 4.0, BendingStiffness(EI_b))),
        (fixed(0.0),),
    )
    expected = P * ((4.0**3 - b**3) / EI_a + b**3 / EI_b) / 3
    assert solved(model, PointLoad(4.0, P)).at("w", 4.0) == pytest.approx(expected, rel=EXACT)


def test_hinged_beam_by_statics() -> None:
    """Two spans of 6 m, a hinge 2 m beyond the middle support: there a simple span of 4 m hangs."""
    model = prismatic(12.0, EI, (pin(0.0), pin(6.0), pin(12.0)), (8.0,))
    s = solved(model, DistributedLoad.uniform(0.0, 12.0, W))
    hanging = W * 4 / 2
    M_middle = -(hanging * 2 + W * 2**2 / 2)
    assert s.at("M", 6.0) == pytest.approx(M_middle, rel=EXACT)
    assert s.at("V", 8.0) == pytest.approx(hanging, rel=EXACT)
    assert s.at("M", 8.0) == 0.0
    assert s.reactions[2].force == pytest.approx(hanging, rel=EXACT)
    assert s.reactions[0].force == pytest.approx(W * 6 / 2 + M_middle / 6, rel=EXACT)
    assert s.at("slope", 8.0, "left") != pytest.approx(s.at("slope", 8.0, "right"))
    assert s.at("w", 8.0, "left") == pytest.approx(s.at("w", 8.0, "right"), rel=EXACT)


def test_hinge_over_a_support_parts_the_spans() -> None:
    model = prismatic(2 * L, EI, (pin(0.0), pin(L), pin(2 * L)), (L,))
    s = solved(model, FULL)
    assert s.at("w", L / 2) == pytest.approx(5 * W * L**4 / (384 * EI), rel=EXACT)
    assert s.extremes("M", L, 2 * L).abs == 0.0


def test_unequal_angle_cantilever_deflects_sideways() -> None:
    """Against bending about the principal axes, axis 1 turned counter-clockwise by α from the horizontal.

    A tip load P down has the components -P sin α along axis 1 and -P cos α along axis 2, y up; each bends the
    beam about the other axis alone, and the two deflections are put together again.
    """
    I_1, I_2, alpha = 9.0e-6, 1.5e-6, radians(23.0)
    mean, half = (I_1 + I_2) / 2, (I_1 - I_2) / 2
    I_h, I_v = mean + half * cos(2 * alpha), mean - half * cos(2 * alpha)
    # With x' = x cos α + y sin α and y' = y cos α - x sin α, ∫x'y' dA = 0: this is ∫xy dA.
    I_hv = -half * sin(2 * alpha)
    E = 210e9
    s = solved(prismatic(L, BendingStiffness.of_section(E, I_h, I_v, I_hv), (fixed(0.0),)), PointLoad(L, P))
    per_force = L**3 / (3 * E)
    along_1 = -P * sin(alpha) * per_force / I_2
    along_2 = -P * cos(alpha) * per_force / I_1
    right = along_1 * cos(alpha) - along_2 * sin(alpha)
    up = along_1 * sin(alpha) + along_2 * cos(alpha)
    assert s.at("w", L) == pytest.approx(-up, rel=EXACT)
    assert s.at("w_lat", L) == pytest.approx(right, rel=EXACT)
    assert s.at("M_lat", 0.0) == 0.0  # the load is vertical: only the deflection turns


def test_the_coupling_is_that_of_a_section() -> None:
    """Moments of the stresses E(κ d + κ_lat r), d down and r right, over the fibres of a parallelogram."""
    E, kappa, kappa_lat = 10.0, 0.3, -0.2
    s, t = (np.arange(400) + 0.5) / 400 - 0.5, (np.arange(400) + 0.5) / 400 - 0.5
    x = 2.0 * s[:, None] + 0.7 * t  # leans to the right at the top: ∫xy dA > 0
    y = 3.0 * t + 0.0 * s[:, None]
    dA = 2.0 * 3.0 / 400**2
    sigma = E * (kappa * -y + kappa_lat * x)
    B = BendingStiffness.of_section(E, (y * y).sum() * dA, (x * x).sum() * dA, (x * y).sum() * dA)
    assert B.lateral is not None
    assert B.vertical * kappa + B.coupling * kappa_lat == pytest.approx((sigma * -y).sum() * dA, rel=1e-12)
    assert B.coupling * kappa + B.lateral * kappa_lat == pytest.approx((sigma * x).sum() * dA, rel=1e-12)


def test_a_restrained_section_bends_about_its_horizontal_axis() -> None:
    B = BendingStiffness.of_section(210e9, 9e-6, 2e-6, 3e-6, restrained=True)
    s = solved(prismatic(L, B, (fixed(0.0),)), PointLoad(L, P), PointLoad(L, 500.0, "lateral"))
    assert s.at("w", L) == pytest.approx(P * L**3 / (3 * 210e9 * 9e-6), rel=EXACT)
    assert s.at("w_lat", L) == pytest.approx(500 * L**3 / (3 * 210e9 * 2e-6), rel=EXACT)
    assert s.at("M_lat", 0.0) == pytest.approx(-500 * L, rel=EXACT)
    assert s.reactions[0].force_lat == pytest.approx(500, rel=EXACT)  # to the left


def test_planes_hold_on_their_own() -> None:
    """Fixed vertically, simply supported sideways."""
    model = prismatic(L, BendingStiffness(EI, EI / 4), tuple(Support(x, RIGID, RIGID) for x in (0.0, L)))
    s = solved(model, FULL, DistributedLoad.uniform(0.0, L, W, "lateral"))
    assert s.at("w", L / 2) == pytest.approx(W * L**4 / (384 * EI), rel=EXACT)
    assert s.at("w_lat", L / 2) == pytest.approx(5 * W * L**4 / (384 * EI / 4), rel=EXACT)


@pytest.mark.parametrize("sliver", [1e-2, 1e-4, 1e-6])
def test_a_short_element_costs_no_digits(sliver: float) -> None:
    """A load that starts close beside a support of a propped cantilever, against sympy in fractions."""
    start = 3.0 + sliver
    model = prismatic(20.0, 1e7, (fixed(0.0), pin(3.0), pin(20.0)))
    s = solved(model, DistributedLoad.uniform(start, 20.0, W))
    # Unknowns: M and V at the wall and the reaction at 3 m; conditions w(3) = w(20) = M(20) = 0.
    M, V, R = sympy.symbols("M V R")
    a, q = sympy.Rational(Fraction(start)), sympy.Integer(int(W))

    def moment(x: int) -> sympy.Expr:
        return M + V * x + R * (x - 3) - q * (x - a) ** 2 / 2

    at_20 = -(M * 400 / 2 + V * 8000 / 6 + R * 17**3 / sympy.Integer(6) - q * (20 - a) ** 4 / 24)
    at_3 = -(M * 9 / 2 + V * 27 / 6)
    exact = sympy.solve([at_3, at_20, moment(20)], [M, V, R])
    assert s.at("M", 0.0) == pytest.approx(float(exact[M]), rel=EXACT)
    assert s.at("V", 0.0) == pytest.approx(float(exact[V]), rel=EXACT)
    assert s.reactions[1].force == pytest.approx(float(exact[R]), rel=EXACT)
    assert s.at("M", start) == pytest.approx(float((M + V * a + R * (a - 3)).subs(exact)), rel=EXACT)


@pytest.mark.parametrize("seed", range(4))
def test_against_a_collocation_solver(seed: int) -> None:
    """scipy's solve_bvp on w'' = -M/EI, M'' = -q with a random beam: fixed, then on a spring."""
    rng = np.random.default_rng(seed)
    length, stiffness, k = rng.uniform(2, 9), rng.uniform(1e6, 1e7), rng.uniform(1e4, 1e6)
    a, b = rng.uniform(-5e3, 9e3, 2)
    tip, couple = rng.uniform(-4e3, 4e3, 2)
    model = prismatic(length, stiffness, (fixed(0.0), spring(length, k)))
    s = solved(model, DistributedLoad(0.0, length, a, b), PointLoad(length, tip), PointMoment(length, couple))

    def rates(x: FloatArray, z: FloatArray) -> FloatArray:
        _, slope, M, V = z
        return np.array([slope, -M * 1e3 / stiffness, V, -(a + (b - a) * x / length) / 1e3])

    def ends(start: FloatArray, end: FloatArray) -> FloatArray:
        # Beyond the end nothing: V - tip + k w = 0 and M + couple = 0 there; forces in kN.
        return np.array([start[0], start[1], end[2] + couple / 1e3, end[3] - tip / 1e3 + k * end[0] / 1e3])

    x = np.linspace(0.0, length, 30)
    oracle = solve_bvp(rates, ends, x, np.zeros((4, 30)), tol=1e-9)
    w, slope, M, V = oracle.sol(x)
    for quantity, values in (("w", w), ("slope", slope), ("M", M * 1e3), ("V", V * 1e3)):
        assert s.values(quantity, x) == pytest.approx(values, rel=1e-6, abs=1e-6 * np.abs(values).max())  # type: ignore[arg-type]


def test_continuous_beams_by_three_moments() -> None:
    """Clapeyron's equation at every inner support of eleven random spans under uniform loads."""
    rng = np.random.default_rng(7)
    lengths, loads = rng.uniform(2, 8, 11), rng.uniform(1e3, 9e3, 11)
    places = np.concatenate([[0.0], np.cumsum(lengths)])
    model = prismatic(float(places[-1]), EI, tuple(pin(float(x)) for x in places))
    s = solved(
        model,
        *(
            DistributedLoad.uniform(float(a), float(b), float(q))
            for a, b, q in zip(places[:-1], places[1:], loads, strict=True)
        ),
    )
    M = s.values("M", places)
    for i in range(1, 11):
        left, right = lengths[i - 1], lengths[i]
        turned = M[i - 1] * left + 2 * M[i] * (left + right) + M[i + 1] * right
        assert turned == pytest.approx(-(loads[i - 1] * left**3 + loads[i] * right**3) / 4, rel=EXACT)


def test_many_spans_keep_their_accuracy() -> None:
    """The ratio of neighbouring support moments far from a loaded end span is -(2 - √3)."""
    model = prismatic(200.0, EI, tuple(pin(float(x)) for x in range(201)))
    s = solved(model, DistributedLoad.uniform(0.0, 1.0, W))
    M = s.values("M", np.arange(1.0, 8.0))
    assert M[1:] / M[:-1] == pytest.approx(np.full(6, -(2 - 3**0.5)), rel=1e-8)


def test_a_sine_load_in_steps_approaches_the_sine() -> None:
    """EI w'''' = q sin(πx/L) gives w = q (L/π)⁴/EI sin(πx/L); 200 linear pieces come near it as 1/n²."""
    x = np.linspace(0.0, L, 201)
    q = W * np.sin(pi * x / L)
    pieces = [DistributedLoad(float(x[i]), float(x[i + 1]), float(q[i]), float(q[i + 1])) for i in range(200)]
    s = solved(prismatic(L, EI, SIMPLE), *pieces)
    assert s.at("w", L / 2) == pytest.approx(W * (L / pi) ** 4 / EI, rel=pi**2 / 12 / 200**2 * 1.1)
