"""The named shapes of sections: sizes in; outline, dimension marks and thin walls out.

Each shape stands with the middle of its bounding box at (0, 0), x right and y up; only a polygon and a strip
keep the coordinates they are given. All sizes are lengths in m unless said otherwise; one that makes no shape
raises ShapeError. Arcs are many short edges whose area is exact. Walls run along the middle of flanges, webs
and legs and meet where these lines do; fillets add nothing to them, and a tapered flange counts with its mean
thickness.
"""

from __future__ import annotations

import math
from collections.abc import Collection, Mapping, Sequence

import numpy as np

from calcgen.mechanics.arrays import Point
from calcgen.mechanics.mid_lines import flange_walls, i_walls, walls_along, walls_around
from calcgen.mechanics.outline import Outline, OutlineError, outline
from calcgen.mechanics.rounding import EDGES_A_QUARTER, Corner, CornerError, rounded
from calcgen.mechanics.shape import (
    DimensionMark,
    Parameter,
    Shape,
    ShapeError,
    ShapeForm,
    canonical,
    form_of,
)
from calcgen.mechanics.strip import strip_lines
from calcgen.mechanics.walls import Wall

__all__ = [
    "SHAPES",
    "DimensionMark",
    "Parameter",
    "Shape",
    "ShapeError",
    "ShapeForm",
    "canonical",
    "form_for",
]

EDGES_A_QUARTER_OF_A_CIRCLE = 128
EUROPEAN_SLOPE = 0.15  # European tapered flanges slope by 5, 8 or 14 %, American ones by 1/6
DEEP_CHANNEL = 0.300  # m: up to this depth European channels state t_f at b/2 (DIN 1026-1, from memory)


def rectangle(*, b: float, h: float) -> Shape:
    """Rectangle, `b` wide and `h` high."""
    _positive(b=b, h=h)
    return _rings([_rectangle(b, h)], {"b": b, "h": h}, _overall(b, h))


def circle(*, d: float) -> Shape:
    """Solid circle of diameter `d`."""
    _positive(d=d)
    return _rings([_rectangle(d, d, 0.5 * d)], {"d": d}, (_across("d", d),), EDGES_A_QUARTER_OF_A_CIRCLE)


def ellipse(*, b: float, h: float) -> Shape:
    """Solid ellipse, `b` wide and `h` high."""
    _positive(b=b, h=h)
    ring = rounded(_rectangle(1.0, 1.0, 0.5), EDGES_A_QUARTER_OF_A_CIRCLE) * np.array([b, h])
    return Shape(outline(ring), {"b": b, "h": h}, _overall(b, h))


def tube(*, d: float, t: float) -> Shape:
    """Round tube of outside diameter `d` and wall `t`."""
    _positive(d=d, t=t)
    _require(2.0 * t < d, "t", t, "must be less than d/2")
    d_i = d - 2.0 * t
    wall = DimensionMark("t", t, (0.5 * d - t, 0.0), (0.5 * d, 0.0), "right")
    return _rings(
        [_rectangle(d, d, 0.5 * d), _rectangle(d_i, d_i, 0.5 * d_i)],
        {"d": d, "t": t},
        (_across("d", d), wall),
        EDGES_A_QUARTER_OF_A_CIRCLE,
        walls=walls_around(rounded(_rectangle(d - t, d - t, 0.5 * (d - t))), t),
    )


def box(*, b: float, h: float, t: float, r_o: float = 0.0, r_i: float | None = None) -> Shape:
    """Rectangular hollow section, `b` wide and `h` high, wall `t`, corner radii `r_o` and `r_i`.

    The inside radius `r_i` is r_o - t where it is not given, and not less than zero; with r_o = 1.5 t it is
    t, the radii with which EN 10210-2 computes hot-finished sections.
    """
    hot_finished = math.isclose(r_o, 1.5 * t, rel_tol=1e-9)
    inner = r_i if r_i is not None else t if hot_finished else max(r_o - t, 0.0)
    _positive(b=b, h=h, t=t)
    _not_negative(r_o=r_o, r_i=inner)
    _require(2.0 * t < b, "t", t, "must be less than b/2")
    _require(2.0 * t < h, "t", t, "must be less than h/2")
    _require(2.0 * r_o <= min(b, h), "r_o", r_o, "must not exceed half the smaller of b and h")
    _require(2.0 * (inner + t) <= min(b, h), "r_i", inner, "does not fit inside the walls")
    at_corner = math.sqrt(2.0) * (t + inner - r_o) + r_o - inner
    _require(at_corner > 0.0, "r_i", inner, "leaves no wall at the corner")
    wall = DimensionMark("t", t, (0.5 * b - t, 0.0), (0.5 * b, 0.0), "right")
    return _rings(
        [_rectangle(b, h, r_o), _rectangle(b - 2.0 * t, h - 2.0 * t, inner)],
        {"b": b, "h": h, "t": t, "r_o": r_o, "r_i": inner},
        (*_overall(b, h), wall),
        walls=walls_around(rounded(_rectangle(b - t, h - t, 0.5 * (r_o + inner))), t),
    )


