"""The map cut into sheets, to be read and printed one by one: arrows between sheets are short."""

from collections import Counter
from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass
from functools import cached_property

from calcgen.figures.map_cut import MOST_LAYERS, bands
from calcgen.figures.map_drawing import BOX, Cell, MapArrow, MapCalc, MapDrawing, Plan
from calcgen.figures.map_layered import BETWEEN, layered
from calcgen.figures.map_layout import GRID, Arrow, backward, joined, layers_of, on_loops
from calcgen.figures.map_words import MOST_SLOTS, Given, cell_of

WIDTH = 900.0  # of a sheet, in pixels: on paper its small words keep a height of 6 points or so
HEIGHT = 960.0
EDGE = 2.0  # of the width, for the thickness of lines at the left side
APART = 2 * GRID  # from one plan to the next
MOST_ARROWS = 6  # of a calc; one that feeds more has short arrows


@dataclass(frozen=True)
class Piece:
    """Calcs in layers with the arrows drawn from box to box between them.

    `cells` are in the order of the layers; `label` is the breadth for words where it is the same in each.
    """

    layers: tuple[tuple[str, ...], ...]
    cells: tuple[Cell, ...]
    arrows: tuple[Arrow, ...]
    label: float | None = None

    @cached_property
    def plan(self) -> Plan:
        """The piece laid out from left to right."""
        return layered(self.layers, {c.calc.number: c for c in self.cells}, self.arrows, self.label)


@dataclass(frozen=True)
class MapSheet:
    """A part of the map that is one figure."""

    ident: str
    title: str
    description: str
    pieces: tuple[Piece, ...]


def sheets_of(drawing: MapDrawing) -> tuple[MapSheet, ...]:
    """Return the sheets of a map, none where no calc feeds another; it holds no calc that stands alone."""
    sheets: list[list[Piece]] = []
    free = 0.0
    for piece in _Map(drawing).pieces():
        height = piece.plan.height + APART
        if not sheets or height > free:
            sheets.append([])
            free = HEIGHT + APART
        sheets[-1].append(piece)
        free -= height
    givers: dict[str, list[str]] = {}
    for arrow in drawing.arrows:
        givers.setdefault(arrow.taker, []).append(arrow.giver)
    return tuple(_sheet(drawing, givers, pieces, n, len(sheets)) for n, pieces in enumerate(sheets, start=1))


def _sheet(
    drawing: MapDrawing,
    givers: Mapping[str, Sequence[str]],
    pieces: Sequence[Piece],
    number: int,
    count: int,
) -> MapSheet:
    of = f", {number} of {count}" if count > 1 else ""
    here = sorted(cell.calc.number for piece in pieces for cell in piece.cells)
    feeds = [f"{', '.join(g)} feed{'' if len(g) > 1 else 's'} {n}" for n in here if (g := givers.get(n))]
    boxes = f"{len(here)} calc{'s' if len(here) > 1 else ''}"
    description = ". ".join([f"{boxes}, joined by arrows that carry values", *feeds]) + "."
    return MapSheet(f"{drawing.ident}-{number}", f"{drawing.title}{of}", description, tuple(pieces))


