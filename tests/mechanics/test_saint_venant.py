"""Torsion and shear against exact solutions, mid-line formulas and another library's elements."""

import itertools
import math
from collections.abc import Callable

import numpy as np
import pytest
import skfem
from hypothesis import given, settings
from hypothesis import strategies as st
from skfem.helpers import dot, grad

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.delaunay import BoolArray
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.saint_venant import SaintVenant, Shear, saint_venant
from calcgen.mechanics.saint_venant.boundary import joined, simplified
from calcgen.mechanics.saint_venant.elements import MASS, NODES, shapes
from calcgen.mechanics.section import section_properties
from calcgen.mechanics.shapes import angle, box, channel, circle, ellipse, i_shape, rectangle, tee, tube, zed
from calcgen.mechanics.torsion import rectangle_torsion
from tests.mechanics.strategies import outlines, star


def J(*parts: Outline) -> float:
    return saint_venant(*parts).J


def sheared(*parts: Outline) -> Shear:
    found = saint_venant(*parts).shear
    assert found is not None
    return found


@pytest.mark.parametrize("ratio", [1.0, 1.5, 2.0, 3.0, 5.0, 10.0, 20.0, 50.0])
def test_rectangle_against_the_exact_series(ratio: float) -> None:
    part = rectangle(b=0.02, h=0.02 * ratio).outline
    found, shear = saint_venant(part), sheared(part)
    exact = rectangle_torsion(0.02, 0.02 * ratio)
    assert J(part) == pytest.approx(exact.value, rel=2e-4)
    assert found.J_lower < exact.value < found.J_upper
    assert found.tau_max.value == pytest.approx(exact.tau_max_per_T, rel=0.01)
    if ratio > 1.0:  # in the middle of a long side
        assert abs(found.tau_max.x) == pytest.approx(0.01)
    if 1.0 < ratio <= 2.0:  # flat for longer ones
        assert abs(found.tau_max.y) < 0.002
    area = 0.02**2 * ratio
    assert (shear.A_s_h / area, shear.A_s_v / area) == pytest.approx((5 / 6, 5 / 6), rel=1e-5)
    assert (shear.x_s, shear.y_s, shear.f_hv) == (0.0, 0.0, 0.0)


def test_triangle_ellipse_and_circle_against_exact_solutions() -> None:
    """Saint-Venant's: J = √3 s⁴/80 and τ = 20 T/s³; warping of an ellipse ω = -(a² - b²)/(a² + b²) xy.

    Shear of a circle for ν = 0: A_s = 6A/7, from Ψ = (3 a²r - r³) sin θ/8 by hand (the same as by G. R.
    Cowper, 1966, from memory).
    """
    triangle = outline([(0.0, 0.0), (1.0, 0.0), (0.5, math.sqrt(0.75))])
    found = saint_venant(triangle)
    assert J(triangle) == pytest.approx(math.sqrt(3.0) / 80.0, rel=1e-4)
    assert found.tau_max.value == pytest.approx(20.0, rel=0.02)
    middle = 0.5 * (triangle.exterior + np.roll(triangle.exterior, 1, axis=0))
    assert np.hypot(*(middle - [found.tau_max.x, found.tau_max.y]).T).min() < 0.05
    shear = sheared(triangle)
    assert (shear.x_s, shear.y_s) == pytest.approx((0.5, math.sqrt(0.75) / 3.0), abs=1e-4)

    a, b = 0.2, 0.1
    oval = ellipse(b=2.0 * a, h=2.0 * b).outline
    shear = sheared(oval)
    assert J(oval) == pytest.approx(math.pi * a**3 * b**3 / (a * a + b * b), rel=3e-4)
    flatness = (a * a - b * b) / (a * a + b * b)
    assert shear.I_w == pytest.approx(flatness**2 * math.pi * a**3 * b**3 / 24.0, rel=1e-3)

    disc = sheared(circle(d=0.2).outline)
    assert disc.A_s_h / (math.pi * 0.01) == pytest.approx(6 / 7, rel=1e-3)
    assert disc.I_w < 1e-9 * 0.1**6


