"""What the figure of normal stress over the depth is drawn from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from calcgen.figures.labels import Point
from calcgen.figures.outline import Part

Word = Literal["tension", "compression"]


@dataclass(frozen=True)
class Mark:
    """A value to write beside the profile, at height `y` of the section."""

    y: float
    value: float
    label: str


@dataclass(frozen=True)
class Force:
    """A resultant along the beam at height `y`: positive leaves the face (tension)."""

    y: float
    value: float
    label: str


@dataclass(frozen=True)
class Couple:
    """A bending moment: positive puts tension at the bottom of the figure."""

    value: float
    label: str


@dataclass(frozen=True, eq=False)
class StressDrawing:
    """Normal stress that varies along the depth only; heights in section coordinates, y up.

    `stress` and `strain` are profiles of (height, value) from the bottom to the top, tension positive; a
    height given twice is a jump. `neutral_axis` is None where no zero of stress lies in the section, and
    `neutral_axis_label` then says where it is. For bending about the vertical axis the parts come turned,
    and `edges` names what is then at the top and at the bottom.
    """

    ident: str
    title: str
    parts: tuple[Part, ...]
    centroid: Point
    stress: tuple[Point, ...]
    marks: tuple[Mark, ...]
    neutral_axis: float | None = None
    neutral_axis_label: str = "neutral axis"
    stress_title: str = "normal stress σ"
    strain: tuple[Point, ...] = ()
    strain_marks: tuple[Mark, ...] = ()
    strain_title: str = "strain ε"
    moment: Couple | None = None
    forces: tuple[Force, ...] = ()
    edges: tuple[str, str] = ("top", "bottom")
    note: str = ""
    description: str = ""
