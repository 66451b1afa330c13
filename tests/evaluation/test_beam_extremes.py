"""Beams whose numbers go to extremes are answered by diagnostics or finite results, never by an exception."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings

from calcgen.evaluation.results.beam import BeamResult
from calcgen.quantities.measure import Measure
from tests.evaluation.fuzzed_beams import beam_texts
from tests.evaluation.helpers import codes, evaluated, fence

SIMPLE = ("span = 6 m", "EI = 20000 kN·m^2", "load G uniform 10 kN/m")


def check(text: str) -> None:
    (calc,) = evaluated(text)
    for beam in (segment for segment in calc.segments if isinstance(segment, BeamResult)):
        for group in beam.groups:
            for result in (*group.results, *group.further):
                assert isinstance(result.value, Measure), result
                assert math.isfinite(result.value.si), result
        assert all(math.isfinite(line.residual) for line in beam.second_route)


@pytest.mark.filterwarnings("error")
@settings(max_examples=40)
@given(beam_texts())
def test_a_beam_of_extreme_numbers_is_answered(text: str) -> None:
    check(text)


@pytest.mark.slow
@pytest.mark.filterwarnings("error")
@settings(max_examples=1500)
@given(beam_texts())
def test_many_beams_of_extreme_numbers_are_answered(text: str) -> None:
    check(text)


@pytest.mark.filterwarnings("error")
@pytest.mark.parametrize(
    ("lines", "code"),
    [
        ((*SIMPLE, "support pin at 0 m", "support spring 1e308 N/mm at 6 m"), "number-too-large"),
        ((*SIMPLE, "support pin at 0 m", "support spring 1e-300 N/mm at 6 m"), "not-positive"),
        ((*SIMPLE, "load G point 1e300 kN at 1 m"), "number-too-large"),
        ((*SIMPLE, "combination U = 1e300*G"), "number-too-large"),
        ((*SIMPLE, "load T train 1e300 kN"), "number-too-large"),
        (("span = 6 m, 1e-300 m", *SIMPLE[1:]), "no-length"),
        (("span = 6 m, 1e300 m", *SIMPLE[1:]), "number-too-large"),
        (("span = 6 m", "EI = 1e-308 kN·m^2", SIMPLE[2]), "not-positive"),
        (("span = 6 m", "EI = 1e300 kN·m^2", SIMPLE[2]), "number-too-large"),
        ((*SIMPLE, "GA_s = 1e-300 kN"), "not-positive"),
    ],
)
def test_what_cannot_be_computed_is_said(lines: tuple[str, ...], code: str) -> None:
    (calc,) = evaluated("# T\n" + fence("beam b", *lines))
    assert code in codes(calc)


@pytest.mark.filterwarnings("error")
@pytest.mark.parametrize(
    "load",
    [
        "load G point 5 kN at 1e-300 m",  # where it is, is the start of the beam
        "load G uniform 1e-308 kN/m",  # so small that few digits are left
        "load G uniform 0 kN/m",
        "load G point 1e12 kN at 2 m",
    ],
)
def test_what_can_be_computed_is_found_again(load: str) -> None:
    (calc,) = evaluated("# T\n" + fence("beam b", *SIMPLE[:2], load))
    assert codes(calc) == []
    assert calc.second_route
    assert all(line.holds for line in calc.second_route)
