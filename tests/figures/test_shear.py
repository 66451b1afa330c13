"""Shear figures: V as it acts, profiles to scale, the largest value told from the others."""

import pytest

from calcgen.figures.picture import WIDTHS, Label, Picture, Shape, Width, label_boxes
from calcgen.figures.shear import ShearDrawing, compose_shear
from tests.figures.shear_models import NO_SHEAR, PLAIN, PLATE_GIRDER, SHEARS, WITH_FLOW

places = pytest.mark.parametrize("width", list(WIDTHS))


def filled(picture: Picture) -> list[Shape]:
    return [item for item in picture.items if isinstance(item, Shape) and item.fill == "section"]


@places
@pytest.mark.parametrize(("drawing", "up"), [(PLATE_GIRDER, True), (PLAIN, False)], ids=["up", "down"])
def test_a_positive_force_points_up_on_the_face(drawing: ShearDrawing, up: bool, width: Width) -> None:
    picture = compose_shear(drawing, width)
    (head,) = [
        i.rings[0] for i in picture.items if isinstance(i, Shape) and i.fill == "ink" and len(i.rings[0]) == 3
    ]
    tip, *back = head
    assert (tip[1] < min(y for _, y in back)) == up


@places
@pytest.mark.parametrize("drawing", SHEARS.values(), ids=lambda d: d.ident)
def test_the_profile_is_to_scale_and_its_largest_value_bold(drawing: ShearDrawing, width: Width) -> None:
    picture = compose_shear(drawing, width)
    profiles = [i for i in filled(picture) if i.stroke is None and len(i.rings[0]) > 20]
    for panel, shape in zip(drawing.panels, profiles, strict=False):
        (*points, (zero, _), _) = shape.rings[0]
        largest = max(abs(value) for _, value in panel.profile)
        reach = max(abs(x - zero) for x, _ in points)
        for (x, _), (_, value) in zip(points, panel.profile, strict=True):
            assert (x - zero) * largest == pytest.approx(value * reach, abs=1e-6 * max(largest * reach, 1e-9))
    for panel in drawing.panels:
        marks = {m.label: abs(m.value) for m in panel.marks}
        bold = {i.text for i in picture.items if isinstance(i, Label) and i.bold and i.text in marks}
        assert bold == {text for text, value in marks.items() if value == max(marks.values())}


@places
def test_each_joint_is_a_heavy_line_with_its_flow_beside_it(width: Width) -> None:
    picture = compose_shear(PLATE_GIRDER, width)
    heavy = [i for i in picture.items if isinstance(i, Shape) and i.stroke and i.stroke.weight == 3.0]
    assert len(heavy) == len(PLATE_GIRDER.joints) + 1  # and the swatch of the legend
    boxes = dict(label_boxes(picture))
    for joint, line in zip(PLATE_GIRDER.joints, heavy, strict=False):
        label = boxes[joint.label]
        assert label.left > line.box.right
        assert abs((label.top + label.bottom) / 2 - line.box.top) < 16


@places
def test_every_panel_has_its_title_and_a_force_of_zero_no_arrow(width: Width) -> None:
    texts = {text for text, _ in label_boxes(compose_shear(WITH_FLOW, width))}
    assert {"shear stress τ, MPa", "shear flow q, N/mm"} <= texts
    assert not [i for i in compose_shear(NO_SHEAR, width).items if isinstance(i, Shape) and i.fill == "ink"]
