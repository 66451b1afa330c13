"""What the figure of normal stress over the depth is drawn from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Literal

from calcgen.figures.dimensions import Dimension
from calcgen.figures.labels import Point
from calcgen.figures.outline import Bar, Part
from calcgen.figures.zones import Zone

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


@dataclass(frozen=True)
class Level:
    """A further axis at height `y` with its name, drawn dashed: the centroidal, the elastic neutral axis."""

    y: float
    label: str


@dataclass(frozen=True)
class Compared:
    """A second profile, drawn dashed over the first, such as that of the straight-beam formula.

    `profile` is (height, value) from the bottom to the top in the unit of the panel; `label` names it with
    its values for the legend: 'straight beam: +102.3 MPa at the bottom, −102.3 MPa at the top'.
    """

    profile: tuple[Point, ...]
    label: str


@dataclass(frozen=True)
class StressPanel:
    """One profile of normal stress with its own zero line.

    `profile` is (height, value) from the bottom to the top, tension positive; a height given twice is a jump.
    It need not reach over the whole depth: that of a steel plate within timber has the plate's heights.
    `marks` are the values written, one each side of a jump. `bars` are stresses of bars (or rows of bars),
    each drawn as one heavy arrow; an empty label leaves its arrow without a value. Where the bars' stresses
    are more than four times the profile's, or less than a fourth, the arrows have a scale of their own, and
    the figure says so.
    """

    profile: tuple[Point, ...]
    marks: tuple[Mark, ...] = ()
    title: str = "normal stress σ"
    bars: tuple[Mark, ...] = ()
    compared: Compared | None = None


@dataclass(frozen=True, eq=False)
class StressDrawing:
    """Normal stress that varies along the depth only; heights in section coordinates, y up.

    `panels` are the profiles of stress, side by side or in rows, each to its own scale (said where there are
    several): one for a section whose materials lie above each other, one for each material where they share
    heights, one more for the residual stress after unloading. `strain` is a profile of (height, value) in any
    unit, from the bottom to the top.

    `neutral_axis` is None where no zero of stress lies in the section, and `neutral_axis_label` then says
    where it is; along the axis stands that sentence, or `neutral_axis_name` where there is too little room.
    `plastic` draws the axis dashed. `levels` are further axes. For bending about the vertical axis the parts
    come turned, and `edges` names what is then at the top and at the bottom.

    `bars` are drawn as dots and named in the legend by `bars_label`; materials by the labels of the parts.
    `zones` are marked on the section: at yield, cracked, open. `dimensions` stand beside the section, so
    their `side` is 'left' (short labels: 'x = 132'); one that has no room there is told under the figure.
    `centre` is the side on which the centre of curvature of a curved bar lies.
    """

    ident: str
    title: str
    parts: tuple[Part, ...]
    centroid: Point
    panels: tuple[StressPanel, ...]
    neutral_axis: float | None = None
    neutral_axis_label: str = "neutral axis"
    strain: tuple[Point, ...] = ()
    strain_marks: tuple[Mark, ...] = ()
    strain_title: str = "strain ε"
    moment: Couple | None = None
    forces: tuple[Force, ...] = ()
    edges: tuple[str, str] = ("top", "bottom")
    note: str = ""
    description: str = ""
    neutral_axis_name: str = "neutral axis"
    plastic: bool = False
    levels: tuple[Level, ...] = ()
    bars: tuple[Bar, ...] = ()
    bars_label: str = ""
    zones: tuple[Zone, ...] = ()
    dimensions: tuple[Dimension, ...] = ()
    centre: Literal["top", "bottom"] | None = None
