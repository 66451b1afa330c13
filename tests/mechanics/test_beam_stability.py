"""Beams that cannot stand, and loads and models that make no sense."""

from __future__ import annotations

from typing import Any

import pytest

from calcgen.mechanics.beam import (
    FREE,
    RIGID,
    BeamModel,
    BendingStiffness,
    DistributedLoad,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
    Stretch,
    Support,
    UnstableBeam,
    combine,
    fixed,
    pin,
    prismatic,
    solve,
    spring,
)

EI = 2e6
SKEW = BendingStiffness(2e6, 1e6, 3e5)


@pytest.mark.parametrize(
    ("model", "message"),
    [
        (prismatic(10.0, EI, ()), "nothing holds the beam vertically"),
        (
            prismatic(10.0, EI, (spring(0.0, 0.0), pin(10.0, ("lateral",)))),
            "nothing holds the beam vertically",
        ),
        (prismatic(10.0, EI, (Support(2.0, FREE, RIGID),)), "nothing holds the beam vertically"),
        (
            prismatic(10.0, EI, (pin(3.0),)),
            "the beam can turn vertically about the only support that holds it, at 3 m",
        ),
        (
            prismatic(10.0, EI, (pin(0.0), pin(10.0)), (3.0,)),
            "the stretch between 0 m and 3 m can rotate: a hinge at 3 m; "
            "that between 3 m and 10 m moves with it",
        ),
        (
            prismatic(10.0, EI, (fixed(0.0),), (3.0,)),
            "the stretch between 3 m and 10 m can rotate: a hinge at 3 m",
        ),
        (
            prismatic(10.0, EI, (fixed(0.0), fixed(10.0)), (3.0, 5.0, 7.0)),
            "the stretch between 3 m and 5 m can rotate: a hinge at each end; "
            "that between 5 m and 7 m moves with it",
        ),
        (
            prismatic(20.0, EI, (pin(0.0), pin(8.0), pin(20.0)), (8.0, 12.0)),
            "the stretch between 8 m and 12 m can rotate: a hinge at each end; "
            "that between 12 m and 20 m moves with it",
        ),
        (
            prismatic(9.0, EI, (fixed(0.0), fixed(9.0)), (3.0, 4.0, 5.0, 6.0)),
            "the stretch between 3 m and 4 m can rotate: a hinge at each end; "
            "that between 4 m and 5 m moves with it",
        ),
        (
            prismatic(9.0, EI, (fixed(0.0), Support(4.5, FREE, RIGID), fixed(9.0)), (2.0, 4.0, 5.0, 7.0)),
            "the stretch between 2 m and 4 m can rotate: a hinge at each end; "
            "that between 4 m and 5 m and that between 5 m and 7 m move with it",
        ),
        (
            prismatic(9.0, EI, (Support(1.0, FREE, RIGID), fixed(9.0)), (2.0, 4.0)),
            "the stretch between 0 m and 2 m can shift: a hinge at 2 m; "
            "that between 2 m and 4 m moves with it",
        ),
        (
            prismatic(9.0, SKEW, (fixed(0.0), pin(9.0, ("vertical",))), (4.0,)),
            "the stretch between 4 m and 9 m can rotate sideways: a hinge at 4 m",
        ),
        (
            prismatic(10.0, SKEW, (pin(0.0), pin(10.0, ("vertical",)))),
            "the beam can turn laterally about the only support that holds it, at 0 m",
        ),
        (prismatic(10.0, SKEW, (fixed(0.0, ("vertical",)),)), "nothing holds the beam laterally"),
    ],
)
def test_an_unstable_beam_says_where(model: BeamModel, message: str) -> None:
    with pytest.raises(UnstableBeam) as caught:
        solve(model, {"case": ()})
    assert str(caught.value) == message


