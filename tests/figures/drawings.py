"""Invented drawings of every kind, plain and extreme, for the tests of figures."""

from dataclasses import replace

import numpy as np

from calcgen.figures.beam import BeamDrawing, Stretch, compose_beam
from calcgen.figures.beam_diagrams import Diagram, Extreme
from calcgen.figures.beam_loads import CoupleLoad, Distributed, Effect, LoadCase, PointLoad
from calcgen.figures.beam_supports import Support
from calcgen.figures.conventions import ConventionDrawing, compose_conventions
from calcgen.figures.dimensions import Dimension
from calcgen.figures.field import FieldDrawing, FieldMark, FieldPart, compose_field
from calcgen.figures.flow import FlowDrawing, compose_flow
from calcgen.figures.interaction import InteractionDrawing, compose_interaction
from calcgen.figures.outline import AMERICAN, Part
from calcgen.figures.picture import Picture, Width
from calcgen.figures.section import Leader, SectionDrawing, compose_section
from calcgen.figures.shear import ShearDrawing, compose_shear
from calcgen.figures.stress import compose_stress
from calcgen.figures.stress_drawing import Couple, Force, Mark, StressDrawing, StressPanel
from calcgen.figures.torsion import TorsionDrawing, compose_torsion
from calcgen.figures.vary import VaryDrawing, compose_vary
from tests.figures.interactions import INTERACTIONS
from tests.figures.rings import circle, rectangle
from tests.figures.section_models import FIELDS, SECTIONS
from tests.figures.shear_models import FLOWS, SHEARS, TORSIONS
from tests.figures.stress_models import STRESS_MODELS
from tests.figures.varied import VARIED

ANGLE = Part((np.array([(0, 0), (100, 0), (100, 12), (12, 12), (12, 150), (0, 150)], dtype=float),))
TEE = Part(
    (
        np.array(
            [(-6, 0), (6, 0), (6, 188), (100, 188), (100, 200), (-100, 200), (-100, 188), (-6, 188)],
            dtype=float,
        ),
    )
)
PLATE = Part((rectangle(60, 240),))
BARS = tuple(Part((circle(20, x, -200),), "steel, E = 200 GPa", "solid") for x in (-100, -33, 33, 100))

SECTION = SectionDrawing(
    ident="angle",
    title="angle 150 × 100 × 12",
    parts=(ANGLE,),
    centroid=(24.2, 48.9),
    principal_angle=114.0,
    shear_centre=(6.0, 6.0),
    plastic_axis=30.0,
    dimensions=(
        Dimension("h = 150", (0, 0), (0, 150), "left"),
        Dimension("b = 100", (0, 0), (100, 0), "bottom"),
        Dimension("t = 12", (100, 0), (100, 12), "right"),
        Dimension("12 mm", (0, 90), (12, 90), "across"),
    ),
)
RIB = SectionDrawing(
    ident="rib",
    title="slab rib",
    parts=(Part((rectangle(300, 500),), "concrete, E = 12 GPa", "hatched"), *BARS),
    centroid=(0, -8),
    axes=AMERICAN,
    leaders=(Leader("4 of 20 mm", (100, -200)),),
    dimensions=(Dimension("500", (-150, -250), (-150, 250), "left"),),
)
TUBE = SectionDrawing(
    ident="tube",
    title="tube 168.3 × 6.3",
    parts=(Part((circle(168.3), circle(155.7, hole=True))),),
    centroid=(0, 0),
    dimensions=(Dimension("t = 6.3", (77.85, 0), (84.15, 0), "across"),),
)
BEAM_I = SectionDrawing(
    ident="i",
    title="I 240 × 120",
    parts=tuple(Part((rectangle(b, h, 0, y),)) for b, h, y in ((120, 10, 5), (6, 220, 120), (120, 10, 235))),
    centroid=(0, 120),
    dimensions=(
        Dimension("240", (-60, 0), (-60, 240), "left"),
        Dimension("120", (-60, 0), (60, 0), "bottom"),
        Dimension("10", (60, 230), (60, 240), "right"),
        Dimension("6", (-3, 120), (3, 120), "across"),
    ),
)
ON_ITS_SIDE = SectionDrawing(
    ident="side",
    title="plate, a thickness on the vertical axis",
    parts=(Part((rectangle(240, 20),)),),
    centroid=(0, 0),
    dimensions=(Dimension("t = 20", (0, -10), (0, 10), "across"),),
)
ONE_MILLIMETRE = replace(TUBE, ident="wire", title="wire", parts=(Part((circle(1.0),)),), dimensions=())
STRIP = replace(
    TUBE, ident="strip", title="strip 2000 × 1", parts=(Part((rectangle(2000, 1),)),), dimensions=()
)
LONG_NAMES = replace(
    RIB,
    ident="long",
    leaders=(Leader("a note that goes on for longer than any place for it could ever be wide", (0, 200)),),
)

