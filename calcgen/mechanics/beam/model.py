"""What a beam is: its length, stiffness, supports and hinges. Signs are in the package's docstring."""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property
from itertools import pairwise
from typing import Final, Literal, TypeAlias

Plane: TypeAlias = Literal["vertical", "lateral"]
PLANES: Final[tuple[Plane, Plane]] = ("vertical", "lateral")

Restraint: TypeAlias = float
"""Stiffness of a restraint, N/m or N·m/rad: 0 is free, infinity is rigid, and a spring lies between."""
FREE: Final[Restraint] = 0.0
RIGID: Final[Restraint] = math.inf

SAME_PLACE: Final = 1e-9
"""Places closer than this part of the beam's length are one place."""


@dataclass(frozen=True)
class BendingStiffness:
    """Bending stiffness about the horizontal and the vertical axis, N·m².

    [M, M_lat] = [[vertical, coupling], [coupling, lateral]] [κ, κ_lat]. `lateral` is None where it is not
    known: such a beam has no lateral results. A `coupling` needs `lateral`.
    """

    vertical: float
    lateral: float | None = None
    coupling: float = 0.0

    def __post_init__(self) -> None:
        if not 0.0 < self.vertical < math.inf:
            raise ValueError("the bending stiffness about the horizontal axis must be positive")
        if self.lateral is None:
            if self.coupling != 0.0:
                raise ValueError("a coupling needs the bending stiffness about the vertical axis")
        elif not (0.0 < self.lateral < math.inf and self.coupling**2 < self.vertical * self.lateral):
            raise ValueError("the bending stiffness must be positive definite")

    @classmethod
    def of_section(
        cls, E: float, I_h: float, I_v: float, I_hv: float = 0.0, *, restrained: bool = False
    ) -> BendingStiffness:
        """Stiffness of a section with modulus `E`, Pa, and second moments of area, m⁴.

        `I_hv` = ∫xy dA with x right and y up. Deflection is measured down, against y, so the coupling is
        -E·I_hv. A `restrained` section is forced to bend about its horizontal axis: no coupling.
        """
        return cls(E * I_h, E * I_v, 0.0 if restrained else -E * I_hv)


@dataclass(frozen=True)
class ShearStiffness:
    """Shear stiffness GA_s for a vertical and for a lateral shear force, N; infinite where it bends alone.

    The two planes are not coupled by shear: the part f_hv of the shear flexibility of a skew section is left
    out.
    """

    vertical: float = math.inf
    lateral: float = math.inf

    def __post_init__(self) -> None:
        if not (self.vertical > 0.0 and self.lateral > 0.0):
            raise ValueError("the shear stiffness must be positive")


NO_SHEAR: Final = ShearStiffness()
"""Of a beam after Euler and Bernoulli: its sections stay at right angles to the axis."""


@dataclass(frozen=True)
class Stretch:
    """A length of beam of constant stiffness, from `start` to `end`, m."""

    start: float
    end: float
    stiffness: BendingStiffness
    shear: ShearStiffness = NO_SHEAR


@dataclass(frozen=True)
class Support:
    """Restraints at the place `x`: deflection and rotation in each of the two planes."""

    x: float
    w: Restraint = RIGID
    rotation: Restraint = FREE
    lateral: Restraint = RIGID
    lateral_rotation: Restraint = FREE

    def __post_init__(self) -> None:
        if not all(value >= 0.0 for plane in PLANES for value in self.restraints(plane)):
            raise ValueError("the stiffness of a support must not be negative")

    def restraints(self, plane: Plane) -> tuple[Restraint, Restraint]:
        """Restraint of the deflection and of the rotation in `plane`."""
        if plane == "vertical":
            return self.w, self.rotation
        return self.lateral, self.lateral_rotation


def spring(
    x: float, force: Restraint, rotation: Restraint = FREE, planes: tuple[Plane, ...] = PLANES
) -> Support:
    """Give a support of stiffness `force`, N/m, and `rotation`, N·m/rad, in each of `planes`."""
    vertical = (force, rotation) if "vertical" in planes else (FREE, FREE)
    lateral = (force, rotation) if "lateral" in planes else (FREE, FREE)
    return Support(x, *vertical, *lateral)


