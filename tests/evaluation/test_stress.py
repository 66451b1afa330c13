"""Stress blocks: results by hand, limit, premises, second route, faults."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results import EvaluatedCalc, StressResult
from tests.evaluation.helpers import codes, evaluated, fence, shown

RECTANGLE = fence("section main", "shape = rectangle(b = 100 mm, h = 200 mm)")


def stress(*lines: str, working: tuple[str, ...] = (), section: str = RECTANGLE) -> EvaluatedCalc:
    blocks = section + fence("stress s", "section = main", *lines) + fence("working", *working)
    (calc,) = evaluated(f"# T\n{blocks}")
    return calc


def result(calc: EvaluatedCalc) -> StressResult:
    return next(s for s in calc.segments if isinstance(s, StressResult))


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
    from calcgen.quantities.display import Style

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
        (("M = 1 kN·m", "V = 3 kN"), "not-available-yet"),
        (("M = 1 kN·m", "T = 3 kN·m"), "not-available-yet"),
        (("M = 1 kN·m", "model = plastic"), "not-available-yet"),
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
    [("κ", "modulus-missing"), ("τ_max", "not-available-yet"), ("sigma_mx", "no-such-result")],
)
def test_results_that_are_not_there(name: str, code: str) -> None:
    assert codes(stress("M = 1 kN·m", working=(f"x = s.{name}",))) == [code]


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
