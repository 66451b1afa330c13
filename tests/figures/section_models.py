"""Invented drawings of built-up sections and of fields of stress over them."""

from dataclasses import replace

import numpy as np

from calcgen.figures.dimensions import Dimension
from calcgen.figures.field import FieldBar, FieldDrawing, FieldMark, FieldPart
from calcgen.figures.outline import Bar, Part
from calcgen.figures.section import Leader, SectionDrawing
from tests.figures.rings import circle, rectangle

COLUMN_BARS = tuple(Bar(x, y, 20) for x in (-150, 0, 150) for y in (-150, 0, 150) if x or y)
KERN = ((-66.0, 0.0), (0.0, -66.0), (66.0, 0.0), (0.0, 66.0))

COLUMN = SectionDrawing(
    ident="column",
    title="column 400 × 400",
    parts=(Part((rectangle(400, 400),), "concrete C30/37"),),
    centroid=(0, 0),
    bars=COLUMN_BARS,
    bars_label="8 bars of 20 mm, B500",
    kern=KERN,
    dimensions=(
        Dimension("400", (-200, -200), (-200, 200), "left"),
        Dimension("400", (-200, -200), (200, -200), "bottom"),
    ),
    leaders=(Leader("8 of 20 mm", (150, 150)),),
)
_STRIP = [(0, 0), (0, 20), (60, 20), (60, 120), (0, 120), (0, 100)]
_BACK = [(1.5, 100), (1.5, 118.5), (58.5, 118.5), (58.5, 21.5), (1.5, 21.5), (1.5, 0)]
BENT_STRIP = SectionDrawing(
    ident="bent",
    title="lipped channel 120 × 60 × 1.5",
    parts=(Part((np.array([*_STRIP, *_BACK], dtype=float)[::-1],)),),
    centroid=(36.0, 60.0),
    shear_centre=(92.0, 60.0),
    kern=((20.0, 60.0), (33.0, 44.0), (40.0, 60.0), (33.0, 76.0)),
    dimensions=(
        Dimension("h = 120", (0, 0), (0, 120), "left"),
        Dimension("b = 60", (0, 0), (60, 0), "bottom"),
    ),
)
TWO_PIECES = SectionDrawing(
    ident="pieces",
    title="two channels, battened",
    parts=(
        Part((rectangle(60, 200, -90), rectangle(48, 176, -96)[::-1]), "S275"),
        Part((rectangle(60, 200, 90), circle(40, 90, 40, hole=True)), "S355", "hatched"),
    ),
    centroid=(0, 0),
    dimensions=(
        Dimension("b = 240", (-120, -100), (120, -100), "bottom"),
        Dimension("h = 200", (-120, -100), (-120, 100), "left"),
    ),
)
BUILT_UP = SectionDrawing(
    ident="built-up",
    title="box of boards",
    parts=(
        Part((rectangle(200, 40, 0, 220),), "caps, C24, E = 11.0 GPa", "ruled"),
        Part((rectangle(12, 280, -94, 100),), "webs, plywood, E = 9.0 GPa", "crossed"),
        Part((rectangle(12, 280, 94, 100),), "webs, plywood, E = 9.0 GPa", "crossed"),
        Part((rectangle(176, 40, 0, -20),), "caps, C24, E = 11.0 GPa", "ruled"),
    ),
    centroid=(0, 100),
    dimensions=(
        Dimension("h = 280", (-100, -40), (-100, 240), "left"),
        Dimension("b = 200", (-100, -40), (100, -40), "bottom"),
    ),
    leaders=tuple(
        Leader(f"{name} {size}", at, optional=True)
        for name, size, at in (
            ("cap", "200 × 40", (70, 225)),
            ("web", "12 × 280", (94, 150)),
            (
                "web",
                "12 × 280, with a name that has no room anywhere near to it in a narrow place",
                (-94, 60),
            ),
            ("sole", "176 × 40", (40, -20)),
        )
    ),
)