def pin(x: float, planes: tuple[Plane, ...] = PLANES) -> Support:
    """Give a support that holds the deflection and lets the beam rotate."""
    return spring(x, RIGID, FREE, planes)


def roller(x: float, planes: tuple[Plane, ...] = PLANES) -> Support:
    """Give the support that, in bending, acts as a pin does."""
    return pin(x, planes)


def fixed(x: float, planes: tuple[Plane, ...] = PLANES) -> Support:
    """Give a support that holds the deflection and the rotation."""
    return spring(x, RIGID, RIGID, planes)


@dataclass(frozen=True)
class BeamModel:
    """A straight beam from x = 0 to `length`, m.

    `stretches` follow one another without gap; `supports` and `hinges` go from left to right. A hinge
    releases the moment in both planes, so it lies inside the beam and a support there holds no rotation.

    Raises
    ------
    ValueError
        Where these conditions are not met.
    """

    length: float
    stretches: tuple[Stretch, ...]
    supports: tuple[Support, ...]
    hinges: tuple[float, ...] = ()

    def __post_init__(self) -> None:
        if not 0.0 < self.length < math.inf:
            raise ValueError("the length of a beam must be positive")
        places = [support.x for support in self.supports]
        joints = [0.0, *(stretch.end for stretch in self.stretches)]
        ascending = all(
            b - a > self.tolerance for row in (joints, places, self.hinges) for a, b in pairwise(row)
        )
        contiguous = all(
            self.same(stretch.start, joint) for stretch, joint in zip(self.stretches, joints, strict=False)
        )
        if not (ascending and contiguous and self.same(joints[-1], self.length)):
            raise ValueError("stretches, supports and hinges must follow one another along the beam")
        if not all(-self.tolerance <= x <= self.length + self.tolerance for x in places):
            raise ValueError("a support lies outside the beam")
        if not all(self.tolerance < x < self.length - self.tolerance for x in self.hinges):
            raise ValueError("a hinge must lie inside the beam")
        if len(self.planes) == 1 and any(stretch.stiffness.coupling != 0.0 for stretch in self.stretches):
            raise ValueError("a coupling in one stretch needs the lateral stiffness of all")
        for support in self.supports:
            if (support.rotation or support.lateral_rotation) and any(
                self.same(support.x, hinge) for hinge in self.hinges
            ):
                raise ValueError("a support at a hinge cannot hold rotation")

    @cached_property
    def tolerance(self) -> float:
        """Distance below which two places are one, m."""
        return SAME_PLACE * self.length

    def same(self, a: float, b: float) -> bool:
        """Tell whether two places along the beam are one."""
        return abs(a - b) <= self.tolerance

    @cached_property
    def spans(self) -> tuple[tuple[float, float], ...]:
        """Start and end of each span: from one support that holds the deflection down or up to the next."""
        return self.spans_in("vertical")

    def spans_in(self, plane: Plane) -> tuple[tuple[float, float], ...]:
        """Start and end of each span in `plane`: from one support that holds the deflection to the next."""
        places = [support.x for support in self.supports if support.restraints(plane)[0] > FREE]
        return tuple(pairwise(places))

    @cached_property
    def planes(self) -> tuple[Plane, ...]:
        """Planes in which the stiffness is known."""
        known = all(stretch.stiffness.lateral is not None for stretch in self.stretches)
        return PLANES if known else ("vertical",)

    @property
    def shears(self) -> bool:
        """Tell whether shear deformation is taken into account somewhere."""
        return any(stretch.shear != NO_SHEAR for stretch in self.stretches)

    @cached_property
    def coupled(self) -> bool:
        """Tell whether a vertical load also bends the beam sideways."""
        return len(self.planes) == 2 and any(stretch.stiffness.coupling != 0.0 for stretch in self.stretches)


def prismatic(
    length: float,
    stiffness: BendingStiffness | float,
    supports: tuple[Support, ...],
    hinges: tuple[float, ...] = (),
    shear: ShearStiffness = NO_SHEAR,
) -> BeamModel:
    """Give a beam of one stiffness; a number is EI about the horizontal axis, N·m²."""
    if not isinstance(stiffness, BendingStiffness):
        stiffness = BendingStiffness(stiffness)
    return BeamModel(length, (Stretch(0.0, length, stiffness, shear),), supports, hinges)
