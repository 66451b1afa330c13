"""Evaluated beams -> drawings in the units shown: one with the loads, one for each group of combinations."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import pairwise

from calcgen.evaluation.results import BeamResult, CombinationResult, GroupResult, LoadRow
from calcgen.figures.beam import BeamDrawing, Stretch
from calcgen.figures.beam_diagrams import Diagram, Extreme
from calcgen.figures.beam_loads import CoupleLoad, Distributed, Effect, Load, LoadCase, PointLoad
from calcgen.figures.beam_supports import Kind, Support
from calcgen.mechanics.beam import Quantity
from calcgen.mechanics.combinations import Envelope, Governing
from calcgen.quantities.display import Style, number_text, show
from calcgen.quantities.measure import from_si, magnitude_in
from calcgen.quantities.symbols import plain

_POINTS = 40  # an element may be the whole beam; points on straight stretches are thinned when drawn

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


def beam_drawings(beam: BeamResult, ident: str, style: Style) -> tuple[BeamDrawing, ...]:
    """Return the drawings of a beam: loading with the first group, then each further group."""
    drawings = []
    for number, group in enumerate(beam.groups):
        for suffix in ("", "_lat"):
            plane = "lateral" if suffix else "vertical"
            cases = _cases(beam, plane, style) if number == 0 else ()
            if suffix and not _active(group):
                continue
            drawings.append(
                BeamDrawing(
                    ident=f"{ident}-{group.name}{suffix}",
                    title=_title(beam, group, plane),
                    start=0.0,
                    end=beam.model.length * _per_metre(style),
                    supports=_supports(beam, suffix, style),
                    cases=cases,
                    diagrams=tuple(_diagram(group, q, suffix, style) for q in ("V", "M", "w")),
                    stretches=_stretches(beam, style),
                    hinges=tuple(x * _per_metre(style) for x in beam.model.hinges),
                    note=_note(group),
                )
            )
    return tuple(drawings)


def _title(beam: BeamResult, group: GroupResult, plane: str) -> str:
    title = f"beam {plain(beam.name)}"
    if group.name:
        title += f", {plain(group.name)}"
    return title if plane == "vertical" else f"{title}: sideways"


def _note(group: GroupResult) -> str:
    """Return the combinations of the group with their factors."""
    if not group.name:
        return "all cases act together"
    texts = []
    for c in group.combinations:
        terms = " + ".join(f"{factor:g}·{plain(case)}" for case, factor in c.factors.items())
        texts.append(f"{plain(c.name)} = {terms.replace('+ -', '− ')}")
    return "; ".join(texts)


def _per_metre(style: Style) -> float:
    return magnitude_in(from_si(1.0, "m"), "ft" if style.system == "US" else "m")


def _length(x: float, style: Style) -> str:
    number = number_text(x * _per_metre(style), style.digits)
    number = number.rstrip("0").rstrip(".") if "." in number else number
    return f"{number} {'ft' if style.system == 'US' else 'm'}"


def _active(group: GroupResult) -> bool:
    return any(r.name == "M_max_lat" for r in group.results)


def _supports(beam: BeamResult, suffix: str, style: Style) -> tuple[Support, ...]:
    supports = []
    for support, word, note in zip(beam.model.supports, beam.support_kinds, beam.support_notes, strict=True):
        held = support.lateral if suffix else support.w
        turning = support.lateral_rotation if suffix else support.rotation
        if not held and not turning:
            continue
        kind: Kind = "pin"
        if word in ("roller", "fixed", "spring"):
            kind = word  # type: ignore[assignment]
        supports.append(
            Support(support.x * _per_metre(style), kind, note, turning=word == "spring" and turning > 0)
        )
    return tuple(supports)


def _stretches(beam: BeamResult, style: Style) -> tuple[Stretch, ...]:
    """Return the lengths between supports, free ends and hinges left out."""
    places = [0.0, *(s.x for s in beam.model.supports if s.w > 0), beam.model.length]
    ends = sorted(set(places))
    factor = _per_metre(style)
    return tuple(
        Stretch(a * factor, b * factor, _length(b - a, style))
        for a, b in pairwise(ends)
        if b - a > 1e-9 * beam.model.length
    )


def _cases(beam: BeamResult, plane: str, style: Style) -> tuple[LoadCase, ...]:
    by_case: dict[str, list[Load]] = {}
    for row in beam.loads:
        if row.plane == plane:
            by_case.setdefault(row.case, []).append(_load(row, style))
    cases = []
    for case, loads in by_case.items():
        kind = beam.case_kinds.get(case, "")
        cases.append(LoadCase(f"{plain(case)}, {kind}" if kind else plain(case), tuple(loads)))
    return tuple(cases)


def _load(row: LoadRow, style: Style) -> Load:
    factor = _per_metre(style)
    start, end = row.start * factor, row.end * factor
    label = row.label
    if row.kind == "point":
        return PointLoad(start, row.values[0], label)
    if row.kind == "moment":
        return CoupleLoad(start, end, label, clockwise=row.values[0] >= 0)
    if row.kind == "gradient":
        return Effect(start, end, label)
    return Distributed(start, end, row.values[0], row.values[-1], label)


def _diagram(group: GroupResult, symbol: str, suffix: str, style: Style) -> Diagram:
    title, unit, down = _TITLES[symbol]
    quantity: Quantity = f"{symbol}{suffix}"  # type: ignore[assignment]
    envelope = Envelope({c.name: c.solution for c in group.combinations})
    several = len(group.combinations) > 1
    upper, lower = _curves(envelope, group.combinations, quantity, style, several=several)
    found = envelope.extremes(quantity)
    note = (_LATERAL_NOTES if suffix else _NOTES)[symbol]
    return Diagram(
        title=title,
        curve=upper,
        lower=lower,
        extremes=tuple(_extremes((found.max, found.min), unit, symbol, style)),
        down=down,
        note=note,
    )


def _curves(
    envelope: Envelope,
    combinations: Sequence[CombinationResult],
    quantity: Quantity,
    style: Style,
    *,
    several: bool,
) -> tuple[tuple[tuple[float, float], ...], tuple[tuple[float, float], ...]]:
    factor = _per_metre(style)
    if several:
        band = envelope.band(quantity, _POINTS)
        x = (band.x * factor).tolist()
        return tuple(zip(x, band.high.tolist(), strict=True)), tuple(zip(x, band.low.tolist(), strict=True))
    places, values = combinations[0].solution.polyline(quantity, _POINTS)
    return tuple(zip((places * factor).tolist(), values.tolist(), strict=True)), ()


def _extremes(found: Iterable[Governing], unit: str, symbol: str, style: Style) -> Iterable[Extreme]:
    for governing in dict.fromkeys(found):
        if governing.value == 0.0:
            continue
        value = from_si(governing.value, unit)
        if symbol == "w":
            value = value.shown_in("in" if style.system == "US" else "mm")
        else:
            value = value.shown_in(style.default_unit(value.dimension))
        label = f"{show(value, style).text} at {_length(governing.x, style)}"
        yield Extreme(governing.x * _per_metre(style), governing.value, label)
