"""Each model on a section without symmetry, bent both ways, against fibres of its own.

The outlines are drawn anew with shapely and cut into small fibres; scipy finds the strain, or the angle and
place of the axis, that balances the forces. x right, y up, tension positive, M with tension at the bottom,
M_lat with tension on the right. Fibres of a two-hundredth of the size carry stresses to some 1e-3.
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
import pytest
import shapely
from scipy.integrate import quad
from scipy.optimize import brentq, root
from shapely.geometry import Polygon, box

from calcgen.mechanics.arrays import FloatArray
from tests.evaluation.stresses import section, values

FIBRES = 240
NEAR = 3e-3
Stress = Callable[[FloatArray], FloatArray]


@dataclass(frozen=True, eq=False)
class Fibres:
    """Fibres of one material: places (n, 2), m, areas (n,), m², E/E_ref, and stress from reference stress."""

    places: FloatArray
    areas: FloatArray
    factor: float
    stress: Stress


def limited(factor: float, tension: float = math.inf, compression: float = math.inf) -> Stress:
    """Return the law of a material that yields."""
    return lambda s: np.clip(factor * s, -compression, tension)


def fibres(shape: Polygon, stress: Stress, factor: float = 1.0) -> Fibres:
    """Cut a polygon, m, into fibres; its area is kept."""
    left, bottom, right, top = shape.bounds
    share = (np.arange(FIBRES) + 0.5) / FIBRES
    x, y = (
        grid.ravel() for grid in np.meshgrid(left + share * (right - left), bottom + share * (top - bottom))
    )
    inside = shapely.contains_xy(shape, x, y)
    places = np.column_stack((x[inside], y[inside]))
    return Fibres(places, np.full(len(places), shape.area / len(places)), factor, stress)


def bars(
    places: list[tuple[float, float]], area: float, factor: float, steel: Stress, host: Stress
) -> Fibres:
    """Return bars that take the place of concrete."""
    return Fibres(np.array(places), np.full(len(places), area), factor, lambda s: steel(s) - host(s))


def centroid(parts: list[Fibres]) -> FloatArray:
    """Return the centroid of the transformed section, m."""
    weights = [p.factor * p.areas for p in parts]
    moments = np.sum([w @ p.places for w, p in zip(weights, parts, strict=True)], axis=0)
    whole: FloatArray = moments / sum(float(w.sum()) for w in weights)
    return whole


def resultants(parts: list[Fibres], stresses: list[FloatArray], about: FloatArray) -> FloatArray:
    """Return N, M and M_lat of stresses."""
    forces = [s * p.areas for s, p in zip(stresses, parts, strict=True)]
    arms = [p.places - about for p in parts]
    return np.array(
        [
            sum(f.sum() for f in forces),
            -sum(f @ a[:, 1] for f, a in zip(forces, arms, strict=True)),
            sum(f @ a[:, 0] for f, a in zip(forces, arms, strict=True)),
        ]
    )


def reference_stress(
    parts: list[Fibres],
    N: float,
    M: float,
    M_lat: float,
    about: FloatArray,
    start: tuple[float, float, float],
) -> Callable[[float, float], float]:
    """Find the plane of reference stress by scipy; N in N, M in N·m; return it by x, y in m."""
    size, scale = 0.1, np.array([abs(N) + abs(M) / 0.1, abs(M) + abs(M_lat) + abs(N) * 0.1])

    def plane(p: FloatArray, places: FloatArray) -> FloatArray:
        s: FloatArray = 1e6 * (p[0] + (places - about) @ p[1:] / size)
        return s

    def gap(p: FloatArray) -> FloatArray:
        found = resultants(parts, [each.stress(plane(p, each.places)) for each in parts], about)
        off: FloatArray = (found - [N, M, M_lat]) / scale[[0, 1, 1]]
        return off

    found = root(gap, np.array(start), method="hybr", options={"factor": 1.0})
    assert np.abs(gap(found.x)).max() < 1e-6
    return lambda x, y: float(plane(found.x, np.array([[x, y]]))[0])


def points(**places: tuple[float, float]) -> tuple[str, ...]:
    """Return points as lines, mm."""
    return tuple(f"point {name} = ({x} mm, {y} mm)" for name, (x, y) in places.items())


# an angle of two strips, on its own axes: heel at the bottom left of its bounding box of 80 by 120 mm
ANGLE = section("shape = angle(h = 120 mm, b = 80 mm, t = 12 mm)")
ANGLE_OUTLINE = Polygon([(-40, -60), (40, -60), (40, -48), (-28, -48), (-28, 60), (-40, 60)])
CORNERS = {"heel": (-40, -60), "toe": (40, -60), "top": (-28, 60), "inner": (-28, -48), "tip": (-40, 60)}


def metres(shape: Polygon) -> Polygon:
    return shapely.transform(shape, lambda c: c * 1e-3)


@pytest.mark.parametrize(
    ("model", "law", "forces", "start"),
    [
        ("elastic", limited(1.0), (-60e3, 4e3, -1.5e3), (0, -10, -10)),
        ("elastic", limited(1.0), (25e3, -3e3, 2e3), (0, 10, 10)),
        ("no_tension", limited(1.0, tension=0.0), (-60e3, 1e3, -0.5e3), (-30, -10, -10)),
        ("no_tension", limited(1.0, tension=0.0), (-60e3, -1.2e3, 0.4e3), (-30, 10, 10)),
        ("elastic_plastic", limited(1.0, 250e6, 250e6), (-60e3, 7e3, -1.2e3), (0, -100, -100)),
        ("elastic_plastic", limited(1.0, 250e6, 250e6), (90e3, -6e3, 2.5e3), (0, 100, 100)),
    ],
)
def test_an_angle_bent_both_ways(
    model: str, law: Stress, forces: tuple[float, float, float], start: tuple[float, float, float]
) -> None:
    N, M, M_lat = forces
    parts = [fibres(metres(ANGLE_OUTLINE), law)]
    about = centroid(parts)
    s = reference_stress(parts, N, M, M_lat, about, start)
    found = values(
        f"model = {model}",
        *(("f_y = 250 MPa",) if model == "elastic_plastic" else ()),
        "E = 200 GPa",
        f"N = {N} N",
        f"M = {M} N*1 m",
        f"M_lat = {M_lat} N*1 m",
        *points(**CORNERS),
        section=ANGLE,
    )
    strains = {name: s(x * 1e-3, y * 1e-3) for name, (x, y) in CORNERS.items()}
    everywhere = [s(x * 1e-3, y * 1e-3) for x, y in ANGLE_OUTLINE.exterior.coords]
    peak = max(map(abs, everywhere))
    for name, strain in strains.items():
        assert found[name] == pytest.approx(float(law(np.array(strain))), abs=NEAR * peak), name
    assert found["ε_max"] == pytest.approx(max(everywhere) / 200e9, abs=NEAR * peak / 200e9)
    assert found["ε_min"] == pytest.approx(min(everywhere) / 200e9, abs=NEAR * peak / 200e9)
    if model == "elastic_plastic":
        elastic = reference_stress([fibres(metres(ANGLE_OUTLINE), limited(1.0))], N, M, M_lat, about, start)
        left = {n: found[n] - elastic(x * 1e-3, y * 1e-3) for n, (x, y) in CORNERS.items()}
        assert found["σ_res_max"] >= max(left.values()) - NEAR * peak
        assert found["σ_res_min"] <= min(left.values()) + NEAR * peak


@pytest.mark.parametrize(("N", "M", "M_lat"), [(-60e3, 5e3, -1.5e3), (40e3, -2e3, -2e3), (0.0, 1e3, 3e3)])
def test_the_plastic_moments_of_an_angle(N: float, M: float, M_lat: float) -> None:
    part = fibres(metres(ANGLE_OUTLINE), limited(1.0))
    about = centroid([part])
    wanted = np.array([M_lat, -M]) / math.hypot(M, M_lat)

    def blocks(angle: float) -> FloatArray:
        direction = np.array([math.cos(angle), math.sin(angle)])
        depths = (part.places - about) @ direction

        def forces(axis: float) -> FloatArray:
            s = 250e6 * np.clip((depths - axis) / 3e-4, -1.0, 1.0)  # a narrow core keeps the sums smooth
            return resultants([part], [s], about)

        return forces(brentq(lambda axis: forces(axis)[0] - N, -0.12, 0.12))

    def off(angle: float) -> float:
        _, m, m_lat = blocks(angle)
        return float(m_lat * wanted[1] + m * wanted[0])

    towards = math.atan2(wanted[1], wanted[0])
    _, m, m_lat = blocks(brentq(off, towards - 1.5, towards + 1.5))
    assert m * M + m_lat * M_lat > 0.0
    found = values(
        "model = plastic",
        "f_y = 250 MPa",
        f"N = {N} N",
        f"M = {M} N*1 m",
        f"M_lat = {M_lat} N*1 m",
        section=ANGLE,
    )
    assert found["M_pl"] == pytest.approx(m, rel=3 * NEAR)
    assert found["M_pl_lat"] == pytest.approx(m_lat, rel=3 * NEAR)
    assert found["utilisation"] == pytest.approx(math.hypot(M, M_lat) / math.hypot(m, m_lat), rel=3 * NEAR)


TIMBER, STEEL = 1.0, 20.0
FLITCH = section(
    "part oak = rectangle(b = 75 mm, h = 250 mm) at (-41 mm, 0 mm) of oak",
    "part plate = rectangle(b = 7 mm, h = 220 mm) of steel",
    "part cap = rectangle(b = 100 mm, h = 50 mm) at (0 mm, 150 mm) of oak",
    "modulus oak = 10 GPa",
    "modulus steel = 200 GPa",
    "strength oak = 25 MPa",
    "strength steel = 300 MPa",
    "reference = oak",
)


@pytest.mark.parametrize(
    ("model", "forces"),
    [
        ("elastic", (-60e3, 20e3, -2e3)),
        ("elastic_plastic", (-60e3, 52e3, -5e3)),
        ("no_tension", (-60e3, 5e3, -1e3)),
    ],
)
def test_a_flitch_beam_on_one_side(model: str, forces: tuple[float, float, float]) -> None:
    N, M, M_lat = forces
    limits = {"elastic": (math.inf, math.inf), "no_tension": (0.0, math.inf)}
    oak, steel = (
        limited(n, *limits.get(model, (strength, strength)))
        for n, strength in ((TIMBER, 25e6), (STEEL, 300e6))
    )
    parts = [
        fibres(box(-0.0785, -0.125, -0.0035, 0.125), oak),
        fibres(box(-0.0035, -0.11, 0.0035, 0.11), steel, STEEL),
        fibres(box(-0.05, 0.125, 0.05, 0.175), oak),
    ]
    s = reference_stress(parts, N, M, M_lat, centroid(parts), (-1, -1, -1))
    found = values(
        f"model = {model}", f"N = {N} N", f"M = {M} N*1 m", f"M_lat = {M_lat} N*1 m", section=FLITCH
    )
    for name, law, corners in (
        ("oak", oak, [(x, y) for x in (-0.0785, -0.0035) for y in (-0.125, 0.125)]),
        ("plate", steel, [(x, y) for x in (-0.0035, 0.0035) for y in (-0.11, 0.11)]),
        ("cap", oak, [(x, y) for x in (-0.05, 0.05) for y in (0.125, 0.175)]),
    ):
        stresses = [float(law(np.array(s(x, y)))) for x, y in corners]
        near = NEAR * max(map(abs, stresses)) + 1e4
        assert found[f"{name}.σ_max"] == pytest.approx(max(stresses), abs=near), name
        assert found[f"{name}.σ_min"] == pytest.approx(min(stresses), abs=near), name


RIB = section(
    "part flange = rectangle(b = 800 mm, h = 150 mm) at (100 mm, 325 mm) of concrete",
    "part web = rectangle(b = 300 mm, h = 500 mm) of concrete",
    "bars low = 4 of 20 mm from (-100 mm, -200 mm) to (110 mm, -200 mm) of steel",
    "bars top = 402 mm² at (-120 mm, 350 mm) of steel",
    "modulus concrete = 10 GPa",
    "modulus steel = 200 GPa",
    "strength concrete = 14 MPa",
    "strength steel = 435 MPa",
    "reference = concrete",
)


@pytest.mark.parametrize(
    ("model", "forces"),
    [
        ("elastic", (-100e3, 200e3, 20e3)),
        ("cracked", (-100e3, 200e3, 20e3)),
        ("cracked", (50e3, 100e3, -15e3)),
        ("elastic_plastic", (-100e3, 310e3, 30e3)),
    ],
)
def test_a_concrete_rib_with_a_flange_to_one_side(model: str, forces: tuple[float, float, float]) -> None:
    N, M, M_lat = forces
    concrete = {
        "elastic": limited(1.0),
        "cracked": limited(1.0, tension=0.0),
        "elastic_plastic": limited(1.0, 0.0, 14e6),
    }[model]
    steel = limited(20.0, 435e6, 435e6) if model == "elastic_plastic" else limited(20.0)
    low = [(x, -0.2) for x in (-0.1, -0.03, 0.04, 0.11)]
    parts = [
        fibres(box(-0.3, 0.25, 0.5, 0.4), concrete),
        fibres(box(-0.15, -0.25, 0.15, 0.25), concrete),
        bars(low, math.pi * 0.02**2 / 4, 19.0, steel, concrete),
        bars([(-0.12, 0.35)], 402e-6, 19.0, steel, concrete),
    ]
    s = reference_stress(parts, N, M, M_lat, centroid(parts), (1, 1, -3))
    found = values(f"model = {model}", f"N = {N} N", f"M = {M} N*1 m", f"M_lat = {M_lat} N*1 m", section=RIB)
    of_low = [float(steel(np.array(s(x, y)))) for x, y in low]
    of_flange = [float(concrete(np.array(s(x, y)))) for x in (-0.3, 0.5) for y in (0.25, 0.4)]
    assert found["low.σ_max"] == pytest.approx(max(of_low), rel=2 * NEAR)
    assert found["low.σ_min"] == pytest.approx(min(of_low), rel=2 * NEAR)
    assert found["low"] == pytest.approx(max(of_low, key=abs), rel=2 * NEAR)
    assert found["top"] == pytest.approx(float(steel(np.array(s(-0.12, 0.35)))), rel=2 * NEAR)
    assert found["flange.σ_min"] == pytest.approx(min(of_flange), rel=2 * NEAR)


@pytest.mark.parametrize("centre", ["top", "bottom"])
@pytest.mark.parametrize(("N", "M"), [(20e3, 3e3), (-20e3, 3e3), (0.0, -3e3)])
def test_a_curved_tee(centre: str, N: float, M: float) -> None:
    """A_m = ∫b dr/r by quadrature; stress by Winkler's formula, here written out with the radii."""
    A, y_bar, R_c = 0.08 * 0.02 + 0.02 * 0.08, (0.04 - 0.01) / 2, 0.12

    def width(y: float) -> float:
        return 0.08 if y > 0.03 else 0.02

    def radius(y: float) -> float:
        return R_c + (y - y_bar if centre == "bottom" else y_bar - y)

    A_m = quad(lambda y: width(y) / radius(y), -0.05, 0.05, points=[0.03])[0]
    opens = M if centre == "bottom" else -M
    found = values(
        "model = curved",
        f"R_c = {R_c} m",
        f"centre = {centre}",
        f"N = {N} N",
        f"M = {M} N*1 m",
        *points(web=(0, -20), flange=(30, 40)),
        section=section("shape = tee(h = 100 mm, b = 80 mm, t_w = 20 mm, t_f = 20 mm)"),
    )
    for name, y in (("σ_top", 0.05), ("σ_bottom", -0.05), ("web", -0.02), ("flange", 0.04)):
        r = radius(y)
        expected = N / A + opens * (A - r * A_m) / (A * r * (R_c * A_m - A))
        assert found[name] == pytest.approx(expected, rel=1e-6), name
