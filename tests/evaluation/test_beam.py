"""Beam blocks: results by name, span, place and group; premises; faults."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results import BeamResult, EvaluatedCalc
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
        ((*SIMPLE, "load T train 80 kN, 40 kN spaced 2 m"), "not-available-yet"),
        ((*SIMPLE, "pattern G"), "not-available-yet"),
        ((*SIMPLE, "shear_deformation = yes"), "not-available-yet"),
    ],
)
def test_fault(lines: tuple[str, ...], code: str) -> None:
    calc = beam(*lines, working=("x = b.M_max",))
    assert set(codes(calc)) == {code}
    assert calc.standing == "in error"


def test_an_unstable_beam_is_described() -> None:
    message = beam(*SIMPLE, "hinge at 3 m").diagnostics[0].message
    assert "0\u00a0m and 6\u00a0m" in message
    assert "hinge at 3\u00a0m" in message


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
