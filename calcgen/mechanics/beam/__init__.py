"""Straight beams in bending: reactions, shear, moment, slope and deflection in closed form.

Signs, in the whole package. x runs along the beam from its start; "right" is seen looking that way.

========== ============================================== ===========================================
quantity   vertical plane                                 lateral plane (names end in `_lat`)
========== ============================================== ===========================================
w, loads   positive down                                  positive to the right
slope      dw/dx                                          the same, of the sideways deflection
couples    positive clockwise, x to the right, w down     positive clockwise seen from above
M          positive sagging: tension at the bottom        positive with tension on the right
V          positive where the left part is pushed up      positive where it is pushed to the left
reaction   force up, moment anticlockwise                 force to the left, moment anticlockwise
========== ============================================== ===========================================

So dV/dx = -q, dM/dx = V + m, M = EI·κ, κ = -d²w/dx², V falls by a point load and M rises by a couple. A
reaction has the sign of the load that it puts on whatever carries the beam. Units are SI base units: m, N,
N·m, rad.
"""

from calcgen.mechanics.beam.loads import (
    DistributedLoad,
    DistributedMoment,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
    combined,
    scaled,
)
from calcgen.mechanics.beam.model import (
    FREE,
    PLANES,
    RIGID,
    BeamModel,
    BendingStiffness,
    Plane,
    Restraint,
    Stretch,
    Support,
    fixed,
    pin,
    prismatic,
    roller,
    spring,
)
from calcgen.mechanics.beam.results import QUANTITIES, CaseSolution, Extremes, Quantity, Reaction, combine
from calcgen.mechanics.beam.solve import solve
from calcgen.mechanics.beam.stability import UnstableBeam

__all__ = [
    "FREE",
    "PLANES",
    "QUANTITIES",
    "RIGID",
    "BeamModel",
    "BendingStiffness",
    "CaseSolution",
    "DistributedLoad",
    "DistributedMoment",
    "Extremes",
    "Load",
    "Plane",
    "PointLoad",
    "PointMoment",
    "Quantity",
    "Reaction",
    "Restraint",
    "Settlement",
    "Stretch",
    "Support",
    "UnstableBeam",
    "combine",
    "combined",
    "fixed",
    "pin",
    "prismatic",
    "roller",
    "scaled",
    "solve",
    "spring",
]