def test_half_circle_has_its_shear_centre_where_theory_puts_it() -> None:
    """8/(15π)·(3 + 4ν)/(1 + ν) of the radius, for ν = 0 (Timoshenko and Goodier, from memory)."""
    theta = np.linspace(-0.5 * math.pi, 0.5 * math.pi, 300)
    found = sheared(outline(np.column_stack((np.cos(theta), np.sin(theta)))))
    assert found.x_s == pytest.approx(24.0 / (15.0 * math.pi), rel=1e-3)
    assert found.y_s == 0.0


def test_thin_sections_against_their_mid_lines() -> None:
    """Formulas of V. Z. Vlasov's thin-walled beams, from memory; t/h = 1/100, b and h of mid-lines."""
    b, h, t = 0.1, 0.2, 0.002
    part = channel(h=h + t, b=b + 0.5 * t, t_w=t, t_f=t).outline
    shear = sheared(part)
    web = part.bounds.left + 0.5 * t
    assert web - shear.x_s == pytest.approx(3.0 * b * b / (h + 6.0 * b), rel=5e-3)
    assert shear.I_w == pytest.approx(t * b**3 * h**2 * (3 * b + 2 * h) / (12 * (6 * b + h)), rel=0.01)

    shear = sheared(zed(h=h + t, b=b + 0.5 * t, t=t).outline)
    assert shear.I_w == pytest.approx(t * b**3 * h**2 * (b + 2 * h) / (12 * (2 * b + h)), rel=0.01)
    assert (shear.x_s, shear.y_s) == (0.0, 0.0)

    shear = sheared(i_shape(h=h + t, b=b, t_w=t, t_f=t).outline)
    assert shear.I_w == pytest.approx(t * b**3 * h**2 / 24.0, rel=0.01)

    part = angle(h=b + 0.5 * t, b=b + 0.5 * t, t=t).outline  # in the crossing of its legs
    shear = sheared(part)
    crossing = part.bounds.left + 0.5 * t
    assert (shear.x_s, shear.y_s) == pytest.approx((crossing, crossing), abs=0.1 * t)

    slit = 0.001  # a tube cut open: twice its radius from its middle, away from the slit
    theta = np.linspace(slit, 2.0 * math.pi - slit, 300)
    ring = np.column_stack((np.cos(theta), np.sin(theta)))
    shear = sheared(outline(np.concatenate((1.01 * ring, 0.99 * ring[::-1]))))
    assert shear.x_s == pytest.approx(-2.0, rel=5e-3)


def test_walls_of_a_closed_section_carry_a_flow() -> None:
    """Bredt: J = 4A²t/l of the mid-line, and t³/3 of each wall; corners matter little at t/h = 1/200."""
    t = 0.0005
    part = box(b=0.1 + t, h=0.1 + t, t=t).outline
    found = saint_venant(part)
    assert J(part) == pytest.approx(4.0 * 0.1**4 * t / 0.4 + 0.4 * t**3 / 3.0, rel=3e-3)
    # the flow T/(2A) in the middle of a wall, upwards on the left for a clockwise torque
    left, right = found.stress(np.array([[-0.05, 0.0], [0.05, 0.0]]), T=1.0)
    assert left == pytest.approx((0.0, 1.0 / (2.0 * 0.01 * t)), rel=3e-3, abs=500.0)
    assert right == pytest.approx(-left, rel=3e-3, abs=500.0)


def test_elements_are_what_they_should_be() -> None:
    """The mass matrix by Gauss points of a square that is drawn together to a triangle: exact."""
    place, weight = np.polynomial.legendre.leggauss(5)
    u, v = (side.ravel() for side in np.meshgrid(0.5 + 0.5 * place, 0.5 + 0.5 * place))
    weights = np.outer(weight, weight).ravel() / 2.0 * (1.0 - u)  # twice the area of the triangle is one
    values = shapes(np.column_stack((u, v * (1.0 - u), (1.0 - v) * (1.0 - u))))
    np.testing.assert_allclose(values.T @ (weights[:, None] * values), MASS, atol=1e-15)
    np.testing.assert_allclose(shapes(NODES), np.eye(6), atol=1e-15)


