"""Beam blocks: results by name, span, place and group; premises; faults."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import Premise
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, evaluated, fence, shown

SIMPLE = ("span = 6 m", "EI = 20000 kN·m^2", "load G uniform 10 kN/m")
TWO = (
    "span = 5 m, 5 m",
    "EI = 20000 kN·m^2",
    "case G permanent",
    "case Q imposed",
    "load G uniform 2 kN/m",
    "load Q uniform 8 kN/m from 0 m to 5 m",
    "combination U1 in ULS = 1.35*G + 1.5*Q",
    "combination U2 in ULS = 1.0*G + 1.5*Q",
    "combination SLS = G + Q",
)


def beam(*lines: str, working: tuple[str, ...] = (), before: str = "") -> EvaluatedCalc:
    (calc,) = evaluated("# T\n" + before + fence("beam b", *lines) + fence("working", *working))
    return calc


def result(calc: EvaluatedCalc) -> BeamResult:
    return next(s for s in calc.segments if isinstance(s, BeamResult))


@pytest.mark.parametrize(
    ("name", "text"),
    [  # closed forms of the simply supported beam: w·L²/8, w·L/2, 5·w·L⁴/(384·EI), w·L³/(24·EI)
        ("M_max", "45.00 kN·m"),
        ("M_min", "0 kN·m"),
        ("M_abs", "45.00 kN·m"),
        ("x_M_max", "3.000 m"),
        ("V_max", "30.00 kN"),
        ("V_min", "−30.00 kN"),
        ("V_abs", "30.00 kN"),
        ("w_max", "8.438 mm"),
        ("x_w_max", "3.000 m"),
        ("R_1", "30.00 kN"),
        ("R_2", "30.00 kN"),
        ("R_2_max", "30.00 kN"),
        ("M(1.5 m)", "33.75 kN·m"),
        ("V(1.5 m)", "15.00 kN"),
        ("w(3 m)", "8.438 mm"),
        ("slope(0 m)", "0.004500"),
        ("M_max(1.5 m)", "33.75 kN·m"),
        ("span_1.M_max", "45.00 kN·m"),
        ("θ_1", "0.004500"),
        ("theta_2", "−0.004500"),
        ("θ_2_max", "−0.004500"),
        ("x_V_0", "3.000 m"),
        ("x_V_0_1", "3.000 m"),
        ("w_rel_max", "8.438 mm"),
        ("x_w_rel_max", "3.000 m"),
        ("C_b", "1.136"),  # 12.5/(2.5 + 3·0.75 + 4 + 3·0.75), a parabola
        ("C_b(0 m, 3 m)", "1.299"),  # 12.5/(2.5 + 3·7/16 + 4·3/4 + 3·15/16)
        ("C_1", "1.136"),  # sqrt(35/(1 + 9·9/16 + 16 + 9·9/16))
    ],
)
def test_result_of_a_beam_without_combinations(name: str, text: str) -> None:
    calc = beam(*SIMPLE, working=(f"x = b.{name}",))
    assert codes(calc) == []
    assert shown(calc, "x") == text


@pytest.mark.parametrize(
    ("name", "text"),
    [  # two equal spans under w over both: M_B = -w·L²/8; under w on one: -w·L²/16
        ("SLS.M_min", "−18.75 kN·m"),
        ("SLS.M(5 m)", "−18.75 kN·m"),
        ("U1.M_min", "−27.19 kN·m"),
        ("ULS.M_min", "−27.19 kN·m"),
        ("ULS.M_max(5 m)", "−25.00 kN·m"),  # -1.0·6.25 - 1.5·12.5
        ("ULS.R_3_max", "1.313 kN"),  # 1.35·2·5·3/8 - 1.5·8·5/16
        ("ULS.R_3_min", "0 kN"),  # 1.0·3.75 - 3.75
        ("ULS.span_2.M_min", "−27.19 kN·m"),
        # SLS: R_1 = 10·5/2 - 18.75/5 = 21.25 kN, so M = 0 at 2·21.25/10 m
        ("SLS.span_1.x_M_0", "4.250 m"),
        ("SLS.x_M_0_2", "8.750 m"),  # R_3 = 2·5/2 - 18.75/5 = 1.25 kN: 2·1.25/2 m before the end
        ("SLS.span_1.x_V_0", "2.125 m"),
        ("SLS.x_V_0_1", "2.125 m"),
        ("SLS.θ_2", "−0.001042"),  # the right span: 2·5³/(24·EI) - 18.75·5/(3·EI)
        ("ULS.span_1.C_b", "1.228"),  # U2: 12.5·32.14/(2.5·32.14 + 3·26.56 + 4·31.25 + 3·14.06)
    ],
)
def test_result_of_combinations_and_groups(name: str, text: str) -> None:
    calc = beam(*TWO, working=(f"x = b.{name}",))
    assert codes(calc) == []
    assert shown(calc, "x") == text
    assert all(r.holds for r in calc.second_route)


@pytest.mark.parametrize(
    ("name", "code"),
    [
        ("M_max", "no-such-result"),  # of which combination?
        ("UlS.M_max", "no-such-result"),
        ("ULS.R_1", "no-such-result"),  # several states
        ("ULS.M(2 m)", "no-such-result"),
        ("ULS", "no-such-result"),
        ("SLS.span_3.M_max", "no-such-result"),
        ("SLS.R_9", "no-such-result"),
        ("SLS.M(99 m)", "no-such-result"),
        ("SLS.M(3 kN)", "no-such-result"),
        ("SLS.M_mx", "no-such-result"),
        ("SLS.M_max_lat", "no-such-result"),  # EI about the horizontal axis alone
        ("SLS.x_M_0_3", "no-such-result"),  # M changes sign twice
        ("SLS.x_M_0", "no-such-result"),  # which of the two?
        ("SLS.x_V_0", "no-such-result"),  # three of them
        ("ULS.x_M_0", "no-such-result"),  # several states
        ("ULS.θ_1", "no-such-result"),
        ("SLS.θ_4", "no-such-result"),
        ("SLS.C_b", "no-such-result"),  # of which span?
        ("SLS.C_b(3 m)", "no-such-result"),
        ("SLS.C_b(3 m, 3 m)", "no-such-result"),
        ("SLS.C_b(3 m, 99 m)", "no-such-result"),
        ("SLS.w_rel_max(3 m)", "no-such-result"),
    ],
)
def test_results_that_are_not_there(name: str, code: str) -> None:
    calc = beam(*TWO, working=(f"x = b.{name}",))
    assert codes(calc) == [code]
    assert calc.diagnostics[0].hint or name.endswith("(99 m)") or "span_3" in name


@pytest.mark.parametrize(
    ("lines", "code"),
    [
        (("EI = 1 kN·m^2", "load G uniform 1 kN/m"), "span-missing"),
        (("span = 0 m", "EI = 1 kN·m^2", "load G uniform 1 kN/m"), "not-positive"),
        (("span = 6 m", "load G uniform 1 kN/m"), "stiffness-missing"),
        (("span = 6 m", "EI = 1 kN·m^2"), "load-missing"),
        ((*SIMPLE, "load Q point 3 kN at 7 m"), "outside-beam"),
        ((*SIMPLE, "load Q uniform 3 kN/m from 4 m to 2 m"), "no-length"),
        ((*SIMPLE, "load Q uniform 3 kN"), "wrong-dimension"),
        ((*SIMPLE, "load Q uniform 3 kg/m"), "wrong-dimension"),
        ((*SIMPLE, "load Q self_weight 78.5 kN/m^3"), "section-missing"),
        ((*SIMPLE, "support pin at 1 m"), "unstable"),
        ((*SIMPLE, "hinge at 3 m"), "unstable"),
        ((*SIMPLE, "hinge at 6 m"), "hinge-at-end"),
        ((*SIMPLE, "support pin at 0 m", "support roller at 0 m"), "two-supports"),
        ((*SIMPLE, "EI = 3 kN·m^2"), "written-twice"),
        ((*SIMPLE, "combination C1 = 1.35*P"), "unknown-case"),
        ((*SIMPLE, "combination M_max = G"), "name-hides-result"),
        ((*SIMPLE, "load M_max uniform 1 kN/m"), "name-hides-result"),
        ((*SIMPLE, "shear_deformation = yes"), "stiffness-missing"),
        ((*SIMPLE, "GA_s = 3 MN from 1 m to 2 m"), "stiffness-missing"),
        ((*SIMPLE, "GA_s = 0 kN"), "not-positive"),
        ((*SIMPLE, "GA_s = 3 MPa"), "wrong-dimension"),
        ((*SIMPLE, "G = -1 GPa"), "not-positive"),
        ((*SIMPLE, "GA_s = 3 MN", "GA_s = 3 MN from 2 m to 2 m"), "no-length"),
        (
            (*SIMPLE, "GA_s = 3 MN", "GA_s = 3 MN from 1 m to 3 m", "GA_s = 3 MN from 2 m to 4 m"),
            "stretches-overlap",
        ),
        ((*SIMPLE, "shear_deformation = 3"), "not-yes-or-no"),
        ((*SIMPLE, "expansion = 12e-6 1/K", "load C gradient 15 K"), "section-missing"),
        ((*SIMPLE, "expansion = 12e-6"), "wrong-dimension"),
    ],
)
def test_fault(lines: tuple[str, ...], code: str) -> None:
    calc = beam(*lines, working=("x = b.M_max",))
    assert set(codes(calc)) == {code}
    assert calc.standing == "in error"


def test_an_unstable_beam_is_described() -> None:
    message = beam(*SIMPLE, "hinge at 3 m").diagnostics[0].message
    assert message.replace("\u00a0", " ") == (
        "the stretch between 0 m and 3 m can rotate: a hinge at 3 m; that between 3 m and 6 m moves with it"
    )


def test_an_unused_case_is_a_warning() -> None:
    calc = beam(*SIMPLE, "load Q uniform 3 kN/m", "combination C1 = 1.35*G")
    assert codes(calc) == ["case-unused"]
    assert calc.standing == "no checks"


def test_a_permanent_load_that_relieves_is_a_warning_until_it_is_taken_at_one() -> None:
    lines = (
        *SIMPLE,
        "case G permanent",
        "load Q point -100 kN at 3 m",
        "combination U1 in ULS = 1.35*G + 1.5*Q",
    )
    assert codes(beam(*lines)) == ["relieving-permanent"]
    assert codes(beam(*lines, "combination U2 in ULS = 1.0*G + 1.5*Q")) == []


def test_settlement_belongs_to_its_case() -> None:
    calc = beam(
        "span = 5 m, 5 m",
        "EI = 17547.6 kN·m^2",
        "support pin at 0 m",
        "support roller at 5 m settles 15 mm in S",
        "support roller at 10 m",
        "combination C1 = S",
        working=("M = b.C1.M(5 m)",),
    )
    assert codes(calc) == []
    assert shown(calc, "M") == "31.59 kN·m"  # 3·EI·Δ/L²


SECTION = fence("section angle_bar", "shape = angle(h = 150 mm, b = 90 mm, t = 12 mm)")


def test_a_section_off_its_principal_axes_deflects_sideways_unless_restrained() -> None:
    lines = (
        "span = 2 m",
        "section = angle_bar",
        "E = 210 GPa",
        "support fixed at 0 m",
        "load G point 2 kN at 2 m",
    )
    free = beam(*lines, working=("x = b.w_abs_lat", "y = b.w_max"), before=SECTION)
    held = beam(*lines, "restrained = yes", working=("x = b.w_abs_lat", "y = b.w_max"), before=SECTION)
    assert codes(free) == codes(held) == []
    by_name = {n: v[0].si for n, v in free.values.items()}  # type: ignore[union-attr]
    assert by_name["x"] > 0
    assert held.values["x"][0].si == 0  # type: ignore[union-attr]
    assert held.values["y"][0].si < by_name["y"]  # type: ignore[union-attr]


def test_a_large_sideways_deflection_is_out_of_premise() -> None:
    section = fence("section zed", "shape = zed(h = 200 mm, b = 70 mm, t = 2 mm)")
    lines = ("span = 6 m", "section = zed", "E = 210 GPa", "load G uniform 2.5 kN/m")
    (calc,) = evaluated("# T\n\n" + section + fence("beam b", *lines))
    (premise,) = (p for p in calc.premises if p.premise == "small deflections")
    assert premise.verdict == "not met"  # 102 mm down, more than 1/50 of 6 m sideways
    assert "sideways" in premise.detail


def test_premises() -> None:
    deep = fence("section wide", "shape = rectangle(b = 100 mm, h = 800 mm)")
    calc = beam("span = 4 m", "section = wide", "E = 11 GPa", "load G uniform 1 kN/m", before=deep)
    verdicts = {p.premise: p.verdict for p in calc.premises}
    assert verdicts["plane sections, shear deflection negligible"] == "not met"
    assert verdicts["restraint against lateral buckling"] == "left to judgement"
    assert verdicts["small deflections"] == "met"


def test_a_stretch_of_its_own_stiffness() -> None:
    calc = beam(
        "span = 2 m",
        "EI = 1000 kN·m^2",
        "EI = 2000 kN·m^2 from 0 m to 1 m",
        "support fixed at 0 m",
        "load G point 3 kN at 2 m",
        working=("w = b.w(2 m)",),
    )
    # P/3·(L³ - a³)/EI_1 + P/3·a³/EI_2 with a the outer part: (8 - 1)/2000 + 1/1000 kN·m³ units
    assert codes(calc) == []
    assert shown(calc, "w") == "4.500 mm"


def test_one_modulus_for_the_whole_beam() -> None:
    section = fence("section s", "shape = rectangle(b = 100 mm, h = 200 mm)")
    calc = beam(
        "span = 2 m", "section = s", "E = 10 GPa from 0 m to 1 m", "load G uniform 1 kN/m", before=section
    )
    assert codes(calc) == ["no-stretch"]


@pytest.mark.parametrize(
    ("support", "found"),
    [
        ("support roller at 5 m settles 15 mm", ["unknown-case"]),  # it would be in no combination
        ("support roller at 5 m settles 15 mm in S", ["case-unused"]),
    ],
)
def test_a_settlement_that_no_combination_has_is_said(support: str, found: list[str]) -> None:
    lines = (
        "span = 5 m, 5 m",
        "EI = 17547.6 kN·m^2",
        "support pin at 0 m",
        support,
        "support roller at 10 m",
    )
    assert codes(beam(*lines, "load G uniform 10 kN/m", "combination C1 = G")) == found
    together = beam(*lines[:3], "support roller at 5 m settles 15 mm", lines[4], "load G uniform 10 kN/m")
    assert codes(together) == []  # without combinations all acts together


def test_a_lateral_support_takes_the_place_of_the_other_in_its_plane() -> None:
    section = fence("section s", "shape = rectangle(b = 100 mm, h = 200 mm)")
    calc = beam(
        "span = 2 m",
        "section = s",
        "E = 10 GPa",
        "support pin at 0 m",
        "support lateral fixed at 0 m",
        "support pin at 2 m",
        "load H lateral uniform 8 kN/m",
        "load G uniform 8 kN/m",
        working=("a = b.M_R_1_lat", "m = b.M_min", "n = b.M_min_lat"),
        before=section,
    )
    assert codes(calc) == []
    assert shown(calc, "m") == "0 kN·m"  # pinned in the vertical plane
    assert shown(calc, "n") == "−4.000 kN·m"  # w·L²/8, fixed in the lateral one
    assert len(result(calc).model.supports) == 2


def test_an_unrestrained_rolled_angle_bends_by_one_consistent_set_of_values() -> None:
    section = fence("section s", 'shape = rolled("L6x4x1/2")')
    lines = ("span = 2 m", "section = s", "E = 200 GPa", "support fixed at 0 m", "load G point 1 kN at 2 m")
    calc = beam(*lines, working=("w = b.w(2 m)", "v = b.w_lat(2 m)"), before=section)
    own = next(s for s in calc.segments if getattr(s, "name", "") == "s").computed  # type: ignore[union-attr]
    factor = 1e3 * 2.0**3 / (3 * 200e9 * (own.I_h * own.I_v - own.I_hv**2))
    w, v = (calc.values[n][0].si for n in ("w", "v"))  # type: ignore[union-attr]
    assert w == pytest.approx(factor * own.I_v, rel=1e-9)  # P·L³/(3E) times the inverse of the matrix
    assert v == pytest.approx(factor * own.I_hv, rel=1e-9)


def test_a_fault_of_the_spans_hides_no_fault_of_the_section() -> None:
    calc = beam("span = 0 m", "section = mian", "E = 3 kN", "load G uniform 1 kN/m")
    assert codes(calc) == ["not-positive", "not-a-section", "wrong-dimension"]


TIMBER = fence("section s", "shape = rectangle(b = 100 mm, h = 400 mm)")
DEEP = ("span = 3 m", "section = s", "E = 11 GPa", "load Q uniform 8 kN/m")


def si(calc: EvaluatedCalc, name: str) -> float:
    value = calc.values[name][0]
    assert isinstance(value, Measure)
    return value.si


def shear_premise(calc: EvaluatedCalc) -> Premise:
    return next(p for p in calc.premises if "shear" in p.premise)


BENDING = 5 * 8e3 * 3.0**4 / (384 * 11e9 * 0.1 * 0.4**3 / 12)  # 5·q·L⁴/(384·EI)
SHEAR = 8e3 * 3.0**2 / (8 * 0.69e9 * 0.1 * 0.4 * 5 / 6)  # q·L²/(8·G·A_s), A_s = 5/6·b·h about


@pytest.mark.parametrize(
    ("lines", "w", "premise", "verdict", "says"),
    [
        ((), BENDING, "negligible", "not met", "the shear modulus G is not given"),
        (("G = 0.69 GPa",), BENDING + SHEAR, "included", "met", "included without being asked for"),
        (("G = 0.69 GPa", "shear_deformation = yes"), BENDING + SHEAR, "included", "met", "21"),
        (("G = 0.69 GPa", "shear_deformation = no"), BENDING, "negligible", "not met", "27"),
        (("GA_s = 23 MN",), BENDING + SHEAR, "included", "met", "as GA_s is given"),
        (("GA_s = 23 MN", "shear_deformation = no"), BENDING, "negligible", "not met", "left out"),
    ],
)
def test_shear_deformation(lines: tuple[str, ...], w: float, premise: str, verdict: str, says: str) -> None:
    """A deep beam: it is included where its stiffness is known, unless the block forbids it."""
    calc = beam(*DEEP, *lines, working=("w = b.w_max",), before=TIMBER)
    assert codes(calc) == []
    assert si(calc, "w") == pytest.approx(w, rel=2e-3)  # A_s depends on Poisson's ratio a little
    found = shear_premise(calc)
    assert found.premise.endswith(premise)
    assert (found.verdict, says in found.detail) == (verdict, True)
    assert all(r.holds for r in calc.second_route)


def test_a_slender_beam_leaves_shear_out_and_says_how_much_it_is() -> None:
    slender = ("span = 9 m", *DEEP[1:], "G = 0.69 GPa")
    calc = beam(*slender, working=("w = b.w_max",), before=TIMBER)
    assert si(calc, "w") == pytest.approx(81 * BENDING, rel=1e-9)
    found = shear_premise(calc)
    assert found.verdict == "met"
    assert "3.0\u00a0% larger" in found.detail  # 81·bending, 9·shear: a ninth of 27 %
    web = fence("section s", "shape = i_shape(h = 400 mm, b = 300 mm, t_w = 3 mm, t_f = 30 mm)")
    soft = shear_premise(beam("span = 5 m", *slender[1:3], "G = 4 GPa", DEEP[3], before=web))
    assert soft.verdict == "not met"  # slender enough, but more than a twentieth


def test_shear_that_is_asked_for_and_not_known() -> None:
    calc = beam(*DEEP, "shear_deformation = yes", before=TIMBER)
    assert codes(calc) == ["setting-missing"]
    assert "G = 81 GPa" in calc.diagnostics[0].hint
    apart = fence(
        "section s",
        "part a = rectangle(b = 9 mm, h = 9 mm) at (0 mm, 0 mm)",
        "part c = rectangle(b = 9 mm, h = 9 mm) at (0 mm, 50 mm)",
    )
    pieces = beam(*DEEP, "G = 81 GPa", "shear_deformation = yes", before=apart)
    assert codes(pieces) == ["stiffness-missing"]
    assert "no shear connects" in pieces.diagnostics[0].message


def test_shear_stiffness_of_a_stretch() -> None:
    """A tip load on a cantilever: P·L³/(3·EI) + P·(a/GA_1 + b/GA_2)."""
    calc = beam(
        "span = 2 m",
        "EI = 1000 kN·m^2",
        "GA_s = 2 MN",
        "GA_s = 1 MN from 0.5 m to 1.5 m",
        "support fixed at 0 m",
        "load G point 3 kN at 2 m",
        working=("w = b.w(2 m)", "a = b.slope_max(0 m)", "t = b.θ_1"),
    )
    assert codes(calc) == []
    assert si(calc, "w") == pytest.approx(3e3 * 8 / 3e6 + 3e3 * (1 / 2e6 + 1 / 1e6), rel=1e-10)
    assert si(calc, "a") == pytest.approx(3e3 / 2e6, rel=1e-10)  # the axis leaves the wall with a slope
    assert si(calc, "t") == 0.0  # the wall holds the section
    assert [r.name for r in result(calc).settings if r.name.startswith("GA_s")] == [
        "GA_s_1",
        "GA_s_2",
        "GA_s_3",
    ]


def test_a_gradient_of_temperature() -> None:
    """α·ΔT/h bows a simple span up by L²/8 of it, and makes fixed ends sag with EI times it."""
    free = 5e-6 * 20 / 0.4
    lines = ("span = 3 m", "section = s", "E = 11 GPa", "expansion = 5e-6 1/K", "case C temperature")
    simple = beam(
        *lines,
        "case G permanent",
        "load C gradient 20 K",
        "load G uniform 1 kN/m",
        "combination S1 = 0.6*C",
        "combination S2 = G",
        working=("w = b.S1.w_min", "m = b.S1.M_abs"),
        before=TIMBER,
    )
    assert codes(simple) == []
    assert si(simple, "w") == pytest.approx(-0.6 * free * 3.0**2 / 8, rel=1e-10)
    assert si(simple, "m") == 0.0
    assert result(simple).loads[0].text.replace("\u00a0", " ") == (
        "20.00 K, top warmer than bottom, over the whole beam"
    )
    fixed = beam(
        *lines,
        "support fixed at 0 m",
        "support fixed at 3 m",
        "load C gradient 20 K from 0 m to 3 m",
        working=("m = b.M_max",),
        before=TIMBER,
    )
    assert codes(fixed) == []
    assert si(fixed, "m") == pytest.approx(11e9 * 0.1 * 0.4**3 / 12 * free, rel=1e-10)
    assert all(r.holds for r in (*simple.second_route, *fixed.second_route))


def test_a_difference_of_temperature_is_no_temperature() -> None:
    calc = beam(*DEEP, "expansion = 5e-6 1/K", "load C gradient 15 °C", before=TIMBER)
    assert codes(calc) == ["wrong-dimension"]
    assert calc.diagnostics[0].hint == "write the difference in K"


@pytest.mark.parametrize(
    ("lines", "code"),
    [
        (("load C gradient 15 K",), "setting-missing"),
        (("load C gradient 15 kN", "expansion = 5e-6 1/K"), "wrong-dimension"),
        (("load C gradient 15 K", "expansion = 5e-6"), "wrong-dimension"),
        (("load C gradient 15 K from 2 m to 1 m", "expansion = 5e-6 1/K"), "no-length"),
    ],
)
def test_a_gradient_at_fault(lines: tuple[str, ...], code: str) -> None:
    assert codes(beam(*DEEP, *lines, before=TIMBER)) == [code]


def test_a_gradient_takes_the_depth_of_each_stretch() -> None:
    sections = TIMBER + fence("section t", "shape = rectangle(b = 100 mm, h = 200 mm)")
    calc = beam(
        "span = 2 m",
        "section = s",
        "section = t from 1 m to 2 m",
        "E = 11 GPa",
        "expansion = 1e-5 1/K",
        "support fixed at 0 m",
        "load C gradient 20 K",
        working=("a = b.slope(2 m)",),
        before=sections,
    )
    assert codes(calc) == []
    assert si(calc, "a") == pytest.approx(1e-5 * 20 * (1 / 0.4 + 1 / 0.2), rel=1e-10)


def test_deflection_from_the_chord_leaves_out_what_the_supports_give() -> None:
    calc = beam(
        "span = 6 m, 2 m",
        "EI = 20000 kN·m^2",
        "support pin at 0 m",
        "support roller at 6 m settles 30 mm",
        "load G uniform 10 kN/m from 0 m to 6 m",
        working=("w = b.span_1.w_rel_max", "x = b.w_rel_max", "y = b.w_max"),
    )
    assert codes(calc) == []
    assert shown(calc, "w") == shown(calc, "x") == "8.438 mm"  # 5·w·L⁴/(384·EI)
    assert si(calc, "y") > 30e-3
    cantilever = beam(
        "span = 2 m",
        "EI = 9 kN·m²",
        "support fixed at 0 m",
        "load G point 1 N at 2 m",
        working=("w = b.w_rel_max",),
    )
    assert codes(cantilever) == ["no-such-result"]


def test_the_smallest_moment_shape_factor_of_a_group_governs() -> None:
    """A uniform load has 1.14, equal end couples 1."""
    lines = (
        "span = 6 m",
        "EI = 20000 kN·m^2",
        "load G uniform 10 kN/m",
        "load W moment 5 kN·m at 0 m",
        "load W moment -5 kN·m at 6 m",
        "combination A in ULS = G",
        "combination B in ULS = W",
    )
    calc = beam(*lines, working=("a = b.A.C_b", "c = b.B.C_b", "d = b.ULS.C_b"))
    assert codes(calc) == []
    assert (shown(calc, "a"), shown(calc, "c"), shown(calc, "d")) == ("1.136", "1", "1")


def test_a_combination_may_be_called_as_a_factor_is() -> None:
    calc = beam(*SIMPLE, "combination C_1 = G", working=("a = b.C_1.C_1",))
    assert codes(calc) == []


def test_what_results_json_lists_beside_the_table() -> None:
    (group, *_) = [g for g in result(beam(*TWO)).groups if g.name == "SLS"]
    names = {r.name for r in group.further}
    assert {
        "θ_1",
        "θ_2",
        "θ_3",
        "x_M_0_1",
        "x_V_0_1",
        "span_2.M_max",
        "span_1.C_b",
        "span_2.C_1",
    } <= names
    assert not {n for n in names if "w_rel" in n}  # no support moves: w itself
    (group, *_) = [g for g in result(beam(*TWO)).groups if g.name == "ULS"]
    names = {r.name for r in group.further}
    assert {"θ_1_max", "θ_3_min", "span_2.M_max"} <= names
    assert not {n for n in names if n.startswith("x_")}  # of which state?


@pytest.mark.parametrize(
    "moves",
    [
        ("support pin at 0 m", "support spring 2 kN/mm at 6 m"),
        ("support pin at 0 m", "support roller at 6 m settles 5 mm in G"),
        ("support pin at 0 m", "support roller at 4 m"),  # the overhang has no chord
    ],
)
def test_deflections_from_the_chord_are_listed_where_they_are_others(moves: tuple[str, ...]) -> None:
    lines = ("span = 6 m", "EI = 20000 kN·m^2", *moves, "load G uniform 10 kN/m")
    (group,) = result(beam(*lines)).groups
    assert {"w_rel_max", "w_rel_min"} <= {r.name for r in group.further}


def test_shape_factors_are_listed_of_spans_from_support_to_support() -> None:
    (group,) = result(beam("span = 6 m", "EI = 20000 kN·m^2", "load G uniform 10 kN/m")).groups
    meanings = {r.name: r.meaning for r in group.further}
    assert meanings["C_b"] == (
        "moment shape factor of span 1 between its supports, AISC 360-16 equation F1-1"
    )
    fixed = ("span = 6 m", "EI = 20000 kN·m^2", "support fixed at 0 m", "load G uniform 10 kN/m")
    (group,) = result(beam(*fixed)).groups
    assert not {r.name for r in group.further} & {"C_b", "C_1"}  # a cantilever
