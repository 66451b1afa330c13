"""Combination sets of beam blocks: results by group and name, faults, warnings, page, results.json, trail."""

from __future__ import annotations

import pytest

from calcgen.evaluation.results.beam import BeamResult
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.figures.adapt_beam import beam_drawings
from calcgen.quantities.display import Style
from calcgen.site.blocks.beam_sets import factor_rows, set_view
from calcgen.site.results_json import _calc
from calcgen.trail.state import state_of
from tests.evaluation.helpers import codes, evaluated, fence, shown

SIMPLE = ("span = 8 m", "EI = 9000 kN·m²")
ROOF = (
    *SIMPLE,
    "case G permanent",
    "case S snow category low",
    "case W wind",
    "load G uniform 3 kN/m",
    "load S uniform 4 kN/m",
    "load W uniform -5 kN/m",
)
LOADS = ("load G uniform 3 kN/m", "load Q uniform 4 kN/m", "load W uniform -5 kN/m")
ULS = 'combinations ULS = "EN 1990 6.10"'


def beam(*lines: str, working: tuple[str, ...] = (), inputs: tuple[str, ...] = ()) -> EvaluatedCalc:
    (calc,) = evaluated(
        "# T\n" + fence("inputs", *inputs) + fence("beam b", *lines) + fence("working", *working)
    )
    return calc


def result(calc: EvaluatedCalc) -> BeamResult:
    return next(s for s in calc.segments if isinstance(s, BeamResult))


def factors(calc: EvaluatedCalc, group: str = "ULS") -> list[dict[str, float]]:
    (found,) = (each for each in result(calc).sets if each.group == group)
    return [dict(c.factors) for c in found.combinations]


# --- results ------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("standard", "name", "text"),
    [  # w L²/8 and w L/2 with the factors of the combination that governs, by hand
        ("EN 1990 6.10", "M_max", "80.40 kN·m"),  # 1.35 G + 1.5 S
        ("EN 1990 6.10", "M_min", "−36.00 kN·m"),  # 1.0 G + 1.5 W
        ("EN 1990 6.10", "R_1_max", "40.20 kN"),
        ("EN 1990 6.10a/b", "M_max", "75.54 kN·m"),  # 0.85·1.35 G + 1.5 S
        ("EN 1990 characteristic", "M_max", "56.00 kN·m"),
        ("EN 1990 characteristic", "M_min", "−16.00 kN·m"),
        ("EN 1990 frequent", "M_max", "30.40 kN·m"),  # ψ_1 of snow is 0.2
        ("EN 1990 frequent", "M_min", "0 kN·m"),  # ψ_1 of wind is 0.2: 3 - 1 > 0, and 0 at the ends
        ("EN 1990 quasi-permanent", "M_max", "24.00 kN·m"),
        ("ASCE 7-16 LRFD", "M_max", "80.00 kN·m"),  # 1.2 D + 1.6 S
        ("ASCE 7-16 LRFD", "M_min", "−18.40 kN·m"),  # 0.9 D + W
        ("ASCE 7-22 LRFD", "M_max", "60.80 kN·m"),  # 1.2 D + 1.0 S
        ("ASCE 7-16 ASD", "M_max", "56.00 kN·m"),
        ("ASCE 7-22 ASD", "M_max", "46.40 kN·m"),  # D + 0.7 S
        ("ASCE 7-22 ASD", "M_min", "−9.600 kN·m"),  # 0.6 D + 0.6 W
    ],
)
def test_results_of_a_group(standard: str, name: str, text: str) -> None:
    lines = ROOF if standard.startswith("EN") else tuple(x.replace(" category low", "") for x in ROOF)
    calc = beam(*lines, f'combinations K = "{standard}"', working=(f"x = b.K.{name}",))
    assert [c for c in codes(calc) if c != "case-unused"] == []
    assert shown(calc, "x") == text
    assert calc.second_route
    assert all(r.holds for r in calc.second_route)


