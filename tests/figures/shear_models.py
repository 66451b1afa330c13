"""Invented drawings of shear over the depth, of flow along walls, and of torsion."""

from dataclasses import replace

import numpy as np

from calcgen.figures.flow import FlowDrawing, FlowForce, Wall
from calcgen.figures.outline import Bar, Part
from calcgen.figures.shear import Joint, ShearDrawing, ShearPanel
from calcgen.figures.stress_drawing import Couple, Level, Mark
from calcgen.figures.torsion import TorsionDrawing, TorsionMark
from tests.figures.rings import circle, rectangle


def parabola(
    low: float, high: float, start: float, middle: float, end: float
) -> tuple[tuple[float, float], ...]:
    """Points of the parabola through three values at the ends and the middle of a depth."""
    t = np.linspace(-1, 1, 25)
    values = middle + (end - start) / 2 * t + ((end + start) / 2 - middle) * t**2
    return tuple(zip(np.linspace(low, high, 25).tolist(), values.tolist(), strict=True))


_PLATES = ((200, 20, 10), (10, 400, 220), (200, 20, 430))
PLATE_GIRDER = ShearDrawing(
    ident="girder-shear",
    title="welded girder",
    parts=tuple(Part((rectangle(b, h, 0, y),), "S355") for b, h, y in _PLATES),
    centroid=(0, 220),
    panels=(
        ShearPanel(
            (
                *parabola(0, 20, 0, 1.0, 2.0),
                *parabola(20, 420, 39.5, 48.3, 39.5),
                *parabola(420, 440, 2.0, 1.0, 0),
            ),
            (
                Mark(220, 48.3, "48.3 MPa"),
                Mark(420, 39.5, "39.5 MPa"),
                Mark(420, 2.0, "2.0 MPa"),
                Mark(20, 39.5, "39.5 MPa"),
            ),
            "shear stress τ, MPa",
        ),
    ),
    force=Couple(180, "V = 180 kN"),
    joints=(
        Joint(((-5, 420), (5, 420)), "top: 395 N/mm"),
        Joint(((-5, 20), (5, 20)), "bottom: 395 N/mm"),
    ),
    levels=(Level(220, "neutral axis"),),
)
WITH_FLOW = replace(
    PLATE_GIRDER,
    ident="girder-flow",
    panels=(
        *PLATE_GIRDER.panels,
        ShearPanel(parabola(0, 440, 0, 483, 0), (Mark(220, 483, "483 N/mm"),), "shear flow q, N/mm"),
    ),
)
PLAIN = ShearDrawing(
    ident="plain-shear",
    title="joist 50 × 225",
    parts=(Part((rectangle(50, 225),)),),
    centroid=(0, 0),
    panels=(ShearPanel(parabola(-112.5, 112.5, 0, 0.67, 0), (Mark(0, 0.67, "0.67 MPa"),)),),
    force=Couple(-5.0, "V = −5.00 kN"),
)
CAPPED = replace(
    PLAIN,
    ident="capped",
    title="box of boards, glued and screwed",
    parts=(
        Part((rectangle(200, 40, 0, 220),), "cap, C24, E = 11.0 GPa", "ruled"),
        Part((rectangle(40, 200, -60, 100),), "web, plywood, E = 9.0 GPa", "crossed"),
        Part((rectangle(40, 200, 60, 100),), "web, plywood, E = 9.0 GPa", "crossed"),
        Part((rectangle(200, 40, 0, -20),), "cap, C24, E = 11.0 GPa", "ruled"),
    ),
    centroid=(0, 100),
    panels=(
        ShearPanel(
            (
                *parabola(-40, 0, 0, 0.1, 0.18),
                *parabola(0, 200, 0.45, 0.62, 0.45),
                *parabola(200, 240, 0.18, 0.1, 0),
            ),
            (Mark(100, 0.62, "0.62 MPa"), Mark(200, 0.45, "0.45 MPa"), Mark(200, 0.18, "0.18 MPa")),
        ),
    ),
    joints=(
        Joint(((-80, 200), (-40, 200)), "cap: 18.0 N/mm"),
        Joint(((40, 200), (80, 200)), "cap: 18.0 N/mm, and on the other side the same again"),
        Joint(((-80, 0), (-40, 0)), "sole: 18.0 N/mm"),
        Joint(((40, 0), (80, 0)), ""),
    ),
    edges=("right", "left"),
    bars=(Bar(-60, 100, 8),),
    bars_label="tie rod",
    note="Shear lag is not counted.",
)
SHEAR_TINY = replace(
    PLAIN,
    ident="tiny-shear",
    title="fin 1:50",
    parts=(Part((rectangle(4, 200),)),),
    panels=(ShearPanel(parabola(-100, 100, 0, 1e-6, 0), (Mark(0, 1e-6, "0.000 001 0 MPa"),)),),
    force=Couple(1e-6, "V = 0.000 001 kN"),
)
NO_SHEAR = replace(
    PLAIN,
    ident="no-shear",
    panels=(ShearPanel(((-112.5, 0.0), (112.5, 0.0)), (Mark(0, 0, "0 MPa"),)),),
    force=Couple(0, "V = 0 kN"),
)
SLAB = replace(
    PLAIN,
    ident="wide-shear",
    title="slab 1000 × 20",
    parts=(Part((rectangle(1000, 20),)),),
    panels=(ShearPanel(parabola(-10, 10, 0, 0.6, 0), (Mark(0, 0.6, "0.60 MPa"),)),),
)


