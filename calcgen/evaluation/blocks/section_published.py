"""A catalogue's values of a section as it lies, and which values are in force."""

from __future__ import annotations

import math
from collections.abc import Mapping

from calcgen.evaluation.quantity import quantity_of
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import ShapeText
from calcgen.mechanics.section import SectionProperties

_TURNED = {"I_h": "I_v", "W_el_h": "W_el_v", "W_pl_h": "W_pl_v", "i_h": "i_v"}


def oriented(table: Mapping[str, float], text: ShapeText, scope: Scope) -> dict[str, float]:
    """Return a profile's published values, or tolerances, as the section lies: a quarter turn exchanges axes.

    Turned by another angle, only what has no axis keeps its published value.
    """
    published = {k: v for k, v in table.items() if k != "mass"}
    if text.turned is None:
        return published if not text.mirrored else {k: v for k, v in published.items() if k != "x_bar"}
    quarters = quarter_turns(text, scope)
    swap = _TURNED | {v: k for k, v in _TURNED.items()}
    free = {k: v for k, v in published.items() if k not in swap and k not in ("x_bar", "y_bar")}
    if quarters is None:
        return free
    exchanged = quarters % 2 == 1
    return free | {(swap[k] if exchanged else k): v for k, v in published.items() if k in swap}


def quarter_turns(text: ShapeText, scope: Scope) -> int | None:
    """Return the quarter turns of a shape; None where it is turned by another angle."""
    angle = quantity_of(text.turned, "angle", scope) if text.turned is not None else None
    quarters = angle.si / (0.5 * math.pi) if angle is not None else 0.0
    return round(quarters) if abs(quarters - round(quarters)) <= 1e-9 else None


def in_force(
    own: Mapping[str, float], published: Mapping[str, float], computed: SectionProperties
) -> dict[str, float]:
    """Return published values before the outline's, and what follows from them by a division with them."""
    if not published:
        return dict(own)
    values = dict(own) | {k: v for k, v in published.items() if k not in ("x_bar", "y_bar")}
    if "I_h" in published:
        values["W_el_h_top"] = values["I_h"] / computed.c_top
        values["W_el_h_bottom"] = values["I_h"] / computed.c_bottom
    for i, inertia in (("i_h", "I_h"), ("i_v", "I_v"), ("i_1", "I_1"), ("i_2", "I_2")):
        if i not in published and inertia in published:
            values[i] = math.sqrt(values[inertia] / values["A"])
    if computed.I_hv == 0.0:  # the reference axes are the principal ones
        values["I_2"], values["I_1"] = sorted((values["I_h"], values["I_v"]))
        values["i_2"], values["i_1"] = sorted((values["i_h"], values["i_v"]))
    return values