def graded(*marks: float) -> FloatArray:
    """Places between marks, ever closer to each of them."""
    share = 0.5 * np.concatenate(([0.0], 0.6 ** np.arange(9, -1, -1)))
    unit = np.concatenate((share, 1.0 - share[-2::-1]))
    places = np.concatenate([low + (high - low) * unit for low, high in itertools.pairwise(marks)])
    return np.unique(places.round(12))  # one place for each mark


def other_elements(
    x: FloatArray, y: FloatArray, inside: Callable[[FloatArray, FloatArray], BoolArray], holes: int
) -> tuple[float, float]:
    """J from above and, without holes, from below by scikit-fem, on triangles of a net of lines."""
    mesh = skfem.MeshTri.init_tensor(x, y)
    middle = mesh.p[:, mesh.t].mean(axis=1)
    mesh = mesh.restrict(np.flatnonzero(inside(middle[0], middle[1])))
    basis = skfem.Basis(mesh, skfem.ElementTriP2())

    @skfem.BilinearForm
    def stiffness(u, v, _):  # type: ignore[no-untyped-def]
        return dot(grad(u), grad(v))

    @skfem.LinearForm
    def turning(v, w):  # type: ignore[no-untyped-def]
        return w.x[1] * grad(v)[0] - w.x[0] * grad(v)[1]

    @skfem.LinearForm
    def two(v, _):  # type: ignore[no-untyped-def]
        return 2.0 * v

    @skfem.Functional
    def polar(w):  # type: ignore[no-untyped-def]
        return w.x[0] ** 2 + w.x[1] ** 2

    K, f = stiffness.assemble(basis), turning.assemble(basis)
    psi = skfem.solve(*skfem.condense(K, f, D=basis.element_dofs[:1, 0]))
    upper = float(polar.assemble(basis) - psi @ f)
    if holes:
        return upper, upper
    load = two.assemble(basis)
    phi = skfem.solve(*skfem.condense(K, load, D=basis.get_dofs()))
    return upper, float(phi @ load)


def l_shape() -> tuple[Outline, float, float]:
    part = angle(h=0.2, b=0.15, t=0.05).outline
    low, left = -0.1, -0.075
    return part, *other_elements(
        graded(left, left + 0.05, left + 0.15),
        graded(low, low + 0.05, low + 0.2),
        lambda x, y: (x < left + 0.05) | (y < low + 0.05),
        holes=0,
    )


def t_shape() -> tuple[Outline, float, float]:
    part = tee(h=0.2, b=0.16, t_w=0.02, t_f=0.03).outline
    return part, *other_elements(
        graded(-0.08, -0.01, 0.01, 0.08),
        graded(-0.1, 0.07, 0.1),
        lambda x, y: (np.abs(x) < 0.01) | (y > 0.07),
        holes=0,
    )


def box_shape() -> tuple[Outline, float, float]:
    part = box(b=0.1, h=0.2, t=0.02).outline
    return part, *other_elements(
        graded(-0.05, -0.03, 0.03, 0.05),
        graded(-0.1, -0.08, 0.08, 0.1),
        lambda x, y: (np.abs(x) > 0.03) | (np.abs(y) > 0.08),
        holes=1,
    )


@pytest.mark.parametrize("build", [l_shape, t_shape, box_shape])
def test_sharp_corners_against_scikit_fem(build: Callable[[], tuple[Outline, float, float]]) -> None:
    part, upper, lower = build()
    assert upper - lower < 5e-4 * upper
    assert J(part) == pytest.approx(0.5 * (upper + lower), rel=1e-3)


