"""Shear force, torque and both with bending in a stress block: results by hand, by formulas and by solutions.

V is positive where the part before the section is pushed up, T clockwise. The rectangle is 100 mm wide and
200 mm deep, A = 20 000 mm², I_h = b·h³/12.
"""

from __future__ import annotations

import math

import numpy as np
import pytest

from calcgen.mechanics.saint_venant import saint_venant
from calcgen.mechanics.shapes import angle
from tests.evaluation.stresses import RECTANGLE, parts, result, section, stress, values

MPA = 1e6
ARCS = 2e-4  # arcs are edges
I_SHAPE = section("shape = i_shape(h = 300 mm, b = 150 mm, t_w = 8 mm, t_f = 12 mm)")
BOX = section("shape = box(h = 200 mm, b = 100 mm, t = 10 mm)")


# --- shear forces -----------------------------------------------------------------------------------------


@pytest.mark.parametrize("force", ["V = 40 kN", "V = -40 kN", "V_lat = 40 kN"])
def test_largest_stress_of_a_rectangle(force: str) -> None:
    found = values(force)
    assert found["τ_max"] == pytest.approx(1.5 * 40e3 / 0.02)
    assert found["σ_vM_max"] == pytest.approx(math.sqrt(3) * found["τ_max"])
    assert found["σ_1"] == pytest.approx(found["τ_max"])
    assert found["σ_2"] == pytest.approx(-found["τ_max"])
    assert found["σ_max"] == found["σ_min"] == 0.0


@pytest.mark.parametrize("y", [-100, -50, 0, 25, 80, 100])
def test_the_parabola_of_a_rectangle(y: int) -> None:
    found = values("V = 40 kN", f"point p = (-30 mm, {y} mm)")
    assert found["p.τ"] == pytest.approx(1.5 * 2 * MPA * (1 - (y / 100) ** 2))
    assert found["p.σ_vM"] == pytest.approx(math.sqrt(3) * found["p.τ"])


def test_stress_of_the_web_of_an_i_section() -> None:
    """τ = V S/(I t): at the middle, at the flange in the web, and q of the flange by its mid-line."""
    found = values("V = 100 kN", "point web = (0 mm, 138 mm)", section=I_SHAPE)
    I_h = (0.15 * 0.3**3 - 0.142 * 0.276**3) / 12
    flange = 0.15 * 0.012 * 0.144
    assert found["τ_max"] == pytest.approx(100e3 * (flange + 0.008 * 0.138**2 / 2) / (I_h * 0.008))
    assert found["web.τ"] == pytest.approx(100e3 * flange / (I_h * 0.008))


def test_a_tee_has_the_stress_of_its_outline() -> None:
    """The web is passed alone: V S/(I b) with all below the axis, however stocky the walls."""
    found = values(
        "V = 100 kN", section=section("shape = tee(h = 200 mm, b = 100 mm, t_w = 25 mm, t_f = 25 mm)")
    )
    A_f, A_w = 0.1 * 0.025, 0.025 * 0.175
    c = (A_f * 0.1875 + A_w * 0.0875) / (A_f + A_w)  # from the bottom
    I_h = 0.1 * 0.025**3 / 12 + A_f * (0.1875 - c) ** 2 + 0.025 * 0.175**3 / 12 + A_w * (0.0875 - c) ** 2
    assert found["τ_max"] == pytest.approx(100e3 * c**2 / 2 / I_h)


@pytest.mark.parametrize(
    ("shape", "tau"),
    [
        ("circle(d = 100 mm)", 4 / 3 * 50e3 / (math.pi * 0.05**2)),
        ("tube(d = 101 mm, t = 1 mm)", 2 * 50e3 / (2 * math.pi * 0.05 * 0.001)),
        # the mid-line of a box: V S/(2 I t), S of half a flange and half a web
        (
            "box(h = 202 mm, b = 102 mm, t = 2 mm)",
            50e3 * (0.1 * 0.1 / 2 + 0.1**2 / 2) / 2 / (0.1 * 0.1**2 + 0.2**3 / 12) / 0.004 * 2,
        ),
    ],
)
def test_largest_stress_of_round_and_closed_shapes(shape: str, tau: float) -> None:
    assert values("V = 50 kN", section=section(f"shape = {shape}"))["τ_max"] == pytest.approx(tau, ARCS)


