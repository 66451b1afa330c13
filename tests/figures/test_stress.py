"""Stress figures: tractions, resultants and words turn and point as the mechanics has it."""

from dataclasses import replace
from itertools import pairwise

import pytest

from calcgen.figures.picture import CHAIN, WIDTHS, Label, Picture, Shape, Width, label_boxes
from calcgen.figures.stress import BARS_NOTE, FACE_NOTE, PANELS_NOTE, compose_stress
from calcgen.figures.stress_drawing import Mark, StressDrawing
from tests.figures.drawings import (
    HOGGING,
    MOSTLY_AXIAL,
    NO_STRESS,
    PLASTIC,
    PURE_AXIAL,
    PURE_COMPRESSION,
    SAGGING,
    TIMBER_ON_STEEL,
    UNEVEN,
)
from tests.figures.stress_models import CRACKED, LAYERS, STRESS_MODELS

places = pytest.mark.parametrize("width", list(WIDTHS))
stressed = pytest.mark.parametrize(
    "drawing",
    [
        SAGGING,
        HOGGING,
        MOSTLY_AXIAL,
        PURE_AXIAL,
        PURE_COMPRESSION,
        PLASTIC,
        UNEVEN,
        TIMBER_ON_STEEL,
    ],
    ids=lambda d: d.ident,
)


def arrows(picture: Picture, colour: str) -> list[tuple[float, float, float]]:
    """Tractions of one colour as (tail x, head x, y); the arrow of a force is thicker than theirs."""
    pairs = zip(picture.items, picture.items[1:], strict=False)
    return [
        (line[0][0], head[0][0], head[0][1])
        for shafts, heads in pairs
        if isinstance(shafts, Shape) and isinstance(heads, Shape) and not shafts.closed
        if shafts.stroke and shafts.stroke.weight < 1 and heads.fill == colour
        for line, head in zip(shafts.rings, heads.rings, strict=True)
    ]


def face_of(picture: Picture) -> float:
    """Place of the zero line of stress, the heaviest upright line."""
    upright = [
        item
        for item in picture.items
        if isinstance(item, Shape) and not item.closed and item.stroke and item.stroke.colour == "ink"
        if item.box.left == item.box.right
    ]
    return max(upright, key=lambda item: item.stroke.weight if item.stroke else 0.0).box.left


@places
@stressed
def test_tension_leaves_the_face_and_compression_enters_the_body(
    drawing: StressDrawing, width: Width
) -> None:
    picture = compose_stress(drawing, width)
    face = face_of(picture)
    tension, compression = arrows(picture, "tension"), arrows(picture, "compression")
    assert {tail for tail, *_ in tension + compression} == {face}
    assert all(head > face for _, head, _ in tension)
    assert all(head < face for _, head, _ in compression)
    assert bool(tension) == any(s > 0 for _, s in drawing.panels[0].profile)
    assert bool(compression) == any(s < 0 and abs(s) > 10 for _, s in drawing.panels[0].profile)


@places
@pytest.mark.parametrize(
    "drawing", [SAGGING, HOGGING, MOSTLY_AXIAL, PURE_AXIAL, UNEVEN], ids=lambda d: d.ident
)
def test_the_heads_lie_on_one_straight_line(drawing: StressDrawing, width: Width) -> None:
    picture = compose_stress(drawing, width)
    heads = sorted((y, x) for colour in ("tension", "compression") for _, x, y in arrows(picture, colour))
    (y_1, x_1), (y_2, x_2) = heads[0], heads[-1]
    for y, x in heads:
        assert x == pytest.approx(x_1 + (x_2 - x_1) * (y - y_1) / (y_2 - y_1), abs=1e-9)


@places
@pytest.mark.parametrize("drawing", [SAGGING, HOGGING, UNEVEN, TIMBER_ON_STEEL], ids=lambda d: d.ident)
def test_the_neutral_axis_runs_through_every_panel_and_is_named_once(
    drawing: StressDrawing, width: Width
) -> None:
    picture = compose_stress(drawing, width)
    chains = [i for i in picture.items if isinstance(i, Shape) and i.stroke and i.stroke.dash == CHAIN]
    rows = 2 if drawing.strain and width == "narrow" else 1
    assert len(chains) == rows
    section, *_ = [i.box for i in picture.items if isinstance(i, Shape) and i.fill == "section"]
    lobes = [i.box for i in picture.items if isinstance(i, Shape) and i.fill and i.opacity < 1]
    assert chains[0].box.left < section.left
    assert chains[0].box.right >= max(lobe.right for lobe in lobes)
    # once along the axis; the sentence below says where it lies if it didn't fit there
    shown = [i for i in picture.items if isinstance(i, Label) and i.text.startswith("neutral axis")]
    assert sum(i.colour == "ink" for i in shown) == 1