def values(found: SaintVenant) -> FloatArray:
    """What no shift, turn or mirror changes, each in lengths of √A."""
    assert found.shear is not None
    a, s = found.mesh.area.sum(), found.shear
    return np.array([found.J / a**2, s.I_w / a**3, (s.f_h + s.f_v) * a, found.tau_max.value * a**1.5])


UNEVEN = channel(h=0.2, b=0.08, t_w=0.006, t_f=0.01, r=0.008).outline
LEGS = angle(h=0.15, b=0.1, t=0.012, r_1=0.012, r_2=0.006).outline


@pytest.mark.parametrize("part", [UNEVEN, LEGS], ids=["channel", "angle"])
def test_nothing_depends_on_where_a_section_stands(part: Outline) -> None:
    here, shear = saint_venant(part), sheared(part)
    x_bar, y_bar = (lambda p: (p.x_bar, p.y_bar))(section_properties(part))
    to_centre = np.array([shear.x_s - x_bar, shear.y_s - y_bar])
    for angle_ in (0.0, 0.4, 0.5 * math.pi, 2.5):
        other = part.moved(3.0, -7.0).turned(angle_)
        there, turned = saint_venant(other), sheared(other)
        np.testing.assert_allclose(values(there)[:3], values(here)[:3], rtol=2e-3)
        np.testing.assert_allclose(values(there)[3], values(here)[3], rtol=0.02)
        moved = section_properties(other)
        cos, sin = math.cos(angle_), math.sin(angle_)
        expected = np.array([[cos, -sin], [sin, cos]]) @ to_centre
        found = np.array([turned.x_s - moved.x_bar, turned.y_s - moved.y_bar])
        np.testing.assert_allclose(found, expected, atol=2e-3 * np.hypot(*to_centre))
        # the flexibility is a tensor: with V_lat to the left f_hv has the sign of -F_xy
        F = np.array([[shear.f_v, -shear.f_hv], [-shear.f_hv, shear.f_h]])
        R = np.array([[cos, -sin], [sin, cos]])
        G = np.array([[turned.f_v, -turned.f_hv], [-turned.f_hv, turned.f_h]])
        np.testing.assert_allclose(G, R @ F @ R.T, atol=5e-3 * shear.f_v)


def test_a_mirror_turns_signs_and_keeps_sizes() -> None:
    shear, mirrored = sheared(LEGS), sheared(LEGS.mirrored())
    assert (mirrored.x_s, mirrored.y_s) == pytest.approx((-shear.x_s, shear.y_s), rel=5e-3)
    assert mirrored.f_hv == pytest.approx(-shear.f_hv, rel=0.05)
    assert (mirrored.f_h, mirrored.f_v, mirrored.I_w) == pytest.approx(
        (shear.f_h, shear.f_v, shear.I_w), rel=5e-3
    )


def test_a_section_twice_the_size() -> None:
    larger = Outline(2.0 * LEGS.exterior)
    shear = sheared(larger)
    assert J(larger) == pytest.approx(2.0**4 * J(LEGS), rel=1e-9)
    assert shear.I_w == pytest.approx(2.0**6 * sheared(LEGS).I_w, rel=1e-9)
    assert shear.A_s_h == pytest.approx(2.0**2 * sheared(LEGS).A_s_h, rel=1e-9)


