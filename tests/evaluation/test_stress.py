"""Stress blocks: results by hand, limit, premises, second route, faults."""

from __future__ import annotations

import pytest

from calcgen.quantities.display import Style
from tests.evaluation.helpers import codes, evaluated, fence, shown
from tests.evaluation.stresses import RECTANGLE, parts, result, stress, values

MPA = 1e6


@pytest.mark.parametrize(
    ("lines", "name", "text"),
    [  # W = b·h²/6 = 666.7 cm³, A = 200 cm²
        (("M = 10 kN·m",), "σ_max", "15.00 MPa"),
        (("M = 10 kN·m",), "σ_bottom", "15.00 MPa"),  # sagging: tension at the bottom
        (("M = -10 kN·m",), "σ_bottom", "−15.00 MPa"),
        (("M_lat = 10 kN·m",), "σ_max", "30.00 MPa"),
        (("N = -40 kN",), "σ_min", "−2.000 MPa"),
        (("M = 10 kN·m", "N = 40 kN"), "σ_top", "−13.00 MPa"),
        (
            ("M = 10 kN·m", "N = 40 kN"),
            "na_depth",
            "−13.33 mm",
        ),  # depth down: the axis lies above the centroid
        (("M = 10 kN·m",), "na_depth", "0 mm"),
        (("M = 10 kN·m", "M_lat = 10 kN·m"), "σ_max", "45.00 MPa"),
        (("M = 10 kN·m", "M_lat = 10 kN·m"), "na_angle", "75.96 deg"),  # atan(I_y/I_z) = atan 4
        (("M = 10 kN·m", "E = 12 GPa"), "κ", "0.01250 1/m"),  # M/(E·I)
        (("M = 10 kN·m", "E = 12 GPa"), "R", "80.00 m"),
        (("M = 10 kN·m", "E = 12 GPa"), "ε_max", "0.001250"),
        (("M = 10 kN·m", "point p = (0 mm, 50 mm)"), "p", "−7.500 MPa"),
    ],
)
def test_result(lines: tuple[str, ...], name: str, text: str) -> None:
    calc = stress(*lines, working=(f"x = s.{name}",))
    assert codes(calc) == []
    assert shown(calc, "x") == text
    assert all(r.holds for r in calc.second_route)


def test_right_side_in_tension_under_positive_lateral_moment() -> None:
    found = result(stress("M_lat = 1 kN·m"))
    assert next(r.place for r in found.results if r.name == "σ_max") == "on the right"


def test_depth_up_turns_the_sign_of_the_depth_alone() -> None:
    text = "# T\n" + RECTANGLE + fence("stress s", "section = main", "M = 10 kN·m", "N = 40 kN")
    (calc,) = evaluated(text, style=Style(depth="up"))
    by_name = {r.name: r.shown.text for r in result(calc).results}
    assert by_name["na_depth"].startswith("13.33")
    assert by_name["σ_top"].startswith("−13.00")


@pytest.mark.parametrize(
    ("limit", "standing"), [("20 MPa", "satisfied"), ("15 MPa", "satisfied"), ("14 MPa", "exceeded")]
)
def test_limit_is_a_check_on_the_larger_magnitude(limit: str, standing: str) -> None:
    calc = stress("M = -10 kN·m", f"limit = {limit} | normal stress | [X]".replace(" | [X]", ""))
    assert calc.standing == standing
    assert calc.checks[0].label == "normal stress"
    assert calc.checks[0].origin == "s"


@pytest.mark.parametrize(
    ("f_y", "verdict"), [("20 MPa", "met"), ("10 MPa", "not met"), ("", "left to judgement")]
)
def test_linear_elastic_is_tested_against_the_strength(f_y: str, verdict: str) -> None:
    calc = stress("M = 10 kN·m", *([f"f_y = {f_y}"] if f_y else []))
    assert next(p.verdict for p in calc.premises if p.premise == "linear elastic") == verdict


@pytest.mark.parametrize(
    ("lines", "code"),
    [
        ((), "force-missing"),
        (("M = 10 kN",), "wrong-dimension"),
        (("M = 1 kN·m", "V = 3 kN·m"), "wrong-dimension"),
        (("M = 1 kN·m", "T = 3 kN"), "wrong-dimension"),
        (("M = 1 kN·m", "E = 3 kN"), "wrong-dimension"),
        (("M = 1 kN·m", "E = -3 GPa"), "not-positive"),
        (("M = 1 kN·m", "f_y = 3 kN/m"), "wrong-dimension"),
        (("M = 1 kN·m", "point p = (0 kN, 0 mm)"), "wrong-dimension"),
        (("M = 1 kN·m", "R_c = 1 kN", "centre = top", "model = curved"), "wrong-dimension"),
        (("M = 1 kN·m", "model = elasti"), "unknown-word"),
        (("M = 1 kN·m", "limit = 3 kN"), "wrong-dimension"),
        (("M = 1 kN·m", "limit = 0 MPa"), "not-positive"),
        (("M = 1 kN·m", "point σ_max = (0 mm, 0 mm)"), "name-hides-result"),
        (("M = 1 kN·m", "M = 2 kN·m"), "written-twice"),
    ],
)
def test_fault(lines: tuple[str, ...], code: str) -> None:
    assert codes(stress(*lines)) == [code]


