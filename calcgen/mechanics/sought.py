"""What an influence line is of: a quantity at a place, or a part of a support's reaction.

Signs and units are those of `calcgen.mechanics.beam`.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TypeAlias

import numpy as np

from calcgen.mechanics.beam import BeamModel, Plane, Quantity
from calcgen.mechanics.beam.results import TIE, Side
from calcgen.mechanics.combinations import ReactionPart
from calcgen.mechanics.influence import Influence, InfluenceLine


@dataclass(frozen=True)
class AtPlace:
    """A quantity at `x`, m; where it has two values there, the one on this side."""

    quantity: Quantity
    x: float
    side: Side


@dataclass(frozen=True)
class OfSupport:
    """A part of a support's reaction; supports count from 0, from the left."""

    support: int
    part: ReactionPart


Sought: TypeAlias = AtPlace | OfSupport


def line_of(influence: Influence, sought: Sought, plane: Plane) -> InfluenceLine:
    """Give the influence line of what is sought, for a unit load in `plane`."""
    match sought:
        case AtPlace(quantity, x, side):
            return influence.line(quantity, x, side, plane)
        case OfSupport(support, part):
            return influence.reaction(support, part, plane)


def has_two_sides(influence: Influence, quantity: Quantity, x: float, plane: Plane) -> bool:
    """Tell whether a quantity differs on the two sides of `x` under a unit load that stands elsewhere.

    So does V above a support, M where one holds the rotation, and the slope at a hinge. At the ends of the
    beam there is one side only.
    """
    left, right = (influence.line(quantity, x, side, plane) for side in ("left", "right"))
    if not _is_inside(influence.model, x) or len(left.pieces) != len(right.pieces):
        return False
    size = max(float(np.abs(line.pieces).max()) for line in (left, right))
    return float(np.abs(left.pieces - right.pieces).max()) > TIE * size


def _is_inside(model: BeamModel, x: float) -> bool:
    return model.tolerance < x < model.length - model.tolerance
