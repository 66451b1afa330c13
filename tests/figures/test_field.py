"""Fields of stress: limits hold, blank areas stay blank, bars are told by more than colour."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from calcgen.figures.field import FieldPart, compose_field
from calcgen.figures.outline import Part
from calcgen.figures.picture import WIDTHS, Shape, Width, label_boxes
from tests.figures.rings import rectangle
from tests.figures.section_models import FOOTING_FIELD, RC_FIELD, YIELDED_FIELD

places = pytest.mark.parametrize("width", list(WIDTHS))
slope = st.floats(-5, 5)


@settings(max_examples=50)
@given(st.floats(-300, 300), slope, slope, st.floats(0, 200), st.floats(0, 200))
def test_the_extremes_are_those_of_the_whole_part(
    constant: float, by_x: float, by_y: float, least: float, most: float
) -> None:
    field = FieldPart(Part((rectangle(60, 100),)), constant, by_x, by_y, -least, most)
    x, y = np.meshgrid(np.linspace(-30, 30, 7), np.linspace(-50, 50, 7))
    everywhere = np.clip(constant + by_x * x + by_y * y, -least, most)
    assert field.extremes == pytest.approx((everywhere.min(), everywhere.max()), abs=1e-9)


@places
@pytest.mark.parametrize("drawing", [RC_FIELD, FOOTING_FIELD], ids=lambda d: d.ident)
def test_what_carries_no_tension_stays_blank(drawing: object, width: Width) -> None:
    field = RC_FIELD if drawing is RC_FIELD else FOOTING_FIELD
    shapes = [i for i in compose_field(field, width).items if isinstance(i, Shape)]
    assert not [i for i in shapes if i.fill == "tension" and i.clip]
    assert [i for i in shapes if i.fill == "paper" and i.clip]


@places
def test_a_plain_area_at_yield_is_told_in_words_and_bounded(width: Width) -> None:
    picture = compose_field(YIELDED_FIELD, width)
    assert YIELDED_FIELD.limits_label in {text for text, _ in label_boxes(picture)}
    bounds = [
        i for i in picture.items if isinstance(i, Shape) and i.clip and i.stroke and i.stroke.colour == "ink"
    ]
    assert [len(i.rings) for i in bounds] == [2]


@places
def test_bars_are_filled_in_tension_and_open_in_compression(width: Width) -> None:
    picture = compose_field(RC_FIELD, width)
    dots = [
        i for i in picture.items if isinstance(i, Shape) and i.closed and len(i.rings[0]) == 20 and i.stroke
    ]
    filled = sum(i.fill == "tension" for i in dots)
    assert filled >= sum(bar.value > 0 for bar in RC_FIELD.bars) > 0
    texts = {text for text, _ in label_boxes(picture)}
    assert {"bar in tension", "bar in compression"} <= texts
