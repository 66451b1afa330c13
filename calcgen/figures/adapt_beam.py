"""Evaluated beams -> drawings in the units shown: one with the loads, one for each group of combinations."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from itertools import pairwise

from calcgen.evaluation.blocks.beam_arrangement import arrangement
from calcgen.evaluation.blocks.beam_states import Found, States, Varying, single
from calcgen.evaluation.results.beam import BeamResult, GroupResult, LoadRow
from calcgen.figures.beam import BeamDrawing, Stretch
from calcgen.figures.beam_diagrams import Diagram, Extreme
from calcgen.figures.beam_loads import CoupleLoad, Distributed, Effect, Load, LoadCase, PointLoad
from calcgen.figures.beam_supports import Kind, Support
from calcgen.mechanics.beam import Quantity
from calcgen.mechanics.combinations import Governing
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
            if suffix and not _active(group):
                continue
            cases = _cases(beam, plane, style) if number == 0 else ()
            drawings.append(
                BeamDrawing(
                    ident=f"{ident}-{group.name}{suffix}",
                    title=_title(beam, group, plane),
                    start=0.0,
                    end=beam.model.length * _per_metre(style),
                    supports=_supports(beam, suffix, style),
                    cases=cases,
                    diagrams=tuple(_diagram(beam, group, q, suffix, style) for q in ("V", "M", "w")),
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
    standing: dict[str, str] = {}
    for row in beam.loads:
        if row.kind == "train":
            loads, says = _train(beam, row, plane, style)
            if loads:
                by_case.setdefault(row.case, []).extend(loads)
                standing[row.case] = says
        elif row.plane == plane:
            by_case.setdefault(row.case, []).append(_load(row, style))
    cases = []
    for case, drawn in by_case.items():
        pattern = "in patterns" if case in beam.patterned else ""
        words = plain(case), beam.case_kinds.get(case, ""), pattern, standing.get(case, "")
        cases.append(LoadCase(", ".join(word for word in words if word), tuple(drawn)))
    return tuple(cases)


def _train(beam: BeamResult, row: LoadRow, plane: str, style: Style) -> tuple[list[Load], str]:
    """Return a train where it stands for the largest moment, or the smallest, and in words which of them."""
    suffix = "_lat" if plane == "lateral" else ""
    for group in beam.groups:
        if not isinstance(group.states, Varying):
            continue
        found = group.states.extremes(f"M{suffix}")  # type: ignore[arg-type]
        for name, effect in (("max", found.max), ("min", found.min)):
            for placed in effect.trains:
                if (placed.case, placed.train) != (row.case, row.number):
                    continue
                train = group.states.effects.actions.trains[placed.case][placed.train]
                loads = [x for x in placed.position.loads(train, beam.model) if x.plane == plane]
                of = f" of {plain(group.name)}" if group.name else ""
                return [
                    _axle(load.x, load.value, style) for load in loads
                ], f"train as for M_{name}{suffix}{of}"
    if plane == "lateral":
        return [], ""
    factor = _per_metre(style)
    return [Effect(row.start * factor, row.end * factor, row.label)], "train along the beam"


def _axle(x: float, value: float, style: Style) -> PointLoad:
    force = from_si(value, "N")
    label = show(force.shown_in(style.default_unit(force.dimension)), style).text
    return PointLoad(x * _per_metre(style), value, label)


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


def _diagram(beam: BeamResult, group: GroupResult, symbol: str, suffix: str, style: Style) -> Diagram:
    title, unit, down = _TITLES[symbol]
    quantity: Quantity = f"{symbol}{suffix}"  # type: ignore[assignment]
    upper, lower = _curves(group.states, quantity, style)
    found = group.states.extremes(quantity)
    causes = _causes(group, (("max", found.max), ("min", found.min)), beam.spans, style)
    note = "; ".join(((_LATERAL_NOTES if suffix else _NOTES)[symbol], *causes))
    return Diagram(
        title=title,
        curve=upper,
        lower=lower,
        extremes=tuple(_extremes((found.max, found.min), unit, symbol, style)),
        down=down,
        note=note,
    )


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


def _curves(
    states: States, quantity: Quantity, style: Style
) -> tuple[tuple[tuple[float, float], ...], tuple[tuple[float, float], ...]]:
    factor = _per_metre(style)
    solution = single(states)
    if solution is None:
        band = states.band(quantity, _POINTS)
        x = (band.x * factor).tolist()
        return tuple(zip(x, band.high.tolist(), strict=True)), tuple(zip(x, band.low.tolist(), strict=True))
    places, values = solution.polyline(quantity, _POINTS)
    return tuple(zip((places * factor).tolist(), values.tolist(), strict=True)), ()


def _extremes(found: Iterable[Found], unit: str, symbol: str, style: Style) -> Iterable[Extreme]:
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
