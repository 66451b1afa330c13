"""A shape as written -> the shape of mechanics; faults are reported at the argument that is wrong."""

from __future__ import annotations

import math
from collections.abc import Mapping

from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import Point as PointText
from calcgen.language.blocks.section import ShapeText
from calcgen.language.nodes import Text
from calcgen.mechanics.arrays import Point
from calcgen.mechanics.boolean import self_contact
from calcgen.mechanics.outline import OutlineError
from calcgen.mechanics.shapes import Shape, ShapeError, ShapeForm, canonical, form_for
from calcgen.profiles.catalogue import Catalogue, Profile
from calcgen.quantities.display import Style, show
from calcgen.quantities.measure import from_si, measure
from calcgen.text import Related, nearest

HALVINGS = 40  # of the room for a size: more digits than are shown
NO_ROOM = 1e-4  # of a size: less is not worth telling
ZERO = 1e-12  # m: a smaller coordinate is rounding


def profile_named(text: ShapeText, scope: Scope, catalogue: Catalogue) -> Profile | None:
    """Return the catalogued profile that `rolled(...)` names."""
    if len(text.positional) != 1 or text.arguments or text.points:
        scope.report.error(
            "rolled-arguments",
            text.span,
            "'rolled' takes one designation",
            hint='write rolled("IPE 240"), or the name of a text input',
        )
        return None
    node = text.positional[0]
    designation = Evaluator(scope).value(node)
    if designation is None:
        return None
    if not isinstance(designation, str):
        scope.report.error(
            "rolled-arguments", node.span, "a designation is text", hint='put it in quotes: rolled("IPE 240")'
        )
        return None
    found = catalogue.find(designation)
    if found is None:
        close = ", ".join(catalogue.nearest(designation)[:3])
        where = node.span if isinstance(node, Text) else text.span
        scope.report.error(
            "unknown-profile",
            where,
            f"'{designation}' is in no catalogue",
            hint=f"the nearest are {close}" if close else "designations read like IPE 240, W18x50, L6x4x1/2",
        )
    return found


def rolled_shape(profile: Profile, text: ShapeText, scope: Scope) -> Shape | None:
    """Build the outline of a catalogued profile from its nominal dimensions."""
    given = frozenset(profile.dimensions)
    form = form_for(profile.shape, given)
    try:
        return form.build(**{k: v for k, v in profile.dimensions.items() if k in form.names})
    except (ShapeError, OutlineError) as fault:
        scope.report.error(
            "shape-does-not-fit",
            text.span,
            f"the dimensions of {profile.designation} make no section: {fault}",
            hint=f"see {profile.file}, line {profile.line}",
        )
        return None


def shape_of(text: ShapeText, scope: Scope) -> Shape | None:
    """Build a shape of the language from its arguments."""
    word = text.shape.name
    form = form_for(word, frozenset(a.name.name for a in text.arguments))
    given = _arguments(text, form, scope)
    points = _points(text, scope)
    if given is None or points is None:
        return None
    spans = {canonical(form, a.name.name): a.value.span for a in text.arguments}
    try:
        return form.build(**given, points=points) if _takes_points(form) else form.build(**given)
    except ShapeError as fault:
        places = [text.points[i].span for i in fault.points if i < len(text.points)]
        scope.report.error(
            "shape-does-not-fit",
            places[0] if places else spans.get(fault.parameter, text.span),
            f"'{fault.parameter}' of the {word} {fault.reason}",
            label=""
            if fault.parameter == "points"
            else _size(fault.parameter, fault.value, form, scope.style),
            hint=_room(fault, form, given, points, scope.style),
            related=tuple(Related(place, "and this point") for place in places[1:2]),
        )
    except OutlineError as fault:
        _report_outline(fault, text, points, scope)
    return None


def _report_outline(fault: OutlineError, text: ShapeText, points: list[Point], scope: Scope) -> None:
    """Report corners that bound no section: where two edges meet, before what else follows from it."""
    contact = self_contact(points) if text.shape.name == "polygon" else None
    if contact is None:
        places = [text.points[i].span for i in fault.vertices if i < len(text.points)]
        hint = "corners follow one another around the section, in either sense" if text.points else ""
        scope.report.error(
            "outline", places[0] if places else text.span, f"the outline {fault.reason}", hint=hint
        )
        return

    def edge(corners: tuple[int, int]) -> str:
        start, end = (point_text(points[corner], scope.style) for corner in corners)
        return f"from {start} to {end}"

    scope.report.error(
        "outline",
        text.points[contact.first[0]].span,
        f"the outline crosses or touches itself at {point_text(contact.place, scope.style)}",
        label=f"the edge {edge(contact.first)}",
        hint="corners follow one another around the section, in either sense",
        related=(Related(text.points[contact.second[0]].span, f"meets the edge {edge(contact.second)}"),),
    )


