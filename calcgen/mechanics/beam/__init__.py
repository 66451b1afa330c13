"""Straight beams in bending: reactions, shear, moment, slope and deflection in closed form.

Signs, in the whole package. x runs along the beam from its start; "right" is seen looking that way.

========== ============================================== ===========================================
quantity   vertical plane                                 lateral plane (names end in `_lat`)
========== ============================================== ===========================================
w, loads   positive down                                  positive to the right
slope      dw/dx                                          the same, of the sideways deflection
rotation   of the cross-section, as slope                 the same
couples    positive clockwise, x to the right, w down     positive clockwise seen from above
M          positive sagging: tension at the bottom        positive with tension on the right
V          positive where the left part is pushed up      positive where it is pushed to the left
reaction   force up, moment anticlockwise                 force to the left, moment anticlockwise
========== ============================================== ===========================================

So dV/dx = -q, dM/dx = V + m, κ = M/EI + κ_0 with the free curvature κ_0, V falls by a point load and M
rises by a couple. Without shear deformation κ = -d²w/dx². With it (Timoshenko) the axis slopes more than the
section turns: dw/dx = rotation + V/GA_s and κ = -d(rotation)/dx; the slope then jumps under a point load, the
rotation does not, and a fixed support holds the rotation. A reaction has the sign of the load that it puts on
whatever carries the beam. Units are SI base units: m, N, N·m, rad.
"""

from calcgen.mechanics.beam.loads import (
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
    combined,
    scaled,
)
from calcgen.mechanics.beam.model import (
    FREE,
    NO_SHEAR,
    PLANES,
    RIGID,
    BeamModel,
    BendingStiffness,
    Plane,
    Restraint,
    ShearStiffness,
    Stretch,
    Support,
    fixed,
    pin,
    prismatic,
    roller,
    spring,
)
from calcgen.mechanics.beam.results import (
    PARTS,
    QUANTITIES,
    CaseSolution,
    Extremes,
    Quantity,
    Reaction,
    combine,
    combine_all,
)
from calcgen.mechanics.beam.solve import solve
from calcgen.mechanics.beam.span_measures import (
    MomentShape,
    moment_shape,
    relative_to_chord,
    relative_to_chords,
)
from calcgen.mechanics.beam.stability import UnstableBeam

__all__ = [
    "FREE",
    "NO_SHEAR",
    "PARTS",
    "PLANES",
    "QUANTITIES",
    "RIGID",
    "BeamModel",
    "BendingStiffness",
    "CaseSolution",
    "DistributedLoad",
    "DistributedMoment",
    "Extremes",
    "FreeCurvature",
    "Load",
    "MomentShape",
    "Plane",
    "PointLoad",
    "PointMoment",
    "Quantity",
    "Reaction",
    "Restraint",
    "Settlement",
    "ShearStiffness",
    "Stretch",
    "Support",
    "UnstableBeam",
    "combine",
    "combine_all",
    "combined",
    "fixed",
    "moment_shape",
    "pin",
    "prismatic",
    "relative_to_chord",
    "relative_to_chords",
    "roller",
    "scaled",
    "solve",
    "spring",
]