def test_a_group_is_that_of_its_combinations_written_by_hand() -> None:
    first = beam(*ROOF, ULS, working=("x = b.ULS.M_max",))
    written = [
        "combination U{} in ULS = {}".format(n, " + ".join(f"{f}*{case}" for case, f in each.items()))
        for n, each in enumerate(factors(first), start=1)
    ]
    second = beam(*ROOF, *written)
    values = [{r.name: r.value for r in result(calc).groups[0].results} for calc in (first, second)]
    assert values[0] == values[1]


def test_each_can_be_read_by_its_name() -> None:
    calc = beam(*ROOF, ULS, working=("x = b.ULS_2.M(4 m)", "y = b.ULS_9.R_1"))
    assert codes(calc) == []
    assert shown(calc, "x") == "80.40 kN·m"
    assert shown(calc, "y") == "−18.00 kN"


def test_settings_are_expressions_over_the_calc() -> None:
    lines = (*ROOF, "gamma_G = γ_1", "γ_Q = 1.4", "γ_G_inf = 0.9", ULS)
    calc = beam(*lines, inputs=("γ_1 = 1.2",), working=("x = b.ULS.M_min",))
    assert codes(calc) == []
    assert factors(calc)[1] == {"G": 1.2, "S": 1.4}
    assert shown(calc, "x") == "−34.40 kN·m"  # (0.9·3 - 1.4·5)·8
    sources = {row.values: row.source for row in result(calc).set_factors}
    assert sources[("γ_G", 1.2),] == "as written, line 14"
    assert sources[("ψ_0", 0.5),] == "EN 1990:2002 Table A1.1, category low"


def test_psi_and_a_factor_of_a_case_are_expressions_too() -> None:
    lines = (*SIMPLE, "case G permanent γ 1.2", "case T traffic psi 1.0, ψ_1, 0 gamma 1.35", *LOADS[:1])
    calc = beam(*lines, "load T uniform 4 kN/m", ULS, inputs=("ψ_1 = 0.9",))
    assert codes(calc) == []
    assert factors(calc) == [{"G": 1.2, "T": 1.35}, {"G": 1.2}, {"G": 1.0, "T": 1.35}, {"G": 1.0}]


def test_written_combinations_join_the_group() -> None:
    calc = beam(*ROOF, ULS, "combination X in ULS = 2*S", working=("x = b.ULS.V_max", "y = b.X.M_max"))
    assert codes(calc) == []
    assert [c.name for c in result(calc).groups[0].combinations][-2:] == ["ULS_10", "X"]


def test_a_train_is_in_every_combination_that_another_does_not_cover() -> None:
    lines = (*SIMPLE, "case G permanent", "case C imposed ψ 0.9, 0.9, 0.5", "case W wind")
    calc = beam(*lines, LOADS[0], LOADS[2], "load C train 20 kN", ULS, working=("x = b.ULS.M_max",))
    assert codes(calc) == []
    assert shown(calc, "x") == "92.40 kN·m"  # 1.35·3·8²/8 + 1.5·20·8/4
    assert {"G": 1.35} not in factors(calc)
    assert result(calc).sets[0].remarks == ("C acts where adverse, so no combination without is needed",)


def test_a_settlement_is_there_or_not() -> None:
    calc = beam(
        "span = 5 m, 5 m",
        "EI = 17547.6 kN·m²",
        "support pin at 0 m",
        "support roller at 5 m settles 15 mm in D",
        "support roller at 10 m",
        "case G permanent",
        "case D settlement",
        "load G uniform 4 kN/m",
        ULS,
        working=("x = b.ULS.M_max(5 m)", "y = b.ULS.M_min(5 m)"),
    )
    assert codes(calc) == []
    assert shown(calc, "x") == "25.40 kN·m"  # -4·5²/8 + 1.2·3 EI Δ/L², and 3 EI Δ/L² = 31.586 kN·m
    assert shown(calc, "y") == "−16.88 kN·m"  # -1.35·4·5²/8, without it