SAGGING = StressDrawing(
    ident="sagging",
    title="plate 60 × 240",
    parts=(PLATE,),
    centroid=(0, 0),
    panels=(
        StressPanel(
            ((-120, 104.6), (120, -104.6)), (Mark(120, -104.6, "−104.6 MPa"), Mark(-120, 104.6, "+104.6 MPa"))
        ),
    ),
    neutral_axis=0.0,
    neutral_axis_label="neutral axis, at the centroid",
    moment=Couple(60.2, "M = 60.2 kN·m"),
)
HOGGING = replace(
    SAGGING,
    ident="hogging",
    panels=(
        StressPanel(
            ((-120, -144.6), (120, 64.6)), (Mark(120, 64.6, "+64.6 MPa"), Mark(-120, -144.6, "−144.6 MPa"))
        ),
    ),
    neutral_axis=45.9,
    neutral_axis_label="neutral axis, 45.9 mm above the centroid",
    moment=Couple(-60.2, "M = −60.2 kN·m"),
    forces=(Force(0, -576, "N = −576 kN"),),
    strain=((-120, -0.688), (120, 0.308)),
    strain_marks=(Mark(120, 0.308, "+0.308 ‰"), Mark(-120, -0.688, "−0.688 ‰")),
)
MOSTLY_AXIAL = replace(
    SAGGING,
    ident="axial",
    panels=(
        StressPanel(
            ((-120, -120.0), (120, -160.0)), (Mark(120, -160, "−160.0 MPa"), Mark(-120, -120, "−120.0 MPa"))
        ),
    ),
    neutral_axis=None,
    neutral_axis_label="neutral axis outside the section: 840 mm below the centroid",
    moment=Couple(11.5, "M = 11.5 kN·m"),
    forces=(Force(0, -2016, "N = −2016 kN"),),
)
PURE_AXIAL = replace(
    MOSTLY_AXIAL,
    ident="pure",
    panels=(StressPanel(((-120, 80.0), (120, 80.0)), (Mark(120, 80, "+80.0 MPa"),)),),
    neutral_axis_label="no neutral axis: the stress is uniform",
    moment=None,
    forces=(Force(0, 1152, "N = 1152 kN"),),
)
PURE_COMPRESSION = replace(
    PURE_AXIAL,
    ident="pressed",
    panels=(
        StressPanel(
            ((-120, -80.0), (120, -80.0)), (Mark(120, -80, "−80.0 MPa"), Mark(-120, -80, "−80.0 MPa"))
        ),
    ),
    forces=(Force(0, -1152, "N = −1152 kN"),),
)
NO_STRESS = replace(
    PURE_AXIAL,
    ident="none",
    panels=(StressPanel(((-120, 0.0), (120, 0.0)), (Mark(120, 0.0, "0 MPa"),)),),
    neutral_axis_label="no stress",
    forces=(),
)
PLASTIC = replace(
    SAGGING,
    ident="plastic",
    parts=(Part((rectangle(2000, 12),)),),
    panels=(
        StressPanel(
            ((-6, 235.0), (0, 235.0), (0, -235.0), (6, -235.0)),
            (Mark(6, -235, "−235 MPa"), Mark(-6, 235, "+235 MPa")),
        ),
    ),
    moment=Couple(16.9, "M = 16.9 kN·m"),
    note="Plastic: the stress is at yield over the whole depth.",
)
UNEVEN = replace(
    SAGGING,
    ident="uneven",
    title="tee 200 × 200 × 12",
    parts=(TEE,),
    centroid=(0, 145.5),
    panels=(
        StressPanel(((0, 187.1), (200, -7.4)), (Mark(200, -7.4, "−7.4 MPa"), Mark(0, 187.1, "+187.1 MPa"))),
    ),
    neutral_axis=192.4,
    neutral_axis_label="neutral axis, 46.8 mm above the centroid",
    moment=Couple(17.8, "M = 17.8 kN·m"),
    forces=(Force(145.5, 212, "N = 212 kN"),),
)
TIMBER_ON_STEEL = replace(  # E = 11 GPa on 210 GPa: the stress jumps at the joint, the strain doesn't
    SAGGING,
    ident="jump",
    title="timber on steel",
    parts=(Part((rectangle(100, 200, 0, 110),), "timber"), Part((rectangle(100, 10, 0, 5),), "steel")),
    centroid=(0, 58.7),
    panels=(
        StressPanel(
            ((0, 218.0), (10, 180.8), (10, 9.5), (210, -29.4)),
            (
                Mark(210, -29.4, "−29.4 MPa"),
                Mark(10, 9.5, "+9.5 MPa"),
                Mark(10, 180.8, "+180.8 MPa"),
                Mark(0, 218.0, "+218.0 MPa"),
            ),
        ),
    ),
    neutral_axis=58.7,
    moment=Couple(33.93, "M = 33.93 kN·m"),
    strain=((0, 1.04), (210, -2.67)),
    strain_marks=(Mark(210, -2.67, "−2.67 ‰"), Mark(0, 1.04, "+1.04 ‰")),
)
LOCKED_IN = replace(
    SAGGING,
    ident="locked",
    title="welded plates",
    panels=(
        StressPanel(
            ((-120, -60.0), (-40, 20.0), (-40, -35.0), (60, -35.0), (60, 90.0), (120, 30.0)),
            (
                Mark(120, 30.0, "+30.0 MPa"),
                Mark(60, 90.0, "+90.0 MPa"),
                Mark(60, -35.0, "−35.0 MPa"),
                Mark(-40, -35.0, "−35.0 MPa"),
                Mark(-40, 20.0, "+20.0 MPa"),
                Mark(-120, -60.0, "−60.0 MPa"),
            ),
        ),
    ),
    neutral_axis=None,
    neutral_axis_label="more than one zero of stress",
    moment=None,
    edges=("left", "right"),
)
HUGE = replace(
    SAGGING,
    ident="huge",
    panels=(
        StressPanel(
            ((-120, 1e12), (120, -1e12)),
            (Mark(120, -1e12, "−1 000 000 000 000.0 N/mm²"), Mark(-120, 1e12, "+1 000 000 000 000.0 N/mm²")),
        ),
    ),
    edges=("left", "right"),
)

