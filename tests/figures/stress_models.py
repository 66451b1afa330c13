"""Invented drawings of normal stress under every model, plain and extreme."""

from dataclasses import replace

import numpy as np

from calcgen.figures.dimensions import Dimension
from calcgen.figures.outline import Bar, Part
from calcgen.figures.stress_drawing import Compared, Couple, Force, Level, Mark, StressDrawing, StressPanel
from calcgen.figures.zones import Zone
from tests.figures.rings import circle, rectangle


def marks(*pairs: tuple[float, float], unit: str = "MPa") -> tuple[Mark, ...]:
    """Marks of (height, value), written to one decimal."""
    return tuple(Mark(y, s, f"{s:+.1f} {unit}".replace("-", "−")) for y, s in pairs)


FLITCH = StressDrawing(  # E = 11 GPa and 210 GPa: at one height the steel has 19 times the stress
    ident="flitch",
    title="flitch beam",
    parts=(
        Part((rectangle(50, 200, -30),), "timber C24, E = 11.0 GPa", "ruled"),
        Part((rectangle(10, 160, 0),), "steel S275, E = 210 GPa", "hatched"),
        Part((rectangle(50, 200, 30),), "timber C24, E = 11.0 GPa", "ruled"),
    ),
    centroid=(0, 0),
    panels=(
        StressPanel(((-100, 6.4), (100, -6.4)), marks((100, -6.4), (-100, 6.4)), "σ in timber"),
        StressPanel(((-80, 97.7), (80, -97.7)), marks((80, -97.7), (-80, 97.7)), "σ in steel"),
    ),
    neutral_axis=0.0,
    neutral_axis_label="neutral axis, at the centroid",
    strain=((-100, 0.582), (100, -0.582)),
    strain_marks=(Mark(100, -0.582, "−0.582 ‰"), Mark(-100, 0.582, "+0.582 ‰")),
    moment=Couple(9.4, "M = 9.40 kN·m"),
)
FOUR_MATERIALS = replace(
    FLITCH,
    ident="four",
    title="sandwich",
    strain=(),
    strain_marks=(),
    panels=tuple(
        StressPanel(
            ((-h, n * h / 10), (h, -n * h / 10)),
            marks((h, -n * h / 10), (-h, n * h / 10)),
            f"σ in part {name}",
        )
        for name, n, h in (("core", 1, 100), ("left face", 12, 80), ("right face", 14, 80), ("lid", 3, 60))
    ),
    forces=(Force(0, -12.0, "N = −12.0 kN"),),
)
_CONCRETE = Part((rectangle(300, 500),), "concrete, E = 12 GPa")
CRACKED = StressDrawing(
    ident="cracked",
    title="beam 300 × 500",
    parts=(_CONCRETE,),
    centroid=(0, 0),
    panels=(
        StressPanel(
            ((-250, 0.0), (90, 0.0), (250, -8.4)),
            marks((250, -8.4)),
            bars=(Mark(-200, 213.0, "+213 MPa"), Mark(205, -92.0, "−92 MPa")),
        ),
    ),
    neutral_axis=90.0,
    neutral_axis_label="neutral axis, 160.0 mm below the top",
    strain=((-250, 1.25), (250, -0.70)),
    strain_marks=(Mark(250, -0.70, "−0.70 ‰"), Mark(-250, 1.25, "+1.25 ‰")),
    moment=Couple(112, "M = 112 kN·m"),
    bars=(*(Bar(x, -200, 20) for x in (-100, -33, 33, 100)), Bar(-100, 205, 12), Bar(100, 205, 12)),
    bars_label="reinforcement, E = 200 GPa",
    zones=(Zone(-250, 90, "cracked", "cracked: carries no tension"),),
    dimensions=(Dimension("x = 160.0", (-150, 90), (-150, 250), "left"),),
)
MANY_ROWS = replace(
    CRACKED,
    ident="rows",
    title="wall",
    parts=(Part((rectangle(250, 1500),), "concrete"),),
    panels=(
        StressPanel(
            ((-750, 0.0), (300, 0.0), (750, -11.0)),
            marks((750, -11.0)),
            bars=tuple(
                Mark(y, s, f"{s:+.0f} MPa" if y in (-700, 700) else "")
                for y, s in ((y, (300 - y) * 0.3) for y in range(-700, 701, 140))
            ),
        ),
    ),
    neutral_axis=300.0,
    neutral_axis_label="neutral axis, 450 mm below the top",
    strain=((-750, 1.75), (750, -0.75)),
    strain_marks=(Mark(750, -0.75, "−0.75 ‰"), Mark(-750, 1.75, "+1.75 ‰")),
    bars=tuple(Bar(x, y, 12) for x in (-80, 80) for y in range(-700, 701, 140)),
    zones=(Zone(-750, 300, "cracked", "cracked: carries no tension"),),
    dimensions=(Dimension("x = 450", (-125, 300), (-125, 750), "left"),),
)
_TEE_RING = np.array([(-6, 0), (6, 0), (6, 188), (100, 188), (100, 200), (-100, 200), (-100, 188), (-6, 188)])
_TEE = Part((_TEE_RING.astype(float),))
FULLY_PLASTIC = StressDrawing(
    ident="blocks",
    title="tee 200 × 200 × 12",
    parts=(_TEE,),
    centroid=(0, 145.5),
    panels=(
        StressPanel(
            ((0, 275.0), (189.0, 275.0), (189.0, -275.0), (200, -275.0)),
            marks((200, -275.0), (0, 275.0)),
            "stress at M_pl",
        ),
    ),
    neutral_axis=189.0,
    neutral_axis_label="plastic neutral axis, 43.5 mm above the centroid",
    neutral_axis_name="plastic neutral axis",
    plastic=True,
    moment=Couple(59.6, "M_pl = 59.6 kN·m"),
)
_YIELD = (Zone(60, 120, "yielded", "at yield"), Zone(-120, -60, "yielded", "at yield"))
ELASTIC_PLASTIC = StressDrawing(
    ident="kinked",
    title="plate 60 × 240",
    parts=(Part((rectangle(60, 240),)),),
    centroid=(0, 0),
    panels=(
        StressPanel(
            ((-120, 235.0), (-60, 235.0), (60, -235.0), (120, -235.0)), marks((120, -235.0), (-120, 235.0))
        ),
        StressPanel(
            ((-120, -88.1), (-60, 73.4), (60, -73.4), (120, 88.1)),
            marks((120, 88.1), (60, -73.4), (-60, 73.4), (-120, -88.1)),
            "residual stress after unloading",
        ),
    ),
    neutral_axis=0.0,
    neutral_axis_label="neutral axis, at the centroid",
    moment=Couple(186.1, "M = 186.1 kN·m"),
    zones=_YIELD,
    dimensions=(Dimension("core 120.0", (-30, -60), (-30, 60), "left"),),
)
ELASTIC_PLASTIC_STRAIN = replace(
    ELASTIC_PLASTIC,
    ident="kinked-strain",
    strain=((-120, 2.24), (120, -2.24)),
    strain_marks=(Mark(120, -2.24, "−2.24 ‰"), Mark(-120, 2.24, "+2.24 ‰")),
)
THIN_CORE = replace(
    ELASTIC_PLASTIC,
    ident="thin-core",
    panels=(
        StressPanel(
            ((-120, 235.0), (-2, 235.0), (2, -235.0), (120, -235.0)), marks((120, -235.0), (-120, 235.0))
        ),
    ),
    zones=(Zone(2, 120, "yielded", "at yield"), Zone(-120, -2, "yielded", "at yield")),
    dimensions=(Dimension("depth of the elastic core = 4.00 mm", (-30, -2), (-30, 2), "left"),),
)
NO_TENSION = StressDrawing(
    ident="footing",
    title="footing 1500 × 2400",
    parts=(Part((rectangle(1500, 2400),)),),
    centroid=(0, 0),
    panels=(StressPanel(((-1200, 0.0), (-300, 0.0), (1200, -0.187)), (Mark(1200, -0.187, "−187 kPa"),)),),
    neutral_axis=-300.0,
    neutral_axis_label="neutral axis, 300.0 mm below the centroid",
    moment=Couple(147, "M = 147 kN·m"),
    forces=(Force(0, -210, "N = −210 kN"),),
    zones=(Zone(-1200, -300, "open", "no contact: carries no tension"),),
    dimensions=(Dimension("1500 in contact", (-750, -300), (-750, 1200), "left"),),
)
SLIVER = replace(
    NO_TENSION,
    ident="sliver",
    title="pier on edge",
    panels=(StressPanel(((-1200, 0.0), (1150, 0.0), (1200, -4.0)), marks((1200, -4.0))),),
    neutral_axis=1150.0,
    neutral_axis_label="neutral axis, 1150 mm above the centroid",
    zones=(Zone(-1200, 1150, "open", "no contact: carries no tension"),),
    dimensions=(Dimension("50.0", (-750, 1150), (-750, 1200), "left"),),
)