def test_flow_in_the_flange_of_a_channel() -> None:
    """At the web's mid-line q = V b h t/(2I), with b and h of the mid-line; both flanges side by side."""
    shape = "strip(t = 1 mm, (80 mm, 100 mm), (0 mm, 100 mm), (0 mm, -100 mm), (80 mm, -100 mm))"
    found = values(
        "V = 5 kN", "point corner = (0 mm, 100 mm)", section=section(f"shape = {shape} at (39.75 mm, 0 mm)")
    )
    I_h = 0.001 * (0.2**3 / 12 + 2 * 0.08 * 0.1**2)
    assert found["corner.τ"] == pytest.approx(5e3 * 0.08 * 0.1 / I_h, 1e-4)


def test_a_leg_of_an_angle_has_the_flow_of_the_general_formula() -> None:
    """V on an angle with equal legs bends it about both axes.

    The finite elements of Saint-Venant's flexure of the same outline give the stress over the middle of the
    upright leg, whose mean the formula is.
    """
    text = section("shape = angle(h = 100 mm, b = 100 mm, t = 5 mm)")
    found = values("V = 5 kN", "point p = (-47.5 mm, 10 mm)", section=text)
    outline = angle(h=0.1, b=0.1, t=0.005).outline
    middle = np.array(outline.bounds.middle)
    across = np.column_stack((np.linspace(-0.0499, -0.0451, 25), np.full(25, 0.01))) + middle
    tau = saint_venant(outline).stress(across, V=5e3)[:, 1]
    assert found["p.τ"] == pytest.approx(float(np.mean(np.abs(tau))), rel=5e-3)


# --- joints -----------------------------------------------------------------------------------------------


def test_flow_across_the_joints_of_a_built_up_section() -> None:
    """V S/I of each cap; either joint of the web carries as much, though it keeps none of it."""
    text = section(
        "part top = rectangle(b = 120 mm, h = 20 mm) at (0 mm, 110 mm)",
        "part web = rectangle(b = 20 mm, h = 200 mm)",
        "part bottom = rectangle(b = 120 mm, h = 20 mm) at (0 mm, -110 mm)",
    )
    found = values("V = 60 kN", section=text)
    I_h = 0.02 * 0.2**3 / 12 + 2 * (0.12 * 0.02**3 / 12 + 0.12 * 0.02 * 0.11**2)
    q = 60e3 * 0.12 * 0.02 * 0.11 / I_h
    assert found["q_top"] == pytest.approx(q)
    assert found["q_bottom"] == pytest.approx(q)
    assert found["q_web"] == pytest.approx(q)  # what one joint gives it, the other takes
    assert found["τ_max"] == pytest.approx((q + 60e3 * 0.02 * 0.1**2 / 2 / I_h) / 0.02)


def test_a_plate_glued_to_timber_has_no_stress_of_its_edge() -> None:
    """The largest stress is V S/(I b) at the axis, in the timber; a cut along the force tells nothing."""
    text = parts(
        "part wood = rectangle(b = 100 mm, h = 300 mm) of timber",
        "part plate = rectangle(b = 100 mm, h = 6 mm) at (0 mm, -153 mm) of steel",
    )
    found = values("V = 10 kN", section=text)
    A_w, A_p = 0.03, 20 * 0.0006
    y = -0.153 * A_p / (A_w + A_p)
    I_h = 0.1 * 0.3**3 / 12 + A_w * y**2 + 20 * 0.1 * 0.006**3 / 12 + A_p * (0.153 + y) ** 2
    assert found["τ_max"] == pytest.approx(10e3 * (0.15 - y) ** 2 / 2 / I_h)