@pytest.mark.parametrize(
    ("name", "code"),
    [
        ("κ", "modulus-missing"),
        ("ε_max", "modulus-missing"),
        ("τ_max", "no-such-result"),
        ("core", "no-such-result"),
        ("M_pl", "no-such-result"),
        ("x_c", "no-such-result"),
        ("r_n", "no-such-result"),
        ("p.σ", "no-such-result"),
        ("sigma_mx", "no-such-result"),
    ],
)
def test_results_that_are_not_there(name: str, code: str) -> None:
    assert codes(stress("M = 1 kN·m", working=(f"x = s.{name}",))) == [code]


def test_a_point_has_the_utilisation_of_the_limit() -> None:
    """σ = M·y/I at half the depth: 7.5 of 20 MPa."""
    found = values("M = 10 kN·m", "limit = 20 MPa", "point p = (0 mm, 50 mm)")
    assert found["p.utilisation"] == pytest.approx(7.5 / 20)


def test_a_point_outside_the_section_is_a_warning() -> None:
    calc = stress("M = 1 kN·m", "point p = (0 mm, 101 mm)", "point q = (50 mm, 100 mm)")
    assert codes(calc) == ["point-outside"]
    assert calc.standing == "no checks"


def test_a_shear_force_of_zero_is_none() -> None:
    assert codes(stress("M = 1 kN·m", "V = 0 kN", "V_lat = 0 kN", "T = 0 kN·m", "model = elastic")) == []


def test_a_section_that_is_not_there() -> None:
    (calc,) = evaluated("# T\n" + RECTANGLE + fence("stress s", "section = mian", "M = 1 kN·m"))
    assert codes(calc) == ["not-a-section"]
    assert "'main'" in calc.diagnostics[0].hint


# --- several materials ------------------------------------------------------------------------------------

PLATED = parts(
    "part wood = rectangle(b = 100 mm, h = 200 mm) of timber",
    "part plate = rectangle(b = 100 mm, h = 10 mm) at (0 mm, -105 mm) of steel",
)
A = 0.02 + 20 * 0.001
Y = -20 * 0.001 * 0.105 / A
I_h = 0.1 * 0.2**3 / 12 + 0.02 * Y**2 + 20 * (0.1 * 0.01**3 / 12 + 0.001 * (0.105 + Y) ** 2)


def test_stress_jumps_at_an_interface() -> None:
    """n = 20: the plate's stress is twenty times that of the timber which it touches."""
    lines = ("M = 10 kN·m", "point in_wood = (0 mm, -99 mm)", "point joint = (0 mm, -100 mm)")
    found = values(*lines, "point in_plate = (0 mm, -109 mm)", section=PLATED)
    at_joint = 10e3 * (0.1 + Y) / I_h
    assert found["wood.σ_max"] == pytest.approx(at_joint)
    assert found["plate.σ_min"] == pytest.approx(20 * at_joint)
    assert found["plate.σ_max"] == found["σ_max"] == pytest.approx(20 * 10e3 * (0.11 + Y) / I_h)
    assert found["wood.σ_min"] == found["σ_min"] == pytest.approx(-10e3 * (0.1 - Y) / I_h)
    assert found["joint"] == pytest.approx(20 * at_joint)  # on an interface, that of larger magnitude
    assert found["in_wood"] == pytest.approx(10e3 * (0.099 + Y) / I_h)
    assert found["in_plate"] == pytest.approx(20 * 10e3 * (0.109 + Y) / I_h)
    assert found["na_depth"] == 0.0  # at the transformed centroid
    assert found["κ"] == pytest.approx(10e3 / (10e9 * I_h))  # the moduli of the section are known
    assert found["ε_max"] == pytest.approx(found["σ_max"] / 200e9)


def test_axial_force_at_the_transformed_centroid_strains_all_alike() -> None:
    found = values("N = -40 kN", section=PLATED)
    assert found["wood.σ_max"] == found["wood.σ_min"] == pytest.approx(-40e3 / A)
    assert found["plate.σ_max"] == pytest.approx(-20 * 40e3 / A)


def test_bars_of_an_elastic_section_have_a_stress_of_their_own() -> None:
    """A_s counts n - 1 times, as the bars take the place of concrete."""
    text = parts(
        "part rib = rectangle(b = 300 mm, h = 500 mm) of timber",
        "bars low = 1500 mm² at (0 mm, -200 mm) of steel",
    )
    found = values("M = 50 kN·m", section=text)
    extra = 19 * 1.5e-3
    y = -extra * 0.2 / (0.15 + extra)
    I_h = 0.3 * 0.5**3 / 12 + 0.15 * y**2 + extra * (0.2 + y) ** 2
    assert found["low"] == pytest.approx(20 * 50e3 * (0.2 + y) / I_h)
    assert found["rib.σ_max"] == pytest.approx(50e3 * (0.25 + y) / I_h)