def i_shape(
    *, h: float, b: float, t_w: float, t_f: float, r: float = 0.0, slope: float = 0.0, r_toe: float = 0.0
) -> Shape:
    """I-section of depth `h` and flange width `b`, root radius `r`, toe radius `r_toe`.

    `slope` is that of the flanges' inner faces. `t_f` then stands at b/4 from the tip for European
    slopes (up to 15 %), in the middle of the flange's projection for steeper ones (American S shapes).
    """
    _positive(h=h, b=b, t_w=t_w, t_f=t_f)
    _not_negative(r=r, slope=slope, r_toe=r_toe)
    _require(t_w < b, "t_w", t_w, "must be less than b")
    _require(2.0 * t_f < h, "t_f", t_f, "must be less than h/2")
    x_f = 0.25 * b if slope <= EUROPEAN_SLOPE else 0.25 * (b + t_w)
    tip, root = _tapered(t_f, slope, outer=0.5 * b - x_f, inner=x_f - 0.5 * t_w, clear=0.5 * h)
    w, e, top = 0.5 * t_w, 0.5 * b, 0.5 * h
    right: list[Corner] = [
        (e, -top, 0.0),
        (e, -top + tip, r_toe),
        (w, -top + root, r),
        (w, top - root, r),
        (e, top - tip, r_toe),
        (e, top, 0.0),
    ]
    left = [(-x, y, radius) for x, y, radius in reversed(right)]
    marks = (*_overall(b, h), _web(t_w), _flange("t_f", t_f, x_f if slope else e, top - t_f))
    sizes = {"h": h, "b": b, "t_w": t_w, "t_f": t_f, "r": r, "slope": slope, "r_toe": r_toe}
    mean = 0.5 * (tip + root)
    return _rings([[*right, *left]], sizes, marks, walls=i_walls(h, (b, mean), (b, mean), t_w))


def unequal_i_shape(
    *, h: float, b_t: float, t_t: float, b_b: float, t_b: float, t_w: float, r: float = 0.0
) -> Shape:
    """I-section with a top flange b_t × t_t and a bottom flange b_b × t_b, overall depth `h`."""
    _positive(h=h, b_t=b_t, t_t=t_t, b_b=b_b, t_b=t_b, t_w=t_w)
    _not_negative(r=r)
    _require(t_w < min(b_t, b_b), "t_w", t_w, "must be less than both flange widths")
    _require(t_t + t_b < h, "t_t", t_t, "must leave a web: t_t + t_b must be less than h")
    w, top = 0.5 * t_w, 0.5 * h
    right: list[Corner] = [
        (0.5 * b_b, -top, 0.0),
        (0.5 * b_b, -top + t_b, 0.0),
        (w, -top + t_b, r),
        (w, top - t_t, r),
        (0.5 * b_t, top - t_t, 0.0),
        (0.5 * b_t, top, 0.0),
    ]
    left = [(-x, y, radius) for x, y, radius in reversed(right)]
    marks = (
        _depth(h, 0.5 * max(b_t, b_b)),
        DimensionMark("b_t", b_t, (-0.5 * b_t, top), (0.5 * b_t, top), "top"),
        DimensionMark("b_b", b_b, (-0.5 * b_b, -top), (0.5 * b_b, -top), "bottom"),
        _web(t_w),
        _flange("t_t", t_t, 0.5 * b_t, top - t_t),
        _flange("t_b", t_b, 0.5 * b_b, -top),
    )
    sizes = {"h": h, "b_t": b_t, "t_t": t_t, "b_b": b_b, "t_b": t_b, "t_w": t_w, "r": r}
    return _rings([[*right, *left]], sizes, marks, walls=i_walls(h, (b_t, t_t), (b_b, t_b), t_w))


