"""Properties of a section of several materials, or with bars, transformed to its reference material."""

from __future__ import annotations

from collections.abc import Callable, Sequence

import numpy as np

from calcgen.evaluation.blocks.section_findings import Findings
from calcgen.evaluation.blocks.section_materials import Materials
from calcgen.evaluation.conventions import PROPERTIES
from calcgen.evaluation.results.section import BarsPart, SectionPart
from calcgen.mechanics.composite import transformed_properties
from calcgen.mechanics.field import Bars, Law, Piece
from calcgen.mechanics.second_route.composite import composite_residuals
from calcgen.mechanics.stress_blocks import plastic_state
from calcgen.quantities.symbols import plain

_TRANSFORMED = (
    *("A", "I_h", "I_v", "I_hv", "I_1", "I_2", "alpha"),
    *("Q_h", "i_h", "i_v", "i_1", "i_2", "x_bar", "y_bar"),
)
_MODULI = ("W_el_h", "W_el_h_top", "W_el_h_bottom", "W_el_v")
_PLASTIC = ("W_pl_h", "W_pl_v")


def pieces_of(
    parts: Sequence[SectionPart], law: Callable[[SectionPart | BarsPart], Law]
) -> tuple[Piece, ...]:
    """Return the parts as pieces of mechanics, each with its law."""
    return tuple(Piece(part.name, part.outlines, law(part)) for part in parts)


def bars_of(
    bars: Sequence[BarsPart], parts: Sequence[SectionPart], law: Callable[[SectionPart | BarsPart], Law]
) -> tuple[Bars, ...]:
    """Return the bars as bars of mechanics: a group for each part in which bars of a line lie."""
    by_name = {part.name: part for part in parts}
    groups = []
    for line in bars:
        for host in dict.fromkeys(line.hosts):
            points = [p for p, h in zip(line.points, line.hosts, strict=True) if h == host]
            displaced = law(by_name[host]) if host else None
            groups.append(Bars(line.name, np.array(points), line.area, law(line), displaced))
    return tuple(groups)


def elastic(owner: SectionPart | BarsPart) -> Law:
    """Return the law of an elastic part."""
    return Law(owner.factor)


def _yielding(owner: SectionPart | BarsPart) -> Law:
    """Return the law of a part of the same strength in tension and compression."""
    strength = owner.strength or 0.0
    return Law(owner.factor, strength, strength)


def composite_findings(
    name: str, materials: Materials, parts: Sequence[SectionPart], bars: Sequence[BarsPart]
) -> Findings:
    """Transform a section; what follows from one material alone is absent, with the reason."""
    pieces, groups = pieces_of(parts, elastic), bars_of(bars, parts, elastic)
    computed = transformed_properties(pieces, groups)
    values = {key: float(getattr(computed, key)) for key in _TRANSFORMED}
    provenance = dict.fromkeys(_TRANSFORMED, f"transformed to {plain(materials.reference.name)}")
    provenance |= dict.fromkeys(("x_bar", "y_bar"), "of the transformed area")
    absent = {p.key: "not available for a composite section" for p in PROPERTIES if p.key not in values}
    owners = ", ".join(plain(f"{name}.{part.name}") for part in parts)
    absent |= dict.fromkeys(_MODULI, f"a composite section has a section modulus for each part: {owners}")
    missing = ", ".join(plain(m) for m in materials.missing_strengths())
    if bars:
        reason = "the material that bars lie in carries no tension: use a stress with model = plastic"
        absent |= dict.fromkeys(_PLASTIC, reason)
    elif missing:
        reason = f"it needs the strength of every material: strength {missing} = … is missing"
        absent |= dict.fromkeys(_PLASTIC, reason)
    else:
        plastic = _plastic_moduli(materials.reference.strength or 0.0, parts)
        values |= plastic
        way = (
            f"plastic moment over the strength of {plain(materials.reference.name)}, "
            "each material with one strength in tension and compression"
        )
        provenance |= dict.fromkeys(plastic, way)
        absent = {key: reason for key, reason in absent.items() if key not in plastic}
    return Findings(
        computed, values, provenance, absent=absent, residuals=composite_residuals(computed, pieces, groups)
    )


def _plastic_moduli(strength: float, parts: Sequence[SectionPart]) -> dict[str, float]:
    """Return the plastic moments about level and upright axes over the reference strength, m³."""
    pieces = pieces_of(parts, _yielding)
    level = plastic_state(pieces, towards="bottom").forces.M
    upright = plastic_state(pieces, towards="right").forces.M_lat
    return {"W_pl_h": level / strength, "W_pl_v": upright / strength}
