"""Zones of a section: cut as shapely cuts, each with its own mark and its words."""

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from shapely.geometry import Polygon, box

from calcgen.figures.labels import Box
from calcgen.figures.legend import Entry, entries_of
from calcgen.figures.outline import Part
from calcgen.figures.picture import DASH, WIDTHS, Shape, Width, label_boxes
from calcgen.figures.stress import compose_stress
from calcgen.figures.stress_drawing import StressDrawing
from calcgen.figures.zones import Zone, cut_to
from tests.figures.rings import rectangle
from tests.figures.stress_models import CRACKED, ELASTIC_PLASTIC, NO_TENSION, STRESS_MODELS


@settings(max_examples=50)
@given(
    st.lists(st.floats(2, 50), min_size=4, max_size=12),
    st.floats(-60, 60),
    st.floats(1, 80),
)
def test_a_ring_is_cut_to_a_strip_as_shapely_cuts_it(reaches: list[float], top: float, depth: float) -> None:
    turns = np.linspace(0, 2 * np.pi, len(reaches), endpoint=False)
    ring = np.column_stack([np.cos(turns), np.sin(turns)]) * np.array(reaches)[:, None]  # a star, simple
    expected = Polygon(ring).intersection(box(-100, top, 100, top + depth)).area
    cut = cut_to([ring], Box(-100, top, 100, top + depth))
    area = sum(Polygon(piece).area for piece in cut)
    assert area == pytest.approx(expected, rel=1e-9, abs=1e-9)


@pytest.mark.parametrize("width", list(WIDTHS))
@pytest.mark.parametrize("drawing", STRESS_MODELS.values(), ids=lambda d: d.ident)
def test_each_zone_and_each_material_is_told_in_words(drawing: StressDrawing, width: Width) -> None:
    shown = " ".join(text for text, _ in label_boxes(compose_stress(drawing, width)))
    for label in (*(zone.label for zone in drawing.zones), *(part.label for part in drawing.parts)):
        assert all(word in shown for word in label.split())


@pytest.mark.parametrize("width", list(WIDTHS))
@pytest.mark.parametrize(
    ("drawing", "stress_free"), [(NO_TENSION, True), (CRACKED, False), (ELASTIC_PLASTIC, False)]
)
def test_what_is_out_of_contact_has_a_dashed_outline(
    drawing: StressDrawing, stress_free: bool, width: Width
) -> None:
    shapes = [item for item in compose_stress(drawing, width).items if isinstance(item, Shape)]
    dashed = [item for item in shapes if item.closed and item.stroke and item.stroke.dash == DASH]
    assert bool(dashed) == stress_free


def test_the_legend_has_each_entry_once() -> None:
    timber = Part((rectangle(1, 1),), "timber", "ruled")
    zone = Zone(0, 1, "cracked", "cracked")
    entries = entries_of([timber, timber, Part((rectangle(1, 1),))], [zone, zone], "bars")
    assert entries == [Entry("timber", "ruled"), Entry("bars", "bar"), Entry("cracked", "cracked")]
