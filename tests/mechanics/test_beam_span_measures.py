"""Deflection from the chord of a span, and moment shape factors."""

from __future__ import annotations

import numpy as np
import pytest

from calcgen.mechanics.beam import (
    RIGID,
    BeamModel,
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
    Support,
    fixed,
    moment_shape,
    pin,
    prismatic,
    relative_to_chord,
    roller,
    solve,
    spring,
)

L, EI, W, P, C = 4.0, 2e6, 5e3, 7e3, 3e3
SIMPLE = prismatic(L, EI, (pin(0.0), roller(L)))
FULL = DistributedLoad.uniform(0.0, L, W)


def solved(model: BeamModel, *loads: Load) -> CaseSolution:
    return solve(model, {"case": loads})["case"]


def test_a_span_on_springs_sags_from_its_chord_as_on_pins() -> None:
    s = solved(prismatic(L, EI, (spring(0.0, 1e5), spring(L, 3e5))), FULL)
    chorded = relative_to_chord(s, 0.0, L).extremes("w")
    assert chorded.max == pytest.approx(5 * W * L**4 / (384 * EI), rel=1e-10)
    assert chorded.x_max == pytest.approx(L / 2)
    assert s.extremes("w").max > 5 * chorded.max


def test_between_rigid_supports_the_chord_is_the_axis() -> None:
    s = solved(prismatic(2 * L, EI, (pin(0.0), pin(L), pin(2 * L))), FULL)
    x = np.linspace(0.0, L, 9)
    assert relative_to_chord(s, 0.0, L).values("w", x) == pytest.approx(s.values("w", x), abs=1e-18)


def test_a_settlement_alone_leaves_a_simple_span_straight() -> None:
    s = solved(SIMPLE, Settlement(1, 0.01))
    assert relative_to_chord(s, 0.0, L).extremes("w").abs == pytest.approx(0.0, abs=1e-16)


def test_each_plane_has_its_own_chord() -> None:
    model = prismatic(L, BendingStiffness(EI, EI), tuple(Support(x, RIGID, 0.0, 2e5) for x in (0.0, L)))
    s = solved(model, FULL, DistributedLoad.uniform(0.0, L, W, "lateral"))
    sideways = relative_to_chord(s, 0.0, L, "lateral")
    assert sideways.at("w_lat", L / 2) == pytest.approx(s.at("w", L / 2), rel=1e-10)
    assert sideways.at("w", L / 2) == s.at("w", L / 2)


# AISC Steel Construction Manual, Table 3-1 (C_b of simply supported beams), from memory; printed to 3 digits.
# The first two follow from equation F1-1 with moments read by hand: a parabola has 3/4 at its quarters.
CASES = [
    ("uniform", (FULL,), (0.0, L), 1.14),
    ("uniform, braced in the middle", (FULL,), (0.0, L / 2), 1.30),
    ("middle load", (PointLoad(L / 2, P),), (0.0, L), 1.32),
    ("middle load, braced there", (PointLoad(L / 2, P),), (L / 2, L), 1.67),
    (
        "loads at thirds, middle third",
        (PointLoad(L / 3, P), PointLoad(2 * L / 3, P)),
        (L / 3, 2 * L / 3),
        1.0,
    ),
    ("loads at thirds, unbraced", (PointLoad(L / 3, P), PointLoad(2 * L / 3, P)), (0.0, L), 1.14),
    ("equal end moments, single curvature", (PointMoment(0.0, C), PointMoment(L, -C)), (0.0, L), 1.0),
    ("equal end moments, double curvature", (PointMoment(0.0, C), PointMoment(L, C)), (0.0, L), 2.27),
    ("moment at one end", (PointMoment(0.0, C),), (0.0, L), 1.67),
]


@pytest.mark.parametrize(("name", "loads", "stretch", "C_b"), CASES, ids=[case[0] for case in CASES])
def test_moment_shape_factor(
    name: str, loads: tuple[Load, ...], stretch: tuple[float, float], C_b: float
) -> None:
    assert moment_shape(solved(SIMPLE, *loads), *stretch).C_b == pytest.approx(C_b, abs=0.006), name


# Factors of elastic critical moments, for ends free to warp and to turn sideways: NCCI SN003, Tables 3.1 and
# 3.2, from memory. The formula is a fit: it comes within 6 % of them.
@pytest.mark.parametrize(
    ("loads", "C_1", "within"),
    [
        ((FULL,), 1.127, 0.01),
        ((PointLoad(L / 2, P),), 1.348, 0.06),
        ((PointMoment(0.0, C), PointMoment(L, -C)), 1.0, 1e-12),
        ((PointMoment(0.0, C),), 1.77, 0.04),
        ((PointMoment(0.0, C), PointMoment(L, C)), 2.55, 0.02),
    ],
)
def test_moment_shape_factor_of_the_quarter_points(
    loads: tuple[Load, ...], C_1: float, within: float
) -> None:
    factor = moment_shape(solved(SIMPLE, *loads), 0.0, L).C_1
    assert factor == pytest.approx(C_1, rel=within)


def test_no_moment_has_the_factors_of_a_constant_one() -> None:
    shape = moment_shape(solved(prismatic(2 * L, EI, (fixed(0.0),)), PointLoad(1.0, P)), L, 2 * L)
    assert shape.C_b == shape.C_1 == 1.0
