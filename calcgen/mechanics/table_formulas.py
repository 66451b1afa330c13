"""The formulas by which section tables compute torsion and warping constants.

Tables print I_t and I_w by these approximations and not by the actual outline, from which they differ by 0.5
to 4 %. A catalogued section whose table value is not known takes the value of its table's formula. Sizes go
by the symbols of the shapes, in m. Everything here is from memory of the sources named, and held against the
catalogues in the tests.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

Standard: TypeAlias = Literal["eurocode", "american"]

JOHNSTON = "El Darwish & Johnston 1965, from memory"
END_LOSS = 0.105  # of t⁴: what each end of a rectangle loses against b t³/3


@dataclass(frozen=True)
class TableValue:
    """A constant as a table computes it: I_t, m⁴, or I_w, m⁶, and the formula's name with its source."""

    value: float
    formula: str


def table_torsion(shape: str, sizes: Mapping[str, float], standard: Standard) -> TableValue | None:
    """Return I_t by the formula of the shape's table; None where there is none here (tapered I-sections).

    Parameters
    ----------
    shape, sizes : a shape of the language and its sizes; radii and slopes left out are zero.
    standard : whose tables; European and American ones differ for I-sections, tees and tapered channels.
    """
    slope = sizes.get("slope", 0.0)
    match shape, standard:
        case (("i_shape" | "tee"), _) if "t_f" in sizes and slope == 0.0:
            junctions = 2 if shape == "i_shape" else 1
            if standard == "eurocode":
                name = "rectangles and junction circles, formula of European section tables, from memory"
                return TableValue(_european_i_torsion(sizes, junctions), name)
            return TableValue(_i_torsion(sizes, junctions), f"rectangles and junction circles, {JOHNSTON}")
        case "channel", "american" if slope > 0.0:
            return TableValue(
                _tapered_channel_torsion(sizes), f"tapered flanges, web and junction circles, {JOHNSTON}"
            )
        case "channel", _:
            return TableValue(_channel_torsion(sizes), f"rectangles and junction circles, {JOHNSTON}")
        case "angle", _:
            return TableValue(_angle_torsion(sizes), f"rectangles and junction circle, {JOHNSTON}")
        case "box", _:
            name = "t³ h_p/3 + 2 K A_h, EN 10210-2 and EN 10219-2 annex, from memory"
            return TableValue(_box_torsion(sizes), name)
        case "tube", _:
            d, inside = sizes["d"], sizes["d"] - 2.0 * sizes["t"]
            return TableValue(math.pi * (d**4 - inside**4) / 32.0, "2 I, exact for a round tube")
    return None


def table_warping(
    shape: str, sizes: Mapping[str, float], standard: Standard, *, I_h: float, I_v: float
) -> TableValue | None:
    """Return I_w by the formula of the shape's table; None where there is none here.

    European tables print channels close to the outline's own value: mid-line forms lie 3 to 17 % above it.

    Parameters
    ----------
    shape, sizes, standard : as for `table_torsion`.
    I_h, I_v : second moments about the horizontal and the vertical axis, m⁴, which American tables use:
        the published ones where there are any.
    """
    guide = "AISC Design Guide 9, from memory"
    match shape, standard:
        case "i_shape", _ if "t_f" in sizes:
            h_o = sizes["h"] - sizes["t_f"]
            if standard == "eurocode":
                I_f = sizes["t_f"] * sizes["b"] ** 3 / 12.0
                return TableValue(I_f * h_o**2 / 2.0, "t_f b³ (h - t_f)²/24, flanges alone, from memory")
            return TableValue(I_v * h_o**2 / 4.0, f"I_y (d - t_f)²/4, {guide}")
        case "channel", "american":
            return TableValue(_channel_warping(sizes, I_h), f"mid-line with parallel flanges, {guide}")
        case "tee", _:
            b, h, t_w, t_f = (sizes[name] for name in ("b", "h", "t_w", "t_f"))
            value = ((b * t_f) ** 3 / 4.0 + ((h - 0.5 * t_f) * t_w) ** 3) / 36.0
            return TableValue(value, f"(b³ t_f³/4 + d'³ t_w³)/36, {guide}")
        case "angle", _:
            t = sizes["t"]
            legs = (sizes["h"] - 0.5 * t) ** 3 + (sizes["b"] - 0.5 * t) ** 3
            return TableValue(t**3 * legs / 36.0, f"t³ (h'³ + b'³)/36, {guide}")
    return None


def channel_shear_centre(sizes: Mapping[str, float]) -> float:
    """Return the distance of a channel's shear centre from the web's middle, m, away from the flanges.

    By the mid-line with parallel flanges, E_o = b'² t_f/(2 b' t_f + h' t_w/3); tables print E_o - t_w/2, from
    the back of the web, as e_o. From memory of AISC Design Guide 9.
    """
    b, h, t_w, t_f = _mid_line(sizes)
    return b * b * t_f / (2.0 * b * t_f + h * t_w / 3.0)