FIELD_PART = FieldPart(ANGLE, 56.11, -0.5, -0.9)
FIELD = FieldDrawing(
    ident="field",
    title="angle 150 × 100 × 12",
    parts=(FIELD_PART,),
    centroid=(24.2, 48.9),
    marks=(
        FieldMark((0, 150), -78.9, "−78.9 MPa"),
        FieldMark((100, 0), 6.1, "+6.1 MPa"),
        FieldMark((0, 0), 56.1, "+56.1 MPa"),
    ),
    neutral_axis_label="neutral axis turned −29.1° from y–y",
    actions=("M = 5.0 kN·m about y–y (horizontal axis): tension at the bottom",),
)
UNIFORM_FIELD = replace(
    FIELD,
    ident="even",
    parts=(FieldPart(ANGLE, 20.0, 0.0, 0.0),),
    marks=(FieldMark((0, 150), 20.0, "+20.0 MPa"),),
)
NO_FIELD = replace(
    FIELD,
    ident="nil",
    parts=(FieldPart(ANGLE, 0.0, 0.0, 0.0),),
    marks=(FieldMark((0, 150), 0.0, "0 MPa"),),
)

MOMENT_NOTE = "drawn on the tension side: sagging below the line"


def simple_beam(span: float = 6.0, load: float = 10.0) -> BeamDrawing:
    """V = w(L/2 − x) and M = w·x(L − x)/2 of a simple span (statics)."""
    x = np.linspace(0, span, 81)
    shear = tuple((float(a), load * (span / 2 - float(a))) for a in x)
    moment = tuple((float(a), load * float(a) * (span - float(a)) / 2) for a in x)
    return BeamDrawing(
        ident="simple",
        title="loading, G and Q",
        start=0.0,
        end=span,
        supports=(Support(0.0, "pin", "1: R = 30.0 kN"), Support(span, "roller", "2: R = 30.0 kN")),
        cases=(
            LoadCase("G permanent", (Distributed(0, span, 0.31, 0.31, "self-weight 0.31 kN/m"),)),
            LoadCase(
                "Q imposed",
                (
                    Distributed(0, span, 5, 5, "5.0 kN/m"),
                    Distributed(0, span / 2, 0, 4, "0 to 4.0 kN/m"),
                    Distributed(span / 2, span, -1, 2, "−1.0 to 2.0 kN/m"),
                    PointLoad(span * 0.4, 9, "9.0 kN"),
                    CoupleLoad(span, span, "4.0 kN·m"),
                ),
            ),
        ),
        diagrams=(
            Diagram("shear force V, kN", shear, extremes=(Extreme(0, load * span / 2, "30.0 kN at 0 m"),)),
            Diagram(
                "bending moment M, kN·m",
                moment,
                extremes=(Extreme(span / 2, load * span**2 / 8, "45.0 kN·m at 3.00 m"),),
                down=True,
                note=MOMENT_NOTE,
            ),
        ),
        stretches=(Stretch(0, span, "6.00 m"),),
    )


