"""Which calc feeds which, as it is drawn: calcs, arrows with values, and where they are placed."""

from dataclasses import dataclass, replace
from typing import Literal

from calcgen.figures.labels import Point
from calcgen.figures.map_layout import GRID, Arrow

BOX = 160.0  # breadth of a calc's box, in pixels
LABEL = 116.0  # the most that the words on an arrow take

Standing = Literal["satisfied", "exceeded", "no checks", "not evaluated", "in error"]


@dataclass(frozen=True)
class MapCalc:
    """A calc; `utilisation` is that of its governing check, '' if there is none; `href` leads to its page."""

    number: str
    title: str
    standing: Standing
    utilisation: str = ""
    href: str = ""


@dataclass(frozen=True)
class MapValue:
    """What an arrow carries: 'N_G = 4.13 kN', of a block 'main: IPE 220'.

    `text` is '' where there is no value; `was` is the mark of one that changed: 'was 3.90 kN at P1'.
    """

    name: str
    text: str
    joint: Literal[" = ", ": "] = " = "
    was: str = ""


@dataclass(frozen=True)
class MapArrow:
    """What one calc takes from another; `href` leads to all its values."""

    giver: str
    taker: str
    values: tuple[MapValue, ...]
    href: str = ""

    @property
    def ends(self) -> Arrow:
        """From where to where."""
        return self.giver, self.taker


@dataclass(frozen=True)
class MapDrawing:
    """Calcs in the order of their numbers, and at most one arrow from any of them to any."""

    ident: str
    title: str
    calcs: tuple[MapCalc, ...]
    arrows: tuple[MapArrow, ...]


@dataclass(frozen=True)
class Line:
    """A line of words."""

    text: str
    bold: bool = False


@dataclass(frozen=True)
class Slot:
    """Where an arrow enters a box; its words stand on it.

    `giver` is '' where it stands for several arrows; `short` says that it is not drawn from its start.
    """

    giver: str
    lines: tuple[Line, ...]
    short: bool
    href: str = ""

    @property
    def height(self) -> float:
        """Of words, arrow and the distance to the next one."""
        return GRID * (len(self.lines) + 1)


@dataclass(frozen=True)
class Cell:
    """A calc's box with the words in it, and the arrows that enter it from the left."""

    calc: MapCalc
    lines: tuple[Line, ...]
    slots: tuple[Slot, ...]
    label: float  # breadth of the words on the arrows

    @property
    def height(self) -> float:
        """Of the box, a multiple of GRID."""
        return max(GRID * (len(self.lines) + 1), sum(slot.height for slot in self.slots))

    def entry(self, giver: str) -> float:
        """Return how far below the top the arrow from a calc enters."""
        down = 0.0
        for slot in self.slots:
            if slot.giver == giver:
                return down + slot.height - GRID
            down += slot.height
        raise KeyError(giver)


@dataclass(frozen=True)
class Placed:
    """A cell in its place: its words start at `left`, its box at `left + label`."""

    cell: Cell
    left: float
    label: float
    top: float
    height: float

    @property
    def box_left(self) -> float:
        """The side of the box where arrows enter."""
        return self.left + self.label

    def moved(self, down: float) -> "Placed":
        """Give the cell shifted down."""
        return replace(self, top=self.top + down)


@dataclass(frozen=True)
class Route:
    """The line of an arrow from box to box; `ends` are the calcs, `loop` says that it is part of a loop."""

    ends: Arrow
    points: tuple[Point, ...]
    loop: bool = False
    tip: bool = True

    def moved(self, down: float) -> "Route":
        """Give the route shifted down."""
        return replace(self, points=tuple((x, y + down) for x, y in self.points))


@dataclass(frozen=True)
class Plan:
    """Cells and arrows in their places, from (0, 0); `dots` are where an arrow parts from another."""

    cells: tuple[Placed, ...]
    routes: tuple[Route, ...]
    dots: tuple[Point, ...]
    width: float
    height: float

    def moved(self, down: float) -> "Plan":
        """Give the plan shifted down."""
        return Plan(
            tuple(cell.moved(down) for cell in self.cells),
            tuple(route.moved(down) for route in self.routes),
            tuple((x, y + down) for x, y in self.dots),
            self.width,
            self.height,
        )
