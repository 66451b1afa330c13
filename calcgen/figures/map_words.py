"""What stands in the boxes and on the arrows of the map: long words are cut, values never."""

from collections.abc import Sequence
from dataclasses import dataclass

from calcgen.figures.labels import text_width
from calcgen.figures.map_drawing import BOX, LABEL, Cell, Line, MapArrow, MapCalc, MapValue, Slot
from calcgen.figures.picture import SMALL, TEXT, wrap

MOST_VALUES = 3  # on an arrow
MOST_SLOTS = 10  # arrows that enter a box one by one
PAD = 8.0  # from the side of a box to its words
AFTER = 14.0  # from words to the box, for the head of the arrow
BAR = 6.0  # breadth of the bar in the box of a calc that does not hold


@dataclass(frozen=True)
class Given:
    """An arrow into a box: whether it is drawn from its start, is part of a loop, carries one value only."""

    arrow: MapArrow
    short: bool
    loop: bool
    brief: bool

    @property
    def slot(self) -> Slot:
        """Its words and how it enters."""
        lines = _on_arrow(self.arrow, loop=self.loop, most=1 if self.brief else MOST_VALUES)
        return Slot(self.arrow.giver, lines, self.short, self.arrow.href)

    @property
    def changed(self) -> bool:
        """Whether a value on it has changed."""
        return any(value.was for value in self.arrow.values)


def cell_of(calc: MapCalc, given: Sequence[Given], apart: Sequence[str]) -> Cell:
    """Return the cell of a calc.

    `apart` are the numbers of the calcs that it feeds by arrows of which only the tips are drawn. Where more
    arrows enter than MOST_SLOTS, those drawn from their start stay, then those that carry changed values.
    """
    ranked = sorted(given, key=lambda g: (g.short, not g.changed))
    kept = given if len(given) <= MOST_SLOTS else ranked[: MOST_SLOTS - 1]
    others = [g for g in given if g not in kept]
    slots = [g.slot for g in given if g in kept]
    if others:
        changed = (Line("changed"),) if any(g.changed for g in others) else ()
        lines = (Line(f"from {len(others)} other calcs", bold=True), *changed)
        slots.append(Slot("", lines, short=True, href=others[0].arrow.href))
    widths = [text_width(line.text, SMALL, bold=line.bold) for slot in slots for line in slot.lines]
    return Cell(calc, _in_box(calc, apart), tuple(slots), max(widths) + AFTER if slots else 0.0)


def shortened(text: str, size: float, width: float, *, bold: bool = False) -> str:
    """Return a text, cut if it is wider than `width`, with an ellipsis for what is left out."""
    if text_width(text, size, bold=bold) <= width:
        return text
    kept = text
    while kept and text_width(f"{kept.rstrip()}…", size, bold=bold) > width:
        kept = kept[:-1]
    return f"{kept.rstrip()}…"


def _in_box(calc: MapCalc, apart: Sequence[str]) -> tuple[Line, ...]:
    room = BOX - 2 * PAD - BAR
    title = wrap(calc.title, SMALL, room)
    if len(title) > 2:
        title = [title[0], f"{title[1]} …"]
    standing = f"{calc.standing} {calc.utilisation}".rstrip()
    lines = [
        Line(shortened(calc.number, TEXT, room, bold=True), bold=True),
        *(Line(shortened(text, SMALL, room)) for text in title),
        Line(standing, bold=calc.standing in ("exceeded", "in error", "not evaluated")),
    ]
    if apart:
        lines.append(Line(_some("feeds", apart, room)))
    return tuple(lines)


def _some(verb: str, numbers: Sequence[str], room: float) -> str:
    """Return 'feeds B-03, D-04 + 7 more', with as many numbers as there is room for."""
    for count in range(min(len(numbers), int(room)), 0, -1):  # each number is broader than a pixel
        more = f" + {len(numbers) - count} more" if count < len(numbers) else ""
        text = f"{verb} {', '.join(numbers[:count])}{more}"
        if text_width(text, SMALL) <= room:
            return text
    return f"{verb} {len(numbers)} calc{'s' if len(numbers) > 1 else ''}"


def _on_arrow(arrow: MapArrow, *, loop: bool, most: int) -> tuple[Line, ...]:
    """Return where the arrow comes from, its first values, changed ones before others, and how many more."""
    room = LABEL - AFTER
    head = f"loop, from {arrow.giver}" if loop else f"from {arrow.giver}"
    lines = [Line(shortened(head, SMALL, room, bold=True), bold=True)]
    ranked = sorted(arrow.values, key=lambda v: not v.was)
    shown = ranked[: max(most, min(MOST_VALUES, sum(bool(v.was) for v in ranked)))]
    for value in shown:
        lines += [Line(text) for text in _stated(value, room)]
    if len(ranked) > len(shown):
        lines.append(Line(f"+ {len(ranked) - len(shown)} more"))
    return tuple(lines)


def _stated(value: MapValue, room: float) -> list[str]:
    """Return a value with its name, and what it was, in lines that fit."""
    text = value.text or "—"
    lines = [f"{value.name}{value.joint}{text}"]
    if text_width(lines[0], SMALL) > room:
        after = f"{value.joint}{text}".lstrip(": ")
        fits = text_width(after, SMALL) <= room
        lines = [shortened(value.name, SMALL, room), after if fits else "see the table"]
    if value.was:
        was = wrap(value.was, SMALL, room)
        fits = len(was) <= 2 and all(text_width(line, SMALL) <= room for line in was)
        lines += was if fits else ["changed"]
    return lines
