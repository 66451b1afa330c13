"""Beam figures: one axis for all panels, the moment on its tension side, extremes where they occur."""

import numpy as np
import pytest

from calcgen.figures.beam import MARGIN, BeamDrawing, compose_beam
from calcgen.figures.picture import WIDTHS, Picture, Shape, Width, label_boxes
from tests.figures.drawings import (
    MOMENT_NOTE,
    crowded_beam,
    envelope_beam,
    neighbouring_extremes,
    simple_beam,
)

places = pytest.mark.parametrize("width", list(WIDTHS))


def dots(picture: Picture) -> list[tuple[float, float]]:
    """Centres of the dots that mark extremes."""
    centres = [
        tuple(np.mean(item.rings[0], axis=0))
        for item in picture.items
        if isinstance(item, Shape)
        and item.fill == "ink"
        and len(item.rings) == 1
        and len(item.rings[0]) == 20
    ]
    return [(float(x), float(y)) for x, y in centres]


def zero_lines(picture: Picture) -> list[float]:
    return [
        item.rings[0][0][1]
        for item in picture.items
        if isinstance(item, Shape)
        and item.stroke is not None
        and item.stroke.weight == 0.9
        and not item.closed
    ]


@places
def test_extremes_stand_where_they_occur_and_sagging_is_below_the_line(width: Width) -> None:
    picture = compose_beam(simple_beam(), width)
    *_, shear, moment = dots(picture)
    zero_v, zero_m = zero_lines(picture)[-2:]
    assert shear[0] == pytest.approx(MARGIN)
    assert moment[0] == pytest.approx(WIDTHS[width] / 2)
    assert shear[1] < zero_v  # positive shear is drawn above
    assert moment[1] > zero_m  # pixels run down: sagging is drawn below
    assert MOMENT_NOTE in " ".join(text for text, _ in label_boxes(picture))


@places
@pytest.mark.parametrize(
    "drawing", [simple_beam(), envelope_beam(), neighbouring_extremes()], ids=lambda b: b.ident
)
def test_every_value_of_the_beam_is_in_the_figure(drawing: BeamDrawing, width: Width) -> None:
    texts = {text for text, _ in label_boxes(compose_beam(drawing, width))}
    expected = {load.label for case in drawing.cases for load in case.loads}
    expected |= {extreme.label for diagram in drawing.diagrams for extreme in diagram.extremes}
    expected |= {support.label for support in drawing.supports}
    expected |= {stretch.label for stretch in drawing.stretches}
    assert expected <= texts


@places
def test_an_envelope_has_both_its_lines_named(width: Width) -> None:
    texts = [text for text, _ in label_boxes(compose_beam(envelope_beam(), width))]
    assert {"max", "min"} <= set(texts)


@places
def test_thirty_loads_and_two_dozen_extremes_all_keep_their_labels(width: Width) -> None:
    beam = crowded_beam()
    texts = [text for text, _ in label_boxes(compose_beam(beam, width))]
    assert {load.label for load in beam.cases[0].loads} <= set(texts)
    assert {extreme.label for extreme in beam.diagrams[0].extremes} <= set(texts)