def hook(
    inner: float = 60.0, outer: float = 180.0, moment: float = 5.0e6, breadth: float = 50.0
) -> StressDrawing:
    """Winkler–Bach stress of a rectangle whose centre of curvature lies below it; r from that centre."""
    depth, mean = outer - inner, (inner + outer) / 2
    neutral = depth / np.log(outer / inner)
    area, e = breadth * depth, mean - neutral
    radii = np.linspace(inner, outer, 33)
    stresses = moment * (neutral - radii) / (area * e * radii)
    straight = moment * depth / 2 / (breadth * depth**3 / 12)
    ys = radii - mean
    return StressDrawing(
        ident="hook",
        title=f"{breadth:g} × {depth:g}",
        parts=(Part((rectangle(breadth, depth),)),),
        centroid=(0, 0),
        panels=(
            StressPanel(
                tuple((float(y), float(s)) for y, s in zip(ys, stresses, strict=True)),
                marks((float(ys[-1]), float(stresses[-1])), (float(ys[0]), float(stresses[0]))),
                compared=Compared(
                    ((-depth / 2, straight), (depth / 2, -straight)),
                    f"straight-beam formula: ±{straight:.1f} MPa,"
                    f" {100 - 100 * straight / stresses[0]:.0f} % too low at the inside",
                ),
            ),
        ),
        neutral_axis=float(neutral - mean),
        neutral_axis_label=f"neutral axis, {e:.2f} mm towards the centre",
        levels=(Level(0.0, "centroidal axis"),),
        moment=Couple(moment, f"M = {moment / 1e6:.2f} kN·m"),
        note=f"R_c = {mean:.1f} mm to the centroidal axis, r_n = {neutral:.1f} mm to the neutral axis.",
        dimensions=(
            Dimension(f"e = {e:.2f}", (-breadth / 2, float(neutral - mean)), (-breadth / 2, 0.0), "left"),
        ),
        centre="bottom",
    )


