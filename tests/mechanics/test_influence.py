"""Influence lines against closed forms, plain unit loads, and the principle of Müller-Breslau."""

from __future__ import annotations

import numpy as np
import pytest

from calcgen.mechanics.beam import (
    FREE,
    PLANES,
    QUANTITIES,
    BeamModel,
    BendingStiffness,
    DistributedLoad,
    Load,
    Plane,
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
    solve,
    spring,
)
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import Influence, InfluenceLine, influence

EXACT = 1e-10
EI = 2e6
SIMPLE = prismatic(6.0, EI, (pin(0.0), pin(6.0)))
TWO_SPANS = prismatic(2.0, EI, (pin(0.0), pin(1.0), pin(2.0)))

MODELS: dict[str, BeamModel] = {
    "simple": SIMPLE,
    "two spans": TWO_SPANS,
    "cantilever": prismatic(3.0, EI, (fixed(0.0),)),
    "fixed at both ends": prismatic(7.0, EI, (fixed(0.0), fixed(7.0))),
    "overhangs": prismatic(10.0, EI, (pin(2.0), pin(8.0))),
    "Gerber": prismatic(15.0, EI, (pin(0.0), pin(6.0), pin(12.0)), (8.0,)),
    "springs": prismatic(9.0, EI, (spring(0.0, 3e5, 4e5), spring(4.0, 2e6), spring(9.0, 1e6))),
    "steps, shear and a skew section": BeamModel(
        17.0,
        (
            Stretch(0.0, 5.0, BendingStiffness(2e6, 1e6, 3e5), ShearStiffness(1e6, 2e6)),
            Stretch(5.0, 5.02, BendingStiffness(9e6, 1e6)),
            Stretch(5.02, 17.0, BendingStiffness(3e6, 2e6, -5e5)),
        ),
        (fixed(0.0), pin(6.0), spring(11.0, 2e6, 3e5), pin(15.0)),
        (8.0,),
    ),
}


def unit_loads(plane: Plane, x: list[float]) -> dict[str, tuple[Load, ...]]:
    return {str(i): (PointLoad(at, 1.0, plane),) for i, at in enumerate(x)}


def scale(lines: list[InfluenceLine]) -> float:
    return max(float(np.abs(line.pieces).max()) for line in lines)