def channel(
    *, h: float, b: float, t_w: float, t_f: float, r: float = 0.0, slope: float = 0.0, r_toe: float = 0.0
) -> Shape:
    """Channel of depth `h` and flange width `b`, web on the left, open to the right.

    `slope` is that of the flanges' inner faces, `r` the root radius, `r_toe` that of the tips. `t_f` of a
    tapered flange stands in the middle of its projection, (b - t_w)/2 from the tip; at b/2 for European
    slopes (up to 15 %) and depths up to 300 mm (DIN 1026-1, from memory).
    """
    _positive(h=h, b=b, t_w=t_w, t_f=t_f)
    _not_negative(r=r, slope=slope, r_toe=r_toe)
    _require(t_w < b, "t_w", t_w, "must be less than b")
    _require(2.0 * t_f < h, "t_f", t_f, "must be less than h/2")
    shallow = slope <= EUROPEAN_SLOPE and h <= DEEP_CHANNEL * (1.0 + 1e-9)
    x_f = 0.5 * b if shallow else 0.5 * (b + t_w)
    tip, root = _tapered(t_f, slope, outer=b - x_f, inner=x_f - t_w, clear=0.5 * h)
    e, top = 0.5 * b, 0.5 * h
    lower: list[Corner] = [
        (-e, -top, 0.0),
        (e, -top, 0.0),
        (e, -top + tip, r_toe),
        (-e + t_w, -top + root, r),
    ]
    upper = [(x, -y, radius) for x, y, radius in reversed(lower)]
    web = DimensionMark("t_w", t_w, (-e, 0.0), (-e + t_w, 0.0), "right")
    marks = (*_overall(b, h), web, _flange("t_f", t_f, x_f - e if slope else e, top - t_f))
    sizes = {"h": h, "b": b, "t_w": t_w, "t_f": t_f, "r": r, "slope": slope, "r_toe": r_toe}
    mean = 0.5 * (tip + root)
    x, y = -e + 0.5 * t_w, top - 0.5 * mean
    walls = (
        Wall((e, -y), (x, -y), mean),
        Wall((x, -y), (x, y), t_w),
        Wall((x, y), (e, y), mean),
    )
    return _rings([[*lower, *upper]], sizes, marks, walls=walls)


def tee(*, h: float, b: float, t_w: float, t_f: float, r: float = 0.0) -> Shape:
    """Tee of depth `h`, its flange b × t_f on top, its web t_w thick."""
    _positive(h=h, b=b, t_w=t_w, t_f=t_f)
    _not_negative(r=r)
    _require(t_w < b, "t_w", t_w, "must be less than b")
    _require(t_f < h, "t_f", t_f, "must be less than h")
    w, e, top = 0.5 * t_w, 0.5 * b, 0.5 * h
    right: list[Corner] = [(w, -top, 0.0), (w, top - t_f, r), (e, top - t_f, 0.0), (e, top, 0.0)]
    left = [(-x, y, radius) for x, y, radius in reversed(right)]
    marks = (
        _depth(h, e),
        DimensionMark("b", b, (-e, top), (e, top), "top"),
        _web(t_w),
        _flange("t_f", t_f, e, top - t_f),
    )
    y = top - 0.5 * t_f
    walls = (Wall((0.0, -top), (0.0, y), t_w), *flange_walls(b, t_f, y))
    return _rings([[*right, *left]], {"h": h, "b": b, "t_w": t_w, "t_f": t_f, "r": r}, marks, walls=walls)


def angle(*, h: float, b: float, t: float, r_1: float = 0.0, r_2: float = 0.0) -> Shape:
    """Angle, heel bottom left: vertical leg `h`, horizontal `b`, root radius `r_1`, toe radii `r_2`."""
    _positive(h=h, b=b, t=t)
    _not_negative(r_1=r_1, r_2=r_2)
    _require(t < min(h, b), "t", t, "must be less than both legs")
    e, top = 0.5 * b, 0.5 * h
    ring: list[Corner] = [
        (-e, -top, 0.0),
        (e, -top, 0.0),
        (e, -top + t, r_2),
        (-e + t, -top + t, r_1),
        (-e + t, top, r_2),
        (-e, top, 0.0),
    ]
    marks = (*_overall(b, h), DimensionMark("t", t, (e, -top), (e, -top + t), "right"))
    heel = (-e + 0.5 * t, -top + 0.5 * t)
    walls = walls_along([(e, heel[1]), heel, (heel[0], top)], t)
    return _rings([ring], {"h": h, "b": b, "t": t, "r_1": r_1, "r_2": r_2}, marks, walls=walls)