def wall(
    start: tuple[float, float],
    end: tuple[float, float],
    flow: tuple[float, float, float],
    t: float,
    label: str = "",
) -> Wall:
    """A straight wall whose flow is the parabola through three values."""
    at = np.linspace(0, 1, 25)[:, None]
    values = np.array([q for _, q in parabola(0, 1, *flow)])
    return Wall(np.array(start) * (1 - at) + np.array(end) * at, values, t, label)


CHANNEL = FlowDrawing(
    ident="channel",
    title="channel 200 × 75",
    walls=(
        wall((75, 200), (0, 200), (0, 130, 260), 11, "260 N/mm"),
        wall((0, 200), (0, 0), (260, 420, 260), 8, "420 N/mm"),
        wall((0, 0), (75, 0), (260, 130, 0), 11, "260 N/mm"),
    ),
    centroid=(20.0, 100.0),
    quantity="shear flow q, N/mm",
    shear_centre=(-27.0, 100.0),
    force=FlowForce(0.0, -60.0, "V = 60.0 kN"),
)
I_FLOW = replace(
    CHANNEL,
    ident="i-flow",
    title="I 240 × 120",
    walls=(
        wall((-60, 240), (0, 240), (0, 60, 120), 10, "120 N/mm"),
        wall((60, 240), (0, 240), (0, 60, 120), 10, "120 N/mm"),
        wall((0, 240), (0, 0), (240, 300, 240), 6, "300 N/mm"),
        wall((0, 0), (-60, 0), (120, 60, 0), 10),
        wall((0, 0), (60, 0), (120, 60, 0), 10),
    ),
    centroid=(0.0, 120.0),
    shear_centre=(0.0, 120.0),
    shear_centre_label="shear centre, at the centroid",
)
BOX_TORSION = FlowDrawing(
    ident="box-torsion",
    title="box 300 × 200",
    walls=tuple(
        wall(a, b, (85.0, 85.0, 85.0), t, label)
        for a, b, t, label in (
            ((0, 0), (0, 200), 6, ""),
            ((0, 200), (300, 200), 10, "85.0 N/mm, τ = 8.50 MPa"),
            ((300, 200), (300, 0), 6, "85.0 N/mm, τ = 14.2 MPa"),
            ((300, 0), (0, 0), 10, ""),
        )
    ),
    centroid=(150, 100),
    quantity="shear flow of torsion, N/mm",
    torque=Couple(10.2, "T = 10.2 kN·m"),
)
TWO_CELLS = replace(
    BOX_TORSION,
    ident="two-cells",
    title="two cells",
    walls=(
        *BOX_TORSION.walls,
        wall((300, 200), (600, 200), (40, 40, 40), 10, "40.0 N/mm"),
        wall((600, 200), (600, 0), (40, 40, 40), 10),
        wall((600, 0), (300, 0), (40, 40, 40), 10),
    ),
    centroid=(290, 100),
)
_TURNS = np.radians(np.linspace(20, 340, 33))
SLIT_TUBE = FlowDrawing(
    ident="slit",
    title="slit tube",
    walls=(
        Wall(
            80 * np.column_stack([np.cos(_TURNS), np.sin(_TURNS)]),
            100 * (1 - np.cos(np.linspace(0, 2 * np.pi, 33))),
            5,
            "200 N/mm",
        ),
    ),
    centroid=(-5, 0),
    shear_centre=(-155, 0),
    force=FlowForce(0, 1, "V = 10.0 kN"),
)
OPEN_TORSION = replace(
    CHANNEL,
    ident="open-torsion",
    title="channel 200 × 75",
    quantity="stress of torsion τ_t at the faces, MPa",
    walls=tuple(
        Wall(np.array(points, dtype=float), np.full(2, s), t, label, turning=True)
        for points, s, t, label in (
            (((75, 200), (0, 200)), 44.0, 11, "44.0 MPa"),
            (((0, 200), (0, 0)), 32.0, 8, "32.0 MPa"),
            (((0, 0), (75, 0)), 44.0, 11, "44.0 MPa"),
        )
    ),
    force=None,
    torque=Couple(-0.3, "T = −0.30 kN·m"),
)
FLOW_WORDS = replace(
    I_FLOW,
    ident="flow-words",
    title="I with a name that takes more than the breadth of a narrow place",
    quantity="shear flow q with a long word for what it is and how it was found, N/mm",
    walls=tuple(replace(w, label=w.label and f"{w.label} of a very long word") for w in I_FLOW.walls),
    note="A note that goes on for longer than any place for it could be wide, so that it must be broken.",
)
NO_FLOW = replace(
    CHANNEL,
    ident="no-flow",
    walls=tuple(replace(w, flow=np.zeros(25), label="0 N/mm") for w in CHANNEL.walls),
    force=FlowForce(0, 0, "V = 0 kN"),
)
_BENDS = (
    (0, 0, 0, -20, 0),
    (0, -20, 60, 0, 10),
    (60, -20, 30, 80, 20),
    (90, 60, 60, 0, 30),
    (150, 60, 0, -20, 40),
)
LEANING = replace(  # a slender strip at 1:50 with bends
    CHANNEL,
    ident="leaning",
    title="strip with five bends",
    walls=tuple(
        wall((x, y), (x + dx, y + dy), (q, q + 5, q + 10), 1.5, f"{q + 10:.0f} N/mm" if q % 20 == 0 else "")
        for x, y, dx, dy, q in _BENDS
    ),
    centroid=(75, 20),
    shear_centre=(70, 24),
    force=FlowForce(0.5, -1, "V = 2.24 kN"),
)