def test_how_cases_act_together_is_told() -> None:
    calc = beam(
        *SIMPLE,
        *("case G_1 permanent", "case G_2 permanent", "case R roof", "case W_1 wind", "case W_2 wind"),
        *(f"load {case} uniform 1 kN/m" for case in ("G_1", "G_2", "R", "W_1", "W_2")),
        ULS,
    )
    assert codes(calc) == []
    assert result(calc).sets[0].remarks == (
        "G_1 and G_2 act together, with one sense",
        "W_1 or W_2: never two at a time",
        "imposed loads of roofs do not act with snow or wind (EN 1991-1-1 3.3.2(1))",
    )


def test_a_case_that_a_written_combination_takes_is_left_out() -> None:
    lines = (
        *SIMPLE,
        "case D permanent",
        "case T temperature",
        "load D uniform 3 kN/m",
        "load T uniform 1 kN/m",
    )
    asked = 'combinations LRFD = "ASCE 7-16 LRFD"'
    assert codes(beam(*lines, asked)) == ["set-incomplete"]
    calc = beam(*lines, asked, "combination X in LRFD = 1.2*D + 1.2*T")
    assert codes(calc) == []
    (remark,) = result(calc).sets[0].remarks
    assert remark == "T is left out: it has no factor for the kind temperature; written combinations take it"


# --- faults -------------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("lines", "code", "words"),
    [
        (('combinations U = "EN 1990 6.1"',), "unknown-word", "the nearest is 'EN 1990 6.10'"),
        (('combinations U = "ASCE 7-22 LFRD"',), "unknown-word", "the nearest is 'ASCE 7-22 LRFD'"),
        (("case Q imposed", "case W wind", ULS), "set-incomplete", "needs ψ_0 of the case 'Q'"),
        (("case Q snow", "case W wind", ULS), "set-incomplete", "category low (up to 1000 m) or high"),
        (("case Q imposed category B", ULS), "set-incomplete", "the case 'W' has no kind"),
        (("case Q traffic", "case W wind", ULS), "set-incomplete", "EN 1990 has no ψ for the kind traffic"),
        (("case Q crane", "case W wind", ULS), "set-incomplete", "write case Q crane ψ"),
        (("case Q imposed category K", "case W wind"), "unknown-word", "possible are A, B, C, D, E, F, G, H"),
        (("case Q snow category B", "case W wind"), "unknown-word", "possible are low, high"),
        (("case Q wind category B",), "combination-factor", "has no categories"),
        (("case Q imposed ψ 0.3, 0.5, 0.7",), "combination-factor", "the order is ψ_0, ψ_1, ψ_2"),
        (("case Q imposed ψ 1.5, 0.5, 0.3",), "combination-factor", "between 0 and 1"),
        (("case Q permanent ψ 0.7, 0.5, 0.3",), "combination-factor", "for variable actions"),
        (("case Q accidental γ 1.2",), "combination-factor", "has its design value"),
        (("case Q imposed γ -1",), "not-positive", "γ must be positive"),
        (("case Q imposed γ 2 kN",), "wrong-dimension", "a plain number"),
        (("γ_Q = 0",), "not-positive", "'γ_Q' must be positive"),
        (("ξ = 1.1",), "combination-factor", "1 at most"),
        (("γ_G_inf = 1.4",), "combination-factor", "γ_G_inf is γ_G at most"),
        (("γ_G = 1.0", "γ_G_inf = 1.1"), "combination-factor", "γ_G_inf is γ_G at most"),
        (
            ("case Q imposed category B", "case W wind", 'combinations U = "EN 1990 accidental"'),
            "set-incomplete",
            "needs a case of the kind accidental",
        ),
        (
            ("case Q imposed category B", "case W wind", ULS, "combination ULS_3 = G"),
            "written-twice",
            "the combination 'ULS_3' is given twice",
        ),
        (
            ("case Q imposed category B", "case W wind", "combination ULS_3 = G", ULS),
            "written-twice",
            "this set makes a combination 'ULS_3'",
        ),
        (
            ("case Q imposed category B", "case W wind", "combination X in ULS_1 = G", ULS),
            "written-twice",
            "this set makes a combination 'ULS_1'",
        ),
        (
            ("case Q imposed category B", "case W wind", "combination ULS = G", ULS),
            "written-twice",
            "'ULS' is the name of a group, too",
        ),
        (
            ("case Q imposed category B", "case W wind", 'combinations R = "EN 1990 6.10"'),
            "name-hides-result",
            "'R_1' is the name of a result",
        ),
        (
            ("case Q imposed category B", "case W wind", 'combinations M_max = "EN 1990 6.10"'),
            "name-hides-result",
            "'M_max' is the name of a result",
        ),
    ],
)
def test_fault(lines: tuple[str, ...], code: str, words: str) -> None:
    calc = beam(*SIMPLE, "case G permanent", *LOADS, *lines)
    errors = [d for d in calc.diagnostics if d.severity == "error"]
    assert code in [d.code for d in errors]
    assert any(words in f"{d.message} / {d.hint}" for d in errors)