def envelope_beam() -> BeamDrawing:
    x = np.linspace(0, 20, 161)
    upper = tuple((float(a), 30 * float(np.sin(np.pi * a / 20))) for a in x)
    lower = tuple((float(a), -12 * float(np.sin(np.pi * a / 10)) ** 2) for a in x)
    return BeamDrawing(
        ident="envelope",
        title="loading",
        start=0.0,
        end=20.0,
        supports=(
            Support(0, "fixed", "A"),
            Support(10, "spring", "B: 12 kN/mm", turning=True),
            Support(20, "fixed", "C"),
        ),
        cases=(
            LoadCase("C temperature", (Effect(0, 20, "top 15 K warmer"),)),
            LoadCase(
                "W wind", (CoupleLoad(12, 20, "2.0 kN·m/m", clockwise=False), PointLoad(3, -4, "−4.0 kN"))
            ),
        ),
        diagrams=(
            Diagram(
                "bending moment M, kN·m, ULS",
                upper,
                lower,
                (
                    Extreme(10, 30, "30.0 kN·m at 10.00 m"),
                    Extreme(5, -12, "−12.0 kN·m at 5.00 m"),
                    Extreme(15, -12, "−12.0 kN·m at 15.00 m"),
                ),
                down=True,
                note="drawn on the tension side; right",
            ),
        ),
        stretches=(Stretch(0, 10, "10.00 m"), Stretch(10, 20, "10.00 m")),
        hinges=(7.0,),
        note="Lateral plane: loads act to the right.",
    )


def crowded_beam() -> BeamDrawing:
    """Twelve spans, thirty point loads, twenty-four extremes."""
    x = np.linspace(0, 60, 601)
    wave = tuple((float(a), 8 * float(np.sin(2 * np.pi * a / 5)) * (1 + float(a) / 80)) for a in x)
    extremes = tuple(
        Extreme(at, value, f"{value:.2f} kN·m at {at:.2f} m") for at, value in wave[12::25] if abs(value) > 1
    )
    return BeamDrawing(
        ident="crowded",
        title="twelve spans",
        start=0.0,
        end=60.0,
        supports=tuple(Support(5.0 * i, "roller" if i else "pin", f"{i + 1}") for i in range(13)),
        cases=(LoadCase("Q", tuple(PointLoad(1 + 2 * i, 4, f"{4 + i / 100:.2f} kN") for i in range(30))),),
        diagrams=(
            Diagram("bending moment M, kN·m", wave, extremes=extremes, down=True, note=MOMENT_NOTE),
            Diagram(
                "deflection w, mm", ((0.0, 0.0), (60.0, 0.0)), extremes=(Extreme(0, 0, "0 mm throughout"),)
            ),
        ),
        stretches=tuple(Stretch(5.0 * i, 5.0 * i + 5, "5.00 m") for i in range(12)),
    )


