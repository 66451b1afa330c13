"""Labels of any beam stand clear of each other, of the frame and of the curves."""

from itertools import combinations

import numpy as np
import pytest
from hypothesis import given, settings

from calcgen.figures.beam import BeamDrawing, compose_beam
from calcgen.figures.picture import WIDTHS, Picture, Shape, label_boxes
from calcgen.quantities.display import Style
from tests.figures.beams import drawings_of, random_beams


def check(picture: Picture, width: float) -> None:
    frame, boxes = picture.frame, label_boxes(picture)
    assert frame.right - frame.left <= width + 0.1
    for text, box in boxes:
        assert frame.left <= box.left, text
        assert box.right <= frame.right, text
        assert frame.top <= box.top, text
        assert box.bottom <= frame.bottom, text
    for (first, a), (second, b) in combinations(boxes, 2):
        assert not a.overlaps(b), f"{first!r} over {second!r}"
    for item in picture.items:
        if isinstance(item, Shape) and is_curve(item):
            curve = np.array(item.rings[0])
            for text, box in boxes:
                assert not box.crosses(curve[:-1], curve[1:]), f"{text!r} on a curve"


def is_curve(item: Shape) -> bool:
    """Tell whether a shape is a diagram's curve: forces and keys are straight, and of two points."""
    return (
        not item.closed and item.stroke is not None and item.stroke.weight == 1.5 and len(item.rings[0]) > 2
    )


def check_all(drawings: tuple[BeamDrawing, ...]) -> None:
    for drawing in drawings:
        for width, room in WIDTHS.items():
            check(compose_beam(drawing, width), room)


@settings(max_examples=8, deadline=None)
@given(random_beams())
def test_labels_of_a_random_beam_collide_with_nothing(typed: tuple[tuple[str, ...], str, Style]) -> None:
    lines, before, style = typed
    check_all(drawings_of(*lines, before=before, style=style))


@pytest.mark.slow
@settings(max_examples=100, deadline=None)
@given(random_beams())
def test_labels_of_many_random_beams_collide_with_nothing(typed: tuple[tuple[str, ...], str, Style]) -> None:
    lines, before, style = typed
    check_all(drawings_of(*lines, before=before, style=style))


@pytest.mark.parametrize(
    ("count", "pattern"), [(100, ""), pytest.param(30, "pattern Q", marks=pytest.mark.slow)]
)
def test_labels_of_a_long_beam_are_thinned(count: int, pattern: str) -> None:
    drawings = drawings_of(
        f"span = {', '.join(['5 m'] * count)}",
        "EI = 20000 kN·m^2",
        "load G uniform 4 kN/m",
        "load Q uniform 8 kN/m",
        *(f"load Q point {i + 1} kN at {5 * i + 2} m" for i in range(count)),
        *(f"load R uniform {i + 1} kN/m from {5 * i} m to {5 * i + 4} m" for i in range(count)),
        *filter(None, [pattern]),
        "combination U1 in ULS = 1.35*G + 1.5*Q + R",
        "combination U2 in ULS = 1.0*G + 1.5*Q",
    )
    check_all(drawings)
    picture = compose_beam(drawings[0], "wide")
    texts = [text for text, _ in label_boxes(picture)]
    assert f"{count} × 5\u00a0m" in texts
    assert {"1", str(count + 1)} <= set(texts)
    assert "listed under the figure" in " ".join(texts)
    assert len(picture.listed) == 6