@pytest.mark.parametrize("name", MODELS)
def test_every_line_gives_what_a_unit_load_does(name: str) -> None:
    model = MODELS[name]
    planes = model.planes
    lines = influence(model, planes)
    loads = [float(x) for x in np.linspace(0.0037, 0.9971, 7) * model.length]
    places = sorted({0.0, 0.41 * model.length, 5.01 / 17 * model.length, model.length, *model.hinges})
    for support in model.supports:
        places.append(support.x)
    for plane in planes:
        solved = list(solve(model, unit_loads(plane, loads)).values())
        for quantity in QUANTITIES[: len(QUANTITIES) // 2 * len(planes)]:
            sides: tuple[Side, ...] = ("left", "right")
            asked = [(x, side) for x in places for side in sides]
            found = [lines.line(quantity, x, side, plane) for x, side in asked]
            size = max(scale(found), 1e-12)
            for (x, side), line in zip(asked, found, strict=True):
                expected = [float(s.values(quantity, np.array([x]), side)[0]) for s in solved]
                assert line.values(np.array(loads)) == pytest.approx(expected, abs=EXACT * size), (
                    quantity,
                    x,
                )
        parts: tuple[ReactionPart, ...] = ("force", "moment", "force_lat", "moment_lat")
        for number in range(len(model.supports)):
            for part in parts[: 2 * len(planes)]:
                expected = [getattr(s.reactions[number], part) for s in solved]
                line = lines.reaction(number, part, plane)
                assert line.values(np.array(loads)) == pytest.approx(expected, abs=EXACT * model.length)


def test_a_simple_beam() -> None:
    """M at a: a triangle of height ab/L; V: from -a/L to b/L; the left reaction: 1 - x/L."""
    lines = influence(SIMPLE)
    M, V, R = lines.line("M", 2.0), lines.line("V", 2.0), lines.reaction(0)
    x = np.array([0.0, 1.0, 2.0, 4.0, 6.0])
    assert M.values(x) == pytest.approx([0.0, 2 / 3, 4 / 3, 2 / 3, 0.0], abs=EXACT)
    assert V.values(np.array([2.0]), "left") == pytest.approx(-1 / 3, rel=EXACT)
    assert V.values(np.array([2.0]), "right") == pytest.approx(2 / 3, rel=EXACT)
    assert R.values(x) == pytest.approx(1 - x / 6, abs=EXACT)
    assert (M.extremes().x_max, M.extremes().max) == pytest.approx((2.0, 4 / 3), rel=EXACT)
    assert (V.extremes().max, V.extremes().min) == pytest.approx((2 / 3, -1 / 3), rel=EXACT)
    assert V.zeros() == (2.0,)
    assert M.zeros() == ()


def test_the_middle_support_of_two_spans() -> None:
    """M_B = -x(1 - x²)/4 for a load in the first of two spans of length 1, least -0.0962 at x = 1/√3.

    From the three-moment equation; the coefficient 0.0962 stands in tables of continuous beams (from memory).
    """
    line = influence(TWO_SPANS).line("M", 1.0)
    x = np.linspace(0.0, 1.0, 11)
    assert line.values(x) == pytest.approx(-x * (1 - x**2) / 4, abs=EXACT)
    assert line.values(2.0 - x) == pytest.approx(-x * (1 - x**2) / 4, abs=EXACT)
    least = line.extremes()
    assert least.min == pytest.approx(-1 / (6 * 3**0.5), rel=EXACT)
    assert least.min == pytest.approx(-0.0962, abs=5e-5)
    assert least.x_min == pytest.approx(1 / 3**0.5, rel=1e-7)
    assert line.integral(0.0, 2.0) == pytest.approx(-1 / 8, rel=EXACT)  # q·l²/8 with both spans loaded


@pytest.mark.parametrize("name", ["two spans", "Gerber", "springs", "overhangs"])
def test_a_reaction_is_the_deflection_when_its_support_settles_by_one(name: str) -> None:
    """Müller-Breslau, for rigid supports and for springs."""
    model = MODELS[name]
    lines = influence(model)
    x = np.linspace(0.0, model.length, 40)
    for number in range(len(model.supports)):
        settled = solve(model, {"case": (Settlement(number, 1.0),)})["case"]
        assert lines.reaction(number).values(x) == pytest.approx(settled.values("w", x), abs=EXACT)


def test_a_moment_is_the_deflection_when_a_hinge_there_opens_by_one() -> None:
    """Müller-Breslau: couples beside a hinge in the first of two spans open it; the kink is scaled to 1."""
    s, near = 0.4, 1e-6
    hinged = prismatic(2.0, EI, TWO_SPANS.supports, (s,))
    opened = solve(hinged, {"case": (PointMoment(s - near, 1.0), PointMoment(s + near, -1.0))})["case"]
    kink = opened.at("slope", s, "left") - opened.at("slope", s, "right")
    x = np.linspace(0.0, 2.0, 21)
    line = influence(TWO_SPANS).line("M", s)
    assert line.values(x) == pytest.approx(opened.values("w", x) / kink, abs=1e-5)


@pytest.mark.parametrize("name", MODELS)
def test_deflections_are_reciprocal(name: str) -> None:
    """Maxwell: w at a under a load at b is w at b under a load at a, across the planes as well."""
    model = MODELS[name]
    lines = influence(model, model.planes)
    w: dict[Plane, Quantity] = {"vertical": "w", "lateral": "w_lat"}
    a, b = 0.23 * model.length, 0.88 * model.length
    for here in model.planes:
        for there in model.planes:
            one = lines.line(w[here], a, plane=there).values(np.array([b]))
            other = lines.line(w[there], b, plane=here).values(np.array([a]))
            assert one == pytest.approx(other, rel=1e-8, abs=1e-18)


@pytest.mark.parametrize("name", MODELS)
def test_the_reactions_carry_the_load(name: str) -> None:
    model = MODELS[name]
    lines = influence(model)
    x = np.linspace(0.0, model.length, 23)
    total = sum((lines.reaction(i).values(x) for i in range(len(model.supports))), np.zeros_like(x))
    assert total == pytest.approx(1.0, rel=1e-9)


@pytest.mark.parametrize("quantity", ["w", "slope", "M", "V"])
def test_a_distributed_load_is_an_integral_over_the_line(quantity: Quantity) -> None:
    model = MODELS["steps, shear and a skew section"]
    load = DistributedLoad(1.0, 13.0, -4e3, 9e3)
    solved = solve(model, {"case": (load,)})["case"]
    lines = influence(model)
    for x in (2.0, 7.3, 9.0):
        line = lines.line(quantity, x)
        assert line.under(load) == pytest.approx(solved.at(quantity, x), rel=1e-9)
    assert lines.line("M", 9.0).under(PointLoad(9.0, 5e3)) == pytest.approx(
        solve(model, {"case": (PointLoad(9.0, 5e3),)})["case"].at("M", 9.0), rel=1e-9
    )


def test_rounding_is_not_shown_in_a_determinate_beam() -> None:
    """The suspended span of a Gerber beam feels nothing of a load beyond the hinge."""
    line = influence(MODELS["Gerber"]).line("M", 10.0)
    assert line.values(np.array([1.0, 3.0, 5.0])).tolist() == [0.0, 0.0, 0.0]
    assert influence(MODELS["overhangs"]).line("M", 0.0).extremes().abs == 0.0


def test_what_cannot_be_asked() -> None:
    lines = influence(SIMPLE)
    with pytest.raises(ValueError, match="outside"):
        lines.line("M", 6.1)
    with pytest.raises(ValueError, match="outside"):
        lines.line("M", 2.0).values(np.array([-1.0]))
    with pytest.raises(ValueError, match="not asked for"):
        lines.line("M", 2.0, plane="lateral")
    with pytest.raises(ValueError, match="vertical axis"):
        lines.line("M_lat", 2.0)
    with pytest.raises(ValueError, match="vertical axis"):
        lines.reaction(0, "force_lat")
    with pytest.raises(ValueError, match="lateral"):
        influence(SIMPLE, PLANES)


def test_a_support_that_holds_one_plane_only() -> None:
    model = prismatic(8.0, BendingStiffness(EI, EI / 4), (pin(0.0), Support(4.0, lateral=FREE), pin(8.0)))
    lines: Influence = influence(model, PLANES)
    assert lines.line("M_lat", 4.0, plane="lateral").extremes().max == pytest.approx(2.0, rel=EXACT)
    assert lines.line("M", 4.0).extremes().max == pytest.approx(0.0, abs=EXACT)


# --- published values, and the equation of three moments --------------------------------------------------


def support_moments(spans: list[float], x: float) -> list[float]:
    """Moments over the supports under a unit load at x, by Clapeyron's equation of three moments.

    M_{i-1} l_i + 2 M_i (l_i + l_{i+1}) + M_{i+1} l_{i+1} = -6 (A a/l)_i - 6 (A b/l)_{i+1}; for a load at a in
    a span l, with b = l - a, the terms are ab(a + l)/l on its right support and ab(b + l)/l on its left one.
    """
    ends = np.concatenate([[0.0], np.cumsum(spans)])
    n = len(spans)
    matrix, known = np.eye(n + 1), np.zeros(n + 1)
    for i in range(1, n):
        matrix[i, i - 1 : i + 2] = spans[i - 1], 2 * (spans[i - 1] + spans[i]), spans[i]
    number = min(int(np.searchsorted(ends, x, side="right")) - 1, n - 1)
    length, a = spans[number], x - ends[number]
    b = length - a
    if number > 0:
        known[number] -= a * b * (b + length) / length
    if number < n - 1:
        known[number + 1] -= a * b * (a + length) / length
    return [float(value) for value in np.linalg.solve(matrix, known)]


@pytest.mark.parametrize(
    "spans", [[5.0, 5.0], [4.0, 6.0, 5.0], [3.0, 3.0, 3.0, 3.0], [8.0, 2.0, 7.0, 5.0, 1.0]]
)
def test_moments_over_supports_are_those_of_three_moments(spans: list[float]) -> None:
    ends = [0.0, *np.cumsum(spans).tolist()]
    model = prismatic(ends[-1], EI, tuple(pin(x) for x in ends))
    lines = influence(model)
    x = np.linspace(0.0, ends[-1], 67)
    expected = np.array([support_moments(spans, float(at)) for at in x])
    for number, place in enumerate(ends):
        found = lines.line("M", place).values(x)
        assert found == pytest.approx(expected[:, number], abs=EXACT * sum(spans))


@pytest.mark.parametrize(
    ("spans", "of", "place", "load", "value"),
    [  # for spans of length 1, three or four figures as printed; all from memory
        (2, "M", 0.4, 0.4, 0.2064),  # tables of influence lines of continuous beams
        (2, "M", 0.5, 0.5, 0.2031),  # 13/64
        (
            2,
            "R",
            0,
            0.5,
            0.406,
        ),  # AISC Steel Construction Manual, Table 3-23, two spans, load at midspan: 13/32
        (2, "R", 1, 0.5, 0.688),  # the same: 22/32
        (2, "R", 2, 0.5, -0.094),  # the same: -3/32
        (3, "M", 1.0, 1.5, -0.075),  # three spans, load in the middle of the inner one: -3/40
        (3, "M", 1.5, 1.5, 0.175),  # 7/40
        (3, "M", 1.0, 0.5774, -0.1026),
        (3, "M", 2.0, 0.5774, 0.0257),
    ],
)
def test_published_ordinates(spans: int, of: str, place: float, load: float, value: float) -> None:
    lines = influence(prismatic(float(spans), EI, tuple(pin(float(i)) for i in range(spans + 1))))
    line = lines.line("M", place) if of == "M" else lines.reaction(int(place))
    assert line.values(np.array([load]))[0] == pytest.approx(value, abs=0.00051 if of == "R" else 0.000051)


def test_the_largest_span_moment_of_two_spans_under_one_load() -> None:
    """0.2074 L, the load and the moment at 0.4323 L: the maximum over all places of the line's peak.

    Known from tables as about 0.207 P L (from memory); here by scipy on x(1 - x) - x·x(1 - x²)/4.
    """
    from scipy.optimize import minimize_scalar

    best = minimize_scalar(
        lambda x: -(x * (1 - x) - x * x * (1 - x**2) / 4), bounds=(0.1, 0.9), method="bounded"
    )
    lines = influence(TWO_SPANS)
    assert lines.line("M", float(best.x)).extremes().max == pytest.approx(-best.fun, rel=1e-9)
    assert -best.fun == pytest.approx(0.2074, abs=5e-5)


def test_ends_that_are_fixed() -> None:
    """M_A = -ab²/L², R_A = b²(3a + b)/L³ for a load at a: textbooks, from memory."""
    lines, L = influence(MODELS["fixed at both ends"]), 7.0
    a = np.linspace(0.0, L, 15)
    b = L - a
    assert lines.line("M", 0.0, "right").values(a) == pytest.approx(-a * b**2 / L**2, abs=EXACT)
    assert lines.reaction(0, "moment").values(a) == pytest.approx(a * b**2 / L**2, abs=EXACT)
    assert lines.reaction(0).values(a) == pytest.approx(b**2 * (3 * a + b) / L**3, abs=EXACT)


# --- beside a jump, areas ---------------------------------------------------------------------------------


def test_a_line_beside_its_jump() -> None:
    line = influence(SIMPLE).line("V", 2.0)
    assert line.beside(2.0) == pytest.approx((-1 / 3, 2 / 3), rel=EXACT)
    assert line.beside(2.0 + 1e-10) == line.beside(2.0)  # one place, within the model's tolerance
    left, right = line.beside(3.0)
    assert left == right == pytest.approx(0.5, rel=EXACT)
    assert line.beside(0.0) == (0.0, 0.0)
    assert influence(TWO_SPANS).line("M", 0.4).beside(1.0) == (0.0, 0.0)  # no rounding above a support


def test_areas_of_the_parts() -> None:
    """V at a of a simple beam: b²/(2L) and -a²/(2L); M at 0.4 of two spans: 0.095 and -0.025 L²."""
    assert influence(SIMPLE).line("V", 2.0).areas() == pytest.approx((16 / 12, -4 / 12), rel=EXACT)
    assert influence(TWO_SPANS).line("M", 0.4).areas() == pytest.approx((0.095, -0.025), rel=EXACT)
    assert influence(SIMPLE).line("M", 2.0).areas() == pytest.approx((4.0, 0.0), rel=EXACT)


@pytest.mark.parametrize("name", MODELS)
def test_the_areas_of_both_signs_make_the_whole(name: str) -> None:
    model = MODELS[name]
    lines = influence(model)
    for quantity in ("w", "slope", "M", "V"):
        line = lines.line(quantity, 0.37 * model.length)
        positive, negative = line.areas()
        assert negative <= 0.0 <= positive
        assert positive + negative == pytest.approx(
            line.integral(0.0, model.length), abs=1e-12 * (positive - negative)
        )