@dataclass(frozen=True)
class _Map:
    """A drawing, and what is asked about it again and again."""

    drawing: MapDrawing

    @cached_property
    def ends(self) -> list[Arrow]:
        """All arrows."""
        return [arrow.ends for arrow in self.drawing.arrows]

    @cached_property
    def loops(self) -> frozenset[Arrow]:
        """The arrows of loops."""
        return on_loops(self.ends)

    @cached_property
    def crowded(self) -> frozenset[str]:
        """The calcs that feed so many others that their arrows would bury the picture."""
        fed = Counter(giver for giver, taker in self.ends if giver != taker)
        return frozenset(giver for giver, count in fed.items() if count > MOST_ARROWS)

    @cached_property
    def drawn(self) -> dict[str, list[Arrow]]:
        """The arrows to draw from box to box, by taker: of loops, and others if they are not too many."""
        wanted = sorted(self.ends, key=lambda arrow: arrow not in self.loops)
        found: dict[str, list[Arrow]] = {}
        for giver, taker in wanted:
            row = found.setdefault(taker, [])
            if ((giver, taker) in self.loops or giver not in self.crowded) and len(row) < MOST_SLOTS - 1:
                row.append((giver, taker))
        return found

    def within(self, calcs: Collection[str]) -> list[Arrow]:
        """Return the arrows to draw between some calcs."""
        held = set(calcs)
        return [arrow for calc in calcs for arrow in self.drawn.get(calc, ()) if arrow[0] in held]

    @cached_property
    def _given(self) -> Mapping[str, list[MapArrow]]:
        found: dict[str, list[MapArrow]] = {calc.number: [] for calc in self.drawing.calcs}
        for arrow in self.drawing.arrows:
            found[arrow.taker].append(arrow)
        return found

    @cached_property
    def _fed(self) -> Mapping[str, list[Arrow]]:
        found: dict[str, list[Arrow]] = {calc.number: [] for calc in self.drawing.calcs}
        for giver, taker in self.ends:
            found[giver].append((giver, taker))
        return found

    @cached_property
    def _calcs(self) -> Mapping[str, MapCalc]:
        return {calc.number: calc for calc in self.drawing.calcs}

    def cell(self, number: str, arrows: Collection[Arrow]) -> Cell:
        """Return the cell of a calc on a sheet where `arrows` are drawn from box to box."""
        given = [
            Given(a, short=a.ends not in arrows, loop=a.ends in self.loops, brief=a.giver in self.crowded)
            for a in self._given[number]
        ]
        apart = [arrow[1] for arrow in self._fed[number] if arrow not in arrows]
        return cell_of(self._calcs[number], given, apart)

    def layers(self, group: Sequence[str]) -> tuple[tuple[str, ...], ...]:
        """Return a group of calcs in its layers."""
        arrows = self.within(group)
        back = backward(group, arrows)
        return layers_of(group, [arrow for arrow in arrows if arrow not in back])

    def piece(self, group: Sequence[str], layers: tuple[tuple[str, ...], ...]) -> Piece:
        """Return a group of calcs with the arrows between them."""
        arrows = self.within(group)
        drawn = set(arrows)
        cells = tuple(self.cell(calc, drawn) for layer in layers for calc in layer)
        return Piece(layers, cells, tuple(arrows))

    def whole_loops(self, group: Sequence[str], parts: Sequence[Sequence[str]]) -> list[list[str]]:
        """Return parts of a group with each loop that they cut, if it fits a sheet, as a part of its own."""
        held = [set(part) for part in parts]
        loops = joined(group, [arrow for arrow in self.within(group) if arrow in self.loops])
        cut = [loop for loop in loops if not any(part.issuperset(loop) for part in held)]
        whole = [loop for loop in cut if self._fits(loop)]
        if not whole:
            return [list(part) for part in parts]
        apart = {calc for loop in whole for calc in loop}
        return [*whole, [calc for calc in group if calc not in apart]]

    def _fits(self, group: Sequence[str]) -> bool:
        layers = self.layers(group)
        return len(layers) <= MOST_LAYERS and len(_cut(self.piece(group, layers))) < 2

    def groups(self) -> Iterator[Piece]:
        """Yield the calcs that are drawn together, each group small enough for a sheet."""
        linked = {calc for arrow in self.ends for calc in arrow}
        place = {calc.number: n for n, calc in enumerate(self.drawing.calcs)}
        numbers = [number for number in place if number in linked]
        waiting = joined(numbers, self.within(numbers))[::-1]
        while waiting:
            group = waiting.pop()
            layers = self.layers(group)
            if len(layers) > MOST_LAYERS:
                parts = bands(layers, self.within(group), place)
            else:
                piece = self.piece(group, layers)
                parts = _cut(piece)
                if len(parts) < 2:
                    yield piece
                    continue
            parts = self.whole_loops(group, parts)
            ordered = [sorted(part, key=place.__getitem__) for part in parts]
            joint = [found for part in ordered for found in joined(part, self.within(part))]
            waiting += reversed(joint)

    def pieces(self) -> Iterator[Piece]:
        """Yield the pieces: calcs that nothing feeds, groups joined by arrows, calcs by themselves."""
        groups = list(self.groups())
        alone = [piece.cells[0] for piece in groups if len(piece.cells) == 1 and not piece.arrows]
        yield from _rows([cell for cell in alone if not cell.slots])
        yield from (piece for piece in groups if len(piece.cells) > 1 or piece.arrows)
        yield from _rows([cell for cell in alone if cell.slots])


def _cut(piece: Piece) -> list[list[str]]:
    """Return the calcs of a piece in parts if it is too large for a sheet.

    One that is too wide is cut behind the layers for which there is room, one too high at half its height.
    """
    plan = piece.plan
    if plan.width > WIDTH - EDGE and len(piece.layers) > 1:
        right = {placed.cell.calc.number: placed.box_left + BOX for placed in plan.cells}
        count = max(1, sum(max(right[c] for c in layer) <= WIDTH - EDGE for layer in piece.layers[:-1]))
        parts = piece.layers[:count], piece.layers[count:]
        return [[calc for layer in part for calc in layer] for part in parts]
    if plan.height > HEIGHT and len(plan.cells) > 1:
        ranked = sorted(plan.cells, key=lambda p: (p.top + p.height / 2, p.cell.calc.number))
        half = len(ranked) // 2
        return [[placed.cell.calc.number for placed in part] for part in (ranked[:half], ranked[half:])]
    return [[cell.calc.number for cell in piece.cells]]


def _rows(cells: Sequence[Cell]) -> Iterator[Piece]:
    """Yield calcs side by side, as many as there is room for; one too high for a sheet by itself."""
    label = max((cell.label for cell in cells), default=0.0)
    count = int((WIDTH - EDGE + BETWEEN) // (label + BOX + BETWEEN))
    low = [cell for cell in cells if cell.height <= HEIGHT]
    rows = [low[start : start + count] for start in range(0, len(low), count)]
    for row in (*rows, *([cell] for cell in cells if cell.height > HEIGHT)):
        yield Piece(tuple((cell.calc.number,) for cell in row), tuple(row), (), label)