def test_a_plate_between_two_joists_takes_the_flow_of_both_sides() -> None:
    """The force that the plate gains comes across both of its joints, half across each."""
    text = parts(
        "part left = rectangle(b = 50 mm, h = 200 mm) at (-30 mm, 0 mm) of timber",
        "part plate = rectangle(b = 10 mm, h = 100 mm) at (0 mm, 50 mm) of steel",
        "part right = rectangle(b = 50 mm, h = 200 mm) at (30 mm, 0 mm) of timber",
    )
    found = values("V = 10 kN", section=text)
    assert found["q_plate"] == pytest.approx(2 * found["q_left"])
    assert found["q_left"] == pytest.approx(found["q_right"])


def test_parts_that_do_not_touch_cannot_share_shear() -> None:
    text = section(
        "part upper = rectangle(b = 100 mm, h = 100 mm) at (0 mm, 100 mm)",
        "part lower = rectangle(b = 100 mm, h = 100 mm) at (0 mm, -100 mm)",
    )
    calc = stress("V = 5 kN", section=text)
    assert next(p.verdict for p in calc.premises if p.premise == "parts hang together") == "not met"


@pytest.mark.parametrize(
    ("forces", "severities"),
    [
        (("V = 900 kN",), ["error"]),  # nothing for the limit to judge
        (("T = 9 kN·m",), ["error"]),
        (("M = 1 kN·m", "V = 900 kN"), ["warning"]),
        (("M = 20 kN·m", "V = 1 kN"), []),  # the extreme fibres govern, where there is no shear stress
    ],
)
def test_a_limit_does_not_judge_shear_stress(forces: tuple[str, ...], severities: list[str]) -> None:
    calc = stress(*forces, "limit = 50 MPa")
    assert [d.severity for d in calc.diagnostics] == severities
    assert all(d.code == "limit-and-shear" for d in calc.diagnostics)


def test_flow_between_timber_and_steel() -> None:
    text = parts(
        "part wood = rectangle(b = 100 mm, h = 200 mm) of timber",
        "part plate = rectangle(b = 100 mm, h = 10 mm) at (0 mm, -105 mm) of steel",
    )
    found = values("V = 10 kN", section=text)
    A_w, A_p = 0.02, 20 * 0.001
    y = -0.105 * A_p / (A_w + A_p)
    I_h = 0.1 * 0.2**3 / 12 + A_w * y**2 + 20 * 0.1 * 0.01**3 / 12 + A_p * (0.105 + y) ** 2
    q = 10e3 * A_p * (0.105 + y) / I_h
    assert found["q_plate"] == pytest.approx(q)
    assert found["q_wood"] == pytest.approx(q)
    # largest where the axis lies in the timber, or at its joint
    assert found["τ_max"] == pytest.approx(10e3 * 0.1 * (0.1 - y) ** 2 / 2 / I_h / 0.1)


def test_a_section_of_one_part_has_no_joints() -> None:
    assert not [name for name in values("V = 60 kN") if name.startswith("q_")]


# --- torsion ----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("ratio", "coefficient"),
    [(1.0, 0.208), (1.5, 0.231), (2.0, 0.246), (3.0, 0.267), (4.0, 0.282), (6.0, 0.299), (10.0, 0.313)],
)
@pytest.mark.parametrize("upright", [True, False])
def test_torsion_of_a_rectangle(ratio: float, coefficient: float, *, upright: bool) -> None:
    """τ = T/(c a b²) in the middle of the long side, c of the usual table, from memory (three digits)."""
    b, h = (50.0, 50.0 * ratio) if upright else (50.0 * ratio, 50.0)
    sizes = f"rectangle(b = {b} mm, h = {h} mm)"
    at = "(25 mm, 0 mm)" if upright else "(0 mm, 25 mm)"
    found = values("T = 1 kN·m", f"point p = {at}", section=section(f"shape = {sizes}"))
    assert found["τ_max"] == pytest.approx(1e3 / (coefficient * 0.05 * ratio * 0.05**2), rel=3e-3)
    assert found["p.τ"] == pytest.approx(found["τ_max"], rel=1e-3)


