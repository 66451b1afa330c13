"""Loads of an evaluated beam -> what its figure draws, case by case."""

from __future__ import annotations

from collections.abc import Iterable

from calcgen.evaluation.blocks.beam_states import Varying
from calcgen.evaluation.results.beam import BeamResult, LoadRow
from calcgen.figures.adapt_beam_supports import per_metre
from calcgen.figures.beam_loads import CoupleLoad, Distributed, Effect, Load, LoadCase, PointLoad
from calcgen.mechanics.beam import BeamModel, Plane, Quantity
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import from_si
from calcgen.quantities.symbols import plain


def cases_of(beam: BeamResult, plane: Plane, style: Style) -> tuple[LoadCase, ...]:
    """Return the loads of each case in a plane, with its kind, its pattern and what its signs mean."""
    by_case: dict[str, list[Load]] = {}
    standing: dict[str, str] = {}
    for row in beam.loads:
        if row.kind == "train":
            loads, says = _train(beam, row, plane, style)
            if loads:
                by_case.setdefault(row.case, []).extend(loads)
                standing[row.case] = says
        elif row.plane == plane:
            by_case.setdefault(row.case, []).extend(_loads(row, beam.model, style))
    cases = []
    for case, drawn in by_case.items():
        pattern = "in patterns" if case in beam.patterned else ""
        words = (
            plain(case),
            beam.case_kinds.get(case, ""),
            pattern,
            standing.get(case, ""),
            _signs(drawn, plane),
        )
        cases.append(LoadCase(", ".join(word for word in words if word), tuple(drawn)))
    return tuple(cases)


def _signs(loads: Iterable[Load], plane: Plane) -> str:
    """Say how a load acts whose number is negative."""
    forces = any(
        min(load.first, load.last) < 0.0 if isinstance(load, Distributed) else load.value < 0.0
        for load in loads
        if isinstance(load, Distributed | PointLoad)
    )
    couples = any(isinstance(load, CoupleLoad) and not load.clockwise for load in loads)
    ways = ["upwards" if plane == "vertical" else "to the left"] if forces else []
    ways += ["anticlockwise"] if couples else []
    return f"negative: {' or '.join(ways)}" if ways else ""


def _train(beam: BeamResult, row: LoadRow, plane: Plane, style: Style) -> tuple[list[Load], str]:
    """Return a train where it stands for the largest moment, or the smallest, and in words which of them."""
    quantity: Quantity = "M_lat" if plane == "lateral" else "M"
    for group in beam.groups:
        if not isinstance(group.states, Varying):
            continue
        found = group.states.extremes(quantity)
        for name, effect in (("max", found.max), ("min", found.min)):
            for placed in effect.trains:
                if (placed.case, placed.train) != (row.case, row.number):
                    continue
                train = group.states.effects.actions.trains[placed.case][placed.train]
                axles = [x for x in placed.position.loads(train, beam.model) if x.plane == plane]
                of = f" of {plain(group.name)}" if group.name else ""
                sideways = " sideways" if plane == "lateral" else ""
                which = "largest" if name == "max" else "smallest"
                return (
                    [_axle(axle.x, axle.value, style) for axle in axles],
                    f"train where it stands for the {which} M{sideways}{of}",
                )
    if plane == "lateral":
        return [], ""
    factor = per_metre(style)
    return [Effect(row.start * factor, row.end * factor, row.label)], "train along the beam"


def _axle(x: float, value: float, style: Style) -> PointLoad:
    force = from_si(value, "N")
    label = show(force.shown_in(style.default_unit(force.dimension)), style).text
    return PointLoad(x * per_metre(style), value, label)


def _loads(row: LoadRow, model: BeamModel, style: Style) -> Iterable[Load]:
    factor = per_metre(style)
    start, end = row.start * factor, row.end * factor
    match row.kind:
        case "point":
            yield PointLoad(start, row.values[0], row.label)
        case "moment":
            label = _spread_couple(row.values[0], style) if end > start else row.label
            yield CoupleLoad(start, end, label, clockwise=row.values[0] >= 0)
        case "gradient":
            difference = show(from_si(abs(row.values[0]), "K").shown_in(None), style).text
            warmer = "top" if row.values[0] >= 0.0 else "bottom"
            yield Effect(start, end, f"{difference} warmer at the {warmer}")
        case "self_weight":
            yield from _weights(row, model, style)
        case _:
            yield Distributed(start, end, row.values[0], row.values[-1], row.label)


def _spread_couple(value: float, style: Style) -> str:
    """Return a couple per length, whose dimension alone is that of a force."""
    unit = "kip-ft/ft" if style.system == "US" else "kN·m/m"
    return show(from_si(value, "N").shown_in(unit), style).text


def _weights(row: LoadRow, model: BeamModel, style: Style) -> Iterable[Distributed]:
    """Yield the self-weight of each stretch of the beam; where it is the same all along, as one load."""
    if len(set(row.values)) == 1:
        factor = per_metre(style)
        yield Distributed(row.start * factor, row.end * factor, row.values[0], row.values[0], row.label)
        return
    parts = [(max(row.start, s.start), min(row.end, s.end)) for s in model.stretches]
    covered = [(a, b) for a, b in parts if b - a > model.tolerance]
    widest = max(covered, key=lambda part: part[1] - part[0])
    for (a, b), value in zip(covered, row.values, strict=True):
        weight = show(from_si(value, "N/m").shown_in(None), style).text
        weight += " self-weight" if (a, b) == widest else ""
        yield Distributed(a * per_metre(style), b * per_metre(style), value, value, weight)