@given(outlines())
@settings(max_examples=20, deadline=None)
def test_any_outline_has_bounds_and_stresses_that_make_the_forces(part: Outline) -> None:
    found, section = saint_venant(part), section_properties(part)
    assert 0.0 < found.J_lower <= found.J_upper <= (section.I_h + section.I_v) * (1.0 + 1e-4)
    assert found.gap < 1e-3
    mesh, shear = found.mesh, found.shear
    assert shear is not None
    assert mesh.area.sum() == pytest.approx(section.area, rel=1e-5)
    inner = np.full((3, 3), 1 / 6) + 0.5 * np.eye(3)
    points = (inner @ mesh.points[mesh.triangles[:, :3]]).reshape(-1, 2)
    weight = np.repeat(mesh.area / 3.0, 3)
    x, y = (points - np.array([section.x_bar, section.y_bar])).T
    arm = math.sqrt(section.area)
    for forces, expected in (({"V": 1.0}, (0.0, 1.0)), ({"V_lat": 1.0}, (-1.0, 0.0))):
        tau = found.stress(points, **forces)
        assert weight @ tau == pytest.approx(np.array(expected), abs=0.01)
        torque = (shear.x_s - section.x_bar) * expected[1] - (shear.y_s - section.y_bar) * expected[0]
        assert weight @ (x * tau[:, 1] - y * tau[:, 0]) == pytest.approx(torque, abs=0.01 * arm)
    tau = found.stress(points, T=1.0)
    assert weight @ (y * tau[:, 0] - x * tau[:, 1]) == pytest.approx(1.0, abs=0.01)
    assert shear.A_s_h < section.area
    assert shear.f_h * shear.f_v > shear.f_hv**2


def test_pieces_that_share_an_edge_act_as_one() -> None:
    plate = rectangle(b=0.1, h=0.01).outline
    halves = plate.moved(0.0, 0.005), plate.moved(0.0, -0.005)
    assert saint_venant(*halves).pieces == 1
    assert J(*halves) == pytest.approx(rectangle_torsion(0.1, 0.02).value, rel=1e-3)
    turn = np.array([[0.8, 0.6], [-0.6, 0.8]])  # edges that are shared but for rounding
    assert J(*(outline(half.exterior @ turn) for half in halves)) == pytest.approx(J(*halves), rel=1e-3)
    web, flange = rectangle(b=0.01, h=0.1).outline, plate.moved(0.0, 0.055)
    built = tee(h=0.11, b=0.1, t_w=0.01, t_f=0.01).outline.moved(0.0, 0.005)
    assert J(web, flange) == pytest.approx(J(built), rel=1e-3)
    four = [rectangle(b=0.1, h=0.1).outline.moved(x, y) for x in (0.0, 0.1) for y in (0.0, 0.1)]
    assert len(joined(four)) == 1


def test_pieces_apart_add_their_constants_and_carry_no_shear() -> None:
    plate = rectangle(b=0.1, h=0.01).outline
    found = saint_venant(plate, plate.moved(0.0, 0.2))
    assert found.pieces == 2
    assert found.shear is None
    assert J(plate, plate.moved(0.0, 0.2)) == pytest.approx(
        2.0 * rectangle_torsion(0.1, 0.01).value, rel=1e-3
    )
    top = found.stress(np.array([[0.0, 0.0048], [0.0, 0.2048]]), T=1.0)
    assert top[0, 0] == pytest.approx(top[1, 0], rel=0.02)
    assert top[0, 0] > 0.0  # clockwise: to the right at the top
    with pytest.raises(ValueError, match="pieces"):
        found.stress(np.zeros((1, 2)), V=1.0)


def test_a_sharp_re_entrant_corner_is_said() -> None:
    sharp = i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01).outline
    smooth = i_shape(h=0.3, b=0.15, t_w=0.007, t_f=0.01, r=0.015).outline
    assert saint_venant(sharp).tau_max.unbounded
    assert not saint_venant(smooth).tau_max.unbounded
    assert not saint_venant(LEGS).tau_max.unbounded


def test_solutions_are_remembered() -> None:
    assert saint_venant(LEGS) is saint_venant(Outline(LEGS.exterior.copy()))


def test_simplified_outlines_keep_their_area() -> None:
    for part in (
        circle(d=0.2).outline,
        tube(d=0.2, t=0.004).outline,
        LEGS,
        UNEVEN,
        box(b=0.1, h=0.1, t=0.005).outline,
    ):
        (found,), tolerance = simplified([part])
        ratio = section_properties(found).area / section_properties(part).area
        assert ratio == pytest.approx(1.0, abs=1e-5)
        assert len(found.exterior) <= 260
        assert tolerance < 0.004 * 0.1