SLIGHTLY_CURVED = replace(hook(1000.0, 1120.0), ident="slight")
CURVED_UP = replace(
    hook(),
    ident="curved-up",
    centre="top",
    edges=("inside", "outside"),
    moment=Couple(-5.0, "M = −5.00 kN·m"),
)
COMPOSITE_PLASTIC = StressDrawing(
    ident="slab",
    title="slab on girder",
    parts=(
        Part((rectangle(1200, 120, 0, 300),), "concrete C30/37, f_cd = 17.0 MPa", "hatched"),
        Part((rectangle(150, 12, 0, -6 + 240),), "steel S355, f_yd = 355 MPa"),
        Part((rectangle(8, 216, 0, 120),), "steel S355, f_yd = 355 MPa"),
        Part((rectangle(150, 12, 0, 6),), "steel S355, f_yd = 355 MPa"),
    ),
    centroid=(0, 250),
    panels=(
        StressPanel(
            ((0, 355.0), (240, 355.0), (240, 0.0), (267, 0.0), (267, -17.0), (360, -17.0)),
            marks((360, -17.0), (0, 355.0)),
            "stress at M_pl",
        ),
    ),
    neutral_axis=267.0,
    neutral_axis_label="plastic neutral axis, 93.0 mm below the top",
    neutral_axis_name="plastic neutral axis",
    plastic=True,
    moment=Couple(411, "M_pl = 411 kN·m"),
    zones=(Zone(240, 267, "cracked", "concrete in tension, not counted"),),
)
LONG = "a material whose name goes on for longer than a narrow place is wide, E = 0.1 GPa"
DEEP = replace(  # fifty times as deep as broad, with small numbers and long names
    CRACKED,
    ident="deep",
    title="a fin with a rather long name for its place",
    parts=(Part((rectangle(10, 500),), LONG),),
    panels=(
        StressPanel(
            ((-250, 1.2e-6), (0, 0), (250, -1.2e-6)),
            (Mark(250, -1.2e-6, "−0.000 001 2 MPa"), Mark(-250, 1.2e-6, "+0.000 001 2 MPa")),
        ),
    ),
    neutral_axis=0.0,
    strain=((-250, 1e-9), (250, -1e-9)),
    strain_marks=(Mark(250, -1e-9, "−0.000 000 001 ‰"), Mark(-250, 1e-9, "+0.000 000 001 ‰")),
    bars=(Bar(0, 0, 0.5),),
    zones=(),
    dimensions=(),
)
_BOARDS = [(23.0 * n, 6 if n % 2 else 17, 0.004 if n % 2 else 0.12) for n in range(5)]
_BOARD_STRESS = [(y + side * half, -(y + side * half - 46) * e) for y, half, e in _BOARDS for side in (-1, 1)]
LAYERS = StressDrawing(  # boards across carry next to nothing along
    ident="layers",
    title="five layers",
    parts=tuple(
        Part(
            (rectangle(100, 2 * half, 0, y),),
            *(("boards across", "crossed") if e < 0.1 else ("boards along", "plain")),
        )
        for y, half, e in _BOARDS
    ),
    centroid=(0, 46),
    panels=(StressPanel(tuple(_BOARD_STRESS), marks(*_BOARD_STRESS)),),
    neutral_axis=46.0,
    moment=Couple(1, "M = 1.00 kN·m"),
    forces=(Force(46, 0.0, "N = 0 kN"),),
)
ROD = StressDrawing(
    ident="rod",
    title="rod",
    parts=(Part((circle(20),), "steel"),),
    centroid=(0, 0),
    panels=(StressPanel(((-10, 60.0), (10, -60.0)), marks((10, -60.0), (-10, 60.0))),),
    neutral_axis=0.0,
)

STRESS_MODELS = {
    "flitch": FLITCH,
    "four materials": FOUR_MATERIALS,
    "cracked": CRACKED,
    "many rows": MANY_ROWS,
    "fully plastic": FULLY_PLASTIC,
    "composite plastic": COMPOSITE_PLASTIC,
    "elastic-plastic": ELASTIC_PLASTIC,
    "elastic-plastic with strain": ELASTIC_PLASTIC_STRAIN,
    "thin core": THIN_CORE,
    "no tension": NO_TENSION,
    "sliver": SLIVER,
    "curved": hook(),
    "slightly curved": SLIGHTLY_CURVED,
    "curved up": CURVED_UP,
    "deep": DEEP,
    "layers": LAYERS,
    "rod": ROD,
}
