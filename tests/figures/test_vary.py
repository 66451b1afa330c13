"""Figures of repeated calcs: curves pass through their values and are open at gaps; marks are in place."""

import numpy as np
import pytest

from calcgen.figures.picture import CHAIN, DASH, WIDTHS, Label, Picture, Shape, Width
from calcgen.figures.vary import APART, HEIGHT, VaryDrawing, compose_vary
from tests.figures.varied import CONSTANT, GAPS, SECTIONS_TRIED, SPANS, VARIED

places = pytest.mark.parametrize("width", list(WIDTHS))


def curves(picture: Picture) -> list[np.ndarray]:
    """Points of the curves, which are the lines of weight 1.5."""
    return [
        np.array(ring)
        for item in picture.items
        if isinstance(item, Shape) and item.stroke is not None and item.stroke.weight == 1.5
        for ring in item.rings
    ]


def dashed(picture: Picture, dash: tuple[float, ...]) -> list[np.ndarray]:
    """Lines of a dash over the panels; those of the legend are shorter."""
    lines = (
        np.array(item.rings[0])
        for item in picture.items
        if isinstance(item, Shape) and item.stroke is not None and item.stroke.dash == dash
    )
    return [line for line in lines if np.ptp(line, axis=0).max() > 20]


def dots(picture: Picture, fill: str) -> list[np.ndarray]:
    """Centres and radii (x, y, r) of the dots of one fill, those of the legend apart."""
    shapes = [i for i in picture.items if isinstance(i, Shape) and i.closed and i.fill == fill]
    rings = [np.array(i.rings[0]) for i in shapes]
    found = [np.array([*ring.mean(axis=0), np.ptp(ring[:, 0]) / 2]) for ring in rings]
    return [dot for dot in found if dot[1] < HEIGHT]


def scale(picture: Picture, panel: int, *, upright: bool) -> tuple[float, float]:
    """Slope and value at pixel 0 of an axis, by the numbers at its ticks."""
    low = panel * (HEIGHT + APART)
    found = []
    for item in picture.items:
        if isinstance(item, Label) and item.colour == "muted":
            value = float(item.text.replace("−", "-"))
            if upright and item.anchor == "right" and low <= item.y <= low + HEIGHT + 4:
                found.append((item.y - 3.5, value))
            if not upright and item.anchor == "center":
                found.append((item.x, value))
    (a, first), (b, last) = found[0], found[-1]
    slope = (last - first) / (b - a)
    return slope, first - slope * a


@places
def test_curves_pass_through_their_values(width: Width) -> None:
    picture = compose_vary(SPANS, width)
    found = curves(picture)
    assert len(found) == 2
    across = scale(picture, 0, upright=False)
    for number, curve in enumerate(found):
        up = scale(picture, number, upright=True)
        for (x, y), trial in zip(curve, SPANS.trials, strict=True):
            assert across[0] * x + across[1] == pytest.approx(trial.x, abs=0.02)
            assert up[0] * y + up[1] == pytest.approx(trial.values[number], rel=1e-2, abs=0.02)


@places
def test_the_present_value_and_the_limit_stand_where_the_axes_say(width: Width) -> None:
    picture = compose_vary(SPANS, width)
    slope, start = scale(picture, 0, upright=False)
    present = dashed(picture, DASH)
    assert len(present) == len(SPANS.panels)
    for line in present:
        assert slope * line[:, 0] + start == pytest.approx(6.0, abs=0.02)
    (limit,) = dashed(picture, CHAIN)
    slope, start = scale(picture, 0, upright=True)
    assert slope * limit[:, 1] + start == pytest.approx(1.0, abs=0.01)


@places
def test_a_curve_is_open_where_values_are_missing(width: Width) -> None:
    picture = compose_vary(GAPS, width)
    # 4 to 5 m, 7 and 7.5 m, 8.5 and 9 m have values; the second panel has none
    assert [len(curve) for curve in curves(picture)] == [3, 2, 2]
    assert dashed(picture, DASH) == []


@places
def test_a_value_alone_between_gaps_is_a_dot(width: Width) -> None:
    trials = tuple(t for t in GAPS.trials if t.x != 7.0)
    picture = compose_vary(VaryDrawing("alone", "alone", "L", SPANS.panels, trials), width)
    assert [len(curve) for curve in curves(picture)] == [3, 2]
    assert len(dots(picture, "ink")) == 1


@places
def test_sections_are_dots_filled_where_every_check_is_satisfied(width: Width) -> None:
    picture = compose_vary(SECTIONS_TRIED, width)
    slope, start = scale(picture, 0, upright=False)
    filled = [slope * x + start for x, _, _ in dots(picture, "ink")]
    rings = [slope * x + start for x, _, radius in dots(picture, "paper") if radius > 5]
    opened = [slope * x + start for x, _, radius in dots(picture, "paper") if radius < 5]
    assert filled == pytest.approx([36.1, 42.2, 57.1], abs=0.3)
    assert opened == pytest.approx([12.9, 18.8, 26.2, 30.0], abs=0.3)
    assert rings == pytest.approx([36.1], abs=0.3)


def test_a_constant_is_a_level_line_within_its_panel() -> None:
    for number, curve in enumerate(curves(compose_vary(CONSTANT, "wide"))):
        top = number * (HEIGHT + APART)
        assert curve[:, 1] == pytest.approx(top + HEIGHT / 2)


@pytest.mark.parametrize("drawing", VARIED.values(), ids=lambda d: d.ident)
@places
def test_everything_drawn_lies_within_its_panel(drawing: VaryDrawing, width: Width) -> None:
    for curve in curves(compose_vary(drawing, width)):
        panel = int(curve[0, 1] // (HEIGHT + APART))
        assert curve[:, 1].min() >= panel * (HEIGHT + APART)
        assert curve[:, 1].max() <= panel * (HEIGHT + APART) + HEIGHT
