"""The map of which calc feeds which: boxes that lead to the calcs, and arrows with the values they carry."""

from collections.abc import Sequence
from dataclasses import replace

from calcgen.figures.labels import Box, Point
from calcgen.figures.map_drawing import BOX, Placed, Plan, Slot
from calcgen.figures.map_layout import GRID
from calcgen.figures.map_listed import listed
from calcgen.figures.map_sheets import APART, EDGE, WIDTH, MapSheet
from calcgen.figures.map_words import BAR, PAD
from calcgen.figures.picture import DASH, SMALL, TEXT, WIDTHS, Label, Picture, Sketch, Stroke, Width

ARROW, LOOP = Stroke("muted", 1.0), Stroke("ink", 2.0)
FRAME = Stroke("ink", 1.2)
HEAD = 7.0  # of an arrow, in pixels
CORNER = 9.0  # cut off the box of a calc in error


def compose_map(sheet: MapSheet, width: Width) -> Picture:
    """Compose a sheet: in layers from left to right, or where it is narrow one calc below the other."""
    sketch = Sketch()
    for plan in plans_of(sheet, width):
        _draw(sketch, plan)
    room = WIDTH if width == "wide" else WIDTHS["narrow"]
    picture = sketch.picture(f"{sheet.ident}-{width}", sheet.title, sheet.description, width=room - EDGE)
    return replace(picture, frame=replace(picture.frame, left=-EDGE))


def plans_of(sheet: MapSheet, width: Width) -> list[Plan]:
    """Give what a sheet shows, in its places."""
    if width == "narrow":
        cells = {cell.calc.number: cell for piece in sheet.pieces for cell in piece.cells}
        return [listed(list(cells), cells, [arrow for piece in sheet.pieces for arrow in piece.arrows])]
    plans: list[Plan] = []
    below = 0.0
    for piece in sheet.pieces:
        plans.append(piece.plan.moved(below))
        below += piece.plan.height + APART
    return plans


def _draw(sketch: Sketch, plan: Plan) -> None:
    """Draw arrows, then boxes with their words."""
    for stroke, loop in ((ARROW, False), (LOOP, True)):
        sketch.lines((route.points for route in plan.routes if route.loop == loop), stroke)
    for at in plan.dots:
        sketch.dot(at, 2.2, "ink")
    short = [end for cell in plan.cells for end in _short(cell)]
    sketch.lines(short, ARROW)
    for start, _ in short:
        sketch.dot(start, 2.2, "paper", Stroke("ink", 0.9))
    tips = [_tip(route.points) for route in plan.routes if route.tip] + short
    sketch.heads(tips, "ink", HEAD)
    for placed in plan.cells:
        first = len(sketch.items)
        _draw_box(sketch, placed)
        sketch.lead(first, placed.cell.calc.href)
        for slot, top in _slots(placed):
            first = len(sketch.items)
            for number, line in enumerate(slot.lines):
                at = (placed.left, top + GRID * (number + 1) - 5.0)
                sketch.label(
                    Label(*at, line.text, SMALL, "left", "ink" if line.bold else "muted", bold=line.bold)
                )
            sketch.lead(first, slot.href)


def _slots(placed: Placed) -> list[tuple[Slot, float]]:
    """Give the arrows that enter a box, each with the top of its words."""
    found, top = [], placed.top
    for slot in placed.cell.slots:
        found.append((slot, top))
        top += slot.height
    return found


def _short(placed: Placed) -> list[tuple[Point, Point]]:
    """Give the ends of the arrows of a box that are drawn short."""
    levels = [top + slot.height - GRID for slot, top in _slots(placed) if slot.short]
    return [((placed.left + 3.0, level), (placed.box_left, level)) for level in levels]


def _tip(points: Sequence[Point]) -> tuple[Point, Point]:
    return points[-2], points[-1]


def _draw_box(sketch: Sketch, placed: Placed) -> None:
    """Draw a box whose outline tells how the calc stands, as its words do.

    A bar marks what does not hold (exceeded, in error), cut corners an error; dashes what is not evaluated.
    """
    calc = placed.cell.calc
    box = Box(placed.box_left, placed.top, placed.box_left + BOX, placed.top + placed.height)
    dashed = calc.standing == "not evaluated"
    ring = _outline(box, CORNER if calc.standing == "in error" else 0.0)
    sketch.fill([ring], "paper", stroke=Stroke("ink", 1.2, DASH) if dashed else FRAME)
    barred = calc.standing in ("exceeded", "in error")
    if barred:
        down = CORNER if calc.standing == "in error" else 0.0
        bar = Box(box.left, box.top + down, box.left + BAR, box.bottom - down)
        sketch.fill([_outline(bar, 0.0)], "ink")
    x = box.left + PAD + (BAR if barred else 0.0)
    for number, line in enumerate(placed.cell.lines):
        size = SMALL if number else TEXT
        sketch.label(Label(x, box.top + 14 + GRID * number, line.text, size, "left", bold=line.bold))


def _outline(box: Box, corner: float) -> tuple[Point, ...]:
    """Give the corners of a box, or those left where its corners are cut off."""
    if not corner:
        return ((box.left, box.top), (box.right, box.top), (box.right, box.bottom), (box.left, box.bottom))
    return (
        (box.left + corner, box.top),
        (box.right - corner, box.top),
        (box.right, box.top + corner),
        (box.right, box.bottom - corner),
        (box.right - corner, box.bottom),
        (box.left + corner, box.bottom),
        (box.left, box.bottom - corner),
        (box.left, box.top + corner),
    )
