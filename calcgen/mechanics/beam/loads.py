"""Actions on a beam, and their shares on the elements of a mesh. Signs are in the package's docstring."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.mesh import Mesh, nearest
from calcgen.mechanics.beam.model import BeamModel, Plane


@dataclass(frozen=True)
class PointLoad:
    """A force `value`, N, at `x`, positive down (lateral: to the right)."""

    x: float
    value: float
    plane: Plane = "vertical"


@dataclass(frozen=True)
class PointMoment:
    """A couple `value`, N·m, at `x`, positive clockwise: the moment rises by it."""

    x: float
    value: float
    plane: Plane = "vertical"


@dataclass(frozen=True)
class DistributedLoad:
    """A load from `start` to `end` that goes linearly from `value_start` to `value_end`, N/m."""

    start: float
    end: float
    value_start: float
    value_end: float
    plane: Plane = "vertical"

    @classmethod
    def uniform(cls, start: float, end: float, value: float, plane: Plane = "vertical") -> DistributedLoad:
        """Give a load of constant intensity."""
        return cls(start, end, value, value, plane)


@dataclass(frozen=True)
class DistributedMoment:
    """A couple per length from `start` to `end`, linear between its end values, N·m/m, positive clockwise."""

    start: float
    end: float
    value_start: float
    value_end: float
    plane: Plane = "vertical"

    @classmethod
    def uniform(cls, start: float, end: float, value: float, plane: Plane = "vertical") -> DistributedMoment:
        """Give a distributed couple of constant intensity."""
        return cls(start, end, value, value, plane)


@dataclass(frozen=True)
class FreeCurvature:
    """The curvature `value`, 1/m, that the beam takes from `start` to `end` where nothing holds it.

    Positive as M, in the sense of sagging. A temperature that rises by ΔT from the bottom to the top of a
    section of depth h gives -α·ΔT/h: the warmer top grows longer, and the beam bows up.
    """

    start: float
    end: float
    value: float
    plane: Plane = "vertical"

    @classmethod
    def of_gradient(
        cls, start: float, end: float, expansion: float, difference: float, depth: float
    ) -> FreeCurvature:
        """Give that of a `difference` of temperature, K, top less bottom, over the `depth`, m."""
        return cls(start, end, -expansion * difference / depth)


@dataclass(frozen=True)
class Settlement:
    """The support of number `support`, from 0, moves by `value`, m, positive down (lateral: to the right)."""

    support: int
    value: float
    plane: Plane = "vertical"


Load: TypeAlias = PointLoad | PointMoment | DistributedLoad | DistributedMoment | FreeCurvature | Settlement


def scaled(load: Load, factor: float) -> Load:
    """Give the load multiplied by `factor`."""
    if isinstance(load, DistributedLoad | DistributedMoment):
        return replace(load, value_start=factor * load.value_start, value_end=factor * load.value_end)
    return replace(load, value=factor * load.value)


def combined(cases: Mapping[str, Sequence[Load]], factors: Mapping[str, float]) -> tuple[Load, ...]:
    """Give the loads of a combination: those of each case times its factor."""
    return tuple(scaled(load, factor) for name, factor in factors.items() for load in cases[name])


def places(load: Load) -> tuple[float, ...]:
    """Give the places along the beam at which the load begins, ends or acts."""
    match load:
        case DistributedLoad() | DistributedMoment() | FreeCurvature():
            return load.start, load.end
        case PointLoad() | PointMoment():
            return (load.x,)
        case Settlement():
            return ()


def validate(load: Load, model: BeamModel) -> None:
    """Raise ValueError for a load that the model cannot carry: outside the beam, of no length, not finite."""
    if load.plane not in model.planes:
        raise ValueError("a lateral load needs the bending stiffness about the vertical axis")
    along = places(load)
    tolerance = model.tolerance
    if along and not (along[0] >= -tolerance and along[-1] <= model.length + tolerance):
        raise ValueError("a load lies outside the beam")
    match load:
        case DistributedLoad() | DistributedMoment():
            if along[1] - along[0] <= tolerance:
                raise ValueError("a distributed load needs a length")
        case FreeCurvature():
            if along[1] - along[0] <= tolerance:
                raise ValueError("a free curvature needs a length")
        case PointMoment():
            if any(model.same(load.x, hinge) for hinge in model.hinges):
                raise ValueError("a couple at a hinge does not tell on which side of it it acts")
        case Settlement():
            if not 0 <= load.support < len(model.supports):
                raise ValueError("a settlement names a support that does not exist")
            if model.supports[load.support].restraints(load.plane)[0] == 0.0:
                raise ValueError("a support that does not hold the beam cannot settle")
    if not all(math.isfinite(value) for value in _values(load)):
        raise ValueError("a load must be finite")


def _values(load: Load) -> tuple[float, ...]:
    if isinstance(load, DistributedLoad | DistributedMoment):
        return load.value_start, load.value_end
    return (load.value,)


@dataclass(frozen=True, eq=False)
class LoadField:
    """The loads of c cases on a mesh of n elements, in p planes.

    `forces`, `couples` and `settlements`: (n + 1, c, p), at the nodes. `intensity` and `moment_intensity`:
    (n, c, p, 2), at the start and the end of each element. `curvature`: (n, c, p), the free one of each
    element.
    """

    forces: FloatArray
    couples: FloatArray
    settlements: FloatArray
    intensity: FloatArray
    moment_intensity: FloatArray
    curvature: FloatArray


def on_mesh(cases: Sequence[Sequence[Load]], mesh: Mesh, planes: Sequence[Plane]) -> LoadField:
    """Spread the loads over the nodes and elements of a mesh that has a node at each of their places."""
    n, c, p = len(mesh.lengths), len(cases), len(planes)
    forces, couples, settlements = np.zeros((3, n + 1, c, p))
    intensity, moment_intensity = np.zeros((2, n, c, p, 2))
    field = LoadField(forces, couples, settlements, intensity, moment_intensity, np.zeros((n, c, p)))
    kinds: dict[type, list[tuple[int, int, Load]]] = {}
    for case, loads in enumerate(cases):
        for load in loads:
            kinds.setdefault(type(load), []).append((case, planes.index(load.plane), load))
    for kind, found in kinds.items():
        case_of, plane_of = np.array([each[:2] for each in found]).T
        values = np.array([_values(load) for _, _, load in found])
        if kind is Settlement:
            nodes = [mesh.supports[load.support] for _, _, load in found if isinstance(load, Settlement)]
            np.add.at(settlements, (nodes, case_of, plane_of), values[:, 0])
            continue
        x = np.array([places(load) for _, _, load in found])
        at = nearest(mesh.nodes, x)
        if kind is PointLoad or kind is PointMoment:
            np.add.at(forces if kind is PointLoad else couples, (at[:, 0], case_of, plane_of), values[:, 0])
            continue
        # Each distributed load on each of the elements that it covers.
        count = at[:, 1] - at[:, 0]
        number = np.repeat(np.arange(len(found)), count)
        element = np.arange(len(number)) - np.repeat(np.cumsum(count) - count, count) + at[number, 0]
        where = element, case_of[number], plane_of[number]
        if kind is FreeCurvature:
            np.add.at(field.curvature, where, values[number, 0])
            continue
        ends = mesh.nodes[at]
        part = mesh.nodes[np.stack([element, element + 1])] - ends[number, 0]
        part /= (ends[:, 1] - ends[:, 0])[number]
        spread = values[number, 0] + (values[:, 1] - values[:, 0])[number] * part
        np.add.at(intensity if kind is DistributedLoad else moment_intensity, where, spread.T)
    return field
