"""The demo projects give the values worked by hand, and stand as their conclusions say."""

from __future__ import annotations

from collections.abc import Mapping
from functools import cache
from pathlib import Path

import pytest

from calcgen.evaluation.calc import Setting, evaluate_all
from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import AssumptionsResult, InputRow, InputsResult
from calcgen.evaluation.results.stress import StressResult
from calcgen.language.document import calc_from
from calcgen.profiles.catalogue import builtin_catalogue
from calcgen.project import load_project
from calcgen.quantities.display import Style
from calcgen.quantities.measure import Measure, dimension_of, magnitude_in, unit_size
from tests.projects import heron_lock, mill_loft
from tests.projects.by_hand import EXACT, FACETS, Worked

PROJECTS = Path(__file__).parents[2] / "projects"
CASES = [("heron-lock", case) for case in heron_lock.CASES] + [("mill-loft", c) for c in mill_loft.CASES]
BLOCKS = [("heron-lock", case) for case in heron_lock.BLOCKS] + [("mill-loft", c) for c in mill_loft.BLOCKS]
BOTH = pytest.mark.parametrize("project", ["heron-lock", "mill-loft"])


@cache
def demo(project: str) -> Mapping[str, EvaluatedCalc]:
    """Return the calcs of a project by number."""
    files, found = load_project(PROJECTS / project)
    assert found == ()
    p = files.project
    assert p is not None
    style = Style(p.units, p.digits, p.depth, p.preferred_units)
    setting = Setting(p.axes, style, builtin_catalogue(), frozenset(files.references))
    return {c.number: c for c in evaluate_all([calc_from(s) for s in files.calcs], setting)}


@pytest.mark.parametrize(("project", "case"), CASES, ids=[f"{c.calc} {c.name} {c.how}" for _, c in CASES])
def test_values_are_those_worked_by_hand(project: str, case: Worked) -> None:
    found = demo(project)[case.calc].values[case.name][0]
    assert isinstance(found, Measure)
    assert found.dimension == dimension_of(unit_size(case.unit))
    assert magnitude_in(found, case.unit) == pytest.approx(case.value, rel=case.within)


@pytest.mark.parametrize(("project", "case"), BLOCKS, ids=[f"{c.calc} {c.name} {c.how}" for _, c in BLOCKS])
def test_stresses_are_those_worked_by_hand(project: str, case: Worked) -> None:
    block, *part, name = case.name.split(".")
    segments = demo(project)[case.calc].segments
    stress = next(s for s in segments if isinstance(s, StressResult) and s.name == block)
    results = stress.parts[part[0]] if part else stress.results
    found = next(r.value for r in results if r.name == name)
    assert magnitude_in(found, case.unit) == pytest.approx(case.value, rel=case.within)


@pytest.mark.parametrize(("calc", "label"), mill_loft.UTILISATIONS, ids=" ".join)
def test_utilisations_are_those_worked_by_hand(calc: str, label: str) -> None:
    check = next(c for c in demo("mill-loft")[calc].checks if c.label == label)
    assert check.utilisation == pytest.approx(mill_loft.UTILISATIONS[calc, label], rel=EXACT)


@pytest.mark.parametrize("point", heron_lock.STRESSES)
def test_stresses_of_the_angle_are_those_worked_by_hand(point: str) -> None:
    (stress,) = (s for s in demo("heron-lock")["B-03"].segments if isinstance(s, StressResult))
    found = next(r.value for r in stress.results if r.name == point)
    assert magnitude_in(found, "MPa") == pytest.approx(heron_lock.STRESSES[point], rel=FACETS)


def test_the_stringer_stays_on_its_trestle() -> None:
    (key, reaction) = next(iter(heron_lock.UPLIFT.items()))
    check = next(c for c in demo("heron-lock")[key[0]].checks if c.label == key[1])
    assert check.utilisation is None
    assert magnitude_in(check.left, "kN") == pytest.approx(reaction, rel=EXACT)


@BOTH
def test_one_check_alone_is_exceeded_and_its_calc_says_so(project: str) -> None:
    expected = heron_lock.EXCEEDED if project == "heron-lock" else {}
    exceeded = {
        (number, check.label): check.utilisation
        for number, calc in demo(project).items()
        for check in calc.checks
        if not check.satisfied
    }
    assert exceeded == {key: pytest.approx(value, rel=EXACT) for key, value in expected.items()}
    standings = {number: calc.standing for number, calc in demo(project).items()}
    assert standings.pop("DB-01") == "no checks"
    assert {n for n, s in standings.items() if s != "satisfied"} == {number for number, _ in expected}


@BOTH
def test_no_diagnostics(project: str) -> None:
    found = [d for calc in demo(project).values() for d in calc.diagnostics]
    assert [(d.source.path, d.line, d.message) for d in found] == []


@BOTH
def test_registers_have_open_assumptions_and_unreferenced_inputs(project: str) -> None:
    segments = [s for calc in demo(project).values() for s in calc.segments]
    inputs = [r for s in segments if isinstance(s, InputsResult) for r in s.rows if isinstance(r, InputRow)]
    assumptions = [a for s in segments if isinstance(s, AssumptionsResult) for a in s.block.items]
    assert 1 <= sum(not row.referenced for row in inputs) <= 6
    assert 1 <= sum(a.open for a in assumptions) < len(assumptions)
