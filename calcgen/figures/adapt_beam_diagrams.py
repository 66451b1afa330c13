"""V, M and w of an evaluated beam -> diagrams in the units shown, envelopes with what governs them."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from calcgen.evaluation.blocks.beam_arrangement import arrangement, pattern_text
from calcgen.evaluation.blocks.beam_states import Found, States, Varying, names_of, single
from calcgen.evaluation.results.beam import BeamResult, GroupResult
from calcgen.figures.adapt_beam_supports import per_metre, place_text
from calcgen.figures.beam_diagrams import Diagram, Extreme
from calcgen.figures.beam_governing import Governed, Strip
from calcgen.figures.labels import Point
from calcgen.mechanics.actions import Governs, Pattern
from calcgen.mechanics.arrays import FloatArray
from calcgen.mechanics.beam import Quantity
from calcgen.mechanics.combinations import Governing
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import from_si
from calcgen.quantities.symbols import plain

POINTS = 40  # an element may be the whole beam; points on straight stretches are thinned when drawn
EQUAL = 3  # combinations that give the same up to which all are named

_TITLES: dict[str, tuple[str, str, bool]] = {
    "V": ("shear force V", "N", False),
    "M": ("moment M", "N·m", True),
    "w": ("deflection w", "m", True),
}
_NOTES = {
    "V": "positive where the left part is pushed up",
    "M": "drawn on the tension side: sagging below the line",
    "w": "positive down",
}
_LATERAL_NOTES = {
    "V": "positive where the left part is pushed to the left",
    "M": "drawn on the tension side: tension on the right below the line",
    "w": "positive to the right",
}


def diagram_of(beam: BeamResult, group: GroupResult, symbol: str, suffix: str, style: Style) -> Diagram:
    """Return the diagram of V, M or w of a group; of several states their envelope."""
    title, unit, down = _TITLES[symbol]
    quantity: Quantity = f"{symbol}{suffix}"  # type: ignore[assignment]
    found = group.states.extremes(quantity)
    extremes = tuple(_extremes((found.max, found.min), unit, quantity, style))
    causes = _causes(group, (("max", found.max), ("min", found.min)), beam.spans, style)
    note = [(_LATERAL_NOTES if suffix else _NOTES)[symbol], *causes]
    if not extremes:
        note.append("zero throughout")
    solution = single(group.states)
    if solution is not None:
        curve = _curve(*solution.polyline(quantity, POINTS), style)
        return Diagram(title, curve, extremes=extremes, down=down, note="; ".join(note))
    band = group.states.band(quantity, POINTS)
    edges = (("max", band.governs_high), ("min", band.governs_low))
    strips = tuple(Strip(symbol, edge, _governed(row, group.states, beam, style)) for edge, row in edges)
    return Diagram(
        title=title,
        curve=_curve(band.x, band.high, style),
        lower=_curve(band.x, band.low, style),
        extremes=extremes,
        down=down,
        note="; ".join(note),
        inner=tuple(_curve(band.x, state.values, style) for state in band.curves),
        strips=strips if any(g.state for strip in strips for g in strip.stretches) else (),
    )


def _curve(x: FloatArray, values: FloatArray, style: Style) -> tuple[Point, ...]:
    return tuple(zip((x * per_metre(style)).tolist(), values.tolist(), strict=True))


def _governed(row: Sequence[Governs], states: States, beam: BeamResult, style: Style) -> tuple[Governed, ...]:
    """Return what governs an edge of an envelope; a combination is named where there are several."""
    factor = per_metre(style)
    several = len(names_of(states)) > 1
    arranged: dict[tuple[Pattern, ...], list[str]] = {}  # the same ones come again along the beam
    found = []
    for g in row:
        names = [plain(name) for name in (g.combination, *g.others)] if several else []
        more = len(names) - EQUAL
        if len(names) > 2 and len(names) == len(names_of(states)):
            combination = "any"
        elif more > 0:
            combination = f"{' or '.join(names[:EQUAL])} or {more} more"
        else:
            combination = " or ".join(names)
        if isinstance(states, Varying) and g.patterns not in arranged:
            arranged[g.patterns] = [pattern_text(p, states.effects, beam.spans, style) for p in g.patterns]
        state = ", ".join(text for text in (combination, *arranged.get(g.patterns, ())) if text)
        where = f"from {place_text(g.start, style)} to {place_text(g.end, style)}"
        found.append(Governed(g.start * factor, g.end * factor, state, combination, where))
    return tuple(found)


def _causes(
    group: GroupResult,
    found: Iterable[tuple[str, Found]],
    spans: Sequence[tuple[float, float]],
    style: Style,
) -> Iterable[str]:
    """Say what causes each extreme, where patterns and trains do."""
    for which, effect in found:
        if isinstance(group.states, Varying) and not isinstance(effect, Governing) and effect.value != 0.0:
            combination = [plain(effect.combination)] if len(group.combinations) > 1 else []
            words = [*combination, *arrangement(effect, group.states.effects, spans, style)]
            if words:
                yield f"{which}: {', '.join(words)}"


def _extremes(found: Iterable[Found], unit: str, quantity: Quantity, style: Style) -> Iterable[Extreme]:
    for governing in dict.fromkeys(found):
        if governing.value == 0.0:
            continue
        value = from_si(governing.value, unit)
        if quantity in ("w", "w_lat"):
            value = value.shown_in("in" if style.system == "US" else "mm")
        else:
            value = value.shown_in(style.default_unit(value.dimension))
        word = ""
        if quantity == "M":
            word = " sagging" if governing.value > 0.0 else " hogging"
        label = f"{show(value, style).text}{word} at {place_text(governing.x, style)}"
        yield Extreme(governing.x * per_metre(style), governing.value, label)
