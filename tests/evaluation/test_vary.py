"""`vary`: each run is the calc with the value written in it; what is marked; which faults are reported."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.evaluation.blocks import beam
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.vary import VaryResult, VaryRun
from calcgen.mechanics.envelope import Effects
from calcgen.mechanics.second_route import moving
from calcgen.mechanics.second_route.residual import Residual
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.quantities.measure import Measure, magnitude_in
from tests.evaluation.helpers import codes, evaluated, fence

INPUTS = ('profile = "IPE 240"', "L = 6 m", "w = 8 kN/m", "T = 10 °C", "built = yes")
MAIN = fence("section main", "shape = rolled(profile)")
WORKING = fence(
    "working",
    "M_Ed = w*L^2/8",
    "M_c_Rd = main.W_pl_y*235 MPa",
    "rise = sqrt(8 - L/(1 m))",
    "warmer = T - 5 °C",
    "M_Ed <= M_c_Rd | bending",
)


def text(*lines: str, inputs: tuple[str, ...] = INPUTS, working: str = WORKING) -> str:
    return f"# T\n{fence('inputs', *inputs)}{MAIN}{working}{fence('vary', *lines) if lines else ''}"


def calc(*lines: str, working: str = WORKING) -> EvaluatedCalc:
    (found,) = evaluated(text(*lines, working=working))
    return found


def varied(found: EvaluatedCalc) -> VaryResult:
    (result,) = (s for s in found.segments if isinstance(s, VaryResult))
    return result


def numbers(result: VaryResult, column: int = 0) -> list[float | None]:
    """Return a column in its unit."""
    return [
        None if value is None else magnitude_in(value, result.units[column])
        for value in (run.values[column] for run in result.runs)
    ]


# --- steps ------------------------------------------------------------------------------------------------


def test_steps_are_evenly_apart_with_both_ends() -> None:
    result = varied(calc("L = 6 steps from 3 m to 8 m", "show M_Ed, M_Ed/M_c_Rd"))
    assert [run.shown.text for run in result.runs] == [f"{n}.000\u00a0m" for n in range(3, 9)]
    assert numbers(result) == pytest.approx([n**2 for n in range(3, 9)], rel=1e-12)  # w L²/8, w = 8 kN/m
    assert (result.input, result.unit, result.heads) == ("L", "m", ("M_Ed", "M_Ed/M_c_Rd"))
    assert result.units == ("kN·m", "")
    assert [run.present for run in result.runs] == [False, False, False, True, False, False]


def test_a_range_may_fall_and_its_ends_may_be_derived() -> None:
    result = varied(calc("w = 3 steps from M_Ed/L^2*8 to 2 kN/m", "show w"))
    assert numbers(result) == pytest.approx([8, 5, 2], rel=1e-12)


def test_steps_are_shown_with_the_figures_that_tell_them_apart() -> None:
    result = varied(calc("L = 3 steps from 5.00001 m to 5.00002 m", "show M_Ed"))
    assert [run.shown.number for run in result.runs] == ["5.000010", "5.000015", "5.000020"]


def test_a_temperature_keeps_its_scale() -> None:
    result = varied(calc("T = 3 steps from 0 °C to 30 °C", "show T, warmer"))
    assert [run.shown.text for run in result.runs] == ["0\u00a0°C", "15.00\u00a0°C", "30.00\u00a0°C"]
    assert numbers(result, 1) == pytest.approx([-5, 10, 25], abs=1e-9)


@settings(max_examples=15, deadline=None)
@given(st.integers(1000, 8000), st.integers(1000, 8000), st.integers(2, 5))
def test_a_run_is_the_calc_with_the_value_written_in_it(a: int, b: int, count: int) -> None:
    if a == b:
        return
    result = varied(calc(f"L = {count} steps from {a} mm to {b} mm", "show M_Ed, rise"))
    for run in result.runs:
        assert isinstance(run.value, Measure)
        length = magnitude_in(run.value, "mm")
        inputs = tuple(f"L = {length!r} mm" if i.startswith("L =") else i for i in INPUTS)
        (written,) = evaluated(text(inputs=inputs))
        for value, name in zip(run.values, ("M_Ed", "rise"), strict=True):
            expected = written.values[name][0]
            assert isinstance(value, Measure)
            assert isinstance(expected, Measure)
            assert value.si == pytest.approx(expected.si, rel=1e-12)
        (check,) = written.checks
        assert run.satisfied == check.satisfied
        assert run.governing is not None
        label, utilisation = run.governing
        assert label == check.label
        assert utilisation == pytest.approx(check.utilisation, rel=1e-12)


def test_a_run_in_error_has_no_values_and_says_why() -> None:
    found = calc("L = 3 steps from 6 m to 10 m", "show M_Ed")
    result = varied(found)
    assert [run.fault for run in result.runs] == ["", "", "the root of a negative value"]
    assert numbers(result) == [pytest.approx(36), pytest.approx(64), None]
    assert [run.texts for run in result.runs] == [("36.00",), ("64.00",), ("—",)]
    assert not result.runs[2].checked
    assert (codes(found), found.standing) == ([], "satisfied")


def test_an_expression_without_a_value_is_a_fault_of_its_run() -> None:
    result = varied(calc("L = 3 steps from 5 m to 7 m", "show 1/(L - 7 m)"))
    assert [run.fault for run in result.runs] == ["", "", "division by zero"]


def test_values_and_checks_of_the_calc_itself_stay() -> None:
    with_block, without = calc("L = 3 steps from 3 m to 7 m", "show M_Ed"), calc()
    assert with_block.values.keys() == without.values.keys()
    for name, (_, shown) in without.values.items():
        assert with_block.values[name][1] == shown
    assert with_block.checks == without.checks


def test_what_is_defined_below_the_block_can_be_shown_and_a_fed_input_varied() -> None:
    first = f"# A\n{fence('inputs', 'L = 2 m')}"
    block = fence("vary", "L = 2 steps from 1 m to 3 m", "show A")
    _, second = evaluated(first, f"# B\n{fence('inputs', 'L of C-1')}{block}{fence('working', 'A = L^2')}")
    assert codes(second) == []
    assert numbers(varied(second)) == pytest.approx([1, 9])


def test_two_blocks_of_one_input_have_anchors_of_their_own() -> None:
    block = fence("vary", "L = 2 steps from 3 m to 4 m", "show L")
    (found,) = evaluated(text() + block + block)
    assert [s.name for s in found.segments if isinstance(s, VaryResult)] == ["vary-L", "vary-L-2"]


# --- sections ---------------------------------------------------------------------------------------------


def satisfying(runs: tuple[VaryRun, ...]) -> list[VaryRun]:
    return [run for run in runs if run.satisfied]


def test_sections_go_by_mass_and_the_lightest_that_satisfies_every_check_is_marked() -> None:
    result = varied(calc('profile over "IPE *"', "show M_Ed/M_c_Rd"))
    family = builtin_catalogue().family("IPE")
    assert [run.value for run in result.runs] == [profile.designation for profile in family]
    masses = [run.mass.si for run in result.runs if run.mass is not None]
    assert masses == sorted(profile.published["mass"] for profile in family)
    # W_pl,y, cm³, of EN 10365 from memory, against 36 kN·m at 235 MPa: 153.2 cm³ are needed
    at = {str(run.value): value for run, value in zip(result.runs, numbers(result), strict=True)}
    for designation, modulus in (("IPE 160", 123.9), ("IPE 180", 166.4), ("IPE 240", 366.6)):
        assert at[designation] == pytest.approx(36e3 / (modulus * 235), rel=1e-9)
    assert [run.value for run in result.runs if run.lightest] == ["IPE 180"]
    assert [run.value for run in result.runs if run.present] == ["IPE 240"]
    assert len(satisfying(result.runs)) == len(family) - 5


@pytest.mark.parametrize(
    ("pattern", "first", "count"),
    [("IPE 2?0", "IPE 200", 4), ("ipe200", "IPE 200", 1), ("* 240", "UPE 240", None), ("W8x1*", "W8X10", 4)],
)
def test_patterns(pattern: str, first: str, count: int | None) -> None:
    result = varied(calc(f'profile over "{pattern}"', "show main.A"))
    assert str(result.runs[0].value).casefold() == first.casefold()
    assert count is None or len(result.runs) == count


def test_none_is_marked_where_none_satisfies_every_check_or_there_are_no_checks() -> None:
    for working in (WORKING.replace("235", "1"), fence("working", "M_Ed = w*L^2")):
        runs = varied(calc('profile over "IPE 1?0"', "show M_Ed", working=working)).runs
        assert len(runs) == 5
        assert not satisfying(runs)
        assert not any(run.lightest for run in runs)


def test_sections_of_one_mass_are_all_marked() -> None:
    """W12x50 and W18x50 have 50 lb/ft, and none lighter is tried."""
    runs = varied(calc('profile over "W1?x50"', "show M_Ed")).runs
    assert {run.value for run in runs if run.lightest} == {run.value for run in runs} >= {"W12x50", "W18x50"}


# --- faults -----------------------------------------------------------------------------------------------


FAULTS = [
    (("l = 3 steps from 1 m to 2 m", "show L"), ["unknown-name"], "the nearest input is 'L'"),
    (("M_Ed = 3 steps from 1 kN·m to 2 kN·m", "show L"), ["not-an-input"], ""),
    (("main = 3 steps from 1 m to 2 m", "show L"), ["not-an-input"], ""),
    (("L = 3 steps from 1 kN to 2 m", "show L"), ["wrong-dimension"], "a unit may be missing"),
    (("L = 3 steps from 1 m to 2", "show L"), ["wrong-dimension"], "a unit may be missing"),
    (("L = 1 steps from 1 m to 2 m", "show L"), ["vary-steps"], ""),
    (("L = 2.5 steps from 1 m to 2 m", "show L"), ["vary-steps"], ""),
    (("L = 201 steps from 1 m to 2 m", "show L"), ["vary-steps"], ""),
    (("L = 3 m steps from 1 m to 2 m", "show L"), ["vary-steps"], ""),
    (("L = 3 steps from 2 m to 2 m", "show L"), ["vary-steps"], ""),
    (("profile = 3 steps from 1 m to 2 m", "show L"), ["not-a-number"], 'write NAME over "IPE *"'),
    (("built = 3 steps from 1 m to 2 m", "show L"), ["not-a-number"], ""),
    (('L over "IPE *"', "show L"), ["not-a-text"], ""),
    (('profile over "IPY *"', "show L"), ["unknown-profile"], "IPE"),
    (('profile over "IPE 245"', "show L"), ["unknown-profile"], "IPE 240"),
    (('profile over "*"', "show L"), ["vary-steps"], "narrow the pattern"),
    (("L = 3 steps from 1 m to 2 m", "show M_ed"), ["unknown-name"], "M_Ed"),
    (("L = 3 steps from 1 m to 2 m", "show profile"), ["not-a-number"], ""),
    (("L = 3 steps from 1 m to 2 m", "show main"), ["block-is-no-value"], ""),
]


@pytest.mark.parametrize(("lines", "expected", "hint"), FAULTS)
def test_faults(lines: tuple[str, ...], expected: list[str], hint: str) -> None:
    found = calc(*lines)
    assert codes(found) == expected
    assert hint in found.diagnostics[0].hint
    assert not any(isinstance(s, VaryResult) for s in found.segments)


def test_a_calc_in_error_is_not_repeated_and_tells_nothing_twice() -> None:
    found = calc("L = 3 steps from 1 m to 2 m", "show b", working=fence("working", "b = 2*c"))
    assert codes(found) == ["unknown-name"]
    assert not any(isinstance(s, VaryResult) for s in found.segments)


# --- what a run computes ------------------------------------------------------------------------------------

GIRDER = fence(
    "beam girder",
    "span = L, L",
    "EI = 8 MN·m²",
    "case G permanent",
    "case Q imposed category B",
    "load G uniform 2 kN/m",
    "load Q uniform w",
    "support pin at 0 m",
    "support roller at L",
    "support roller at 2*L",
    "pattern Q",
    'combinations ULS = "EN 1990 6.10"',
    'combinations CH = "EN 1990 characteristic"',
)


def under_patterns(*lines: str) -> str:
    return f"# T\n{fence('inputs', 'L = 6 m', 'w = 8 kN/m')}{GIRDER}{fence('vary', *lines) if lines else ''}"


def test_a_run_under_patterns_has_the_numbers_of_the_calc_itself() -> None:
    names = ("girder.ULS.M_max", "girder.ULS.R_2_max", "girder.CH.w_max", "girder.ULS_1.V_abs")
    read = fence("working", *(f"r_{i} = {name}" for i, name in enumerate(names)))
    (found,) = evaluated(under_patterns("w = 2 steps from 8 kN/m to 9 kN/m", f"show {', '.join(names)}"))
    (itself,) = evaluated(under_patterns() + read)
    run = varied(found).runs[0]
    assert [v.si for v in run.values if v is not None] == [
        itself.values[f"r_{i}"][0].si  # type: ignore[union-attr]
        for i in range(len(names))
    ]


@pytest.mark.parametrize(
    ("compared", "shown", "at_fault"),
    [
        ("V", "girder.ULS.V_max", True),
        ("V", "girder.ULS_1.V_max", True),
        ("V", "girder.ULS.V_max(1 m)", True),
        ("V", "girder.ULS.M_max", False),
        ("M", "girder.ULS.M_max", True),
        ("w", "girder.CH.w_abs", True),
        ("R", "girder.ULS.R_1_max", True),
        ("R", "girder.ULS.M_max", False),
    ],
)
def test_a_run_is_at_fault_where_the_second_route_does_not_find_what_it_reads(
    monkeypatch: pytest.MonkeyPatch, compared: str, shown: str, at_fault: bool
) -> None:
    """The route is made to miss in one run alone: with an error of its own the calc would have no runs."""
    compare = moving._residuals

    def missing(effects: Effects, what: str, *others: Any) -> tuple[Residual, ...]:
        found = compare(effects, what, *others)
        misses = what == compared and effects.model.length > 13.0
        return tuple(replace(r, residual=1.0) for r in found) if misses else found

    monkeypatch.setattr(moving, "_residuals", missing)
    (found,) = evaluated(under_patterns("L = 2 steps from 6 m to 7 m", f"show {shown}"))
    assert [run.fault.startswith("the second route") for run in varied(found).runs] == [False, at_fault]
    assert [run.values == (None,) for run in varied(found).runs] == [False, at_fault]


def test_a_run_lists_no_results(monkeypatch: pytest.MonkeyPatch) -> None:
    listed: list[object] = []

    def listing(*arguments: object) -> object:
        listed.append(arguments)
        return (), ()

    monkeypatch.setattr(beam, "group_results", listing)
    (found,) = evaluated(under_patterns("L = 3 steps from 6 m to 8 m", "show girder.ULS.M_max"))
    assert all(run.values != (None,) for run in varied(found).runs)
    assert not listed