def test_a_result_of_a_part_is_read_by_its_name() -> None:
    calc = stress("M = 10 kN·m", working=("a = s.plate.σ_max",), section=PLATED)
    assert codes(calc) == []
    assert calc.values["a"][0].si == pytest.approx(20 * 10e3 * (0.11 + Y) / I_h)  # type: ignore[union-attr]


@pytest.mark.parametrize(
    ("name", "code"),
    [
        ("s.plate", "block-is-no-value"),
        ("s.plat.σ_max", "no-such-result"),
        ("s.plate.κ", "no-such-result"),
        ("s.plate.σ_max.x", "no-such-result"),
        ("s.σ_max(1 m)", "no-such-result"),
    ],
)
def test_names_of_parts_that_lead_nowhere(name: str, code: str) -> None:
    assert codes(stress("M = 1 kN·m", working=(f"x = {name}",), section=PLATED)) == [code]


def test_one_limit_for_several_materials_is_a_warning() -> None:
    calc = stress("M = 1 kN·m", "limit = 300 MPa", section=PLATED)
    assert codes(calc) == ["limit-of-composite"]
    assert "s.wood.σ_max" in calc.diagnostics[0].hint
    assert calc.standing == "satisfied"


def test_a_modulus_that_contradicts_the_section() -> None:
    (fault,) = stress("M = 1 kN·m", "E = 11 GPa", section=PLATED).diagnostics
    assert fault.code == "modulus-differs"
    assert "10.00" in fault.message
    assert codes(stress("M = 1 kN·m", "E = 10 GPa", section=PLATED)) == []


def test_a_point_beside_several_parts_is_an_error() -> None:
    (fault,) = stress("M = 1 kN·m", "point p = (0 mm, 300 mm)", section=PLATED).diagnostics
    assert (fault.code, fault.severity) == ("point-outside", "error")


@pytest.mark.parametrize(
    ("f_y", "verdict"), [("strength timber = 1 MPa", "not met"), ("", "left to judgement")]
)
def test_linear_elastic_is_tested_for_each_material(f_y: str, verdict: str) -> None:
    text = PLATED.replace("reference", f"strength steel = 300 MPa\n{f_y}\nreference")
    premises = {p.premise: p.verdict for p in stress("M = 10 kN·m", section=text).premises}
    assert premises["linear elastic"] == verdict
    assert premises["no slip between the parts"] == "left to judgement"


# --- signs, units, extremes -------------------------------------------------------------------------------


def test_us_units() -> None:
    """4 by 8 in: S = 42.67 in³; 64 kip-in make 1.5 ksi."""
    text = fence("section main", "shape = rectangle(b = 4 in, h = 8 in)")
    calc = stress(
        "M = 64 kip-in", "N = -32 kip", "V = 32 kip", "E = 1000 ksi", section=text, style=Style(system="US")
    )
    by_name = {r.name: r.shown.text.replace("\u00a0", " ") for r in result(calc).results}
    assert by_name["σ_max"] == "0.5000 ksi"
    assert by_name["σ_min"] == "−2.500 ksi"
    assert by_name["τ_max"] == "1.500 ksi"
    assert by_name["na_depth"] == "2.667 in"
    assert by_name["R"].endswith(" ft")


@pytest.mark.parametrize("size", ["e-12", "e-150", "e12"])
def test_forces_of_any_size(size: str) -> None:
    """Stresses are in proportion to forces of a size that nobody means, too."""
    for lines in (
        ("model = elastic",),
        ("model = no_tension",),
        ("model = elastic", "V = 1 N", "T = 1 N*1 m"),
    ):
        forces = [
            f"{key} = {value}{size} {unit}" for key, value, unit in (("N", -100, "N"), ("M", 5, "N*1 m"))
        ]
        found = values(*(line.replace("= 1 N", f"= 1{size} N") for line in lines), *forces)
        unit = values(*lines, "N = -100 N", "M = 5 N*1 m")
        assert found["σ_min"] == pytest.approx(unit["σ_min"] * float(f"1{size}"), rel=1e-9)


def test_a_foil_on_a_slant_has_no_stiffness() -> None:
    text = parts("part foil = rectangle(b = 0.0005 mm, h = 100 mm) turned 45 deg of timber")
    found = [d for d in stress("M = 1 kN·m", section=text).diagnostics if d.code == "no-stiffness"]
    assert len(found) == 1
    assert "0.0001443 mm" in found[0].label.replace("\u00a0", " ")  # 0.0005/√12


def test_a_section_thinner_than_a_millionth_of_its_size_is_refused() -> None:
    text = fence("section main", "shape = rectangle(b = 0.00009 mm, h = 100 mm)")
    faults = stress("M = 1 kN·m", section=text).diagnostics
    assert faults[0].code == "shape-does-not-fit"
    assert "millionth" in faults[0].message
