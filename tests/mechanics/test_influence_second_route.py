"""The second route of influence lines: it agrees on every line of many beams, and notices a wrong one."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest

from calcgen.mechanics.beam import QUANTITIES, BeamModel, Plane, pin, prismatic
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import InfluenceLine, influence
from calcgen.mechanics.second_route.influence import TOLERANCE, influence_residuals
from calcgen.mechanics.sought import AtPlace, OfSupport, Sought, has_two_sides, line_of
from tests.mechanics.test_influence import MODELS

PARTS: tuple[ReactionPart, ...] = ("force", "moment", "force_lat", "moment_lat")
SIDES: tuple[Side, Side] = ("left", "right")


def every_line(model: BeamModel) -> list[tuple[Sought, Plane, InfluenceLine]]:
    """Return the lines of all quantities at telling places, and of all reactions, in each plane."""
    lines, L = influence(model, model.planes), model.length
    places = {0.0, 0.41 * L, L, *model.hinges, *(s.x for s in model.supports)}
    outside = {(0.0, "left"), (L, "right")}
    sought: list[Sought] = [
        AtPlace(quantity, x, side)
        for quantity in QUANTITIES[: len(QUANTITIES) // 2 * len(model.planes)]
        for x in sorted(places)
        for side in SIDES
        if (x, side) not in outside
    ]
    for number in range(len(model.supports)):
        sought += [OfSupport(number, part) for part in PARTS[: 2 * len(model.planes)]]
    return [(each, plane, line_of(lines, each, plane)) for plane in model.planes for each in sought]


@pytest.mark.parametrize("name", MODELS)
def test_both_routes_agree_on_every_line(name: str) -> None:
    lines = every_line(MODELS[name])
    residuals = influence_residuals(MODELS[name], lines)
    assert len(residuals) == len(lines)
    assert {r.residual for r in residuals} == {0.0}
    assert all(r.tolerance == TOLERANCE for r in residuals)


@pytest.mark.parametrize("name", MODELS)
def test_a_wrong_cubic_anywhere_is_noticed(name: str) -> None:
    model = MODELS[name]
    lines = influence(model)
    sought = AtPlace("M", 0.41 * model.length, "right")
    line = lines.line("M", sought.x)
    size = float(np.abs(line.pieces).max())
    for number in np.ndindex(line.pieces.shape):
        if np.diff(line.nodes)[number[0]] < 0.01 * model.length:
            continue
        pieces = line.pieces.copy()
        pieces[number] += 1e-5 * size
        (found,) = influence_residuals(model, [(sought, "vertical", replace(line, pieces=pieces))])
        assert not found.holds, number


def test_the_line_of_another_place_is_noticed() -> None:
    model = MODELS["two spans"]
    line = influence(model).line("V", 0.5001)
    (found,) = influence_residuals(model, [(AtPlace("V", 0.5, "left"), "vertical", line)])
    assert not found.holds


def test_a_line_that_is_zero_by_statics_is_no_division_by_zero() -> None:
    """M at a hinge, and M_A of the suspended span for loads beyond it."""
    model = MODELS["Gerber"]
    line = influence(model).line("M", 8.0)
    assert line.extremes().abs == 0.0
    (found,) = influence_residuals(model, [(AtPlace("M", 8.0, "left"), "vertical", line)])
    assert found.holds


def test_a_beam_of_a_hundred_spans() -> None:
    model = prismatic(500.0, 2e6, tuple(pin(5.0 * i) for i in range(101)))
    lines = influence(model)
    sought: list[Sought] = [AtPlace("M", 251.3, "right"), AtPlace("V", 250.0, "left"), OfSupport(50, "force")]
    asked: list[tuple[Sought, Plane, InfluenceLine]] = [
        (each, "vertical", line_of(lines, each, "vertical")) for each in sought
    ]
    assert [r.residual for r in influence_residuals(model, asked)] == [0.0] * 3


@pytest.mark.parametrize(
    ("name", "quantity", "x", "two"),
    [
        ("two spans", "V", 1.0, True),
        ("two spans", "V", 0.7, False),
        ("two spans", "V", 0.0, False),
        ("two spans", "M", 1.0, False),
        ("two spans", "slope", 1.0, False),
        ("springs", "M", 4.0, False),
        ("springs", "V", 4.0, True),
        ("Gerber", "slope", 8.0, True),
        ("Gerber", "w", 8.0, False),
        ("Gerber", "V", 8.0, False),
        ("fixed at both ends", "M", 7.0, False),
    ],
)
def test_where_a_result_has_two_sides(name: str, quantity: str, x: float, *, two: bool) -> None:
    lines = influence(MODELS[name])
    assert has_two_sides(lines, quantity, x, "vertical") is two  # type: ignore[arg-type]


def test_with_shear_deformation_the_slope_has_two_sides_above_a_support_and_the_rotation_has_not() -> None:
    lines = influence(MODELS["steps, shear and a skew section"])
    assert has_two_sides(lines, "slope", 5.0, "vertical")  # the stiffness against shear changes
    assert not has_two_sides(lines, "rotation", 5.0, "vertical")
