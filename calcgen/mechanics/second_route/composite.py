"""Transformed properties of a composite section again, as sums over fibres weighted by their moduli."""

from __future__ import annotations

import math
from collections.abc import Sequence

import numpy as np

from calcgen.mechanics.field import Bars, Piece
from calcgen.mechanics.second_route.fibres import fibres
from calcgen.mechanics.second_route.residual import Residual, relative
from calcgen.mechanics.section import Inertia

TOLERANCE = 1e-9  # both routes are exact for straight edges but for rounding


def composite_residuals(
    first: Inertia, pieces: Sequence[Piece], bars: Sequence[Bars] = ()
) -> tuple[Residual, ...]:
    """Compare transformed properties with sums over the fibres of all pieces, and over the bars.

    A bar counts with its own modulus, and once more, negative, with that of the material it displaces. Areas
    and second moments are compared relative to themselves, centroids to the section's width or depth, I_hv
    to √(I_h I_v).
    """
    x, y, weight = [], [], []
    for piece in pieces:
        bundle = fibres(*piece.outlines)
        x.append(bundle.x)
        y.append(bundle.y)
        weight.append(piece.law.factor * bundle.area)
    width, depth = np.ptp(np.concatenate(x)), np.ptp(np.concatenate(y))
    for group in bars:
        for law, sign in ((group.law, 1.0), (group.displaced, -1.0)):
            if law is not None:
                x.append(group.points[:, 0])
                y.append(group.points[:, 1])
                weight.append(np.full(len(group.points), sign * law.factor * group.area))
    xs, ys, w = np.concatenate(x), np.concatenate(y), np.concatenate(weight)
    area = float(w.sum())
    x_bar, y_bar = float(w @ xs) / area, float(w @ ys) / area
    I_h, I_v = float(w @ (ys - y_bar) ** 2), float(w @ (xs - x_bar) ** 2)
    I_hv = float(w @ ((xs - x_bar) * (ys - y_bar)))
    compared = (
        ("A", area, first.area, first.area, "transformed area, relative to itself"),
        ("x_bar", x_bar, first.x_bar, float(width), "centroid, relative to the width"),
        ("y_bar", y_bar, first.y_bar, float(depth), "centroid, relative to the depth"),
        ("I_h", I_h, first.I_h, first.I_h, "second moment about the horizontal axis, relative to itself"),
        ("I_v", I_v, first.I_v, first.I_v, "second moment about the vertical axis, relative to itself"),
        (
            "I_hv",
            I_hv,
            first.I_hv,
            math.sqrt(first.I_h * first.I_v),
            "product moment, relative to the geometric mean of the second moments",
        ),
    )
    return tuple(
        Residual(what, relative(second - value, abs(scale)), TOLERANCE, words)
        for what, second, value, scale, words in compared
    )
