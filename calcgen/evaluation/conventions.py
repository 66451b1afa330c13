"""The names of section properties under each convention of axes, and what they mean.

Mechanics names what is about the horizontal axis with `h`, about the vertical one with `v`. In `eurocode`
the horizontal axis is y–y and the vertical one z–z (EN 1993-1-1, 1.7); in `american` they are x–x and y–y.
`I_y` exists in both and means different things: meanings are always given in words.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

Axes = Literal["eurocode", "american"]

HORIZONTAL = "about the horizontal axis"
VERTICAL = "about the vertical axis"


@dataclass(frozen=True)
class PropertyName:
    """A section property.

    Attributes
    ----------
    key : its name in mechanics and catalogues.
    eurocode, american : its name under each convention, '' where the convention has none.
    meaning : in words, with the axis.
    kind : kind of quantity (`calcgen.quantities.display.KINDS`), 'angle' or 'number'.
    units : unit it is shown in, SI and US.
    """

    key: str
    eurocode: str
    american: str
    meaning: str
    kind: str
    units: tuple[str, str]

    def name(self, axes: Axes) -> str:
        """Return its name under a convention."""
        return self.eurocode if axes == "eurocode" else self.american


_LENGTH, _AREA, _CUBE = ("mm", "in"), ("cm²", "in²"), ("cm³", "in³")
_FOURTH, _SIXTH = ("cm⁴", "in⁴"), ("cm⁶", "in⁶")

_MONOSYMMETRY = (
    f"monosymmetry constant ∫y(x² + y²) dA / I − 2(y_s − y_bar), I {HORIZONTAL}, x to the right and y up "
    "from the centroid; of an I-section negative with the larger flange on top"
)

PROPERTIES: tuple[PropertyName, ...] = (
    PropertyName("A", "A", "A", "area", "area", _AREA),
    PropertyName("I_h", "I_y", "I_x", f"second moment of area {HORIZONTAL}", "second moment", _FOURTH),
    PropertyName("I_v", "I_z", "I_y", f"second moment of area {VERTICAL}", "second moment", _FOURTH),
    PropertyName(
        "I_hv", "I_yz", "I_xy", "product moment ∫xy dA, x to the right and y up", "second moment", _FOURTH
    ),
    PropertyName(
        "I_1", "I_1", "I_1", "second moment about principal axis 1, the stiffer", "second moment", _FOURTH
    ),
    PropertyName("I_2", "I_2", "I_2", "second moment about principal axis 2", "second moment", _FOURTH),
    PropertyName(
        "alpha",
        "α_p",
        "α_p",
        "angle from the horizontal axis to axis 1, counter-clockwise",
        "angle",
        ("deg", "deg"),
    ),
    PropertyName(
        "W_el_h", "W_el_y", "S_x", f"elastic modulus {HORIZONTAL}, the smaller", "section modulus", _CUBE
    ),
    PropertyName(
        "W_el_h_top",
        "W_el_y_t",
        "S_x_t",
        f"elastic modulus {HORIZONTAL}, top fibre",
        "section modulus",
        _CUBE,
    ),
    PropertyName(
        "W_el_h_bottom",
        "W_el_y_b",
        "S_x_b",
        f"elastic modulus {HORIZONTAL}, bottom fibre",
        "section modulus",
        _CUBE,
    ),
    PropertyName(
        "W_el_v", "W_el_z", "S_y", f"elastic modulus {VERTICAL}, the smaller", "section modulus", _CUBE
    ),
    PropertyName("W_pl_h", "W_pl_y", "Z_x", f"plastic modulus {HORIZONTAL}", "section modulus", _CUBE),
    PropertyName("W_pl_v", "W_pl_z", "Z_y", f"plastic modulus {VERTICAL}", "section modulus", _CUBE),
    PropertyName(
        "Q_h",
        "Q_y",
        "Q_x",
        f"first moment of the area above the centroid, {HORIZONTAL}",
        "section modulus",
        _CUBE,
    ),
    PropertyName("i_h", "i_y", "r_x", f"radius of gyration {HORIZONTAL}", "length", _LENGTH),
    PropertyName("i_v", "i_z", "r_y", f"radius of gyration {VERTICAL}", "length", _LENGTH),
    PropertyName("i_1", "i_1", "r_1", "radius of gyration about principal axis 1", "length", _LENGTH),
    PropertyName("i_2", "i_2", "r_2", "radius of gyration about principal axis 2", "length", _LENGTH),
    PropertyName("I_t", "I_t", "J", "torsion constant", "second moment", _FOURTH),
    PropertyName("I_w", "I_w", "C_w", "warping constant about the shear centre", "warping constant", _SIXTH),
    PropertyName(
        "A_v_v",
        "A_v_z",
        "A_w",
        "shear area of the design standard, for a vertical shear force",
        "area",
        _AREA,
    ),
    PropertyName(
        "A_v_h", "A_v_y", "", "shear area of the design standard, for a horizontal shear force", "area", _AREA
    ),
    PropertyName(
        "A_s_v", "A_s_z", "A_s_y", "area of shear deformation, for a vertical shear force", "area", _AREA
    ),
    PropertyName(
        "A_s_h", "A_s_y", "A_s_x", "area of shear deformation, for a horizontal shear force", "area", _AREA
    ),
    PropertyName(
        "x_bar", "x_bar", "x_bar", "centroid from the section's origin, to the right", "length", _LENGTH
    ),
    PropertyName("y_bar", "y_bar", "y_bar", "centroid from the section's origin, upwards", "length", _LENGTH),
    PropertyName(
        "x_s", "x_s", "x_s", "shear centre from the section's origin, to the right", "length", _LENGTH
    ),
    PropertyName("y_s", "y_s", "y_s", "shear centre from the section's origin, upwards", "length", _LENGTH),
    PropertyName("k_t", "k_t", "k_t", "kern from the centroid, upwards", "length", _LENGTH),
    PropertyName("k_b", "k_b", "k_b", "kern from the centroid, downwards", "length", _LENGTH),
    PropertyName("k_l", "k_l", "k_l", "kern from the centroid, to the left", "length", _LENGTH),
    PropertyName("k_r", "k_r", "k_r", "kern from the centroid, to the right", "length", _LENGTH),
    PropertyName("beta", "β", "β", _MONOSYMMETRY, "length", _LENGTH),
)
"""Properties in the order shown."""

DIMENSIONS: dict[str, str] = {
    "h": "depth",
    "b": "width",
    "d": "depth or diameter",
    "b_f": "flange width",
    "t": "thickness",
    "t_w": "web thickness",
    "t_f": "flange thickness",
    "r": "root radius",
    "b_t": "width at the top",
    "t_t": "thickness of the top flange",
    "b_b": "width at the bottom",
    "t_b": "thickness of the bottom flange",
    "r_o": "outside corner radius",
}
"""Dimensions of a shape that can be read as properties."""


def names(axes: Axes) -> dict[str, PropertyName]:
    """Return the properties by their names under a convention."""
    return {p.name(axes): p for p in PROPERTIES if p.name(axes)}


def other(axes: Axes) -> Axes:
    """Return the other convention."""
    return "american" if axes == "eurocode" else "eurocode"


def translation(name: str, axes: Axes) -> PropertyName | None:
    """Return the property that `name` means under the other convention only.

    One that has no name under this convention is none.
    """
    if name in names(axes):
        return None
    found = names(other(axes)).get(name)
    return found if found is not None and found.name(axes) else None
