"""A beam's figure in parts that fit a printed sheet: nothing is lost, nothing shrinks beyond reading."""

from dataclasses import replace

import pytest

from calcgen.figures.beam import compose_beam
from calcgen.figures.beam_loads import Distributed
from calcgen.figures.beam_sheets import TALLEST, beam_sheets
from tests.figures.drawings import simple_beam

BEAM = simple_beam()


def test_a_figure_that_fits_stays_one() -> None:
    ((drawing, _),) = beam_sheets(BEAM)
    assert drawing is BEAM


@pytest.mark.parametrize("count", [9, 13, 40])
def test_loads_and_diagrams_part_where_they_are_too_tall(count: int) -> None:
    cases = tuple(replace(BEAM.cases[0], title=f"case {n}") for n in range(count))
    parts = list(beam_sheets(replace(BEAM, cases=cases)))
    assert all(picture.frame.bottom - picture.frame.top <= TALLEST for _, picture in parts)
    assert tuple(case for drawing, _ in parts for case in drawing.cases) == cases
    assert [drawing.diagrams for drawing, _ in parts if drawing.diagrams] == [BEAM.diagrams]
    assert not any(drawing.cases and drawing.diagrams for drawing, _ in parts)
    idents = [picture.ident for _, picture in parts]
    assert len(set(idents)) == len(idents)


def test_loads_are_drawn_on_one_scale_over_all_sheets() -> None:
    low = BEAM.cases[0]
    (load,) = [each for each in low.loads if isinstance(each, Distributed)]
    high = replace(low, loads=(replace(load, first=20 * load.first, last=20 * load.last),))
    parts = list(beam_sheets(replace(BEAM, cases=(low,) * 20 + (high,) * 20)))
    scales = {drawing.intensity for drawing, _ in parts if drawing.cases}
    assert list(scales) == [pytest.approx(20 * abs(load.first))]
    own = replace(BEAM, cases=(low,), diagrams=())
    assert compose_beam(own, "wide").items != compose_beam(replace(own, intensity=scales.pop()), "wide").items