@pytest.mark.parametrize(
    ("shape", "tau", "rel"),
    [
        ("circle(d = 80 mm)", 16e3 / (math.pi * 0.08**3), 1e-9),
        ("tube(d = 80 mm, t = 8 mm)", 16e3 * 0.08 / (math.pi * (0.08**4 - 0.064**4)), 1e-9),
        ("ellipse(b = 60 mm, h = 100 mm)", 16e3 / (math.pi * 0.1 * 0.06**2), 1e-9),
        ("box(h = 200 mm, b = 100 mm, t = 10 mm)", 1e3 / (2 * 0.19 * 0.09 * 0.01), 1e-9),  # Bredt
    ],
)
@pytest.mark.parametrize("sense", [1, -1])
def test_torsion_of_closed_forms(shape: str, tau: float, rel: float, sense: int) -> None:
    assert values(f"T = {sense} kN·m", section=section(f"shape = {shape}"))["τ_max"] == pytest.approx(
        tau, rel
    )


def test_torsion_of_open_walls() -> None:
    """T t_max/J with J = Σ b t³/3 on the mid-lines; half of it halfway to the surface, none in the middle."""
    points = ("point out = (40 mm, 150 mm)", "point half = (40 mm, 147 mm)", "point mid = (40 mm, 144 mm)")
    found = values("T = 0.4 kN·m", *points, section=I_SHAPE)
    J = (2 * 0.15 * 0.012**3 + 0.288 * 0.008**3) / 3
    assert found["τ_max"] == pytest.approx(400 * 0.012 / J)
    assert found["out.τ"] == pytest.approx(400 * 0.012 / J)
    assert found["half.τ"] == pytest.approx(200 * 0.012 / J)
    assert found["mid.τ"] == pytest.approx(0.0, abs=1e-3)


def test_shear_and_torque_of_a_box_add_in_one_web_and_oppose_in_the_other() -> None:
    webs = ("point left = (-45 mm, 0 mm)", "point right = (45 mm, 0 mm)")
    of_V, of_T, both, back = (
        values(*forces, *webs, section=BOX)
        for forces in (
            ("V = 50 kN",),
            ("T = 2 kN·m",),
            ("V = 50 kN", "T = 2 kN·m"),
            ("V = 50 kN", "T = -2 kN·m"),
        )
    )
    more, less = of_V["left.τ"] + of_T["left.τ"], abs(of_V["left.τ"] - of_T["left.τ"])
    # V acts upwards on the seen face; a clockwise torque goes up on the left
    assert [both["left.τ"], both["right.τ"]] == pytest.approx([more, less])
    assert [back["left.τ"], back["right.τ"]] == pytest.approx([less, more])
    assert both["τ_max"] == pytest.approx(more)


def test_shear_and_torque_of_open_walls_add_on_one_surface() -> None:
    of_V, of_T = values("V = 50 kN", section=I_SHAPE), values("T = 0.1 kN·m", section=I_SHAPE)
    both = values("V = 50 kN", "T = 0.1 kN·m", section=I_SHAPE)
    assert both["τ_max"] == pytest.approx(of_V["τ_max"] + of_T["τ_max"] * 8 / 12)


# --- combined ---------------------------------------------------------------------------------------------


def test_a_shaft_in_bending_and_torsion() -> None:
    """σ_1,2 = 16/(πd³)·(M ± √(M² + T²)), σ_vM = 16/(πd³)·√(4M² + 3T²)."""
    found = values("M = 3 kN·m", "T = 4 kN·m", section=section("shape = circle(d = 80 mm)"))
    k = 16 / (math.pi * 0.08**3)
    assert found["σ_1"] == pytest.approx(k * (3e3 + 5e3), ARCS)
    assert found["σ_2"] == pytest.approx(-k * (3e3 + 5e3), ARCS)  # on the compressed side
    assert found["σ_vM_max"] == pytest.approx(k * math.sqrt(4 * 9e6 + 3 * 16e6), ARCS)
    assert found["τ_max"] == pytest.approx(k * 4e3, ARCS)