def zed(*, h: float, b: float, t: float) -> Shape:
    """Zed of depth `h` and even thickness `t`, each flange `b` wide over the web: the top one to the left."""
    _positive(h=h, b=b, t=t)
    _require(t < b, "t", t, "must be less than b")
    _require(2.0 * t < h, "t", t, "must be less than h/2")
    w, e, top = 0.5 * t, b - 0.5 * t, 0.5 * h
    half: list[Corner] = [(-w, -top, 0.0), (e, -top, 0.0), (e, -top + t, 0.0), (w, -top + t, 0.0)]
    other = [(-x, -y, 0.0) for x, y, _ in half]
    marks = (
        _depth(h, e),
        DimensionMark("b", b, (-w, -top), (e, -top), "bottom"),
        _web(t, "t"),
    )
    y = top - 0.5 * t
    walls = walls_along([(e, -y), (0.0, -y), (0.0, y), (-e, y)], t)
    return _rings([[*half, *other]], {"h": h, "b": b, "t": t}, marks, walls=walls)


def trapezium(*, b_t: float, b_b: float, h: float) -> Shape:
    """Symmetric trapezium, `b_t` wide at the top, `b_b` at the bottom, `h` high."""
    _positive(b_t=b_t, b_b=b_b, h=h)
    top = 0.5 * h
    ring: list[Corner] = [
        (-0.5 * b_b, -top, 0.0),
        (0.5 * b_b, -top, 0.0),
        (0.5 * b_t, top, 0.0),
        (-0.5 * b_t, top, 0.0),
    ]
    marks = (
        _depth(h, 0.5 * max(b_t, b_b)),
        DimensionMark("b_t", b_t, (-0.5 * b_t, top), (0.5 * b_t, top), "top"),
        DimensionMark("b_b", b_b, (-0.5 * b_b, -top), (0.5 * b_b, -top), "bottom"),
    )
    return _rings([ring], {"b_t": b_t, "b_b": b_b, "h": h}, marks)


def polygon(*, points: Sequence[Point]) -> Shape:
    """Polygon through its corners, m, in either sense; it stays where its coordinates put it.

    Raises
    ------
    OutlineError
        When the corners bound no section.
    """
    ring = outline(points)
    return Shape(ring, {"b": ring.bounds.width, "h": ring.bounds.height}, _around_it(ring))


def strip(*, t: float, r: float = 0.0, points: Sequence[Point]) -> Shape:
    """Strip of thickness `t` along a centreline, bent with the inside radius `r`; it stays where it is given.

    `points` are the ends of the centreline and, between them, the corners where its straight parts would
    meet, m. The outside radius of a bend is r + t; without a radius corners are mitred. Ends are cut square.
    A centreline that returns to its first point is a closed section, bent there too.

    Raises
    ------
    ShapeError
        For points that make no centreline, bends that do not fit between their neighbours, and walls that
        cross or touch; `points` of the error are the points concerned.
    """
    _positive(t=t)
    _not_negative(r=r)
    lines = strip_lines(points, t, r)
    ring = lines.outline
    mark = tuple(DimensionMark("t", t, start, end, "right") for start, end in lines.across)
    sizes = {"t": t, "r": r, "b": ring.bounds.width, "h": ring.bounds.height}
    return Shape(ring, sizes, (*_around_it(ring), *mark), walls_along(lines.mid_line.tolist(), t))


def _rings(
    rings: Sequence[Sequence[Corner]],
    sizes: Mapping[str, float],
    marks: tuple[DimensionMark, ...],
    edges_a_quarter: int = EDGES_A_QUARTER,
    walls: tuple[Wall, ...] = (),
) -> Shape:
    """Round the corners of the outer ring and the holes; name the radius that does not fit."""
    points = []
    for corners in rings:
        try:
            points.append(rounded(corners, edges_a_quarter))
        except CornerError as error:
            radius = corners[error.corner][2]
            symbol = next(s for s, size in sizes.items() if s.startswith("r") and size == radius)
            raise ShapeError(symbol, radius, "does not fit between its neighbours") from error
    try:
        return Shape(outline(points[0], points[1:]), sizes, marks, walls)
    except OutlineError as error:  # sizes so far apart that they vanish beside each other
        symbol, value = min(((s, v) for s, v in sizes.items() if v > 0.0), key=lambda size: size[1])
        raise ShapeError(symbol, value, f"makes an outline that {error.reason}") from error


