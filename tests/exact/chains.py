"""Chains of the oracle -> models and loads of mechanics, and -> the lines of a beam block."""

from __future__ import annotations

from collections.abc import Iterator

import numpy as np

from calcgen.mechanics.beam import (
    FREE,
    NO_SHEAR,
    PLANES,
    RIGID,
    BeamModel,
    BendingStiffness,
    DistributedLoad,
    DistributedMoment,
    FreeCurvature,
    Load,
    PointLoad,
    PointMoment,
    Settlement,
    ShearStiffness,
    Stretch,
    Support,
)
from tests.exact import singularity as oracle
from tests.exact.singularity import Action, Chain, Held, Number, Piece


def supports_of(chain: Chain) -> tuple[list[Support], list[int]]:
    """Return the supports, and the number of each one of `chain.held` among them."""
    places = sorted({float(held.x) for held in chain.held})
    found = {x: Support(x, FREE, FREE, FREE, FREE) for x in places}
    for held in chain.held:
        own = found[float(held.x)]
        w, rotation = _restraint(held.w), _restraint(held.rotation)
        found[float(held.x)] = (
            Support(own.x, w, rotation, own.lateral, own.lateral_rotation)
            if held.plane == 0
            else Support(own.x, own.w, own.rotation, w, rotation)
        )
    return [found[x] for x in places], [places.index(float(held.x)) for held in chain.held]


def _restraint(stiffness: Number) -> float:
    return FREE if stiffness is None else RIGID if stiffness == oracle.RIGID else float(stiffness)


def model_of(chain: Chain) -> BeamModel:
    """Return the same beam as a model of mechanics."""
    starts = [0.0, *(float(piece.end) for piece in chain.pieces[:-1])]
    stretches = tuple(
        Stretch(start, float(piece.end), _stiffness(piece), _shear(piece))
        for start, piece in zip(starts, chain.pieces, strict=True)
    )
    return BeamModel(
        float(chain.pieces[-1].end),
        stretches,
        tuple(supports_of(chain)[0]),
        tuple(sorted(float(x) for x in chain.hinges)),
    )


def _stiffness(piece: Piece) -> BendingStiffness:
    if len(piece.flexibility) == 1:
        return BendingStiffness(float(1 / piece.flexibility[0][0]))
    B = np.linalg.inv(np.array([[float(f) for f in row] for row in piece.flexibility]))
    return BendingStiffness(float(B[0, 0]), float(B[1, 1]), float(B[0, 1]))


def _shear(piece: Piece) -> ShearStiffness:
    values = [float(1 / f) if f else None for f in piece.shear]
    return ShearStiffness(
        NO_SHEAR.vertical if values[0] is None else values[0],
        NO_SHEAR.lateral if len(values) < 2 or values[1] is None else values[1],
    )


def loads_of(chain: Chain) -> tuple[Load, ...]:
    """Return what acts on the beam, settlements included."""
    _, numbers = supports_of(chain)
    settling = tuple(
        Settlement(number, float(held.settles), PLANES[held.plane])
        for held, number in zip(chain.held, numbers, strict=True)
        if held.settles
    )
    return (*(_load(action) for action in chain.actions), *settling)


def _load(action: Action) -> Load:
    plane, x, value = PLANES[action.plane], float(action.start), float(action.value)
    if action.kind == "force":
        return PointLoad(x, value, plane)
    if action.kind == "couple":
        return PointMoment(x, value, plane)
    end = float(action.end)
    if action.kind == "curvature":
        return FreeCurvature(x, end, value, plane)
    value_end = value if action.value_end is None else float(action.value_end)
    kind = DistributedLoad if action.kind == "load" else DistributedMoment
    return kind(x, end, value, value_end, plane)


DEPTH, EXPANSION = 0.2, 1e-5  # m and 1/K, of the section that stands for a stiffness where one is needed
SECTION = "shape = rectangle(b = 100 mm, h = 200 mm)"
INERTIA = 0.1 * 0.2**3 / 12  # m⁴


def lines_of(chain: Chain) -> list[str]:
    """Return the same beam, in one plane, as the lines of a beam block; `SECTION` is its section `s`.

    A guide, which the language has no word for, is a spring without stiffness that holds the rotation.
    """
    length = float(chain.pieces[-1].end)
    lines = [f"span = {length!r} m"]
    if any(action.kind == "curvature" for action in chain.actions):
        EI = float(1 / chain.pieces[0].flexibility[0][0])
        lines += ["section = s", f"E = {EI / INERTIA!r} Pa", f"expansion = {EXPANSION!r} 1/K"]
        lines += ["shear_deformation = no"]
    else:
        lines += _stiffness_lines(chain)
    for held in chain.held:
        settles = f" settles {float(held.settles)!r} m" if held.settles else ""
        lines.append(f"support {_support(held)} at {float(held.x)!r} m{settles}")
    lines += [f"hinge at {float(x)!r} m" for x in chain.hinges]
    lines += [f"load Q {_text(action)}" for action in chain.actions]
    return lines


def _stiffness_lines(chain: Chain) -> Iterator[str]:
    start = 0.0
    for piece in chain.pieces:
        where = f"from {start!r} m to {float(piece.end)!r} m" if len(chain.pieces) > 1 else ""
        yield f"EI = {float(1 / piece.flexibility[0][0])!r} N·m² {where}"
        if piece.shear[0]:
            yield f"GA_s = {float(1 / piece.shear[0])!r} N {where}"
        start = float(piece.end)


def _support(held: Held) -> str:
    if held.w == oracle.RIGID and held.rotation == oracle.RIGID:
        return "fixed"
    stiffness = 0.0 if held.w is None else held.w
    rotation = 1e18 if held.rotation == oracle.RIGID else held.rotation
    turned = "" if rotation is None else f" rotation {float(rotation)!r} N·m"
    return "pin" + turned if stiffness == oracle.RIGID else f"spring {float(stiffness)!r} N/m{turned}"


def _text(action: Action) -> str:
    x, value = float(action.start), float(action.value)
    match action.kind:
        case "force":
            return f"point {value!r} N at {x!r} m"
        case "couple":
            return f"moment {value!r} N·m at {x!r} m"
        case "curvature":
            rise = -value * DEPTH / EXPANSION
            return f"gradient {rise!r} K from {x!r} m to {float(action.end)!r} m"
        case "moments":
            assert action.value_end is None, "the language has uniform ones"
            return f"moment {value!r} N from {x!r} m to {float(action.end)!r} m"
        case _:
            last = value if action.value_end is None else float(action.value_end)
            return f"linear {value!r} N/m to {last!r} N/m from {x!r} m to {float(action.end)!r} m"