@places
@stressed
def test_values_stand_clear_of_the_profile_and_the_section(drawing: StressDrawing, width: Width) -> None:
    picture = compose_stress(drawing, width)
    values = [(i.text, i.box) for i in picture.items if isinstance(i, Label) and i.bold]
    filled = [i.box for i in picture.items if isinstance(i, Shape) and i.closed and i.fill == "section"]
    assert [text for text, _ in values] == [mark.label for mark in drawing.panels[0].marks]
    for text, box in values:
        assert not any(box.overlaps(part) for part in filled), text
        for colour in ("tension", "compression"):
            for tail, head, y in arrows(picture, colour):
                assert not (
                    box.top < y < box.bottom and box.left < max(tail, head) and min(tail, head) < box.right
                ), text


@places
@pytest.mark.parametrize(("drawing", "sense"), [(SAGGING, 1), (HOGGING, -1)], ids=["sagging", "hogging"])
def test_the_moment_turns_as_the_tractions_do(drawing: StressDrawing, sense: int, width: Width) -> None:
    picture = compose_stress(drawing, width)
    tractions = arrows(picture, "tension") + arrows(picture, "compression")
    middle = sum(y for *_, y in tractions) / len(tractions)
    # pixels run down: a pull to the right below the middle turns counter-clockwise
    turning = sum((head - tail) * (y - middle) for tail, head, y in tractions)
    (head,) = [item for item in picture.items if isinstance(item, Shape) and item.fill == "ink"]
    tip, *back = head.rings[0]
    upward = tip[1] < min(y for _, y in back)  # on the right-hand side of the turn, up is counter-clockwise
    assert (turning > 0) == upward == (sense > 0)


@places
@pytest.mark.parametrize("drawing", [SAGGING, HOGGING, MOSTLY_AXIAL], ids=lambda d: d.ident)
def test_words_stand_beside_the_values(drawing: StressDrawing, width: Width) -> None:
    texts = [text for text, _ in label_boxes(compose_stress(drawing, width))]
    for mark in drawing.panels[0].marks:
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
    assert arrows(picture, "tension") == arrows(picture, "compression") == []
    assert FACE_NOTE not in " ".join(text for text, _ in label_boxes(picture))


@places
@pytest.mark.parametrize("drawing", STRESS_MODELS.values(), ids=lambda d: d.ident)
def test_every_panel_axis_dimension_and_comparison_is_told(drawing: StressDrawing, width: Width) -> None:
    picture = compose_stress(drawing, width)
    shown = " ".join(text for text, _ in label_boxes(picture))
    for label in (*(level.label for level in drawing.levels), *(d.label for d in drawing.dimensions)):
        assert label in shown
    for panel in drawing.panels:
        assert panel.title in shown
        assert panel.compared is None or panel.compared.label in shown
    assert (PANELS_NOTE in shown) == (len(drawing.panels) > 1)


@places
@pytest.mark.parametrize(("bar", "alike"), [(12.0, True), (-30.0, True), (213.0, False), (-0.5, False)])
def test_bars_point_as_their_stress_does_and_another_scale_is_said(
    bar: float, alike: bool, width: Width
) -> None:
    (panel,) = CRACKED.panels
    bars = (Mark(-200, bar, "at the bar"),)
    picture = compose_stress(replace(CRACKED, panels=(replace(panel, bars=bars),)), width)
    face = face_of(picture)
    shafts, heads = next(
        (a, b)
        for a, b in pairwise(picture.items)
        if isinstance(a, Shape) and isinstance(b, Shape) and a.stroke and a.stroke.weight == 2.2
    )
    tip = heads.rings[0][0][0]
    assert shafts.rings[0][0][0] == face
    assert (tip > face) == (bar > 0)
    shown = " ".join(text for text, _ in label_boxes(picture))
    assert (BARS_NOTE in shown) == (not alike)
    lobe = next(i for i in picture.items if isinstance(i, Shape) and i.fill == "compression")
    reach = face - lobe.box.left
    if alike:  # a bar's arrow is as long as the profile is at the same stress
        assert abs(tip - face) == pytest.approx(reach * abs(bar) / 8.4, rel=1e-6)
    else:
        assert abs(tip - face) == pytest.approx(reach, rel=1e-6)


@places
def test_values_inside_keep_to_their_side_or_have_a_leader(width: Width) -> None:
    picture = compose_stress(LAYERS, width)
    bold = [i for i in picture.items if isinstance(i, Label) and i.bold]
    assert sorted(i.text for i in bold) == sorted(mark.label for mark in LAYERS.panels[0].marks)
    words = [i.text for i in picture.items if isinstance(i, Label) and i.text in ("tension", "compression")]
    assert words == ["compression", "tension"] or words == ["tension", "compression"]  # at the extremes alone