def _rectangle(b: float, h: float, r: float = 0.0) -> list[Corner]:
    e, top = 0.5 * b, 0.5 * h
    return [(-e, -top, r), (e, -top, r), (e, top, r), (-e, top, r)]


def _tapered(t_f: float, slope: float, *, outer: float, inner: float, clear: float) -> tuple[float, float]:
    """Thickness of a flange at its tip and at the web, `outer` and `inner` away from where t_f stands."""
    tip, root = t_f - slope * outer, t_f + slope * inner
    _require(tip > 0.0, "slope", slope, "leaves no thickness at the tip of the flange")
    _require(root < clear, "slope", slope, "leaves no web between the flanges")
    return tip, root


def _require(holds: bool, parameter: str, value: float, reason: str) -> None:  # noqa: FBT001  (an assertion)
    if not holds:
        raise ShapeError(parameter, value, reason)


def _positive(**sizes: float) -> None:
    for name, value in sizes.items():
        _require(math.isfinite(value) and value > 0.0, name, value, "must be positive")


def _not_negative(**sizes: float) -> None:
    for name, value in sizes.items():
        _require(math.isfinite(value) and value >= 0.0, name, value, "must not be negative")


def _depth(h: float, e: float) -> DimensionMark:
    return DimensionMark("h", h, (-e, -0.5 * h), (-e, 0.5 * h), "left")


def _overall(b: float, h: float) -> tuple[DimensionMark, DimensionMark]:
    return _depth(h, 0.5 * b), DimensionMark("b", b, (-0.5 * b, -0.5 * h), (0.5 * b, -0.5 * h), "bottom")


def _around_it(ring: Outline) -> tuple[DimensionMark, DimensionMark]:
    """Overall marks of an outline wherever it stands."""
    box_ = ring.bounds
    return (
        DimensionMark("h", box_.height, (box_.left, box_.bottom), (box_.left, box_.top), "left"),
        DimensionMark("b", box_.width, (box_.left, box_.bottom), (box_.right, box_.bottom), "bottom"),
    )


def _across(symbol: str, d: float) -> DimensionMark:
    return DimensionMark(symbol, d, (-0.5 * d, -0.5 * d), (0.5 * d, -0.5 * d), "bottom")


def _web(t_w: float, symbol: str = "t_w") -> DimensionMark:
    return DimensionMark(symbol, t_w, (-0.5 * t_w, 0.0), (0.5 * t_w, 0.0), "right")


def _flange(symbol: str, t: float, x: float, y: float) -> DimensionMark:
    return DimensionMark(symbol, t, (x, y), (x, y + t), "right")


SHAPES: Mapping[str, tuple[ShapeForm, ...]] = {
    "rectangle": (form_of(rectangle, "solid rectangle"),),
    "circle": (form_of(circle, "solid circle"),),
    "ellipse": (form_of(ellipse, "solid ellipse"),),
    "trapezium": (form_of(trapezium, "symmetric trapezium"),),
    "tube": (form_of(tube, "round tube"),),
    "box": (form_of(box, "rectangular hollow section"),),
    "i_shape": (
        form_of(i_shape, "I-section with equal flanges"),
        form_of(unequal_i_shape, "I-section with unequal flanges"),
    ),
    "channel": (form_of(channel, "channel, web left, open to the right"),),
    "tee": (form_of(tee, "tee, flange on top"),),
    "angle": (form_of(angle, "angle, heel bottom left"),),
    "zed": (form_of(zed, "zed, top flange to the left"),),
    "polygon": (form_of(polygon, "polygon through its corners"),),
    "strip": (
        form_of(
            strip,
            "strip of constant thickness along a centreline",
            r="inside radius of the bends",
            points="ends and corners of the centreline in turn",
        ),
    ),
}


def form_for(name: str, given: Collection[str]) -> ShapeForm:
    """Pick the form of the shape `name` that fits the names given best; the first of equals."""

    def misfit(form: ShapeForm) -> int:
        names = {canonical(form, each) for each in given}
        return len(form.required - names) + len(names - form.names)

    return min(SHAPES[name], key=misfit)
