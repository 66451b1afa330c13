"""Shear areas as design standards name them, from a section's sizes."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from typing import Literal, TypeAlias

Standard: TypeAlias = Literal["eurocode", "american"]
Direction: TypeAlias = Literal["vertical", "horizontal"]

ETA = 1.0  # η of EN 1993-1-5, which may always be taken as 1.0 (EN 1993-1-1 6.2.6(3), note)


@dataclass(frozen=True)
class StandardArea:
    """A shear area, m², for a force in the direction named, and the clause that names it."""

    direction: Direction
    value: float
    clause: str


def shear_area(
    shape: str,
    sizes: Mapping[str, float],
    A: float,
    standard: Standard,
    *,
    rolled: bool,
    eta: float = ETA,
) -> tuple[StandardArea, ...]:
    """Return the shear areas of a section as it normally stands; none where the standard names none.

    Parameters
    ----------
    shape, sizes : a shape of the language and its sizes, m; radii left out are zero.
    A : area, m².
    standard : 'eurocode', EN 1993-1-1:2005 with its corrigendum AC:2009, 6.2.6(3); or 'american', AISC 360-16
        chapter G, whose area is the one that 0.6 F_y and C_v2 multiply. Both from memory.
    rolled : whether the section is rolled, or a hollow section as manufactured, and not built up.
    eta : η of the Eurocode.
    """
    if standard == "eurocode":
        return _eurocode(shape, sizes, A, eta, rolled=rolled)
    return _american(shape, sizes, A, rolled=rolled)


def _eurocode(
    shape: str, sizes: Mapping[str, float], A: float, eta: float, *, rolled: bool
) -> tuple[StandardArea, ...]:
    clause = "EN 1993-1-1 6.2.6(3) {}".format
    b, h, t, r = (sizes.get(name, 0.0) for name in ("b", "h", "t", "r"))
    t_w, t_f = sizes.get("t_w", 0.0), sizes.get("t_f", 0.0)
    match shape, rolled:
        case "i_shape", True if t_f:
            web = eta * (h - 2.0 * t_f) * t_w
            return (_vertical(max(A - 2.0 * b * t_f + (t_w + 2.0 * r) * t_f, web), clause("a")),)
        case "channel", True:
            return (_vertical(A - 2.0 * b * t_f + (t_w + r) * t_f, clause("b")),)
        case "tee", True:
            return (_vertical(A - b * t_f + 0.5 * (t_w + 2.0 * r) * t_f, clause("c, as corrected in 2009")),)
        case "tee", False:
            return (_vertical(t_w * (h - 0.5 * t_f), clause("c, as corrected in 2009")),)
        case "i_shape", False:
            web = (h - _both_flanges(sizes)) * t_w
            return _vertical(eta * web, clause("d")), _horizontal(A - web, clause("e"))
        case "channel", False:
            return (_horizontal(A - (h - 2.0 * t_f) * t_w, clause("e")),)
        case "box", True:
            return _vertical(A * h / (b + h), clause("f")), _horizontal(A * b / (b + h), clause("f"))
        case "box", False:
            web = 2.0 * (h - 2.0 * t) * t
            return _vertical(eta * web, clause("d")), _horizontal(A - web, clause("e"))
        case "tube", _:
            area = 2.0 * A / math.pi
            return _vertical(area, clause("g")), _horizontal(area, clause("g"))
    return ()


def _american(shape: str, sizes: Mapping[str, float], A: float, *, rolled: bool) -> tuple[StandardArea, ...]:
    clause = "AISC 360-16 {}".format
    b, h, t = (sizes.get(name, 0.0) for name in ("b", "h", "t"))
    t_w, t_f = sizes.get("t_w", 0.0), sizes.get("t_f", 0.0)
    match shape:
        case "i_shape" if not t_f:
            flanges = sizes["b_t"] * sizes["t_t"] + sizes["b_b"] * sizes["t_b"]
            return _vertical(h * t_w, clause("G2.1")), _horizontal(flanges, clause("G6"))
        case "i_shape" | "channel":
            return _vertical(h * t_w, clause("G2.1")), _horizontal(2.0 * b * t_f, clause("G6"))
        case "tee":
            return _vertical(h * t_w, clause("G3")), _horizontal(b * t_f, clause("G6"))
        case "angle":
            return _vertical(h * t, clause("G3")), _horizontal(b * t, clause("G3"))
        case "box":
            # between the inside corners; where their radius is not known, the outside less three walls
            clear = 2.0 * t if not rolled else 2.0 * (t + sizes["r_i"]) if "r_i" in sizes else 3.0 * t
            return (
                _vertical(2.0 * (h - clear) * t, clause("G4")),
                _horizontal(2.0 * (b - clear) * t, clause("G4")),
            )
        case "tube":
            return _vertical(0.5 * A, clause("G5")), _horizontal(0.5 * A, clause("G5"))
    return ()


def _both_flanges(sizes: Mapping[str, float]) -> float:
    """Thickness of both flanges together, equal or not, m."""
    return 2.0 * sizes["t_f"] if "t_f" in sizes else sizes["t_t"] + sizes["t_b"]


def _vertical(value: float, clause: str) -> StandardArea:
    return StandardArea("vertical", value, clause)


def _horizontal(value: float, clause: str) -> StandardArea:
    return StandardArea("horizontal", value, clause)
