"""The second route can fail: each of its comparisons notices the fault that it is there for."""

from __future__ import annotations

from dataclasses import replace

import pytest

from calcgen.mechanics.beam import (
    BeamModel,
    BendingStiffness,
    CaseSolution,
    DistributedLoad,
    FreeCurvature,
    Load,
    PointLoad,
    Settlement,
    ShearStiffness,
    combine,
    combined,
    fixed,
    pin,
    prismatic,
    solve,
    spring,
)
from calcgen.mechanics.second_route.beam import beam_residuals

SHEAR = ShearStiffness(5e6, 4e6)
MODEL = prismatic(8.0, BendingStiffness(2e6, 1e6, 4e5), (fixed(0.0), spring(5.0, 4e5), pin(8.0)), shear=SHEAR)
LOADS: tuple[Load, ...] = (
    DistributedLoad(1.0, 6.0, 2e3, 5e3),
    PointLoad(7.0, 3e3, "lateral"),
    FreeCurvature(2.0, 7.0, 3e-4),
    Settlement(2, 0.004),
)
W, SLOPE, M, V = range(4)


def failed(model: BeamModel, loads: tuple[Load, ...], solution: CaseSolution) -> set[str]:
    return {r.what for r in beam_residuals(model, loads, solution) if not r.holds}


@pytest.fixture(scope="module")
def solution() -> CaseSolution:
    return solve(MODEL, {"case": LOADS})["case"]


def test_a_right_solution_passes(solution: CaseSolution) -> None:
    residuals = beam_residuals(MODEL, LOADS, solution)
    assert [r.what for r in residuals if r.what.endswith("_lat")] == [
        "ΣF_lat",
        "ΣM_lat",
        "dM/dx_lat",
        "dV/dx_lat",
        "w_lat",
    ]
    assert len(residuals) == 10
    assert all(r.holds for r in residuals)


def test_nothing_happens_without_loads() -> None:
    nothing = solve(MODEL, {"case": ()})["case"]
    assert [r.residual for r in beam_residuals(MODEL, (), nothing)] == [0.0] * 10


def test_a_combination_is_checked_with_its_factored_loads() -> None:
    cases: dict[str, tuple[Load, ...]] = {"a": LOADS[:1], "b": LOADS[1:]}
    factors = {"a": 1.35, "b": -0.5}
    both = combine(solve(MODEL, cases), factors)
    assert failed(MODEL, combined(cases, factors), both) == set()
    assert {"ΣF", "dV/dx", "w"} <= failed(MODEL, LOADS, both)


@pytest.mark.parametrize(
    ("part", "term", "plane", "noticed"),
    [
        (W, 0, 0, {"w"}),
        (W, 2, 1, {"w_lat"}),
        (M, 1, 0, {"dM/dx", "w", "w_lat"}),
        (V, 1, 0, {"dM/dx", "dV/dx"}),
        (V, 1, 1, {"dM/dx_lat", "dV/dx_lat"}),
    ],
)
def test_a_wrong_polynomial_is_noticed(
    solution: CaseSolution, part: int, term: int, plane: int, noticed: set[str]
) -> None:
    pieces = solution.pieces.copy()
    pieces[:, part, plane, term] += 1e-4 * abs(pieces[:, part, plane]).max()
    assert noticed <= failed(MODEL, LOADS, replace(solution, pieces=pieces))


@pytest.mark.parametrize(("part", "noticed"), [(0, {"ΣF", "ΣM", "w"}), (1, {"ΣM"})])
def test_a_wrong_reaction_is_noticed(solution: CaseSolution, part: int, noticed: set[str]) -> None:
    forces = solution.support_forces.copy()
    forces[1 if part == 0 else 0, 0, part] *= 1.0001
    assert noticed <= failed(MODEL, LOADS, replace(solution, support_forces=forces))


@pytest.mark.parametrize(
    "other",
    [
        prismatic(8.0, BendingStiffness(2.002e6, 1e6, 4e5), MODEL.supports, shear=SHEAR),
        prismatic(8.0, BendingStiffness(2e6, 1e6, -4e5), MODEL.supports, shear=SHEAR),
        prismatic(
            8.0,
            BendingStiffness(2e6, 1e6, 4e5),
            (MODEL.supports[0], spring(5.0, 4.1e5), pin(8.0)),
            shear=SHEAR,
        ),
        prismatic(8.0, BendingStiffness(2e6, 1e6, 4e5), MODEL.supports, shear=ShearStiffness(5.01e6, 4e6)),
        prismatic(8.0, BendingStiffness(2e6, 1e6, 4e5), MODEL.supports, shear=ShearStiffness(5e6, 4.01e6)),
        prismatic(8.0, BendingStiffness(2e6, 1e6, 4e5), MODEL.supports),
    ],
    ids=["stiffness", "sign of the coupling", "spring", "shear", "sideways shear", "no shear"],
)
def test_the_solution_of_another_beam_is_noticed(other: BeamModel) -> None:
    assert {"w", "w_lat"} & failed(MODEL, LOADS, solve(other, {"case": LOADS})["case"])


@pytest.mark.parametrize("curvature", [-3e-4, 3.001e-4, 0.0])
def test_another_gradient_is_noticed(solution: CaseSolution, curvature: float) -> None:
    loads = tuple(
        replace(load, value=curvature) if isinstance(load, FreeCurvature) else load for load in LOADS
    )
    assert "w" in failed(MODEL, loads, solution)


def test_a_hinge_that_carries_a_moment_is_noticed() -> None:
    supports = (fixed(0.0), pin(5.0), pin(8.0))
    stiff, hinged = (prismatic(8.0, 2e6, supports, hinges=h) for h in ((), (3.0,)))
    loads = (DistributedLoad.uniform(0.0, 8.0, 3e3),)
    assert "M at hinges" in failed(hinged, loads, solve(stiff, {"case": loads})["case"])
    assert failed(hinged, loads, solve(hinged, {"case": loads})["case"]) == set()