def test_the_web_of_an_i_section_at_its_flange() -> None:
    found = values("M = 60 kN·m", "V = 150 kN", "N = -100 kN", "point w = (0 mm, 138 mm)", section=I_SHAPE)
    I_h, A = (0.15 * 0.3**3 - 0.142 * 0.276**3) / 12, 2 * 0.15 * 0.012 + 0.276 * 0.008
    sigma = -100e3 / A - 60e3 * 0.138 / I_h
    tau = 150e3 * 0.15 * 0.012 * 0.144 / (I_h * 0.008)
    assert found["w"] == found["w.σ"] == pytest.approx(sigma)
    assert found["w.σ_vM"] == pytest.approx(math.sqrt(sigma**2 + 3 * tau**2))
    assert found["σ_vM_max"] == pytest.approx(found["w.σ_vM"], rel=1e-6)  # the fillet-less web's end governs
    assert found["σ_2"] == pytest.approx(sigma / 2 - math.hypot(sigma / 2, tau), rel=1e-6)


def test_extremes_have_their_places() -> None:
    by_name = {
        r.name: r.place.replace("\u00a0", " ") for r in result(stress("M = 40 kN·m", "V = 40 kN")).results
    }
    assert by_name["τ_max"].endswith(" mm, 0 mm)")
    assert by_name["σ_vM_max"].endswith(", −100.0 mm)") or by_name["σ_vM_max"].endswith(", 100.0 mm)")


# --- faults and premises ----------------------------------------------------------------------------------


@pytest.mark.parametrize(
    "text",
    [
        parts(
            "part left = rectangle(b = 1 m, h = 1 m) of timber",
            "part right = rectangle(b = 1 m, h = 1 m) at (1 m, 0 m) of steel",
        ),
        section(
            "part block = rectangle(b = 1 m, h = 1 m) of c",
            "bars low = 400 mm² at (0 mm, -400 mm) of s",
            "modulus c = 1 GPa",
            "modulus s = 200 GPa",
            "reference = c",
        ),
    ],
)
def test_torsion_of_several_materials_is_refused(text: str) -> None:
    (fault,) = stress("T = 1 kN·m", section=text).diagnostics
    assert fault.code == "not-in-model"
    assert stress("M = 1 kN·m", "T = 0 kN·m", section=text).diagnostics == ()


@pytest.mark.parametrize("name", ["τ_max", "σ_vM_max", "q_web"])
def test_results_of_shear_without_shear(name: str) -> None:
    (fault,) = stress("M = 1 kN·m", working=(f"x = s.{name}",)).diagnostics
    assert fault.code == "no-such-result"
    assert "forces" in fault.message


@pytest.mark.parametrize("name", ["web", "q_web", "τ_max"])
def test_a_point_may_not_hide_a_part_or_its_flow(name: str) -> None:
    text = section("part web = rectangle(b = 20 mm, h = 200 mm)")
    calc = stress("V = 1 kN", f"point {name} = (0 mm, 0 mm)", section=text)
    assert [d.code for d in calc.diagnostics] == ["name-hides-result"]


def test_premises_of_shear_and_torsion() -> None:
    premises = {p.premise: p.verdict for p in stress("V = 1 kN", "T = 1 kN·m", section=RECTANGLE).premises}
    assert premises["shear through the shear centre"] == "left to judgement"
    assert premises["free warping"] == "left to judgement"


@pytest.mark.parametrize(
    "shape",
    ["rectangle(b = 50 mm, h = 100 mm)", "circle(d = 50 mm)", "trapezium(b_t = 2 cm, b_b = 6 cm, h = 8 cm)"],
)
def test_torsion_without_walls_has_a_second_route(shape: str) -> None:
    calc = stress("T = 1 kN·m", section=section(f"shape = {shape}"))
    rows = {r.what for r in calc.second_route if r.of == "s"}
    assert {"T", "torsion constant"} <= rows
    assert all(r.holds for r in calc.second_route)
