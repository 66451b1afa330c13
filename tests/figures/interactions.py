"""Invented drawings of the interaction of N and M."""

from dataclasses import replace

import numpy as np

from calcgen.figures.interaction import ForcePoint, InteractionDrawing

_N = np.linspace(-1, 1, 41)
_UPPER = [(50 * (1 - n**2), 800 * n) for n in _N]

RECTANGLE = InteractionDrawing(
    ident="interaction",
    title="plate 60 × 240",
    limit=tuple((m, n) for m, n in (*_UPPER, *((-m, n) for m, n in reversed(_UPPER)))),
    elastic=((33.3, 0), (0, 800), (-33.3, 0), (0, -800)),
    acting=ForcePoint(20, -320, "M = 20.0 kN·m, N = −320 kN"),
    reached=ForcePoint(30.9, -494.4, "30.9 kN·m, −494 kN"),
    marks=(ForcePoint(50, 0, "M_pl = 50.0 kN·m"), ForcePoint(0, 800, "N_pl = 800 kN")),
    utilisation="utilisation 0.647: M and N are 0.647 of those at the limit",
)
BEYOND = replace(
    RECTANGLE,
    ident="beyond",
    acting=ForcePoint(70, 400, "M = 70.0 kN·m, N = 400 kN"),
    reached=ForcePoint(44.9, 256.4, "44.9 kN·m, 256 kN"),
    elastic=(),
    utilisation="utilisation 1.56, exceeded",
)
ONLY_MOMENT = replace(RECTANGLE, ident="only-m", acting=ForcePoint(20, 0, "M = 20.0 kN·m, N = 0 kN"),
                      reached=ForcePoint(50, 0, "50.0 kN·m, 0 kN"), marks=())  # fmt: skip
NOTHING = replace(RECTANGLE, ident="no-force", acting=ForcePoint(0, 0, "no force"), reached=None)
SMALL_UNITS = replace(
    RECTANGLE,
    ident="small-units",
    limit=tuple((1e-7 * m, 1e7 * n) for m, n in RECTANGLE.limit),
    elastic=tuple((1e-7 * m, 1e7 * n) for m, n in RECTANGLE.elastic),
    acting=ForcePoint(20e-7, -320e7, "M = 0.000 002 00 kN·m, N = −3 200 000 000 kN"),
    reached=ForcePoint(30.9e-7, -494.4e7, "M = 0.000 003 09 kN·m, N = −4 944 000 000 kN"),
    marks=(),
    note="A note about the curve that goes on for longer than a narrow place is wide.",
)
INTERACTIONS = {
    "rectangle": RECTANGLE,
    "beyond": BEYOND,
    "only moment": ONLY_MOMENT,
    "no force": NOTHING,
    "small units": SMALL_UNITS,
}