@pytest.mark.parametrize(
    "model",
    [
        prismatic(10.0, EI, (pin(0.0), spring(10.0, 1.0))),
        prismatic(10.0, EI, (spring(5.0, RIGID, 1.0),)),
        prismatic(10.0, EI, (Support(0.0, FREE, RIGID), pin(10.0))),
        prismatic(10.0, EI, (fixed(0.0), fixed(10.0)), (3.0, 7.0)),
        prismatic(12.0, EI, (pin(0.0), pin(4.0), pin(8.0), pin(12.0)), (5.0, 7.0)),
        prismatic(10.0, BendingStiffness(2e6, 1e6), (pin(0.0, ("vertical",)), pin(10.0, ("vertical",)))),
    ],
    ids=["weak spring", "rotation spring", "guided", "two hinges", "hung span", "no sideways action"],
)
def test_just_enough_holds_a_beam(model: BeamModel) -> None:
    s = solve(model, {"case": (PointLoad(4.0, 1e3),)})["case"]
    assert sum(r.force for r in s.reactions) == pytest.approx(1e3, rel=1e-10)


def test_a_sideways_load_needs_sideways_supports() -> None:
    model = prismatic(10.0, BendingStiffness(2e6, 1e6), (pin(0.0, ("vertical",)), pin(10.0, ("vertical",))))
    with pytest.raises(UnstableBeam, match="nothing holds the beam laterally"):
        solve(model, {"case": (PointLoad(5.0, 1e3, "lateral"),)})


SIMPLE = prismatic(10.0, EI, (pin(0.0), pin(10.0)))
HINGED = prismatic(10.0, EI, (fixed(0.0), pin(10.0)), (4.0,))


@pytest.mark.parametrize(
    ("model", "load", "message"),
    [
        (SIMPLE, PointLoad(10.1, 1.0), "outside"),
        (SIMPLE, DistributedLoad.uniform(-1.0, 3.0, 1.0), "outside"),
        (SIMPLE, DistributedLoad.uniform(3.0, 3.0, 1.0), "length"),
        (SIMPLE, PointLoad(5.0, float("nan")), "finite"),
        (SIMPLE, PointLoad(5.0, 1.0, "lateral"), "lateral"),
        (SIMPLE, Settlement(2, 0.01), "does not exist"),
        (prismatic(10.0, EI, (fixed(0.0), Support(10.0, FREE))), Settlement(1, 0.01), "cannot settle"),
        (HINGED, PointMoment(4.0, 1.0), "hinge"),
    ],
)
def test_a_load_the_beam_cannot_carry(model: BeamModel, load: Load, message: str) -> None:
    with pytest.raises(ValueError, match=message):
        solve(model, {"case": (load,)})


@pytest.mark.parametrize(
    ("change", "message"),
    [
        ({"length": 0.0}, "positive"),
        ({"supports": (pin(5.0), pin(0.0))}, "follow"),
        ({"supports": (pin(0.0), pin(11.0))}, "outside"),
        ({"hinges": (0.0,)}, "inside"),
        ({"hinges": (4.0, 4.0)}, "follow"),
        ({"supports": (fixed(4.0), pin(10.0)), "hinges": (4.0,)}, "rotation"),
        ({"stretches": (Stretch(0.0, 9.0, BendingStiffness(EI)),)}, "follow"),
        (
            {
                "stretches": (
                    Stretch(0.0, 4.0, BendingStiffness(EI)),
                    Stretch(5.0, 10.0, BendingStiffness(EI)),
                )
            },
            "follow",
        ),
        ({"stretches": ()}, "follow"),
        ({"stretches": (Stretch(0.0, 4.0, SKEW), Stretch(4.0, 10.0, BendingStiffness(EI)))}, "coupling"),
    ],
)
def test_a_model_that_is_none(change: dict[str, Any], message: str) -> None:
    whole: dict[str, Any] = {
        "length": 10.0,
        "stretches": (Stretch(0.0, 10.0, BendingStiffness(EI)),),
        "supports": (pin(0.0), pin(10.0)),
    }
    with pytest.raises(ValueError, match=message):
        BeamModel(**(whole | change))


@pytest.mark.parametrize("values", [(0.0,), (-1.0,), (1.0, None, 0.1), (1.0, 1.0, 1.0), (1.0, -1.0)])
def test_a_stiffness_is_positive_definite(values: tuple[float, ...]) -> None:
    with pytest.raises(ValueError, match="stiffness"):
        BendingStiffness(*values)


def test_cases_of_different_solutions_do_not_mix() -> None:
    a, b = (solve(SIMPLE, {"case": (PointLoad(5.0, 1e3),)})["case"] for _ in range(2))
    with pytest.raises(ValueError, match="different"):
        combine({"a": a, "b": b}, {"a": 1.0, "b": 1.0})
