"""Stress figures: tractions, resultants and words turn and point as the mechanics has it."""

import pytest

from calcgen.figures.picture import WIDTHS, Picture, Shape, Width, label_boxes
from calcgen.figures.stress import FACE_NOTE, StressDrawing, compose_stress
from tests.figures.drawings import HOGGING, MOSTLY_AXIAL, NO_STRESS, PLASTIC, PURE_AXIAL, SAGGING

TRACTION_HEAD = 5.0
places = pytest.mark.parametrize("width", list(WIDTHS))


def heads(picture: Picture, colour: str) -> list[tuple[float, float, float]]:
    """Tip (x, y) and direction (+1 to the right) of the arrow heads of the tractions of one colour."""
    return [
        (tip[0], tip[1], 1.0 if tip[0] > back[0] else -1.0)
        for item in picture.items
        if isinstance(item, Shape) and item.fill == colour and item.opacity == 1.0
        for tip, back, other in item.rings
        if abs(back[0] - tip[0]) < TRACTION_HEAD
    ]


@places
@pytest.mark.parametrize(
    "drawing", [SAGGING, HOGGING, MOSTLY_AXIAL, PURE_AXIAL, PLASTIC], ids=lambda d: d.ident
)
def test_tension_leaves_the_face_and_compression_enters_it(drawing: StressDrawing, width: Width) -> None:
    picture = compose_stress(drawing, width)
    tension, compression = heads(picture, "tension"), heads(picture, "compression")
    assert {way for *_, way in tension} <= {1.0}
    assert {way for *_, way in compression} <= {-1.0}
    # all compression ends at the face, and no tension does
    assert len({round(x, 6) for x, *_ in compression}) <= 1
    for face in {x for x, *_ in compression}:
        assert all(x > face + 1 for x, *_ in tension)
    assert bool(tension) == any(s > 0 for _, s in drawing.stress)
    assert bool(compression) == any(s < 0 for _, s in drawing.stress)


@places
@pytest.mark.parametrize(("drawing", "sense"), [(SAGGING, 1), (HOGGING, -1)], ids=["sagging", "hogging"])
def test_the_moment_turns_as_the_tractions_do(drawing: StressDrawing, sense: int, width: Width) -> None:
    picture = compose_stress(drawing, width)
    arrows = heads(picture, "tension") + heads(picture, "compression")
    middle = sum(y for _, y, _ in arrows) / len(arrows)
    # pixels run down: a pull to the right below the middle turns counter-clockwise
    turning = sum(way * (y - middle) for _, y, way in arrows)
    (head,) = [item for item in picture.items if isinstance(item, Shape) and item.fill == "ink"]
    tip, *back = head.rings[0]
    upward = tip[1] < min(y for _, y in back)  # on the right-hand side of the turn, up is counter-clockwise
    assert (turning > 0) == upward == (sense > 0)


@places
@pytest.mark.parametrize("drawing", [SAGGING, HOGGING, MOSTLY_AXIAL], ids=lambda d: d.ident)
def test_words_stand_beside_the_values(drawing: StressDrawing, width: Width) -> None:
    texts = [text for text, _ in label_boxes(compose_stress(drawing, width))]
    for mark in drawing.marks:
        assert texts[texts.index(mark.label) + 1] == ("tension" if mark.value > 0 else "compression")


@places
@pytest.mark.parametrize("drawing", [MOSTLY_AXIAL, PURE_AXIAL, NO_STRESS], ids=lambda d: d.ident)
def test_a_neutral_axis_outside_the_section_is_told_in_words(drawing: StressDrawing, width: Width) -> None:
    picture = compose_stress(drawing, width)
    shown = " ".join(text for text, _ in label_boxes(picture))
    assert drawing.neutral_axis_label in shown
    assert not any(isinstance(i, Shape) and i.stroke and i.stroke.dash for i in picture.items)


@places
def test_no_stress_has_no_arrows(width: Width) -> None:
    picture = compose_stress(NO_STRESS, width)
    assert heads(picture, "tension") == heads(picture, "compression") == []
    assert FACE_NOTE not in " ".join(text for text, _ in label_boxes(picture))
