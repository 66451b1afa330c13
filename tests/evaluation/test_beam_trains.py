"""Trains and patterns of beam blocks: results by name, what they say of their cause, faults, figures."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.common import Result
from calcgen.figures.adapt_beam import beam_drawings
from calcgen.figures.beam_loads import PointLoad
from calcgen.quantities.display import Style
from calcgen.quantities.measure import Measure
from tests.evaluation.helpers import codes, evaluated, fence, shown

TRAIN = ("span = 12 m", "EI = 90000 kN·m^2", "load T train 80 kN, 80 kN spaced 3 m")
PATTERN = ("span = 5 m, 5 m, 5 m", "EI = 20000 kN·m^2", "load Q uniform 8 kN/m", "pattern Q")
ALL = (
    "span = 5 m, 5 m",
    "EI = 20000 kN·m^2",
    "support pin at 0 m",
    "support roller at 5 m",
    "support roller at 9 m",
    "case G permanent",
    "load G uniform 4 kN/m",
    "load Q uniform 8 kN/m",
    "load T train 60 kN, 20 kN spaced 2 m",
    "pattern Q",
    "combination U1 in ULS = 1.35*G + 1.5*Q + 1.5*T",
    "combination U2 in ULS = 1.0*G + 1.5*Q + 1.5*T",
    "combination STATIC = G",
)
SECTION = fence("section s", 'shape = rolled("HEA 300")')
RUNWAY = ("span = 8 m", "section = s", "E = 210 GPa", "load C train 100 kN, 100 kN spaced 3 m lateral 0.1")


def beam(*lines: str, working: tuple[str, ...] = (), before: str = "") -> EvaluatedCalc:
    (calc,) = evaluated("# T\n" + before + fence("beam b", *lines) + fence("working", *working))
    return calc


def result(calc: EvaluatedCalc) -> BeamResult:
    return next(s for s in calc.segments if isinstance(s, BeamResult))


def places(calc: EvaluatedCalc, group: str = "") -> dict[str, str]:
    (found,) = (g for g in result(calc).groups if g.name == group)
    return {r.name: r.place.replace("\u00a0", " ") for r in found.results}


@pytest.mark.parametrize(
    ("name", "text"),
    [  # two axles P at a on L: P(2L - a)²/(8L), P(2 - a/L); elsewhere by influence ordinates
        ("M_max", "367.5 kN·m"),
        ("M_abs", "367.5 kN·m"),
        ("M_max(6 m)", "360.0 kN·m"),  # P(L/4 + (L/2 - a)/2)
        ("M_min(6 m)", "0 kN·m"),
        ("M_max(12 m)", "0 kN·m"),
        ("V_max", "140.0 kN"),
        ("V_max(6 m)", "60.00 kN"),  # P(1/2 + 1/4)
        ("R_1_max", "140.0 kN"),
        ("R_1_min", "0 kN"),
        ("span_1.M_max", "367.5 kN·m"),
        ("M_R_1_max", "0 kN·m"),
    ],
)
def test_result_of_a_train(name: str, text: str) -> None:
    calc = beam(*TRAIN, working=(f"x = b.{name}",))
    assert codes(calc) == []
    assert shown(calc, "x") == text
    assert calc.second_route
    assert all(r.holds for r in calc.second_route)


@pytest.mark.parametrize(
    ("name", "text"),
    [  # three equal spans: coefficients of q L² and q L, Schneider, Bautabellen, from memory
        ("span_1.M_max", "20.25 kN·m"),  # 0.10125, spans 1 and 3
        ("span_2.M_max", "15.00 kN·m"),  # 0.075, span 2
        ("M_min", "−23.33 kN·m"),  # -7/60, spans 1 and 2
        ("R_1_max", "18.00 kN"),  # 0.45
        ("R_2_max", "48.00 kN"),  # 1.2
        ("R_1_min", "−2.000 kN"),  # -0.05, span 2
    ],
)
def test_result_of_a_pattern(name: str, text: str) -> None:
    calc = beam(*PATTERN, working=(f"x = b.{name}",))
    assert codes(calc) == []
    assert shown(calc, "x") == text
    assert all(r.holds for r in calc.second_route)


def test_a_result_says_what_causes_it() -> None:
    by_name = places(beam(*TRAIN))
    assert by_name["M_max"] in (
        "at 5.250 m, T with its first axle at 5.25 m, running left",
        "at 5.250 m, T with its first axle at 8.25 m, running right",
        "at 6.750 m, T with its first axle at 6.75 m, running right",
        "at 6.750 m, T with its first axle at 3.75 m, running left",
    )
    assert by_name["M_min"] == ""
    patterned = places(beam(*PATTERN))
    assert patterned["M_min"] == "at 5.000 m, Q on spans 1 and 2"
    assert patterned["R_1_min"] == "Q on span 2"
    assert places(beam(*PATTERN[:2], "load Q uniform 8 kN/m from 0 m to 5 m", "pattern Q"))["R_1_min"] == (
        "without Q"
    )


def test_with_combinations_it_names_the_combination_and_the_overhang() -> None:
    calc = beam(*ALL, working=("y = b.STATIC.R_1", "z = b.STATIC.M(2 m)"))
    assert codes(calc) == []
    by_name = places(calc, "ULS")
    # The span line has two spans of 5 m; the supports make spans of 5 m and 4 m, and an overhang of 1 m.
    assert by_name["R_1_max"].startswith("U1, Q on span 1 and from 9 m to 10 m, T with its first axle")
    assert by_name["R_1_min"].startswith("U2, Q from 5 m to 9 m, T with its first axle")
    assert places(calc, "STATIC")["R_1"] == ""


@pytest.mark.parametrize(
    "name",
    ["R_1", "M(2 m)", "θ_1", "x_M_0", "C_b", "V(2 m)"],
)
def test_what_has_several_states_is_an_error(name: str) -> None:
    calc = beam(*TRAIN, working=(f"x = b.{name}",))
    assert codes(calc) == ["no-such-result"]
    assert "patterns and trains make many" in calc.diagnostics[0].message
    assert calc.diagnostics[0].hint


def test_on_rigid_supports_no_chord_moves() -> None:
    calc = beam(*PATTERN, working=("x = b.w_rel_max", "y = b.w_max", "z = b.span_2.x_w_rel_max"))
    assert codes(calc) == []
    assert shown(calc, "x") == shown(calc, "y")
    assert shown(calc, "z") == "7.500 m"


def test_a_support_that_gives_way_leaves_no_one_chord() -> None:
    lines = (*TRAIN, "support pin at 0 m", "support spring 5 kN/mm at 12 m")
    assert codes(beam(*lines, working=("x = b.w_max",))) == []
    assert codes(beam(*lines, working=("x = b.w_rel_max",))) == ["no-such-result"]


def test_the_rotation_at_a_support_is_the_slope_there() -> None:
    calc = beam(*TRAIN, working=("x = b.θ_1_max", "y = b.slope_max(0 m)", "z = b.slope_max"))
    assert codes(calc) == []
    assert shown(calc, "x") == shown(calc, "y") == shown(calc, "z")


@pytest.mark.parametrize(
    ("lines", "code", "place"),
    [
        ((*TRAIN, "pattern P"), "unknown-case", (6, 9)),
        ((*TRAIN, "pattern T"), "beam", (6, 9)),  # no load but the train
        ((*TRAIN, "case T permanent"), "beam", (5, 6)),
        ((*PATTERN, "case Q permanent"), "beam", (6, 9)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 8 kN, 8 kN spaced 0 m"), "not-positive", (5, 32)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 8 kN, 8 kN spaced -1 m"), "not-positive", (5, 32)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 0 kN"), "not-positive", (5, 14)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 8 kN/m"), "wrong-dimension", (5, 14)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 8 kN, 8 kN spaced 3 kN"), "wrong-dimension", (5, 32)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 8 kN lateral 3 kN"), "wrong-dimension", (5, 27)),
        (("span = 6 m", "EI = 1 kN·m^2", "load T train 8 kN lateral 0.1"), "beam", (5, 27)),
        (("span = 6 m", "EI = 1 kN·m^2", "load M_max train 8 kN"), "name-hides-result", (5, 6)),
        (
            (
                *TRAIN,
                "support pin at 0 m",
                "support pin at 12 m settles 3 mm in S",
                "load S point 3 kN at 2 m",
                "pattern S",
                "combination C = S + T",
            ),
            "beam",
            (9, 9),
        ),
    ],
)
def test_fault(lines: tuple[str, ...], code: str, place: tuple[int, int]) -> None:
    calc = beam(*lines)
    (found,) = calc.diagnostics
    assert (found.code, found.line, found.column) == (code, *place)


def test_a_train_that_no_combination_takes_is_a_warning() -> None:
    calc = beam(*TRAIN, "load G uniform 1 kN/m", "combination C = G")
    assert codes(calc) == ["case-unused"]


def test_a_lateral_share_acts_sideways() -> None:
    calc = beam(*RUNWAY, working=("x = b.M_max", "y = b.M_max_lat", "z = b.R_1_max_lat"), before=SECTION)
    assert codes(calc) == []
    assert shown(calc, "x") == "264.1 kN·m"  # P(2L - a)²/(8L)
    assert shown(calc, "y") == "26.41 kN·m"
    assert shown(calc, "z") == "16.25 kN"
    assert all(r.holds for r in calc.second_route)


def test_deflection_by_the_other_choice_about_shear_is_known() -> None:
    calc = beam(*RUNWAY, "G = 81 GPa", "shear_deformation = yes", before=SECTION)
    assert codes(calc) == []
    (detail,) = (p.detail for p in calc.premises if p.premise == "plane sections, shear deformation included")
    assert "smaller" in detail


def test_the_train_is_drawn_where_the_moment_is_largest() -> None:
    calc = beam(*RUNWAY, before=SECTION)
    upright, sideways = beam_drawings(result(calc), "b", Style("SI"))
    (case,) = upright.cases
    assert case.title == "C, train where it stands for the largest M"
    axles = [load for load in case.loads if isinstance(load, PointLoad)]
    assert [load.label.replace("\u00a0", " ") for load in axles] == ["100.0 kN", "100.0 kN"]
    assert abs(axles[0].x - axles[1].x) == pytest.approx(3)
    assert {round(load.x, 6) for load in axles} & {3.25, 4.75}  # L/2 ± a/4
    (lateral,) = sideways.cases
    assert lateral.title == "C, train where it stands for the largest M sideways"
    diagrams = {d.title: d for d in upright.diagrams}
    moment = diagrams["moment M"]
    assert moment.lower
    assert "max: C with its first axle at" in moment.note.replace("\u00a0", " ")


def test_a_patterned_case_says_so_in_the_figure() -> None:
    drawings = beam_drawings(result(beam(*PATTERN)), "b", Style("SI"))
    assert [case.title for case in drawings[0].cases] == ["Q, in patterns"]


def test_the_line_of_a_train_as_read() -> None:
    (row,) = result(beam(*RUNWAY, before=SECTION)).loads
    text = "100.0 kN, 100.0 kN spaced 3 m, 0.1 of each sideways, in both directions"
    assert row.text.replace("\u00a0", " ") == text


def test_two_trains_of_one_case_cross_independently() -> None:
    calc = beam(
        "span = 10 m, 10 m",
        "EI = 90000 kN·m^2",
        "load T train 10 kN",
        "load T train 10 kN",
        working=("x = b.R_2_max",),
    )
    assert codes(calc) == []
    assert shown(calc, "x") == "20.00 kN"  # both above the support
    assert places(calc)["R_2_max"] == "train 1 of T at 10 m, train 2 of T at 10 m"


def test_adding_a_train_of_factor_zero_changes_nothing() -> None:
    def values(*more: str) -> list[Result]:
        lines = ("span = 6 m", "EI = 1000 kN·m^2", "load G uniform 3 kN/m")
        return list(result(beam(*lines, *more)).groups[0].results)

    assert values("load T train 5 kN", "combination C = G + 0*T") == values("combination C = G")


QUANTITIES = ("M_max", "M_min", "V_max", "V_min", "w_max", "w_min", "R_1_max", "R_2_min", "span_2.M_max")


def test_a_pattern_is_the_worst_of_all_arrangements_written_out() -> None:
    spans = ("span = 4 m, 6 m, 5 m", "EI = 20000 kN·m^2", "load G uniform 3 kN/m")
    working = tuple(f"a{i} = b.U.{name}" for i, name in enumerate(QUANTITIES))
    found = beam(*spans, "load Q uniform 7 kN/m", "pattern Q", "combination U = G + 1.5*Q", working=working)
    parts = [
        f"load Q{i} uniform 7 kN/m from {a} m to {b} m" for i, a, b in ((1, 0, 4), (2, 4, 10), (3, 10, 15))
    ]
    combinations = [
        f"combination C{n} in U = " + " + ".join(["G", *(f"1.5*Q{i}" for i in (1, 2, 3) if n >> i & 1)])
        for n in range(0, 16, 2)
    ]
    wanted = beam(*spans, *parts, *combinations, working=working)
    assert codes(found) == codes(wanted) == []
    for i, _ in enumerate(QUANTITIES):
        a, b = (calc.values[f"a{i}"][0] for calc in (found, wanted))
        assert isinstance(a, Measure)
        assert isinstance(b, Measure)
        assert a.si == pytest.approx(b.si, rel=1e-9)


def test_a_train_is_the_worst_of_the_positions_written_out() -> None:
    spans = ("span = 4 m, 6 m", "EI = 20000 kN·m^2")
    axles = ((60, 0.0), (20, 2.0))
    positions = [0.5 * k for k in range(-4, 25)]
    loads: list[str] = []
    combinations: list[str] = []
    for sense in (1, -1):
        for k, x in enumerate(positions):
            case = f"P{k}{'r' if sense > 0 else 'l'}"
            on = [(p, x - sense * d) for p, d in axles if 0 <= x - sense * d <= 10]
            loads += [f"load {case} point {p} kN at {at} m" for p, at in on]
            combinations += [f"combination C_{case} in U = {case}"] if on else []
    # Reactions and moments at a place: piecewise cubic in the position, so a scan comes close from below.
    names = ("M_max(2 m)", "M_min(4 m)", "M_max(7 m)", "R_1_max", "R_2_max", "R_1_min")
    working = tuple(f"a{i} = b.U.{name}" for i, name in enumerate(names))
    found = beam(*spans, "load T train 60 kN, 20 kN spaced 2 m", "combination U = T", working=working)
    scanned = beam(*spans, *loads, *combinations, working=working)
    assert codes(found) == codes(scanned) == []
    for i, name in enumerate(names):
        a, b = (calc.values[f"a{i}"][0] for calc in (found, scanned))
        assert isinstance(a, Measure)
        assert isinstance(b, Measure)
        assert abs(a.si) >= abs(b.si) * (1 - 1e-9), name
        assert a.si == pytest.approx(b.si, rel=0.02), name


@pytest.mark.parametrize(
    "lines",
    [
        # An axle steps on or off the support whose reaction is meant.
        ("span = 6 m, 6 m", "load T train 20 kN, 30 kN, 20 kN spaced 8 m, 8 m"),
        (
            "span = 6 m, 2 m",
            "support pin at 0 m",
            "support pin at 6 m",
            "load T train 30 kN, 20 kN spaced 8 m",
        ),
        # An axle meets the place while another steps on the free end, but for the rounding of its distance.
        (
            "span = 3.75 m, 1.875 m",
            "EI = 120 MN*1 m*1 m from 2.125 m to 4.375 m",
            "support pin at 3.75 m",
            "support pin at 5.625 m",
            "load T train 5 kN, 43 kN, 45 kN, 10 kN, 71 kN spaced 1.5 m, 0.625 m, 2.125 m, 2.5 m",
        ),
    ],
)
def test_axles_that_coincide_are_found_again(lines: tuple[str, ...]) -> None:
    (calc,) = evaluated("# T\n\n" + fence("beam b", "EI = 40 MN*1 m*1 m", *lines))
    assert codes(calc) == []
    assert all(row.holds for row in calc.second_route)


def test_moments_along_the_beam_name_what_causes_them() -> None:
    (calc,) = evaluated("# T\n\n" + fence("beam b", *TRAIN))
    group = result(calc).groups[0]
    rows = {row.at: row for row in group.along()}
    assert len(rows) == 11
    # Two wheels P, a apart, the first at x of a simple span: P x (2 (L - x) - a)/L where both stand on it.
    for x, at in ((2.4, "2.400\xa0m"), (4.8, "4.800\xa0m")):
        moment = 80.0 * x * (2 * (12.0 - x) - 3.0) / 12.0
        assert rows[at].high.value.si == pytest.approx(moment * 1e3, rel=1e-12)
        assert rows[at].high.place.startswith("T with its first axle at")
    assert result(beam(*PATTERN)).groups[0].along() == ()