RC_FIELD = FieldDrawing(
    ident="rc-field",
    title="column 400 × 400, cracked",
    parts=(FieldPart(COLUMN.parts[0], 2.0, 0.02, -0.05, high=0.0),),
    centroid=(0, 0),
    marks=(FieldMark((-200, 200), -12.0, "−12.0 MPa"),),
    bars=tuple(
        FieldBar(b, s, f"{s:+.0f} MPa".replace("-", "−") if abs(b.x + b.y) < 1 and b.x else "")
        for b, s in ((b, 8 * (2.0 + 0.02 * b.x - 0.05 * b.y)) for b in COLUMN_BARS)
    ),
    limits_label="blank: concrete without tension",
    neutral_axis_label="neutral axis at 21.8° from the horizontal, 37.1 mm from the centroid",
    actions=("M = 80.0 kN·m about y–y (horizontal axis): tension at the bottom", "N = −400 kN, compression"),
)
YIELDED_FIELD = FieldDrawing(
    ident="yield-field",
    title="plate 100 × 200",
    parts=(FieldPart(Part((rectangle(100, 200),)), 20.0, 2.0, -4.0, -235.0, 235.0),),
    centroid=(0, 0),
    marks=(FieldMark((-50, 100), -235.0, "−235 MPa"), FieldMark((50, -100), 235.0, "+235 MPa")),
    limits_label="plain areas: at yield, ±235 MPa",
)
PLASTIC_FIELD = replace(
    YIELDED_FIELD,
    ident="plastic-field",
    parts=(FieldPart(Part((rectangle(100, 200),)), 20e6, 2e6, -4e6, -235.0, 235.0),),
    neutral_axis_label="plastic neutral axis at 26.6° from the horizontal",
)
COMPOSITE_FIELD = FieldDrawing(
    ident="composite-field",
    title="flitch beam under both moments",
    parts=(
        FieldPart(Part((rectangle(50, 200, -30),), "timber"), 0.0, 0.05, -0.06),
        FieldPart(Part((rectangle(10, 160),), "steel"), 0.0, 19.1 * 0.05, -19.1 * 0.06),
        FieldPart(Part((rectangle(50, 200, 30),), "timber"), 0.0, 0.05, -0.06),
    ),
    centroid=(0, 0),
    marks=(
        FieldMark((-55, 100), -8.75, "timber: −8.8 MPa"),
        FieldMark((55, -100), 8.75, "timber: +8.8 MPa"),
        FieldMark((-5, 80), -96.5, "steel: −96.5 MPa"),
        FieldMark((5, -80), 96.5, "steel: +96.5 MPa"),
    ),
)
FOOTING_FIELD = FieldDrawing(
    ident="footing-field",
    title="footing 1500 × 2400",
    parts=(FieldPart(Part((rectangle(1500, 2400),)), -100.0, -0.13, -0.06, high=0.0),),
    centroid=(0, 0),
    marks=(FieldMark((750, 1200), -269.5, "−270 kPa"),),
    unit="kPa",
    kern=((-250, 0), (0, -400), (250, 0), (0, 400)),
    limits_label="blank: no contact",
)
SLENDER_FIELD = replace(
    YIELDED_FIELD,
    ident="slender-field",
    title="fin 1:50",
    parts=(FieldPart(Part((rectangle(4, 200),)), 0.0, 1e-9, -1e-8),),
    marks=(FieldMark((-2, 100), -1e-6, "−0.000 001 MPa"), FieldMark((2, -100), 1e-6, "+0.000 001 MPa")),
    bars=(FieldBar(Bar(0, 0, 1), 0.0, "0 MPa"),),
    limits_label="",
)

SECTIONS = {"column": COLUMN, "bent strip": BENT_STRIP, "two pieces": TWO_PIECES, "built up": BUILT_UP}
FIELDS = {
    "reinforced": RC_FIELD,
    "yielded": YIELDED_FIELD,
    "fully plastic": PLASTIC_FIELD,
    "composite": COMPOSITE_FIELD,
    "footing": FOOTING_FIELD,
    "slender": SLENDER_FIELD,
}
