"""Section properties again, as sums over fibres, and a catalogue's published values against the outline's."""

from __future__ import annotations

import math
from collections.abc import Mapping

import numpy as np

from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.outline import Outline
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.section import SectionProperties

TOLERANCE = 1e-9  # both routes are exact for straight edges but for rounding

PUBLISHED: Mapping[str, tuple[str, str]] = {  # published symbol: property, words
    "A": ("area", "area"),
    "x_bar": ("c_left", "centroid from the left edge"),
    "y_bar": ("c_bottom", "centroid from the bottom edge"),
    "I_h": ("I_h", "second moment about the horizontal axis"),
    "I_v": ("I_v", "second moment about the vertical axis"),
    "I_1": ("I_1", "largest second moment"),
    "I_2": ("I_2", "smallest second moment"),
    "W_el_h": ("W_el_h", "elastic modulus about the horizontal axis"),
    "W_el_v": ("W_el_v", "elastic modulus about the vertical axis"),
    "W_pl_h": ("W_pl_h", "plastic modulus about the horizontal axis"),
    "W_pl_v": ("W_pl_v", "plastic modulus about the vertical axis"),
    "i_h": ("i_h", "radius of gyration about the horizontal axis"),
    "i_v": ("i_v", "radius of gyration about the vertical axis"),
    "i_1": ("i_1", "largest radius of gyration"),
    "i_2": ("i_2", "smallest radius of gyration"),
}


def section_residuals(first: SectionProperties, *outlines: Outline) -> tuple[Residual, ...]:
    """Compare properties with sums over fibres of the outlines.

    Areas, second moments and moduli are compared relative to themselves, centroids to the section's depth or
    width, I_hv to √(I_h I_v), and the areas on either side of a half-area axis, whose difference must
    vanish, to the whole.
    """
    level = fibres(*outlines, cut=first.y_p)
    area = float(level.area.sum())
    x_bar, y_bar = float(level.area @ level.x) / area, float(level.area @ level.y) / area
    x, y = level.x - x_bar, level.y - y_bar
    I_h, I_v, I_hv = (float(level.area @ product) for product in (y * y, x * x, x * y))
    upright = fibres(*_on_their_side(outlines), cut=first.x_p)
    return (
        _residual("A", area, first.area, first.area, "area, relative to itself"),
        _residual(
            "x_bar", x_bar, first.x_bar, first.c_left + first.c_right, "centroid, relative to the width"
        ),
        _residual(
            "y_bar", y_bar, first.y_bar, first.c_top + first.c_bottom, "centroid, relative to the depth"
        ),
        _residual(
            "I_h", I_h, first.I_h, first.I_h, "second moment about the horizontal axis, relative to itself"
        ),
        _residual(
            "I_v", I_v, first.I_v, first.I_v, "second moment about the vertical axis, relative to itself"
        ),
        _residual(
            "I_hv",
            I_hv,
            first.I_hv,
            math.sqrt(first.I_h * first.I_v),
            "product moment, relative to the geometric mean of the second moments",
        ),
        *_plastic("y_p", "W_pl_h", "horizontal", level.area, level.y - first.y_p, first.W_pl_h),
        *_plastic("x_p", "W_pl_v", "vertical", upright.area, upright.y - first.x_p, first.W_pl_v),
    )


def published_residuals(
    published: Mapping[str, float], first: SectionProperties, tolerances: Mapping[str, float]
) -> tuple[Residual, ...]:
    """Compare an outline's properties with the published ones, relative to those.

    Parameters
    ----------
    published : SI values by their symbols, neutral of axis convention; `x_bar` and `y_bar` are measured
        from the left and the bottom edge, as tables do.
    tolerances : by the same symbols; a symbol missing in either, or that an outline does not have (I_t), is
        passed over.
    """
    return tuple(
        Residual(
            symbol,
            relative(getattr(first, name) - published[symbol], abs(published[symbol])),
            tolerances[symbol],
            f"{words}: outline against published, relative to published",
        )
        for symbol, (name, words) in PUBLISHED.items()
        if symbol in published and symbol in tolerances
    )


def _plastic(
    axis: str, modulus: str, direction: str, area: FloatArray, height: FloatArray, first: float
) -> tuple[Residual, Residual]:
    """Test the property that defines a half-area axis, and the modulus about it."""
    balance = float(area @ np.sign(height)) / float(area.sum())
    second = float(area @ np.abs(height))
    return (
        Residual(
            axis, balance, TOLERANCE, f"areas on either side of the {direction} half-area axis, to the whole"
        ),
        _residual(
            modulus, second, first, first, f"plastic modulus about the {direction} axis, relative to itself"
        ),
    )


def _residual(what: str, second: float, first: float, scale: float, quantity: str) -> Residual:
    return Residual(what, relative(second - first, abs(scale)), TOLERANCE, quantity)


def _on_their_side(outlines: tuple[Outline, ...]) -> tuple[Outline, ...]:
    """Exchange x and y."""
    return tuple(Outline(p.exterior[:, ::-1], tuple(hole[:, ::-1] for hole in p.holes)) for p in outlines)