def _room(
    fault: ShapeError, form: ShapeForm, given: Mapping[str, float], points: list[Point], style: Style
) -> str:
    """Return up to which size a shape could be built with its other sizes, as a hint; '' for no such size."""
    if fault.parameter not in given or not fault.value > 0.0:
        return ""

    def fits(value: float) -> bool:
        sizes = {**given, fault.parameter: value}
        try:
            form.build(**sizes, points=points) if _takes_points(form) else form.build(**sizes)
        except (ShapeError, OutlineError):
            return False
        return True

    low, high = NO_ROOM * fault.value, fault.value
    if not fits(low):
        return ""
    for _ in range(HALVINGS):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if fits(middle) else (low, middle)
    return f"beside the other sizes there is room up to {_size(fault.parameter, high, form, style)}"


def _takes_points(form: ShapeForm) -> bool:
    return any(p.kind == "points" for p in form.parameters)


def _points(text: ShapeText, scope: Scope) -> list[Point] | None:
    """Return the points written in the parentheses of a shape, m; none for most shapes."""
    read = [point_of(p, scope) for p in text.points]
    points = [p for p in read if p is not None]
    return points if len(points) == len(read) else None


def _arguments(text: ShapeText, form: ShapeForm, scope: Scope) -> dict[str, float] | None:
    word = text.shape.name
    complete = True
    given: dict[str, float] = {}
    kinds = {p.name: p.kind for p in form.parameters}
    for argument in text.arguments:
        name = canonical(form, argument.name.name)
        if name not in kinds:
            complete = False
            found = nearest(argument.name.name, form.names)
            scope.report.error(
                "unknown-word",
                argument.name.span,
                f"'{word}' has no '{argument.name.name}'",
                hint=f"the nearest is '{found}'" if found else f"it takes {', '.join(kinds)}",
            )
            continue
        if name in given:
            complete = False
            scope.report.error("written-twice", argument.name.span, f"'{name}' is given twice")
            continue
        value = si(argument.value, "length" if kinds[name] == "length" else "number", scope)
        if value is None:
            complete = False
            given[name] = math.nan
        else:
            given[name] = value
    needed = [p for p in form.parameters if p.kind != "points"]
    missing = [p.name for p in needed if not p.optional and p.name not in given]
    if missing:
        complete = False
        scope.report.error(
            "argument-missing",
            text.shape.span,
            f"'{word}' needs {' and '.join(missing)}",
            hint=f"{form.note}: {', '.join(f'{p.name} ({p.note})' for p in needed)}",
        )
    return given if complete else None


def placed_shape(shape: Shape, text: ShapeText, scope: Scope) -> Shape | None:
    """Mirror, turn and place a shape as written."""
    turned = 0.0
    place: Point | None = (0.0, 0.0)
    if text.turned is not None:
        angle = quantity_of(text.turned, "angle", scope)
        if angle is None:
            return None
        turned = angle.si
    if text.at is not None:
        place = point_of(text.at, scope)
    if place is None:
        return None
    return shape.placed(*place, mirrored=text.mirrored, turned=turned)


def _size(parameter: str, value: float, form: ShapeForm, style: Style) -> str:
    kind = next((p.kind for p in form.parameters if p.name == parameter), "number")
    shown = show(from_si(value, "m").shown_in(None) if kind == "length" else measure(value, None), style)
    return f"{parameter} = {shown.text}"


def point_of(text: PointText, scope: Scope) -> Point | None:
    """Return a point as written, m."""
    x, y = si(text.x, "length", scope), si(text.y, "length", scope)
    return None if x is None or y is None else (x, y)


def length_text(value: float, style: Style) -> str:
    """Return a length, m, as sections show it."""
    return show(from_si(value, "m").shown_in("in" if style.system == "US" else "mm"), style).text


def point_text(point: Point, style: Style) -> str:
    """Return a place in the section's own coordinates."""
    x, y = (length_text(value if abs(value) > ZERO else 0.0, style) for value in point)
    return f"({x}, {y})"
