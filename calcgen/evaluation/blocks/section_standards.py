"""Shear areas of the design standard, and constants by the formulas of section tables."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.section_parts import PlacedPart
from calcgen.evaluation.blocks.section_published import quarter_turns
from calcgen.evaluation.conventions import Axes
from calcgen.evaluation.scope import Scope
from calcgen.mechanics.standard_areas import shear_area
from calcgen.mechanics.table_formulas import table_torsion, table_warping

_SHEAR_AREAS = ("A_v_v", "A_v_h")
_NAMES_NONE = {
    "eurocode": "EN 1993-1-1 6.2.6(3) names none for this section",
    "american": "AISC 360-16 chapter G names none for this section",
}


@dataclass(frozen=True)
class ByStandard:
    """Values in SI by their keys, where each comes from, and why one is missing."""

    values: dict[str, float]
    provenance: dict[str, str]
    absent: dict[str, str]


def by_standard(
    part: PlacedPart | None, area: float, published: Mapping[str, float], scope: Scope, axes: Axes
) -> ByStandard:
    """Return what standards and tables say of a section of one whole shape (`part` None: of no other).

    A shape with rounded corners counts as rolled. `area` is the outline's: a shear area is a difference,
    which would magnify the rounding of a printed one.
    """
    absent = dict.fromkeys(_SHEAR_AREAS, _NAMES_NONE[axes])
    if part is None:
        return ByStandard({}, {}, absent)
    shape, sizes = part.kind, part.shape.dimensions
    values: dict[str, float] = {}
    where: dict[str, str] = {}
    quarters = quarter_turns(part.text, scope)
    if quarters is not None:
        rolled = part.profile is not None or any(sizes.get(r, 0.0) > 0.0 for r in ("r", "r_o"))
        for found in shear_area(shape, sizes, area, axes, rolled=rolled):
            upright = (found.direction == "vertical") == (quarters % 2 == 0)
            key = "A_v_v" if upright else "A_v_h"
            values[key], where[key] = found.value, found.clause
    if part.profile is not None:
        axis = {k: published.get(k, 0.0) for k in ("I_h", "I_v")}
        table = {
            "I_t": table_torsion(shape, sizes, part.profile.axes),
            "I_w": table_warping(shape, sizes, part.profile.axes, **axis) if all(axis.values()) else None,
        }
        for key, by_formula in table.items():
            if by_formula is not None and key not in published:
                values[key], where[key] = by_formula.value, f"table formula: {by_formula.formula}"
    return ByStandard(values, where, {key: why for key, why in absent.items() if key not in values})