def test_too_many() -> None:
    cases = [f"case Q_{n} imposed category B" for n in range(9)]
    loads = [f"load Q_{n} uniform 1 kN/m" for n in range(9)]
    calc = beam(*SIMPLE, "case G permanent", LOADS[0], *cases, *loads, ULS)
    assert codes(calc) == ["set-too-large"]
    assert "400" in calc.diagnostics[0].message


# --- warnings -----------------------------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("lines", "named"),
    [
        (("γ_Q = 1.4", "combination U = G + S + W"), ["'γ_Q'", "the category of 'S'"]),
        (("ξ = 0.9", ULS), ["'ξ'"]),
        (("γ_G = 1.2", 'combinations U = "EN 1990 characteristic"'), ["'γ_G'"]),
        (
            (
                "case K imposed ψ 0.7, 0.5, 0.3 γ 1.2",
                "load K uniform 1 kN/m",
                'combinations U = "ASCE 7-22 ASD"',
            ),
            ["ψ of 'K'", "γ of 'K'"],
        ),
        (
            (
                "case K imposed category B γ 1.2",
                "load K uniform 1 kN/m",
                'combinations U = "EN 1990 quasi-permanent"',
                ULS,
            ),
            [],
        ),
    ],
)
def test_factors_that_no_set_takes(lines: tuple[str, ...], named: list[str]) -> None:
    calc = beam(*ROOF, *lines)
    found = [d.message for d in calc.diagnostics if d.code == "factor-unused"]
    assert sorted(found) == sorted(f"no combination set of the beam takes {what}" for what in named)


def test_a_case_of_which_no_set_takes_a_part_is_unused() -> None:
    """ψ_2 of wind and of snow at low sites is 0, so they are in no quasi-permanent combination."""
    calc = beam(*ROOF, 'combinations QP = "EN 1990 quasi-permanent"')
    assert codes(calc) == ["case-unused", "case-unused"]
    assert codes(beam(*ROOF, ULS, 'combinations QP = "EN 1990 quasi-permanent"')) == []


