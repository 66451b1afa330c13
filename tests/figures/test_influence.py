"""Figures of influence lines: labels keep clear, parts are told apart, places are marked."""

from __future__ import annotations

from functools import cache
from itertools import combinations, pairwise

import numpy as np
import pytest

from calcgen.evaluation.results.beam import BeamResult
from calcgen.figures.adapt_influence import TOGETHER, influence_drawings
from calcgen.figures.beam import MARGIN, BeamDrawing
from calcgen.figures.influence import compose_influence
from calcgen.figures.picture import WIDTHS, Picture, Shape, Width, label_boxes
from calcgen.figures.signs import draw_signs
from calcgen.figures.svg import render
from calcgen.quantities.display import Style
from tests.evaluation.helpers import evaluated, fence

BEAMS: dict[str, tuple[str, ...]] = {
    "simple": ("span = 8 m", "influence η_M = M at 3 m", "influence η_V = V at 3 m", "influence η_1 = R_1"),
    "three spans": (
        "span = 8 m, 10 m, 8 m",
        "influence η_1 = M at 13 m",
        "influence η_2 = V at 4 m",
        "influence η_B = M at 8 m",
        "influence η_R = R_2",
        "influence η_w = w at 13 m",
        "influence η_θ = θ_1",
        "influence η_V = V left of 8 m",
    ),
    "Gerber": (
        "span = 12 m, 8 m",
        "support pin at 0 m",
        "support roller at 12 m",
        "support roller at 20 m",
        "hinge at 15 m",
        "influence η_1 = M at 6 m",
        "influence η_2 = V at 17 m",
        "influence η_0 = M at 15 m",
    ),
    "cantilever": (
        "span = 3 m",
        "support fixed at 0 m",
        "influence η_1 = M at 0 m",
        "influence η_2 = V at 1 m",
    ),
    "twenty spans": (
        f"span = {', '.join(['6 m'] * 20)}",
        "influence η_1 = M at 63 m",
        "influence η_2 = V right of 60 m",
        "influence η_3 = w at 117 m",
    ),
    "a place near the end": ("span = 40 m", "influence η_1 = V at 0.1 m", "influence η_2 = V at 39.9 m"),
}
cases = pytest.mark.parametrize(("name", "width"), [(n, w) for n in BEAMS for w in WIDTHS])


@cache
def drawings(name: str) -> tuple[BeamDrawing, ...]:
    (calc,) = evaluated("# T\n" + fence("beam b", "EI = 40000 kN·m²", *BEAMS[name]))
    beam = next(s for s in calc.segments if isinstance(s, BeamResult))
    return influence_drawings(beam, "b", Style("SI"))


@cache
def pictures(name: str, width: Width) -> tuple[Picture, ...]:
    return tuple(compose_influence(drawing, width) for drawing in drawings(name))


def signs(picture: Picture) -> list[str]:
    return [text for text, _ in label_boxes(picture) if text in ("+", "−")]


@cases
def test_no_label_overlaps_another_or_leaves_the_figure(name: str, width: Width) -> None:
    for picture in pictures(name, width):
        frame = picture.frame
        assert frame.right - frame.left <= WIDTHS[width] + 0.1
        for (first, a), (second, b) in combinations(label_boxes(picture), 2):
            assert not a.overlaps(b), f"{first!r} over {second!r}"
        for text, box in label_boxes(picture):
            assert frame.left <= box.left, text
            assert box.right <= frame.right, text


@cases
def test_each_line_has_its_title_its_sign_and_its_extremes(name: str, width: Width) -> None:
    for drawing, picture in zip(drawings(name), pictures(name, width), strict=True):
        texts = {text for text, _ in label_boxes(picture)}
        for diagram in drawing.diagrams:
            assert diagram.title in texts
            assert {extreme.label for extreme in diagram.extremes} <= texts
        together = " ".join(text for text, _ in label_boxes(picture))
        assert "positive" in together
        assert "Positive ordinates are drawn above the line" in together
        assert "a unit load down" in picture.description or "for a unit load down" in picture.description


@cases
def test_the_svg_can_be_drawn(name: str, width: Width) -> None:
    for picture in pictures(name, width):
        assert render(picture) == render(picture)


def test_a_figure_has_a_few_lines_and_another_one_the_rest() -> None:
    first, second = drawings("three spans")
    assert (len(first.diagrams), len(second.diagrams)) == (TOGETHER, 3)
    assert first.title == "beam b, influence lines η_1, η_2, η_B, η_R"
    assert first.ident != second.ident


def test_extremes_say_where_the_load_stands() -> None:
    (drawing,) = drawings("simple")
    moment, shear, reaction = drawing.diagrams
    labels = [e.label.replace("\u00a0", " ") for d in (moment, shear, reaction) for e in d.extremes]
    assert labels == [
        "1.875 m, load at 3 m",
        "0.6250, load just right of 3 m",
        "−0.3750, load just left of 3 m",
        "1, load at 0 m",
    ]
    assert [d.mark for d in drawing.diagrams] == [3.0, 3.0, 0.0]


@pytest.mark.parametrize("width", WIDTHS)
def test_positive_parts_are_above_and_plain_negative_ones_hatched_and_both_signed(width: Width) -> None:
    (picture,) = pictures("simple", width)
    assert sorted(signs(picture)) == ["+", "+", "+", "−"]
    (hatch,) = [item for item in picture.items if isinstance(item, Shape) and item.clip]
    zero = hatch.clip[0][0][1]
    assert all(y >= zero - 1e-9 for _, y in hatch.clip[0])  # pixels run down: below the line
    across = [x for x, _ in hatch.clip[0]]
    room = WIDTHS[width] - 2 * MARGIN
    assert (min(across), max(across)) == pytest.approx((MARGIN, MARGIN + 3 / 8 * room))


def test_the_beam_with_its_supports_and_hinge_stands_beneath() -> None:
    (picture,) = pictures("Gerber", "wide")
    (dotted,) = [
        i for i in picture.items if isinstance(i, Shape) and i.stroke and i.stroke.dash and len(i.rings) > 2
    ]
    foot = max(y for ring in dotted.rings for _, y in ring)
    assert len(dotted.rings) == 4  # three supports and the hinge
    titles = [box.bottom for text, box in label_boxes(picture) if text.startswith("η_")]
    assert all(a < b for a, b in pairwise(titles))
    assert max(titles) < foot


def test_a_line_of_zeros_is_drawn_without_labels() -> None:
    (drawing,) = drawings("Gerber")
    assert drawing.diagrams[2].extremes == ()


@pytest.mark.parametrize(
    ("points", "expected"),
    [
        ([(0, 0), (50, -40), (100, 0)], "+"),
        ([(0, 0), (50, 40), (100, 0)], "−"),
        ([(0, 0), (50, 40), (50, -40), (100, 0)], "−+"),  # a jump
        ([(0, 30), (100, -30)], "−+"),  # it crosses between two points
        ([(0, 0), (40, 0), (70, -30), (100, 0), (130, 0)], "+"),  # zeros before and after
        ([(0, 0), (50, 3), (100, 0)], ""),  # no room
        ([(0, 0), (100, 0)], ""),
    ],
)
def test_parts_of_a_curve(points: list[tuple[float, float]], expected: str) -> None:
    from calcgen.figures.picture import Sketch

    sketch = Sketch()
    sketch.line(points)
    draw_signs(sketch, np.array(points, dtype=float), 0.0, [], -1)
    assert "".join(signs(sketch.picture("s", "", ""))) == expected