BAR_TORSION = TorsionDrawing(
    ident="bar-torsion",
    title="bar 40 × 100",
    parts=(Part((rectangle(40, 100),)),),
    centre=(0, 0),
    marks=(TorsionMark((20, 0), (0, -1), "τ_t,max = 25.1 MPa"), TorsionMark((-20, 0), (0, 1), "")),
    torque=Couple(1.0, "T = 1.00 kN·m"),
    contours=tuple(
        tuple((20 * s * np.cos(a), 50 * s**0.8 * np.sin(a)) for a in np.linspace(0, 2 * np.pi, 41))
        for s in (0.3, 0.6, 0.9)
    ),
)
ROUND_TORSION = replace(
    BAR_TORSION,
    ident="round-torsion",
    title="bar of 60 mm with a name and more of a name",
    parts=(Part((circle(60),)),),
    marks=(TorsionMark((30, 0), (0, 1), "τ_t,max = 12.3 MPa, all along the outline"),),
    torque=Couple(-1.0, "T = −1.00 kN·m"),
    contours=(),
    note="Saint-Venant torsion.",
)
SLAB_TORSION = replace(
    BAR_TORSION,
    ident="slab-torsion",
    title="1:50",
    parts=(Part((rectangle(500, 10),)),),
    marks=(TorsionMark((0, 5), (1, 0), "0.000 1 MPa"),),
    contours=(),
)

SHEARS = {
    "plate girder": PLATE_GIRDER,
    "with flow": WITH_FLOW,
    "plain": PLAIN,
    "capped": CAPPED,
    "tiny": SHEAR_TINY,
    "none": NO_SHEAR,
    "slab": SLAB,
}
FLOWS = {
    "channel": CHANNEL,
    "i": I_FLOW,
    "box torsion": BOX_TORSION,
    "two cells": TWO_CELLS,
    "slit tube": SLIT_TUBE,
    "open torsion": OPEN_TORSION,
    "words": FLOW_WORDS,
    "none": NO_FLOW,
    "bends": LEANING,
}
TORSIONS = {"bar": BAR_TORSION, "round": ROUND_TORSION, "slab": SLAB_TORSION}
