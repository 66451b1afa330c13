"""Torsion, warping, shear centre, shear areas, kern and monosymmetry of a section of one material."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass, field

from calcgen.mechanics.kern import kern
from calcgen.mechanics.monosymmetry import monosymmetry
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.saint_venant import MeshError, SaintVenant, saint_venant
from calcgen.mechanics.second_route.kern import kern_residuals
from calcgen.mechanics.second_route.residual import Residual
from calcgen.mechanics.second_route.torsion import closed_form_residual, torsion_residuals
from calcgen.mechanics.section import Inertia
from calcgen.mechanics.torsion import closed_form
from calcgen.mechanics.walls import Wall, WallSection, wall_section
from calcgen.quantities.display import number_text, rounded

ELEMENTS = "finite elements"
DIGITS = 6  # of values by elements: the last ones of a float differ between machines
NO_WARPING = 1e-12  # of the area cubed: a smaller warping constant is rounding
NOT_MESHED = "the outline could not be meshed for finite elements"
_PIECES = "no shear connects the separate pieces of the section"
_BY_ELEMENTS = ("I_t", "I_w", "A_s_v", "A_s_h", "x_s", "y_s", "beta")


@dataclass(frozen=True)
class Torsional:
    """Properties by their keys, in SI, with where they come from.

    Attributes
    ----------
    beside : label and value of another route.
    absent : why a property is missing.
    elements : I_t and I_w by finite elements, whichever is in force.
    meshed : whether the finite elements were found.
    """

    values: dict[str, float]
    provenance: dict[str, str]
    beside: dict[str, tuple[str, float]] = field(default_factory=dict)
    absent: dict[str, str] = field(default_factory=dict)
    elements: dict[str, float] = field(default_factory=dict)
    residuals: tuple[Residual, ...] = ()
    meshed: bool = True


def torsional(
    section: Inertia,
    outlines: tuple[Outline, ...],
    shape: str,
    sizes: Mapping[str, float],
    walls: tuple[Wall, ...],
) -> Torsional:
    """Find what needs more than integrals over the outline.

    The torsion constant is exact for the shapes with a closed form and by finite elements otherwise; warping
    constant and shear centre of open thin-walled shapes follow their mid-line, as tables do, and the finite
    elements stand beside them; the other way round where flanges taper, whose mid-line is a coarse model.

    Parameters
    ----------
    shape, sizes : word and dimensions of a section of one whole shape, else '' and none.
    walls : its mid-line, empty where it has none.
    """
    found = _solved(outlines)
    mid_line = wall_section(walls) if walls else None
    values = _by_elements(section, found) if found is not None else {}
    elements = {key: value for key, value in values.items() if key in ("I_t", "I_w")}
    where = dict.fromkeys(values, ELEMENTS)
    beside: dict[str, tuple[str, float]] = {}
    residuals: list[Residual] = []
    if found is not None:
        where["I_t"] = f"{ELEMENTS}, within {number_text(100.0 * found.gap, 1)} %"
        residuals += [r for r in torsion_residuals(found) if r.what == "J"]
    if mid_line is not None:
        _beside(beside, values, where, "I_t", mid_line.I_t, mid_line.torsion_method)
        if not mid_line.closed and (found is None or found.shear is not None):
            _by_mid_line(mid_line, values, where, beside, governs=sizes.get("slope", 0.0) == 0.0)
    exact = closed_form(shape, sizes)
    if exact is not None:
        if found is not None:
            residuals.append(closed_form_residual(exact, found))
            beside["I_t"] = (ELEMENTS, values["I_t"])
        values["I_t"], where["I_t"] = exact.value, exact.method
        if shape in ("circle", "tube"):
            values["I_w"], where["I_w"] = 0.0, "a round section does not warp"
    if "y_s" in values:
        values["beta"] = monosymmetry(section, values["y_s"], *outlines)
        where["beta"] = "from the outline and the shear centre"
    core = kern(section, *outlines)
    residuals += kern_residuals(section, core, *outlines)
    reach = {"k_t": core.k_top, "k_b": core.k_bottom, "k_l": core.k_left, "k_r": core.k_right}
    reason = NOT_MESHED if found is None else _PIECES
    return Torsional(
        values | reach,
        where | dict.fromkeys(reach, "from the outline"),
        beside,
        {key: reason for key in _BY_ELEMENTS if key not in values},
        elements,
        tuple(residuals),
        meshed=found is not None,
    )


def _solved(outlines: tuple[Outline, ...]) -> SaintVenant | None:
    try:
        return saint_venant(*outlines)
    except MeshError:
        return None


def _beside(
    beside: dict[str, tuple[str, float]],
    values: dict[str, float],
    where: dict[str, str],
    key: str,
    value: float,
    method: str,
) -> None:
    """Set a value beside the one in force, or in force where there is none."""
    if key in values:
        beside[key] = (method, value)
    else:
        values[key], where[key] = value, method


def _by_elements(section: Inertia, found: SaintVenant) -> dict[str, float]:
    """Return what the elements give, with as many digits as every machine finds alike."""
    values = {"I_t": rounded(found.J, DIGITS)}
    if found.shear is None:
        return values
    s = found.shear
    places = DIGITS - 1 - math.floor(math.log10(math.sqrt(section.area)))
    return values | {
        "I_w": rounded(s.I_w, DIGITS) if s.I_w > NO_WARPING * section.area**3 else 0.0,
        "A_s_v": rounded(s.A_s_h, DIGITS),  # a vertical force goes with bending about the horizontal axis
        "A_s_h": rounded(s.A_s_v, DIGITS),
        "x_s": round(s.x_s, places) + 0.0,
        "y_s": round(s.y_s, places) + 0.0,
    }


def _by_mid_line(
    mid_line: WallSection,
    values: dict[str, float],
    where: dict[str, str],
    beside: dict[str, tuple[str, float]],
    *,
    governs: bool,
) -> None:
    """Set warping constant and shear centre of an open section by its mid-line, or beside those in force."""
    by_mid_line = {"I_w": mid_line.I_w, "x_s": mid_line.x_s, "y_s": mid_line.y_s}
    for key, value in by_mid_line.items():
        if value == values.get(key):
            if governs:
                where[key] = mid_line.warping_method
        elif governs and key in values:
            beside[key] = (ELEMENTS, values[key])
            values[key], where[key] = value, mid_line.warping_method
        else:
            _beside(beside, values, where, key, value, mid_line.warping_method)