def neighbouring_extremes() -> BeamDrawing:
    """Values so near to each other that their labels must step aside, though there is room for all."""
    beam = simple_beam()
    places = (0.0, 2.7, 3.0, 3.2, 3.3)
    extremes = tuple(
        Extreme(x, 10 * x * (6 - x) / 2, f"{10 * x * (6 - x) / 2:.1f} kN·m at {x:.2f} m") for x in places
    )
    return replace(beam, ident="near", diagrams=(replace(beam.diagrams[1], extremes=extremes),))


def long_labels() -> BeamDrawing:
    beam = simple_beam()
    name = "an extreme with a name so long that no narrow place has room for it, at 3.00 m"
    case = LoadCase("Q", (PointLoad(3, 1, name), PointLoad(3, 2, name + " too")))
    return replace(
        beam,
        ident="wordy",
        cases=(case,),
        diagrams=(
            replace(beam.diagrams[0], extremes=(Extreme(0, 30, name), Extreme(6, -30, name + " too"))),
        ),
    )


Drawing = (
    SectionDrawing
    | StressDrawing
    | ShearDrawing
    | FlowDrawing
    | TorsionDrawing
    | InteractionDrawing
    | VaryDrawing
    | FieldDrawing
    | BeamDrawing
    | ConventionDrawing
)

_NAMED: dict[str, Drawing] = {
    "angle": SECTION,
    "rib": RIB,
    "tube": TUBE,
    "i": BEAM_I,
    "on its side": ON_ITS_SIDE,
    "one millimetre": ONE_MILLIMETRE,
    "strip": STRIP,
    "long note": LONG_NAMES,
    "sagging": SAGGING,
    "hogging": HOGGING,
    "mostly axial": MOSTLY_AXIAL,
    "axial": PURE_AXIAL,
    "pure compression": PURE_COMPRESSION,
    "none": NO_STRESS,
    "plastic": PLASTIC,
    "uneven": UNEVEN,
    "jump": TIMBER_ON_STEEL,
    "locked in": LOCKED_IN,
    "huge": HUGE,
    "biaxial": FIELD,
    "uniform": UNIFORM_FIELD,
    "no field": NO_FIELD,
    "simple": simple_beam(),
    "tiny": simple_beam(1e-6, 1e-9),
    "vast": simple_beam(1e9, 1e12),
    "envelope": envelope_beam(),
    "crowded": crowded_beam(),
    "neighbours": neighbouring_extremes(),
    "long labels": long_labels(),
    "eurocode": ConventionDrawing("eurocode", "Axes and signs", "eurocode", "down"),
    "american": ConventionDrawing("american", "Axes and signs", "american", "up"),
}

_ALL: list[tuple[str, Drawing]] = [
    (name, drawing)
    for named in (_NAMED, SECTIONS, FIELDS, STRESS_MODELS, SHEARS, FLOWS, TORSIONS, INTERACTIONS, VARIED)
    for name, drawing in named.items()
]
DRAWINGS: dict[str, Drawing] = {
    f"{type(drawing).__name__.removesuffix('Drawing').lower()}-{name}": drawing for name, drawing in _ALL
}


def compose(drawing: Drawing, width: Width) -> Picture:
    match drawing:
        case SectionDrawing():
            return compose_section(drawing, width)
        case StressDrawing():
            return compose_stress(drawing, width)
        case ShearDrawing():
            return compose_shear(drawing, width)
        case FlowDrawing():
            return compose_flow(drawing, width)
        case TorsionDrawing():
            return compose_torsion(drawing, width)
        case InteractionDrawing():
            return compose_interaction(drawing, width)
        case VaryDrawing():
            return compose_vary(drawing, width)
        case FieldDrawing():
            return compose_field(drawing, width)
        case BeamDrawing():
            return compose_beam(drawing, width)
        case ConventionDrawing():
            return compose_conventions(drawing, width)
