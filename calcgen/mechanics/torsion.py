"""Torsion constants in closed form: circle, tube, ellipse, rectangle.

Stresses are for a torque of one, without sign; a torque is positive clockwise, seen along the beam with x
right and y up. Places are from the centre of the section, m.
"""

from __future__ import annotations

import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass

TERMS = 60  # of the series for a rectangle; they fall off like 1/n⁵ and faster


@dataclass(frozen=True)
class TorsionConstant:
    """A torsion constant, m⁴, the method in words, and the largest shear stress for T = 1, 1/m³.

    `place` is where that stress stands, m, from the centre; the place across the centre has it too.
    """

    value: float
    method: str
    tau_max_per_T: float
    place: tuple[float, float]


def circle_torsion(d: float) -> TorsionConstant:
    """Solid circle of diameter `d`, m: J = πd⁴/32, exact."""
    J = math.pi * d**4 / 32.0
    return TorsionConstant(J, "polar second moment of a circle, exact", 0.5 * d / J, (0.5 * d, 0.0))


def tube_torsion(d: float, t: float) -> TorsionConstant:
    """Round tube of outside diameter `d` and wall `t`, m: J = π(d⁴ - d_i⁴)/32, exact.

    Written as πt(d - t)(d² + d_i²)/8, which loses no digits for a thin wall.
    """
    d_i = d - 2.0 * t
    J = math.pi * t * (d - t) * (d * d + d_i * d_i) / 8.0
    return TorsionConstant(J, "polar second moment of a round tube, exact", 0.5 * d / J, (0.5 * d, 0.0))


def ellipse_torsion(b: float, h: float) -> TorsionConstant:
    """Solid ellipse, `b` wide and `h` high, m: J = πa³c³/(a² + c²) of its half axes, exact.

    The stress is largest at the ends of the short axis. Saint-Venant's solution, S. Timoshenko and J. N.
    Goodier, Theory of elasticity, article 105; from memory.
    """
    a, c = 0.5 * b, 0.5 * h
    J = math.pi * a**3 * c**3 / (a * a + c * c)
    short = min(a, c)
    place = (0.0, c) if c <= a else (a, 0.0)
    return TorsionConstant(
        J, "Saint-Venant's solution for an ellipse, exact", 2.0 / (math.pi * a * c * short), place
    )


def rectangle_torsion(b: float, h: float) -> TorsionConstant:
    """Solid rectangle, `b` wide and `h` high, m: Saint-Venant's series, exact to 1e-10.

    With l ≥ t the sides: J = l t³ (1/3 - 64/π⁵ (t/l) Σ tanh(nπl/2t)/n⁵), and in the middle of the long side
    τ = T t/J (1 - 8/π² Σ 1/(n² cosh(nπl/2t))), n = 1, 3, 5, …; S. Timoshenko and J. N. Goodier, Theory of
    elasticity, article 109; from memory.
    """
    long, t = max(b, h), min(b, h)
    odd = range(1, 2 * TERMS, 2)
    argument = 0.5 * math.pi * long / t
    J = (
        long
        * t**3
        * (
            1.0 / 3.0
            - 64.0 / math.pi**5 * (t / long) * math.fsum(math.tanh(n * argument) / n**5 for n in odd)
        )
    )
    lacking = 8.0 / math.pi**2 * math.fsum(_sech(n * argument) / n**2 for n in odd)
    place = (0.0, 0.5 * h) if h <= b else (0.5 * b, 0.0)
    return TorsionConstant(J, "Saint-Venant's series for a rectangle, exact", t / J * (1.0 - lacking), place)


def _sech(u: float) -> float:
    """Return 1/cosh u without overflow, for u ≥ 0."""
    return 2.0 * math.exp(-u) / (1.0 + math.exp(-2.0 * u))


CLOSED_FORMS: Mapping[str, tuple[Callable[..., TorsionConstant], tuple[str, ...]]] = {
    "circle": (circle_torsion, ("d",)),
    "tube": (tube_torsion, ("d", "t")),
    "ellipse": (ellipse_torsion, ("b", "h")),
    "rectangle": (rectangle_torsion, ("b", "h")),
}
"""By the word of the shape: the closed form, and the sizes that it takes."""


def closed_form(shape: str, sizes: Mapping[str, float]) -> TorsionConstant | None:
    """Return the closed form of a shape with the given sizes, m, by symbol; None where there is none."""
    if shape not in CLOSED_FORMS:
        return None
    form, names = CLOSED_FORMS[shape]
    return form(*(sizes[name] for name in names))
