"""Random outlines and forces for properties that must hold for any of them."""

import numpy as np
from hypothesis import strategies as st

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline, outline
from calcgen.mechanics.stress import Forces


def star(radii: list[float], scale: float, phase: float) -> FloatArray:
    """A ring that never crosses itself: one corner on each of equally spaced rays."""
    angles = phase + np.linspace(0.0, 2.0 * np.pi, len(radii), endpoint=False)
    ring: FloatArray = scale * np.array(radii)[:, None] * np.column_stack((np.cos(angles), np.sin(angles)))
    return ring


_radii = st.lists(st.floats(0.4, 1.0), min_size=5, max_size=14)
_phase = st.floats(0.0, 6.0)


@st.composite
def outlines(draw: st.DrawFn) -> Outline:
    """Star-shaped sections of 0.1 to 0.5 m, some with a star-shaped hole, some far from the origin."""
    scale = draw(st.floats(0.1, 0.5))
    exterior = star(draw(_radii), scale, draw(_phase))
    # five rays or more: the outer ring stays beyond 0.4 cos 36° = 0.32 of the scale
    holes = [star(draw(_radii), 0.3 * scale, draw(_phase))] if draw(st.booleans()) else []
    return outline(exterior, holes).moved(draw(st.floats(-1.0, 1.0)), draw(st.floats(-1.0, 1.0)))


forces = st.builds(Forces, N=st.floats(-1e6, 1e6), M=st.floats(-1e5, 1e5), M_lat=st.floats(-1e5, 1e5))
