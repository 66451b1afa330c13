"""The influence lines of a beam: ordinates, extremes, areas, how they are read, and the second route."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from itertools import pairwise

from calcgen.evaluation.blocks.beam_influence import Wanted, readable
from calcgen.evaluation.blocks.beam_lines import length_text
from calcgen.evaluation.blocks.beam_reading import place_of
from calcgen.evaluation.results.beam import BeamResult, InfluenceResult, Ordinate
from calcgen.evaluation.results.common import Plain, Result, SecondRoute
from calcgen.language.blocks.beam import InfluenceSymbol
from calcgen.mechanics import influence as mechanics
from calcgen.mechanics.beam import BeamModel, Plane
from calcgen.mechanics.beam.results import Side
from calcgen.mechanics.second_route.influence import influence_residuals
from calcgen.mechanics.sought import AtPlace, Sought, has_two_sides, line_of
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import Measure, from_si, magnitude_in
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span

LISTED_FIELDS = 12  # a beam of more supports has its ordinates at halves, not at tenths, of its fields


@dataclass(frozen=True)
class _Kind:
    """What a result is in words, in each plane with its sign, and the units of ordinate and area."""

    words: tuple[str, str]
    units: tuple[str, str]
    areas: tuple[str, str]


_ON_THE_RIGHT = "moment about the vertical axis, positive with tension on the right"
_KINDS: dict[InfluenceSymbol, _Kind] = {
    "M": _Kind(("moment, sagging positive", _ON_THE_RIGHT), ("m", "ft"), ("m²", "ft²")),
    "V": _Kind(
        (
            "shear force, positive where the left part is pushed up",
            "sideways shear force, positive where the left part is pushed to the left",
        ),
        ("", ""),
        ("m", "ft"),
    ),
    "w": _Kind(
        ("deflection, positive down", "sideways deflection, positive to the right"),
        ("mm/kN", "in/kip"),
        ("mm²/N", "in/klf"),
    ),
    "slope": _Kind(
        ("slope dw/dx, w positive down", "slope of the sideways deflection, that positive to the right"),
        ("1/kN", "1/kip"),
        ("m/kN", "ft/kip"),
    ),
    "R": _Kind(("reaction, positive up", "sideways reaction, positive to the left"), ("", ""), ("m", "ft")),
    "M_R": _Kind(
        (
            "restraining moment, positive anticlockwise",
            "sideways restraining moment, positive anticlockwise seen from above",
        ),
        ("m", "ft"),
        ("m²", "ft²"),
    ),
    "θ": _Kind(
        ("rotation of the section, positive clockwise", "rotation, positive clockwise seen from above"),
        ("1/kN", "1/kip"),
        ("m/kN", "ft/kip"),
    ),
}
_LOADS: dict[Plane, str] = {"vertical": "a unit load down", "lateral": "a unit load to the right"}


def solved_influences(
    wanted: Sequence[Wanted], model: BeamModel, style: Style, report: Report
) -> tuple[InfluenceResult, ...] | None:
    """Return the influence lines; report what has two values at its place, and then return None."""
    if not wanted:
        return ()
    planes = tuple(plane for plane in model.planes if any(w.load == plane for w in wanted))
    influence = mechanics.influence(model, planes)
    two_sided = [w for w in wanted if _is_two_sided(w, influence)]
    for each in two_sided:
        _report_two_sides(each, style, report)
    if two_sided:
        return None
    places = ordinate_places(model, [w.sought for w in wanted])
    return tuple(_result(w, influence, places, style, report) for w in wanted)


def influence_route(
    name: str, model: BeamModel, wanted: Sequence[Wanted], found: Sequence[InfluenceResult]
) -> tuple[SecondRoute, ...]:
    """Return the comparison of each influence line with unit loads on the beam."""
    if not found:
        return ()
    asked = [(w.sought, w.load, f.line) for w, f in zip(wanted, found, strict=True)]
    residuals = influence_residuals(model, asked)
    return tuple(
        SecondRoute.found(name, f.name, r.residual, r.tolerance, r.quantity)
        for f, r in zip(found, residuals, strict=True)
    )


def _is_two_sided(wanted: Wanted, influence: mechanics.Influence) -> bool:
    what = wanted.sought
    return (
        isinstance(what, AtPlace)
        and wanted.typed.side is None
        and has_two_sides(influence, what.quantity, what.x, wanted.load)
    )


def _report_two_sides(wanted: Wanted, style: Style, report: Report) -> None:
    line, what = wanted.typed, wanted.sought
    if not isinstance(what, AtPlace):
        return
    x = length_text(what.x, style, _length_unit(style)).replace("\u00a0", " ")
    symbol = f"{'slope' if line.symbol == 'θ' else line.symbol}{'_lat' if line.lateral else ''}"
    report.error(
        "two-sides",
        line.result_span,
        f"{wanted.of} has two values, one on each side",
        hint=f"write {symbol} left of {x}, or {symbol} right of {x}",
    )


def _result(
    wanted: Wanted, influence: mechanics.Influence, places: Sequence[float], style: Style, report: Report
) -> InfluenceResult:
    line, typed, model = line_of(influence, wanted.sought, wanted.load), wanted.typed, influence.model
    kind, us = _KINDS[typed.symbol], style.system == "US"
    unit, area_unit = kind.units[us], kind.areas[us]
    place = wanted.sought.x if isinstance(wanted.sought, AtPlace) else model.supports[wanted.sought.support].x

    def result(name: str, meaning: str, value: Measure, stands: str = "") -> Result:
        return Result(name, meaning, value, show(value, style), stands)

    extremes, areas = line.extremes(), line.areas()
    rows: list[Result] = []
    further: list[Result] = []
    name, of = wanted.name, f"{wanted.of} for {_LOADS[wanted.load]}"
    for which, adjective, value, x in (
        ("max", "largest", extremes.max, extremes.x_max),
        ("min", "smallest", extremes.min, extremes.x_min),
    ):
        where = "" if value == 0.0 else f"load {_standing(line, value, x, style)}"
        rows.append(result(f"{name}_{which}", f"{adjective} ordinate: {of}", _measure(value, unit), where))
        stands = from_si(x, "m").shown_in(_length_unit(style))
        further.append(
            result(f"x_{name}_{which}", f"place of the unit load for the {adjective} ordinate", stands)
        )
    for suffix, parts, area in (
        ("_max", "its positive parts: times a uniform load on them alone", areas[0]),
        ("_min", "its negative parts: times a uniform load on them alone", areas[1]),
        ("", "the whole line: times a uniform load along the beam", sum(areas)),
    ):
        measured = from_si(area, area_unit)
        per = "; 1 mm²/N is 1 mm for 1 kN/m" if area_unit == "mm²/N" else ""
        rows.append(result(f"{name}_area{suffix}", f"area under {parts}{per}", measured))
    return InfluenceResult(
        name=name,
        of=wanted.of,
        meaning=kind.words[typed.lateral],
        load=wanted.load,
        place=place,
        line=line,
        unit=unit,
        results=tuple(rows),
        further=tuple(further),
        ordinates=tuple(_ordinates(wanted, line, places, unit, style)),
        line_number=report.source.line_number(typed.span),
    )


def _standing(line: mechanics.InfluenceLine, value: float, x: float, style: Style) -> str:
    """Return where the unit load stands for an extreme: 'at 3 m', 'just left of 6 m'."""
    text = length_text(x, style, _length_unit(style))
    left, right = line.beside(x)
    if left == right:
        return f"at {text}"
    return f"just {'left' if abs(left - value) <= abs(right - value) else 'right'} of {text}"


def _ordinates(
    wanted: Wanted, line: mechanics.InfluenceLine, places: Sequence[float], unit: str, style: Style
) -> Iterable[Ordinate]:
    """Give the ordinates that are listed, at a jump one on each side, by the names that read them."""
    length_unit = _length_unit(style)
    meaning = f"ordinate: {wanted.of} for {_LOADS[wanted.load]}"
    for x in places:
        left, right = line.beside(x)
        sides: tuple[tuple[Side | None, str, float], ...] = ((None, "", left),)
        if left != right:
            sides = (("left", "_left", left), ("right", "_right", right))
        for side, suffix, ordinate in sides:
            value = _measure(ordinate, unit)
            name = f"{wanted.name}{suffix}({magnitude_in(from_si(x, 'm'), length_unit):.9g} {length_unit})"
            place = length_text(x, style, length_unit)
            yield Ordinate(x, place, side, Result(name, meaning, value, show(value, style)))


def _measure(ordinate: float, unit: str) -> Measure:
    """Return an ordinate, given in SI, in the unit it is shown in."""
    return from_si(ordinate, unit)


def _length_unit(style: Style) -> str:
    return "ft" if style.system == "US" else "m"


def ordinate_places(model: BeamModel, sought: Iterable[Sought]) -> list[float]:
    """Return the places at which the ordinates of the lines of a beam are listed, m.

    They are tenths of each field between supports and ends, the hinges, and the places that the lines are of.
    """
    ends = [0.0, model.length, *(support.x for support in model.supports)]
    fields = [(a, b) for a, b in pairwise(sorted(ends)) if not model.same(a, b)]
    parts = 10 if len(fields) <= LISTED_FIELDS else 2
    wanted = [a + (b - a) * part / parts for a, b in fields for part in range(parts)]
    wanted += [model.length, *model.hinges, *(s.x for s in sought if isinstance(s, AtPlace))]
    found: list[float] = []
    for x in sorted(wanted):
        if not found or not model.same(found[-1], x):
            found.append(x)
    return found


def influence_named(beam: BeamResult, word: str) -> InfluenceResult | None:
    """Return the influence line of which a word is a result."""
    return next((line for line in beam.influences if word in readable(line.name)), None)


def read_influence(
    beam: BeamResult,
    line: InfluenceResult,
    word: str,
    arguments: tuple[Plain, ...] | None,
    style: Style,
    report: Report,
    span: Span,
) -> Measure | None:
    """Return the ordinate, the extreme or the area that a word asks for; report what is not there."""

    def fault(message: str, hint: str) -> None:
        report.error("no-such-result", span, message, hint=hint)

    name = line.name
    whole = next((r.value for r in (*line.results, *line.further) if r.name == word), None)
    if arguments is None:
        if whole is None:
            fault(f"'{plain(word)}' is the ordinate at a place", f"write {word}(2.5 m), or {name}_max")
        return whole
    if whole is not None:
        fault(f"'{plain(word)}' is a result of the whole line", f"write {word}, or {name}(2.5 m)")
        return None
    x = place_of(beam.model, arguments, style, fault)
    if x is None:
        return None
    left, right = line.line.beside(x)
    if word == name and left != right:
        text = length_text(x, style, _length_unit(style))
        typed = text.replace("\u00a0", " ")
        fault(
            f"'{plain(name)}' jumps at {text}",
            f"write {name}_left({typed}) or {name}_right({typed}): the load just left or right of it",
        )
        return None
    return _measure(right if word == f"{name}_right" else left, line.unit)
