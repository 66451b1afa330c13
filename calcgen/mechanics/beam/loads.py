"""Actions on a beam, and their shares on the elements of a mesh. Signs are in the package's docstring."""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence
from dataclasses import dataclass, replace
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam.mesh import Mesh
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
    if not all(-model.tolerance <= x <= model.length + model.tolerance for x in places(load)):
        raise ValueError("a load lies outside the beam")
    values: tuple[float, ...]
    match load:
        case DistributedLoad() | DistributedMoment():
            values = (load.value_start, load.value_end)
            if load.end - load.start <= model.tolerance:
                raise ValueError("a distributed load needs a length")
        case FreeCurvature():
            values = (load.value,)
            if load.end - load.start <= model.tolerance:
                raise ValueError("a free curvature needs a length")
        case PointMoment():
            values = (load.value,)
            if any(model.same(load.x, hinge) for hinge in model.hinges):
                raise ValueError("a couple at a hinge does not tell on which side of it it acts")
        case PointLoad():
            values = (load.value,)
        case Settlement():
            values = (load.value,)
            if not 0 <= load.support < len(model.supports):
                raise ValueError("a settlement names a support that does not exist")
            if model.supports[load.support].restraints(load.plane)[0] == 0.0:
                raise ValueError("a support that does not hold the beam cannot settle")
    if not all(math.isfinite(value) for value in values):
        raise ValueError("a load must be finite")


@dataclass(frozen=True, eq=False)
class LoadField:
    """One case's loads on a mesh of n elements, in p planes.

    `forces`, `couples` and `settlements`: (n + 1, p), at the nodes. `intensity` and `moment_intensity`: (n,
    p, 2), at the start and the end of each element. `curvature`: (n, p), the free one of each element.
    """

    forces: FloatArray
    couples: FloatArray
    settlements: FloatArray
    intensity: FloatArray
    moment_intensity: FloatArray
    curvature: FloatArray


def on_mesh(loads: Sequence[Load], mesh: Mesh, planes: Sequence[Plane]) -> LoadField:
    """Spread the loads over the nodes and elements of a mesh that has a node at each of their places."""
    n, p = len(mesh.lengths), len(planes)
    forces, couples, settlements = np.zeros((3, n + 1, p))
    intensity, moment_intensity = np.zeros((2, n, p, 2))
    field = LoadField(forces, couples, settlements, intensity, moment_intensity, np.zeros((n, p)))
    for load in loads:
        plane = list(planes).index(load.plane)
        match load:
            case PointLoad():
                field.forces[mesh.node(load.x), plane] += load.value
            case PointMoment():
                field.couples[mesh.node(load.x), plane] += load.value
            case DistributedLoad():
                _spread(field.intensity[:, plane], load, mesh)
            case DistributedMoment():
                _spread(field.moment_intensity[:, plane], load, mesh)
            case FreeCurvature():
                field.curvature[mesh.node(load.start) : mesh.node(load.end), plane] += load.value
            case Settlement():
                field.settlements[mesh.supports[load.support], plane] += load.value
    return field


def _spread(intensity: FloatArray, load: DistributedLoad | DistributedMoment, mesh: Mesh) -> None:
    first, last = mesh.node(load.start), mesh.node(load.end)
    x = mesh.nodes[first : last + 1]
    values = load.value_start + (load.value_end - load.value_start) * (x - x[0]) / (x[-1] - x[0])
    intensity[first:last, 0] += values[:-1]
    intensity[first:last, 1] += values[1:]
