"""The manual's examples give the values worked by hand, and show the source that they are built from."""

from __future__ import annotations

from collections.abc import Mapping

import pytest

from calcgen.evaluation.results.calc import EvaluatedCalc
from calcgen.evaluation.results.lines import DerivedRow, WorkingResult
from calcgen.quantities.measure import Measure, dimension_of, magnitude_in, unit_size
from tests.projects.evaluating import evaluated_manual
from tests.projects.manual import MANUAL, chapters, live_kinds, shown_and_live
from tests.projects.manual_values import CASES, EXACT, UTILISATIONS, Worked


@pytest.fixture(scope="module")
def calcs() -> Mapping[str, EvaluatedCalc]:
    return evaluated_manual()


@pytest.mark.parametrize("case", CASES, ids=lambda case: f"{case.calc} {case.name}")
def test_values_are_those_worked_by_hand(calcs: Mapping[str, EvaluatedCalc], case: Worked) -> None:
    found = calcs[case.calc].values[case.name][0]
    assert isinstance(found, Measure)
    assert found.dimension == dimension_of(unit_size(case.unit))
    assert magnitude_in(found, case.unit) == pytest.approx(case.value, rel=case.within, abs=1e-12)


def test_every_derived_value_is_worked_by_hand(calcs: Mapping[str, EvaluatedCalc]) -> None:
    derived = {
        (number, row.name)
        for number, calc in calcs.items()
        for block in calc.segments
        if isinstance(block, WorkingResult)
        for row in block.rows
        if isinstance(row, DerivedRow)
    }
    assert derived <= {(case.calc, case.name) for case in CASES}


def test_every_check_is_worked_by_hand(calcs: Mapping[str, EvaluatedCalc]) -> None:
    found = {(number, check.label): check for number, calc in calcs.items() for check in calc.checks}
    assert found.keys() == UTILISATIONS.keys()
    for key, check in found.items():
        assert check.satisfied
        worked = UTILISATIONS[key]
        assert check.utilisation == (worked if worked is None else pytest.approx(worked, rel=EXACT))


def test_the_manual_has_no_diagnostics(calcs: Mapping[str, EvaluatedCalc]) -> None:
    assert [(d.source.path, d.line, d.message) for c in calcs.values() for d in c.diagnostics] == []


@pytest.mark.parametrize("chapter", chapters())
def test_the_source_shown_is_that_of_the_live_blocks(chapter: str) -> None:
    pairs = shown_and_live(chapter)
    for shown, live in pairs:
        assert shown == live
    shown_blocks = [kind for shown, _ in pairs for kind in live_kinds(shown)]
    assert live_kinds(chapters()[chapter]) == shown_blocks


def test_other_files_of_the_project_are_shown_as_they_are() -> None:
    for path, chapter in (("project.toml", "M-02-project"), ("profiles/office.csv", "M-10b-office")):
        assert f"\n{(MANUAL / path).read_text(encoding='utf-8')}```\n" in chapters()[chapter]
