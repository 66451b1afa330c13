"""What governs along an envelope: strips below its diagram, in line with it, and a key for what is long."""

from collections.abc import Callable, Iterable, Iterator, Mapping, Sequence
from dataclasses import dataclass, field, replace
from itertools import pairwise

from calcgen.figures.labels import spread, text_width
from calcgen.figures.picture import SMALL, Label, Sketch, Stroke

ROW = 15.0  # pixels from one strip to the next
ASIDE = 7.0  # pixels that a letter may stand aside of the middle of a short stretch
SHORT = 26.0  # pixels of a name for which no letter is needed
KEY = 16  # states up to which each has a letter
TOLD = 4  # stretches without a letter that are told one by one
LEAST = 0.25  # part of its stretches that a strip must name, or it is left out
LISTED = 100  # stretches of an edge that are listed
EDGE = Stroke("muted", 0.9)


@dataclass(frozen=True)
class Governed:
    """A stretch of an envelope's edge: what governs there, and from where to where, in words.

    `state` is the combination and how its loads are arranged, `combination` the first of them alone, '' where
    there is only one.
    """

    start: float
    end: float
    state: str
    combination: str
    where: str


@dataclass(frozen=True)
class Strip:
    """One edge of the envelope of the quantity `of`, 'max' or 'min', as stretches that follow one another."""

    of: str
    edge: str
    stretches: tuple[Governed, ...]


@dataclass
class Governing:
    """Draws the strips of a figure, and keeps what its foot must tell: the key, and what had no room.

    `letters` stand for long names, none where every name has room; where the states are too many for a key,
    `reduced` strips name the combinations alone.
    """

    letters: Mapping[str, str]
    reduced: bool = False
    shown: dict[str, str] = field(default_factory=dict)
    untold: list[str] = field(default_factory=list)

    @staticmethod
    def of(strips: Iterable[Strip], across: Callable[[float], float]) -> "Governing":
        """Choose how the strips of a figure name what governs: in full where that is short or has room."""
        every = [stretch for strip in strips for stretch in strip.stretches]
        reduced = len({s.state for s in every}) > KEY
        if reduced:
            every = [stretch for strip in strips for stretch in _by_combination(strip).stretches]
        letter = text_width("m", SMALL) + 2
        wide = [(text_width(s.state, SMALL), across(s.end) - across(s.start)) for s in every]
        if all(width <= SHORT or width + 6 <= room for width, room in wide if room >= letter):
            return Governing({}, reduced)
        states = dict.fromkeys(s.state for s in every)
        return Governing({state: _letter(number) for number, state in enumerate(states)}, reduced)

    @property
    def whole(self) -> bool:
        """Tell whether the figure shows all that governs."""
        return not self.reduced and not self.untold

    def draw(
        self, sketch: Sketch, strips: Sequence[Strip], top: float, across: Callable[[float], float]
    ) -> float:
        """Draw the strips of a diagram below `top`; give the height below them."""
        for strip in strips:
            shown = _by_combination(strip) if self.reduced else strip
            if any(stretch.state for stretch in shown.stretches) and self._drawn(sketch, shown, top, across):
                top += ROW
        return top

    def foot(self) -> Iterator[str]:
        """Give what the foot of the figure says of the strips."""
        if self.shown:
            yield "; ".join(f"{letter}\u00a0=\u00a0{state}" for state, letter in self.shown.items())
        if self.reduced:
            yield "what is loaded changes more often than can be drawn: listed under the figure"
        if len(self.untold) > TOLD:
            yield f"{len(self.untold)} stretches are too short to be named: listed under the figure"
        elif self.untold:
            yield "too short to be named: " + "; ".join(self.untold)

    def _drawn(self, sketch: Sketch, strip: Strip, top: float, across: Callable[[float], float]) -> bool:
        """Draw a strip where most of it has room for its names, and tell whether it has."""
        edges = [across(strip.stretches[0].start), *(across(s.end) for s in strip.stretches)]
        texts = [self.letters.get(s.state, s.state) for s in strip.stretches]
        widths = [text_width(text, SMALL) + 2 for text in texts]
        places = [(a + b) / 2 for a, b in pairwise(edges)]
        fits = [width <= b - a for width, (a, b) in zip(widths, pairwise(edges), strict=True)]
        aside = spread(places, widths, edges[0], edges[-1])
        if aside and all(abs(a - x) <= ASIDE for a, x in zip(aside, places, strict=True)):
            places, fits = aside, [True] * len(fits)
        elif sum(fits) < LEAST * len(fits):
            fits = [False] * len(fits)
        named = list(zip(strip.stretches, places, texts, fits, strict=True))
        self.untold += [f"{strip.edge} {strip.of} {s.where}: {s.state}" for s, _, _, fit in named if not fit]
        if not any(fits):
            return False
        foot = top + 12
        sketch.line([(edges[0], foot), (edges[-1], foot)], EDGE)
        sketch.lines((((x, foot - 8), (x, foot + 2.5)) for x in dict.fromkeys(edges)), EDGE)
        sketch.label(Label(2, foot - 2, strip.edge, SMALL, "left", colour="muted", halo=True))
        for stretch, x, text, fit in named:
            if fit:
                sketch.label(Label(x, foot - 2.5, text, SMALL, halo=True))
            if fit and stretch.state in self.letters:
                self.shown[stretch.state] = text
        return True


def listed(strip: Strip, most: int = LISTED) -> str:
    """Tell what governs along an edge in words, of `most` stretches at most."""
    told = [f"{s.state} {s.where}" for s in strip.stretches[:most]]
    rest = len(strip.stretches) - len(told)
    more = [f"and {rest} more stretches: a result at a place tells what governs it"] if rest else []
    return f"{strip.edge} {strip.of} is governed by {'; '.join([*told, *more])}"


def _by_combination(strip: Strip) -> Strip:
    """Give the strip of the combinations alone."""
    merged: list[Governed] = []
    for stretch in strip.stretches:
        if merged and merged[-1].state == stretch.combination:
            where = f"{merged[-1].where.partition(' to ')[0]} to {stretch.where.partition(' to ')[2]}"
            merged[-1] = replace(merged[-1], end=stretch.end, where=where)
        else:
            merged.append(replace(stretch, state=stretch.combination))
    return replace(strip, stretches=tuple(merged))


def _letter(number: int) -> str:
    """Give 'a' to 'z', then 'aa' and so on."""
    letters = ""
    number += 1
    while number:
        number, rest = divmod(number - 1, 26)
        letters = chr(ord("a") + rest) + letters
    return letters
