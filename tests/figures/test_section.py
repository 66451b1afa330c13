"""Section figures: thicknesses are read beside the axes, not on them."""

import numpy as np
import pytest

from calcgen.figures.picture import WIDTHS, Shape, Width, label_boxes
from calcgen.figures.section import SectionDrawing, compose_section
from tests.figures.drawings import BEAM_I, ON_ITS_SIDE, SECTION, TUBE


@pytest.mark.parametrize("width", list(WIDTHS))
@pytest.mark.parametrize("drawing", [BEAM_I, ON_ITS_SIDE, SECTION, TUBE], ids=lambda d: d.ident)
def test_a_thickness_does_not_stand_on_an_axis(drawing: SectionDrawing, width: Width) -> None:
    picture = compose_section(drawing, width)
    boxes = dict(label_boxes(picture))
    axes = [item for item in picture.items if isinstance(item, Shape) and item.stroke and item.stroke.dash]
    lines = [np.array(ring) for axis in axes for ring in axis.rings]
    assert lines
    for label in (d.label for d in drawing.dimensions if d.side == "across"):
        assert not any(boxes[label].crosses(line[:-1], line[1:]) for line in lines), label