def test_a_permanent_load_that_relieves() -> None:
    """EN 1990 takes it at γ_G,inf; ASCE 7 has no 0.9 D beside a live load, and that is said."""
    assert codes(beam(*ROOF, ULS)) == []
    lines = (
        *("span = 6 m, 2 m", "EI = 9000 kN·m²", "support pin at 0 m", "support pin at 6 m"),
        *(
            "case D permanent",
            "case L imposed",
            "load D uniform 4 kN/m from 0 m to 6 m",
            "load L point 60 kN at 8 m",
        ),
    )
    assert codes(beam(*lines, ULS)) == []
    asked = 'combinations LRFD = "ASCE 7-16 LRFD"'
    calc = beam(*lines, asked)
    assert codes(calc) == ["relieving-permanent"]
    told = calc.diagnostics[0]
    assert told.message.endswith("of 'LRFD', where LRFD_2 governs and takes it at 1.2")
    assert told.hint == "add combination X in LRFD = 1.0*D + 1.6*L"
    assert calc.calc.source.slice(told.span) == asked
    assert codes(beam(*lines, asked, told.hint.removeprefix("add "))) == []
    assert (
        codes(beam(*lines, 'combinations LRFD = "ASCE 7-16 LRFD"', "combination X in LRFD = 0.9*D + 1.6*L"))
        == []
    )


def test_a_written_factor_keeps_its_reference() -> None:
    lines = (*SIMPLE, "case G permanent", "case C traffic ψ 1.0, 0.9, 0 γ γ_c | crane | EN 1991-3 Table A.1")
    own = ("γ_G = 1.2 | national | NA.A1", "load C uniform 4 kN/m", ULS)
    calc = beam(*lines, *LOADS[:1], *own, inputs=("γ_c = 1.35",))
    sources = {row.values[0]: row.source for row in result(calc).set_factors}
    assert sources["γ_G", 1.2] == "NA.A1, line 11"
    assert sources["γ", 1.35] == "EN 1991-3 Table A.1, line 9"


@pytest.mark.parametrize(
    ("standard", "line", "hint"),
    [
        ("EN 1990 6.10", "load T train 80 kN", "write case T traffic ψ ..., ..., ...; or write its combin"),
        ("EN 1990 6.10", "support roller at 6 m settles 9 mm in T", "write case T settlement; or write its"),
        ("EN 1990 6.10", "load T uniform 1 kN/m", "write case T permanent, or another kind; or write its"),
        ("ASCE 7-16 LRFD", "load T train 80 kN", "write its combinations yourself"),
        ("ASCE 7-16 LRFD", "support roller at 6 m settles 9 mm in T", "write its combinations yourself"),
    ],
)
def test_a_case_without_a_kind_is_told_what_it_may_be(standard: str, line: str, hint: str) -> None:
    lines = (
        "span = 6 m",
        "EI = 9000 kN·m²",
        "support pin at 0 m",
        "case G permanent",
        "load G uniform 4 kN/m",
    )
    end = () if line.startswith("support") else ("support roller at 6 m",)
    sets = [f'combinations {group} = "{standard}"' for group in ("A", "B", "C")]
    calc = beam(*lines, *end, line, *sets)
    assert codes(calc) == ["set-incomplete"]  # one mistake is told once, not by each set
    assert calc.diagnostics[0].hint.startswith(hint)


def test_a_settlement_without_a_case_is_told_as_that_alone() -> None:
    lines = ("span = 6 m", "EI = 9000 kN·m²", "support pin at 0 m", "support roller at 6 m settles 9 mm")
    calc = beam(*lines, "case G permanent", "load G uniform 4 kN/m", ULS)
    assert codes(calc) == ["unknown-case"]


def test_a_category_that_a_kind_does_not_have_is_told_once() -> None:
    for case in ("wind category A", "imposed category b", "traffic category B"):
        calc = beam(*SIMPLE, "case G permanent", *LOADS[:1], f"case W {case}", "load W uniform 1 kN/m", ULS)
        assert codes(calc) in (["combination-factor"], ["unknown-word"])


def test_a_case_without_a_load_is_told() -> None:
    lines = (*SIMPLE, "case G permanent", *LOADS[:1], "case W wind", ULS)
    assert codes(beam(*lines)) == ["case-without-load"]
    assert codes(beam(*lines, "load W uniform 1 kN/m")) == []
    assert codes(beam(*lines, "load W train 8 kN")) == []