def _european_i_torsion(sizes: Mapping[str, float], junctions: int) -> float:
    """Half of it for a tee, whose stem is half a web."""
    b, h, t_w, t_f, r = _open_sizes(sizes)
    circle = ((r + 0.5 * t_w) ** 2 + (r + t_f) ** 2 - r**2) / (2.0 * r + t_f)
    web = h - junctions * t_f
    flange = (b - 0.63 * t_f) * t_f**3 / 3.0
    return web * t_w**3 / 3.0 + junctions * (flange + t_w / t_f * (0.145 + 0.1 * r / t_f) * circle**4)


def _i_torsion(sizes: Mapping[str, float], junctions: int) -> float:
    b, h, t_w, t_f, r = _open_sizes(sizes)
    alpha = (
        -0.042 + 0.2204 * t_w / t_f + 0.1355 * r / t_f - 0.0865 * t_w * r / t_f**2 - 0.0725 * (t_w / t_f) ** 2
    )
    circle = ((t_f + r) ** 2 + (r + 0.25 * t_w) * t_w) / (2.0 * r + t_f)
    flange = b * t_f**3 / 3.0 - 2.0 * END_LOSS * t_f**4
    return (h - junctions * t_f) * t_w**3 / 3.0 + junctions * (flange + alpha * circle**4)


def _channel_torsion(sizes: Mapping[str, float]) -> float:
    b, h, t_w, t_f, r = _open_sizes(sizes)
    flange = b * t_f**3 / 3.0 - 2.0 * END_LOSS * t_f**4
    corner = _corner_alpha(t_w, t_f, r) * _corner_circle(t_w, t_f, r) ** 4
    return (h - 2.0 * t_f) * t_w**3 / 3.0 + 2.0 * (flange + corner)


def _tapered_channel_torsion(sizes: Mapping[str, float]) -> float:
    """Flanges that taper from the web to the tip by a slope s, with t_f in the middle of their projection.

    The ends' losses are V_S t⁴ at the thin end and V_L t⁴ at the thick one.
    """
    b, h, t_w, t_f, r = _open_sizes(sizes)
    s = sizes["slope"]
    tip, root = t_f - 0.5 * s * (b - t_w), t_f + 0.5 * s * (b - t_w)
    wedge = (b - t_w) * (tip + root) * (tip**2 + root**2) / 12.0 + t_w * root**3 / 3.0
    even, odd = END_LOSS + 0.0848 * s**2 + 0.0515 * s**4, 0.1 * s + 0.06746 * s**3
    losses = (even - odd) * tip**4 + (even + odd) * root**4
    at_corner = root + r * (math.hypot(1.0, s) - s - 1.0)  # t_f that puts the fillet's centre where it is
    corner = _corner_alpha(t_w, root, r) * _corner_circle(t_w, at_corner, r) ** 4
    return (h - 2.0 * root) * t_w**3 / 3.0 + 2.0 * (wedge - losses + corner)


def _angle_torsion(sizes: Mapping[str, float]) -> float:
    """One leg is whole and has two ends, the other has one."""
    t, r = sizes["t"], sizes.get("r_1", 0.0)
    corner = _corner_alpha(t, t, r) * _corner_circle(t, t, r) ** 4
    return (sizes["h"] + sizes["b"] - t) * t**3 / 3.0 + corner - 3.0 * END_LOSS * t**4


def _box_torsion(sizes: Mapping[str, float]) -> float:
    b, h, t = (sizes[name] for name in ("b", "h", "t"))
    r_o = sizes.get("r_o", 0.0)
    R_c = 0.5 * (r_o + sizes.get("r_i", max(r_o - t, 0.0)))
    h_p = 2.0 * (b + h - 2.0 * t) - 2.0 * R_c * (4.0 - math.pi)
    A_h = (b - t) * (h - t) - R_c**2 * (4.0 - math.pi)
    return t**3 * h_p / 3.0 + 4.0 * A_h**2 * t / h_p


def _channel_warping(sizes: Mapping[str, float], I_h: float) -> float:
    b, h, _, t_f = _mid_line(sizes)
    E_o = channel_shear_centre(sizes)
    return (b - 3.0 * E_o) * h**2 * b**2 * t_f / 6.0 + E_o**2 * I_h


def _corner_alpha(t_w: float, t_f: float, r: float) -> float:
    """Weight of the circle in the corner of two rectangles, to its diameter's fourth power."""
    return (
        -0.0908
        + 0.2621 * t_w / t_f
        + 0.1231 * r / t_f
        - 0.0752 * t_w * r / t_f**2
        - 0.0945 * (t_w / t_f) ** 2
    )


def _corner_circle(t_w: float, t_f: float, r: float) -> float:
    """Diameter of the largest circle in the corner, which touches both outer faces and the fillet, m."""
    return 2.0 * (3.0 * r + t_w + t_f - math.sqrt(2.0 * (2.0 * r + t_w) * (2.0 * r + t_f)))


def _open_sizes(sizes: Mapping[str, float]) -> tuple[float, float, float, float, float]:
    return sizes["b"], sizes["h"], sizes["t_w"], sizes["t_f"], sizes.get("r", 0.0)


def _mid_line(sizes: Mapping[str, float]) -> tuple[float, float, float, float]:
    b, h, t_w, t_f, _ = _open_sizes(sizes)
    return b - 0.5 * t_w, h - t_f, t_w, t_f
