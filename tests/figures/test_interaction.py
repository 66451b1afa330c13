"""Figures of N and M: the ray, the limit and the ticks stand where the numbers are."""

from itertools import pairwise

import numpy as np
import pytest
from shapely.geometry import Point as Place
from shapely.geometry import Polygon

from calcgen.figures.interaction import InteractionDrawing, compose_interaction
from calcgen.figures.picture import WIDTHS, Label, Picture, Shape, Stroke, Width, label_boxes
from tests.figures.interactions import BEYOND, INTERACTIONS, NOTHING, RECTANGLE

places = pytest.mark.parametrize("width", list(WIDTHS))


def dots(picture: Picture, fill: str) -> list[np.ndarray]:
    """Centres of the dots of one fill."""
    shapes = [i for i in picture.items if isinstance(i, Shape) and i.closed and i.fill == fill]
    return [np.array(i.rings[0]).mean(axis=0) for i in shapes if len(i.rings[0]) == 20]


def limit(picture: Picture) -> Polygon:
    return Polygon(next(i for i in picture.items if isinstance(i, Shape) and i.opacity < 1).rings[0])


@places
@pytest.mark.parametrize(
    ("drawing", "within"), [(RECTANGLE, True), (BEYOND, False)], ids=["within", "beyond"]
)
def test_the_forces_stand_within_the_limit_or_beyond_it_on_the_ray(
    drawing: InteractionDrawing, within: bool, width: Width
) -> None:
    picture = compose_interaction(drawing, width)
    (acting,), reached = dots(picture, "ink"), dots(picture, "paper")[0]
    shape = limit(picture)
    assert shape.contains(Place(acting)) == within
    assert shape.exterior.distance(Place(reached)) < 1.0
    (ray,) = [i.rings[0] for i in picture.items if isinstance(i, Shape) and i.stroke == Stroke("ink", 1.4)]
    start, end = np.array(ray[0]), np.array(ray[1])
    assert np.allclose(end, acting, atol=1e-6)
    (a, b), (c, d) = end - start, reached - start
    assert abs(a * d - b * c) < 0.01 * np.hypot(a, b) * np.hypot(c, d)


@places
def test_the_ticks_are_evenly_spaced_round_numbers(width: Width) -> None:
    picture = compose_interaction(RECTANGLE, width)
    upright = [
        (float(i.text.replace("−", "-")), i.y)
        for i in picture.items
        if isinstance(i, Label) and i.colour == "muted" and i.anchor == "right"
    ]
    assert len(upright) >= 3
    slopes = [(y_2 - y_1) / (n_2 - n_1) for (n_1, y_1), (n_2, y_2) in pairwise(upright)]
    assert np.allclose(slopes, slopes[0])
    assert slopes[0] < 0  # tension up


@places
@pytest.mark.parametrize("drawing", INTERACTIONS.values(), ids=lambda d: d.ident)
def test_axes_curves_and_utilisation_are_named(drawing: InteractionDrawing, width: Width) -> None:
    shown = " ".join(text for text, _ in label_boxes(compose_interaction(drawing, width)))
    assert drawing.moment_title in shown
    assert drawing.axial_title in shown
    assert drawing.limit_label in shown
    assert (drawing.elastic_label in shown) == bool(drawing.elastic)
    assert drawing.utilisation in shown


@places
def test_no_force_has_no_ray(width: Width) -> None:
    picture = compose_interaction(NOTHING, width)
    assert not [i for i in picture.items if isinstance(i, Shape) and i.stroke and i.stroke.dash == (2.0, 2.0)]
