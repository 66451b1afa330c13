"""Gradients of temperature against closed forms; the warmer top bows a free beam up."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass

import pytest

from calcgen.mechanics.beam import (
    BeamModel,
    BendingStiffness,
    CaseSolution,
    FreeCurvature,
    Load,
    ShearStiffness,
    Stretch,
    Support,
    combine,
    fixed,
    pin,
    prismatic,
    roller,
    solve,
)
from calcgen.mechanics.second_route.beam import beam_residuals

EXACT = 1e-10
L, EI, ALPHA, DT, H = 4.0, 2e6, 12e-6, 15.0, 0.3
FREE = ALPHA * DT / H
"""Curvature of a free beam, 1/m, bowed up."""
OVER_ALL = FreeCurvature.of_gradient(0.0, L, ALPHA, DT, H)


def solved(model: BeamModel, *loads: Load) -> CaseSolution:
    return solve(model, {"case": loads})["case"]


@dataclass(frozen=True)
class ClosedForm:
    """A beam of length 4 m, EI = 2e6 N·m² and depth 0.3 m, warmer by 15 K at the top."""

    name: str
    supports: tuple[Support, ...]
    read: Callable[[CaseSolution], float]
    value: float


# Roark's Formulas for Stress and Strain, Table 8.1 cases 6 (uniform temperature differential), from memory;
# the continuous beam from the free bow and the stiffness 48 EI/(2L)³ of the beam without its middle support.
CLOSED_FORMS = [
    ClosedForm("simple span bows up", (pin(0.0), roller(L)), lambda s: s.at("w", L / 2), -FREE * L**2 / 8),
    ClosedForm("simple span: end slope", (pin(0.0), roller(L)), lambda s: s.at("slope", 0.0), -FREE * L / 2),
    ClosedForm("cantilever bends down", (fixed(0.0),), lambda s: s.at("w", L), FREE * L**2 / 2),
    ClosedForm("cantilever: tip slope", (fixed(0.0),), lambda s: s.at("slope", L), FREE * L),
    ClosedForm("fixed ends sag", (fixed(0.0), fixed(L)), lambda s: s.at("M", 1.0), EI * FREE),
    ClosedForm(
        "fixed ends: the wall turns clockwise at the start",
        (fixed(0.0), fixed(L)),
        lambda s: s.reactions[0].moment,
        -EI * FREE,
    ),
    ClosedForm(
        "propped cantilever: prop",
        (fixed(0.0), pin(L)),
        lambda s: s.reactions[1].force,
        3 * EI * FREE / (2 * L),
    ),
    ClosedForm("propped cantilever: wall", (fixed(0.0), pin(L)), lambda s: s.at("M", 0.0), 3 * EI * FREE / 2),
    ClosedForm(
        "two spans: the middle support holds the bow down",
        (pin(0.0), pin(L / 2), pin(L)),
        lambda s: s.reactions[1].force,
        -FREE * L**2 / 8 * 48 * EI / L**3,
    ),
]


@pytest.mark.parametrize("case", CLOSED_FORMS, ids=lambda case: case.name)
def test_closed_forms(case: ClosedForm) -> None:
    model = prismatic(L, EI, case.supports)
    s = solved(model, OVER_ALL)
    assert case.read(s) == pytest.approx(case.value, rel=EXACT)
    assert all(r.holds for r in beam_residuals(model, (OVER_ALL,), s))


@pytest.mark.parametrize(
    "supports", [(pin(0.0), roller(L)), (fixed(0.0),)], ids=["simple span", "cantilever"]
)
def test_a_determinate_beam_feels_nothing(supports: tuple[Support, ...]) -> None:
    s = solved(prismatic(L, EI, supports), OVER_ALL)
    assert s.extremes("M").abs == s.extremes("V").abs == 0.0
    assert [(r.force, r.moment) for r in s.reactions] == [(0.0, 0.0)] * len(supports)


def test_fixed_ends_stay_straight() -> None:
    s = solved(prismatic(L, EI, (fixed(0.0), fixed(L))), OVER_ALL)
    assert s.extremes("w").abs == s.extremes("V").abs == 0.0


def test_over_a_part_of_a_cantilever() -> None:
    """The part of length a turns its end by κ·a, and moves the tip by κ·a·(L - a/2)."""
    s = solved(prismatic(L, EI, (fixed(0.0),)), FreeCurvature.of_gradient(0.0, 1.5, ALPHA, DT, H))
    assert s.at("w", L) == pytest.approx(FREE * 1.5 * (L - 0.75), rel=EXACT)
    assert s.at("slope", 3.0) == pytest.approx(FREE * 1.5, rel=EXACT)


def test_each_depth_bends_by_its_own_curvature() -> None:
    """A simple span of two depths: ∫mκ dx with m = x/2 on both sides of the middle."""
    B = BendingStiffness(EI)
    model = BeamModel(L, (Stretch(0.0, L / 2, B), Stretch(L / 2, L, B)), (pin(0.0), roller(L)))
    halves = (
        FreeCurvature.of_gradient(0.0, L / 2, ALPHA, DT, H),
        FreeCurvature.of_gradient(L / 2, L, ALPHA, DT, 2 * H),
    )
    assert solved(model, *halves).at("w", L / 2) == pytest.approx(-(FREE + FREE / 2) * L**2 / 16, rel=EXACT)


def test_a_skew_section_bends_up_without_going_sideways() -> None:
    """A temperature linear over the depth is a plane of free strains about the horizontal axis alone."""
    s = solved(prismatic(L, BendingStiffness(EI, EI / 2, EI / 3), (pin(0.0), roller(L))), OVER_ALL)
    assert s.at("w", L / 2) == pytest.approx(-FREE * L**2 / 8, rel=EXACT)
    assert s.extremes("w_lat").abs == 0.0


def test_held_about_both_axes_a_skew_section_has_both_moments() -> None:
    s = solved(prismatic(L, BendingStiffness(EI, EI / 2, EI / 3), (fixed(0.0), fixed(L))), OVER_ALL)
    assert s.at("M", 1.0) == pytest.approx(EI * FREE, rel=EXACT)
    assert s.at("M_lat", 1.0) == pytest.approx(EI / 3 * FREE, rel=EXACT)


def test_shear_softens_what_a_gradient_meets() -> None:
    """The prop of a cantilever: the free tip over L³/(3EI) + L/GA_s."""
    model = prismatic(L, EI, (fixed(0.0), pin(L)), shear=ShearStiffness(1e6))
    expected = FREE * L**2 / 2 / (L**3 / (3 * EI) + L / 1e6)
    assert solved(model, OVER_ALL).reactions[1].force == pytest.approx(expected, rel=EXACT)


def test_cases_of_temperature_combine() -> None:
    model = prismatic(L, EI, (fixed(0.0), pin(L)))
    warm = FreeCurvature.of_gradient(0.0, L, ALPHA, -2 * DT, H)
    solutions = solve(model, {"C": (OVER_ALL,), "W": (warm,)})
    assert combine(solutions, {"C": 2.0, "W": 1.0}).extremes("M").abs <= 1e-10 * EI * FREE


@pytest.mark.parametrize(
    ("load", "message"),
    [
        (FreeCurvature(1.0, 1.0, 1e-3), "length"),
        (FreeCurvature(1.0, 5.0, 1e-3), "outside"),
        (FreeCurvature(1.0, 2.0, float("inf")), "finite"),
        (FreeCurvature(1.0, 2.0, 1e-3, "lateral"), "lateral"),
    ],
)
def test_a_gradient_the_beam_cannot_have(load: FreeCurvature, message: str) -> None:
    with pytest.raises(ValueError, match=message):
        solved(prismatic(L, EI, (fixed(0.0),)), load)
