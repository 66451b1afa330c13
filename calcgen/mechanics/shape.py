"""A shape: its outline, sizes, dimension marks and walls; and how one is written: a form of parameters."""

from __future__ import annotations

import inspect
import math
from collections.abc import Callable, Mapping
from dataclasses import dataclass, field, replace
from typing import Literal, TypeAlias

from calcgen.mechanics.arrays import Point
from calcgen.mechanics.outline import Outline, exact_cos_sin
from calcgen.mechanics.walls import Wall

Side: TypeAlias = Literal["left", "right", "top", "bottom"]


class ShapeError(ValueError):
    """A size that makes no shape: `parameter`, its `value` (m, or a number), and the `reason` as a phrase.

    `points` are indices of the points concerned, where the shape is given by points.
    """

    def __init__(self, parameter: str, value: float, reason: str, points: tuple[int, ...] = ()) -> None:
        self.parameter, self.value, self.reason, self.points = parameter, value, reason, points
        super().__init__(f"{parameter} {reason}")


@dataclass(frozen=True)
class DimensionMark:
    """A size to be drawn: measured from `start` to `end`, m, with its figure on the given side."""

    symbol: str
    value: float
    start: Point
    end: Point
    side: Side


@dataclass(frozen=True, eq=False)
class Shape:
    """An outline with the sizes it was made from, by symbol, and the marks that show them.

    `walls` is its mid-line model where the shape is one of thin walls, and empty otherwise.
    """

    outline: Outline
    dimensions: Mapping[str, float] = field(default_factory=dict)
    marks: tuple[DimensionMark, ...] = ()
    walls: tuple[Wall, ...] = ()

    def placed(self, x: float = 0.0, y: float = 0.0, *, mirrored: bool = False, turned: float = 0.0) -> Shape:
        """Mirror left and right first, turn by `turned`, rad, counter-clockwise then, and place the middle.

        The middle of the bounding box comes to (x, y), m. Walls and marks go along; a turn other than by
        quarters drops the marks.
        """
        shape = _mirrored(self) if mirrored else self
        shape = _turned(shape, turned) if turned else shape
        middle_x, middle_y = shape.outline.bounds.middle
        return mapped(
            shape,
            shape.outline.placed(x, y),
            lambda point: (point[0] + x - middle_x, point[1] + y - middle_y),
            lambda side: side,
        )


def _mirrored(shape: Shape) -> Shape:
    axis = 2.0 * shape.outline.bounds.middle[0]
    swap: dict[Side, Side] = {"left": "right", "right": "left", "top": "top", "bottom": "bottom"}
    return mapped(
        shape, shape.outline.mirrored(), lambda point: (axis - point[0], point[1]), lambda side: swap[side]
    )


def _turned(shape: Shape, angle: float) -> Shape:
    turned = shape.outline.turned(angle)
    cos, sin = exact_cos_sin(angle)
    x, y = shape.outline.bounds.middle
    sides: tuple[Side, ...] = ("right", "top", "left", "bottom")
    quarters = round(angle / (0.5 * math.pi))
    new = mapped(
        shape,
        turned,
        lambda p: (x + cos * (p[0] - x) - sin * (p[1] - y), y + sin * (p[0] - x) + cos * (p[1] - y)),
        lambda side: sides[(sides.index(side) + quarters) % 4],
    )
    return new if cos * sin == 0.0 else replace(new, marks=())


def mapped(
    shape: Shape, new: Outline, point: Callable[[Point], Point], side: Callable[[Side], Side]
) -> Shape:
    """Return the shape with the outline `new`, its marks and walls carried along by `point` and `side`."""
    marks = tuple(
        DimensionMark(mark.symbol, mark.value, point(mark.start), point(mark.end), side(mark.side))
        for mark in shape.marks
    )
    walls = tuple(Wall(point(wall.start), point(wall.end), wall.t) for wall in shape.walls)
    return Shape(new, shape.dimensions, marks, walls)


@dataclass(frozen=True)
class Parameter:
    """A size of a shape: its symbol, its kind, what it is, and whether it may be left out."""

    name: str
    kind: Literal["length", "number", "points"]
    note: str
    optional: bool


@dataclass(frozen=True)
class ShapeForm:
    """One way to write a shape; `build` takes the parameters by name, and `note` says what it makes."""

    parameters: tuple[Parameter, ...]
    build: Callable[..., Shape]
    note: str

    @property
    def names(self) -> frozenset[str]:
        """Names that may be given."""
        return frozenset(parameter.name for parameter in self.parameters)

    @property
    def required(self) -> frozenset[str]:
        """Names that must be given."""
        return frozenset(parameter.name for parameter in self.parameters if not parameter.optional)


SYNONYMS: Mapping[str, str] = {"d": "h", "b_f": "b"}


def canonical(form: ShapeForm, name: str) -> str:
    """Resolve a synonym (`d` for `h`, `b_f` for `b`) unless the form has a parameter of that name."""
    return name if name in form.names else SYNONYMS.get(name, name)


NOTES: Mapping[str, str] = {
    "h": "overall depth",
    "b": "overall width",
    "d": "outside diameter",
    "t": "thickness",
    "t_w": "web thickness",
    "t_f": "flange thickness",
    "b_t": "width at the top",
    "b_b": "width at the bottom",
    "t_t": "thickness of the top flange",
    "t_b": "thickness of the bottom flange",
    "r": "root radius",
    "r_1": "root radius",
    "r_2": "toe radius",
    "r_toe": "toe radius",
    "r_o": "outside corner radius",
    "r_i": "inside corner radius",
    "slope": "slope of the flanges' inner faces",
    "points": "corners in turn",
}


def form_of(build: Callable[..., Shape], note: str, **notes: str) -> ShapeForm:
    """Read a form from the signature of the function that builds the shape.

    `notes` say what its parameters are where they mean something else than in other shapes.
    """
    kinds: Mapping[str, Literal["number", "points"]] = {"slope": "number", "points": "points"}
    parameters = tuple(
        Parameter(
            name,
            kinds.get(name, "length"),
            notes.get(name, NOTES[name]),
            parameter.default is not parameter.empty,
        )
        for name, parameter in inspect.signature(build).parameters.items()
    )
    return ShapeForm(parameters, build, note)