def test_outlines_of_100_000_corners() -> None:
    """A lobed disc, and a disc with a rough edge, whose J lies near that of the smooth one, πr⁴/2."""
    n = 100_000
    theta = np.linspace(0.0, 2.0 * math.pi, n, endpoint=False)
    few = outline(star((1.0 + 0.3 * np.cos(5.0 * theta[:: n // 400])).tolist(), 1.0, 0.0))
    many = outline(star((1.0 + 0.3 * np.cos(5.0 * theta)).tolist(), 1.0, 0.0))
    assert J(many) == pytest.approx(J(few), rel=1e-3)


@pytest.mark.slow
def test_a_rough_edge_of_100_000_corners() -> None:
    rough = 1.0 + 0.01 * np.random.default_rng(0).uniform(-1.0, 1.0, 100_000)
    assert J(outline(star(rough.tolist(), 1.0, 0.0))) == pytest.approx(0.5 * math.pi, rel=0.01)


@given(st.lists(st.floats(0.4, 1.0), min_size=5, max_size=9))
@settings(max_examples=10, deadline=None)
def test_symmetric_outlines_have_true_zeros(radii: list[float]) -> None:
    half = star(radii, 0.2, 0.3)
    half = half[(half[:, 0] > 0.02)]
    ring = np.concatenate((half[np.argsort(half[:, 1])], (half * [-1.0, 1.0])[np.argsort(-half[:, 1])]))
    shear = sheared(outline(ring))
    assert shear.x_s == pytest.approx(0.0, abs=1e-12)
    assert shear.f_hv == 0.0


def test_awkward_outlines_are_solved_too() -> None:
    """A hole that hardly is one, sharp spikes and notches, plates that touch but for rounding."""
    square = rectangle(b=1.0, h=1.0).outline
    speck = outline(square.exterior, [[(0.0, 0.0), (1e-5, 0.0), (0.0, 1e-5)]])
    assert J(speck) == pytest.approx(J(square), rel=1e-3)

    generator = np.random.default_rng(5)
    for corners in (7, 20, 45):
        theta = np.sort(generator.uniform(0.0, 2.0 * math.pi, corners))
        radius = generator.uniform(0.1, 1.0, corners)
        spiky = outline(np.column_stack((radius * np.cos(theta), radius * np.sin(theta))))
        assert saint_venant(spiky).gap < 1e-3

    left = -1.0
    plates = []
    for width, depth, rise in generator.uniform((0.05, 0.1, -0.01), (0.4, 0.5, 0.01), (4, 3)).tolist():
        plates.append(rectangle(b=width, h=depth).outline.moved(left + 0.5 * width, rise))
        left += width
    cos, sin = math.cos(0.7), math.sin(0.7)
    turned = [Outline(plate.exterior @ np.array([[cos, sin], [-sin, cos]])) for plate in plates]
    assert saint_venant(*turned).pieces == 1
    assert J(*turned) == pytest.approx(J(*plates), rel=1e-3)


PLATE = rectangle(b=0.1, h=0.2).outline
TIP = outline([(0.05, -0.06), (0.09, -0.08), (0.09, -0.04)])
FRAME = [(-0.1, -0.1), (0.1, -0.1), (0.1, 0.1), (-0.1, 0.1)]
# hexagonal star and an I-shaped hole that opens into it, as cut, with two corners 1e-10 m apart
OPEN = [
    (-0.04795, 0.04635),
    (-0.034314973262, -0.0265),
    (0.007, -0.0265),
    (0.007, -0.0325),
    (-0.0144, -0.0325),
    (-0.0144, -0.070303734062),
    (0.03365, -0.05595),
    (0.03545, -0.05115),
    (0.047949999836, -0.065649999748),
    (0.047949999907, -0.065649999708),
    (0.00385, 0.07235),
]
TOUCHING: dict[str, tuple[tuple[Outline, ...], int]] = {
    "a tip on a face": ((PLATE, TIP), 2),
    "a tip nearly on a face": ((PLATE, TIP.moved(1e-10, 0.0)), 2),
    "a tip a little in a face": ((PLATE, TIP.moved(-1e-10, 0.0)), 2),
    "corners that all but coincide": ((Outline(np.array(OPEN)),), 1),
    "a hole at a point of the edge": (
        (Outline(np.array(FRAME), (np.array([(0.1, 0.0), (0, 0), (0, 0.05)]),)),),
        1,
    ),
    "a hole nearly at the edge": (
        (Outline(np.array(FRAME), (np.array([(0.1 - 3e-8, 0.0), (0, 0), (0, 0.05)]),)),),
        1,
    ),
    "two holes at one point": (
        (
            Outline(
                np.array(FRAME),
                (
                    np.array([(0.0, 0.0), (-0.05, -0.02), (-0.05, 0.02)]),
                    np.array([(0.0, 0.0), (0.05, 0.02), (0.05, -0.02)]),
                ),
            ),
        ),
        1,
    ),
    "a hole that leaves two triangles": (
        (Outline(np.array(FRAME), (np.array([(-0.1, 0.0), (0.0, 0.09), (0.1, 0.0), (0.0, -0.09)]),)),),
        2,
    ),
    "an edge that comes back on itself": (
        (Outline(np.array([(0, 0), (1, 0), (1, 1), (0.6, 1), (0.5, 1e-9), (0.4, 1), (0, 1)])),),
        2,
    ),
}


@pytest.mark.parametrize(("parts", "pieces"), TOUCHING.values(), ids=TOUCHING.keys())
def test_outlines_that_touch_themselves_come_apart(parts: tuple[Outline, ...], pieces: int) -> None:
    """Corners draw back by 2e-5 of the size, and the edges that end in them sweep half of that."""
    found = saint_venant(*parts)
    area = sum(section_properties(part).area for part in parts)
    assert found.pieces == pieces
    assert found.gap < 1e-3
    assert found.mesh.area.sum() == pytest.approx(area, rel=5e-5)
    assert len(found.mesh.triangles) < 2_000


def test_a_hole_that_touches_the_edge_opens_the_section() -> None:
    """A tube whose hole touches the outside, against the same with a slit of a thousandth of its size."""
    theta = np.linspace(0.0, -2.0 * math.pi, 40, endpoint=False)
    hole = np.column_stack((0.06 + 0.04 * np.cos(theta), 0.04 * np.sin(theta)))
    slit = outline(
        np.array(
            [
                (-0.1, -0.1),
                (0.1, -0.1),
                (0.1, -1e-4),
                *hole[1:].tolist(),
                (0.1, 1e-4),
                (0.1, 0.1),
                (-0.1, 0.1),
            ]
        )
    )
    assert J(Outline(np.array(FRAME), (hole,))) == pytest.approx(J(slit), rel=2e-3)


def test_no_part_is_lost_where_parts_touch() -> None:
    """A corner on an arc, at any place: the constants of both add up."""
    disc, square = circle(d=0.1).outline, rectangle(b=0.05, h=0.05).outline.turned(0.25 * math.pi)
    expected = J(disc) + J(square)
    for corner in disc.exterior[::37]:
        tip = square.exterior[np.argmax(square.exterior @ -corner)]
        assert J(disc, square.moved(*(corner - tip))) == pytest.approx(expected, rel=1e-3)


SLENDER = {
    "foil 1:100,000": (rectangle(b=10.0, h=1e-4).outline, rectangle_torsion(10.0, 1e-4).value, 1e-4),
    "foil 1:2,000": (rectangle(b=1.0, h=5e-4).outline, rectangle_torsion(1.0, 5e-4).value, 1e-4),
    "wedge of 0.2°": (outline([(0.0, 0.0), (0.1, 0.0), (0.1, 3.49067e-4)]), 0.1 * 3.49067e-4**3 / 12.0, 6e-3),
    "tube 1:20,000": (tube(d=10.0, t=5e-4).outline, 2.0 * math.pi * 4.99975**3 * 5e-4, 1e-4),
    "box 1:6,000": (box(b=3.0, h=10.0, t=5e-4).outline, 4.0 * (2.9995 * 9.9995) ** 2 * 5e-4 / 25.998, 1e-3),
    "angle 1:3,000": (angle(h=1.0, b=1.0, t=3e-4).outline, 2.0 * 3e-4**3 / 3.0, 1e-3),
    "I 1:2,000": (i_shape(h=1.0, b=0.5, t_w=5e-4, t_f=5e-4).outline, 2.0 * 5e-4**3 / 3.0, 2e-3),
}


@pytest.mark.parametrize(("part", "expected", "tolerance"), SLENDER.values(), ids=SLENDER.keys())
def test_slender_sections_take_few_triangles(part: Outline, expected: float, tolerance: float) -> None:
    """Against the series, and the thin wall's l t³/3 (a wedge: ∫t³/3 dx) and Bredt's 4A²t/l."""
    found = saint_venant(part)
    assert len(found.mesh.triangles) < 1_500
    assert found.gap < 1e-3
    assert J(part) == pytest.approx(expected, rel=tolerance)


def test_shear_in_slender_walls_that_incline() -> None:
    """A strip, turned: 5/6 of the area along it, as the flexibility tensor has it at any angle."""
    part = rectangle(b=1.0, h=5e-4).outline.turned(0.6)
    corner = np.array([(0.0, 0.0), (1.0, 0.0), (1.0, 5e-4), (5e-4, 5e-4), (5e-4, 1.0), (0.0, 1.0)])
    legs = sheared(outline(corner))
    turned = sheared(outline(corner).turned(0.6))
    assert turned.f_h + turned.f_v == pytest.approx(legs.f_h + legs.f_v, rel=1e-4)
    strip = sheared(part)
    assert min(np.linalg.eigvalsh([[strip.f_v, -strip.f_hv], [-strip.f_hv, strip.f_h]])) == pytest.approx(
        1.2 / 5e-4, rel=1e-4
    )


def test_intricate_sections_stay_within_bounds() -> None:
    """A plate with stiffeners, and one with fins: hundreds of sharp corners."""
    stiffeners = [rectangle(b=0.01, h=0.2).outline.moved(-4.75 + 0.5 * i, 0.106) for i in range(20)]
    fins = [(0.4, 0.05), (0.397, 0.05), (0.397, 0.01), (0.39, 0.01)]
    comb = [(0.0, 0.0), (0.4, 0.0), *((x - 0.01 * i, y) for i in range(40) for x, y in fins)][:-1]
    for parts in ([rectangle(b=10.0, h=0.012).outline, *stiffeners], [outline(comb)]):
        found = saint_venant(*parts)
        assert found.gap < 1e-3
        assert len(found.mesh.triangles) < 10_000


@pytest.mark.parametrize(
    "part",
    [
        rectangle(b=0.1, h=0.2).outline,
        circle(d=0.1).outline,
        i_shape(h=0.3, b=0.15, t_w=0.0071, t_f=0.0107, r=0.015).outline,
        box(b=0.12, h=0.2, t=0.008, r_o=0.016).outline,
        LEGS,
        UNEVEN,
    ],
    ids=["rectangle", "circle", "I", "box", "angle", "channel"],
)
def test_rounding_decides_nothing(part: Outline) -> None:
    """Coordinates that differ in their last bits, as between machines, give the same triangles and digits."""
    found, generator = saint_venant(part), np.random.default_rng(7)
    for _ in range(2):
        exterior, *holes = (
            ring * (1.0 + 1e-15 * generator.standard_normal(ring.shape)) for ring in part.rings
        )
        other = saint_venant(Outline(exterior, tuple(holes)))
        assert np.array_equal(other.mesh.triangles, found.mesh.triangles)
        np.testing.assert_allclose(values(other), values(found), rtol=1e-10)


def test_corners_that_touch_do_not_connect() -> None:
    square = rectangle(b=0.1, h=0.1).outline
    assert saint_venant(square, square.moved(0.1, 0.1)).pieces == 2
