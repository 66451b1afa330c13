"""Outlines in pixels: what cannot be seen is left out, what can be seen stays."""

import numpy as np
from shapely.geometry import Polygon

from calcgen.figures.outline import Part, fit, pixels
from tests.figures.rings import rectangle


def test_a_ring_of_very_many_vertices_is_thinned_within_a_tenth_of_a_pixel() -> None:
    turns = np.linspace(0, 2 * np.pi, 20_000, endpoint=False)
    reach = 100 + 10 * np.sin(7 * turns)
    part = Part((np.column_stack([reach * np.cos(turns), reach * np.sin(turns)]),))
    scale, _ = fit([part], 300, 300)
    (ring,) = pixels(scale, part)
    assert len(ring) < 1000
    drawn, given = Polygon(ring), Polygon(scale.ring(part.rings[0]))
    assert drawn.exterior.hausdorff_distance(given.exterior) < 0.11


def test_a_plain_ring_keeps_its_vertices() -> None:
    part = Part((rectangle(60, 240),))
    scale, _ = fit([part], 300, 300)
    (ring,) = pixels(scale, part)
    assert np.array_equal(ring, scale.ring(part.rings[0]))