# --- what is shown ------------------------------------------------------------------------------------------


def test_the_table_of_a_set() -> None:
    found = result(beam(*ROOF, ULS))
    view = set_view("b", found.sets[0])
    assert (view.group, view.name, len(view.cases), view.leads) == ("ULS", "EN 1990 6.10", 3, True)
    assert [e.source for e in view.expressions] == ["EN 1990 (6.10)", "EN 1990 (6.10)"]
    first, *_, last = view.expressions[0].rows
    assert (first.anchor, first.factors, last.factors) == (
        "b.ULS_1",
        ("1.35", "1.5", "0.9"),
        ("1.35", "", ""),
    )
    assert [len(e.equation.steps[0]) for e in view.expressions] == [3, 3]  # without G_set
    assert len(factor_rows(found)) == 5


def test_expressions_show_the_loads_that_there_are() -> None:
    lines = tuple(x.replace(" category low", "") for x in ROOF)
    view = set_view("b", result(beam(*lines, 'combinations K = "ASCE 7-16 LRFD"')).sets[0])
    assert not view.leads
    assert [str(e.equation.steps[0]).count("S") for e in view.expressions] == [0, 1, 1, 1, 0]
    assert "<mo>(</mo>" not in str(view.expressions[1].equation.steps)


def test_the_figure_names_the_set_and_lists_what_is_written() -> None:
    calc = beam(*ROOF, ULS, "combination X in ULS = 2*S")
    note = beam_drawings(result(calc), "b", Style())[0].note
    assert note == "ULS_1 to ULS_10: EN 1990 6.10; X = 2·S"


def test_results_json_has_the_group_and_the_combinations() -> None:
    calc = beam(*ROOF, ULS, "combination X in ULS = 2*S")
    found = _calc(calc)
    assert isinstance(found, dict)
    assert set(found["beams"]["b"]) == {"ULS", "X"}  # type: ignore[arg-type, call-overload, index]
    assert found["combinations"]["b"]["ULS_9"] == {  # type: ignore[call-overload, index]
        "group": "ULS",
        "factors": {"G": 1.0, "W": 1.5},
        "source": "EN 1990 (6.10)",
    }
    assert "combinations" not in _calc(beam(*ROOF, "combination X = G + S + W"))  # type: ignore[operator]


def test_the_trail_notices_a_factor_that_changes_with_an_input() -> None:
    """Also one that governs nothing: ψ_0 of wind beside snow."""

    def item(psi: str) -> object:
        lines = [x.replace("case W wind", "case W wind ψ p, 0.2, 0") for x in ROOF]
        return state_of([beam(*lines, ULS, inputs=(f"p = {psi}",))], {}, {}, Style())["C-1#b"]["results"]

    before, after = item("0.6"), item("0.5")
    assert isinstance(before, dict)
    assert isinstance(after, dict)
    assert {key for key in before if before[key] != after[key]} == {"ULS_1", "ULS_6"}
    assert before["ULS_1"] == ["1.35*G + 1.5*S + 0.9*W", ""]


def test_a_train_beside_other_loads_of_its_case_leaves_with_them() -> None:
    calc = beam(
        "span = 6 m, 6 m",
        "EI = 9 MN*1 m*1 m",
        "case G permanent",
        "case T traffic ψ 0.7, 0.5, 0.3",
        "load G uniform 5 kN/m",
        "load T uniform 40 kN/m from 0 m to 6 m",
        "load T train 5 kN",
        'combinations ULS = "EN 1990 6.10"',
    )
    group = result(calc).groups[0]
    assert {"G": 1.35} in [dict(c.factors) for c in group.combinations]
    # Statics of two equal spans under w: the outer reaction is 3 w L/8.
    assert group.states.reaction(2).max.value == pytest.approx(1.35 * 3 / 8 * 5e3 * 6, rel=1e-9)
