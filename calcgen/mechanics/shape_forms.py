"""The table of shapes: which sizes each one takes, read from the functions that build them."""

from __future__ import annotations

import inspect
from collections.abc import Callable, Mapping, Sequence
from dataclasses import dataclass
from typing import Literal

from calcgen.mechanics.shape import Shape
from calcgen.mechanics.shapes import (
    angle,
    box,
    channel,
    circle,
    ellipse,
    i_shape,
    polygon,
    rectangle,
    tee,
    trapezium,
    tube,
    unequal_i_shape,
    zed,
)


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

    def canonical(self, name: str) -> str:
        """Resolve a synonym (`d` for `h`, `b_f` for `b`) unless the form has a parameter of that name."""
        own = {parameter.name for parameter in self.parameters}
        return name if name in own else SYNONYMS.get(name, name)

    def missing(self, given: Sequence[str]) -> tuple[str, ...]:
        """Names that must be given and are not, in their order."""
        names = {self.canonical(name) for name in given}
        return tuple(p.name for p in self.parameters if not p.optional and p.name not in names)

    def unknown(self, given: Sequence[str]) -> tuple[str, ...]:
        """Names given that the form does not have."""
        own = {parameter.name for parameter in self.parameters}
        return tuple(name for name in given if self.canonical(name) not in own)


SYNONYMS: Mapping[str, str] = {"d": "h", "b_f": "b"}

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


def _form(build: Callable[..., Shape]) -> ShapeForm:
    """Read a form from the signature of the function that builds it."""
    kinds: Mapping[str, Literal["number", "points"]] = {"slope": "number", "points": "points"}
    parameters = tuple(
        Parameter(name, kinds.get(name, "length"), NOTES[name], parameter.default is not parameter.empty)
        for name, parameter in inspect.signature(build).parameters.items()
    )
    return ShapeForm(parameters, build, (build.__doc__ or "").partition("\n")[0])


SHAPES: Mapping[str, tuple[ShapeForm, ...]] = {
    "rectangle": (_form(rectangle),),
    "circle": (_form(circle),),
    "ellipse": (_form(ellipse),),
    "trapezium": (_form(trapezium),),
    "tube": (_form(tube),),
    "box": (_form(box),),
    "i_shape": (_form(i_shape), _form(unequal_i_shape)),
    "channel": (_form(channel),),
    "tee": (_form(tee),),
    "angle": (_form(angle),),
    "zed": (_form(zed),),
    "polygon": (_form(polygon),),
}


def form_for(name: str, given: Sequence[str]) -> ShapeForm:
    """Pick the form of the shape `name` that fits the names given best; the first of equals."""
    return min(SHAPES[name], key=lambda form: len(form.missing(given)) + len(form.unknown(given)))
