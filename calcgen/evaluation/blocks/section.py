"""`section NAME`: a shape of the language or a catalogued profile, its properties, and both again."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.conventions import DIMENSIONS, LATER, PROPERTIES, Axes, names, other, translation
from calcgen.evaluation.formulas import Evaluator
from calcgen.evaluation.quantity import quantity_of, si
from calcgen.evaluation.results import Plain, Published, Result, SecondRoute, SectionResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import SectionBlock, ShapeLine, ShapeText
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Expression, Name, Text
from calcgen.mechanics.outline import OutlineError
from calcgen.mechanics.second_route.section import PUBLISHED, published_residuals, section_residuals
from calcgen.mechanics.section import SectionProperties, section_properties
from calcgen.mechanics.shapes import SHAPES, Shape, ShapeError, ShapeForm, canonical, form_for
from calcgen.profiles.catalogue import Catalogue, Profile
from calcgen.quantities.display import KINDS, Style, show
from calcgen.quantities.measure import Measure, from_si, measure
from calcgen.quantities.symbols import plain
from calcgen.text import Report, Span, nearest


@dataclass(frozen=True)
class SectionThing:
    """A section in the scope: its properties by the names of the project's axes."""

    result: SectionResult
    axes: Axes
    kind: str = "section"

    def read(self, name: Name, arguments: tuple[Plain, ...] | None, report: Report) -> Measure | None:
        """Return a property; report an unknown one, and one of the other convention with the name to use."""
        wanted, span = name.parts[1], name.spans[1]
        found = next((r for r in self.result.results if r.name == wanted), None)
        if found is not None and arguments is None and len(name.parts) == 2:
            return found.value
        if (
            len(name.parts) == 2
            and arguments is None
            and wanted in DIMENSIONS
            and wanted in self.result.dimensions
        ):
            return from_si(self.result.dimensions[wanted], "mm").shown_in(None)
        self._missing(wanted, span, report)
        return None

    def _missing(self, wanted: str, span: Span, report: Report) -> None:
        foreign = translation(wanted, self.axes)
        if foreign is not None:
            report.error(
                "other-convention",
                span,
                f"'{plain(wanted)}' is a name of the {other(self.axes)} axes; this project's axes are {self.axes}",
                hint=f"write {foreign.name(self.axes)}: {foreign.meaning}",
            )
            return
        known = names(self.axes)
        if wanted in LATER[self.axes]:
            report.error("not-available-yet", span, f"the property '{plain(wanted)}' is not available yet")
            return
        if wanted in known:
            report.error(
                "not-available-yet",
                span,
                f"'{plain(wanted)}' is not available yet for this section",
                hint="it is known for catalogued sections with a published value only",
            )
            return
        found = nearest(wanted, [*known, *self.result.dimensions])
        hint = f"the nearest property is '{found}'" if found else f"properties are {', '.join(known)}"
        report.error("no-such-result", span, f"a section has no property '{plain(wanted)}'", hint=hint)


def evaluate_section(
    block: SectionBlock, scope: Scope, axes: Axes, catalogue: Catalogue
) -> SectionResult | FailedBlock:
    """Build the section, its properties and their second route, and define its name."""
    name = block.target.name
    free = scope.define(block.target)
    lines = [line for line in block.items if isinstance(line, ShapeLine)]
    if len(lines) > 1:
        scope.report.error(
            "shape-given-twice",
            lines[1].span,
            "a section has one shape",
            hint="several shapes are parts of a section",
        )
    if not lines and not block.items:
        scope.report.error("no-shape", block.head_span, f"the section '{plain(name)}' has no shape")
    result = None
    if len(lines) == len(block.items) == 1:
        result = _section(name, lines[0], block, scope, axes, catalogue)
    if result is None or not free:
        if free:
            scope.failed.add(name)
        return FailedBlock("section", block.span)
    scope.things[name] = SectionThing(result, axes)
    return result


def _section(
    name: str, line: ShapeLine, block: SectionBlock, scope: Scope, axes: Axes, catalogue: Catalogue
) -> SectionResult | None:
    text = line.shape
    profile: Profile | None = None
    if text.shape.name == "rolled":
        profile = _profile(text, scope, catalogue)
        shape = _rolled(profile, text, scope) if profile is not None else None
    else:
        shape = _shape(text, scope)
    placed = _placed(shape, text, scope) if shape is not None else None
    if placed is None:
        return None
    computed = section_properties(placed.outline)
    published = _oriented(profile, text, scope) if profile is not None else {}
    values = _in_force(_values(computed), published, computed)
    return SectionResult(
        name=name,
        shape=text.shape.name if profile is None else profile.shape,
        designation=profile.designation if profile else "",
        source=profile.source if profile else "",
        outline=placed.outline,
        marks=placed.marks,
        computed=computed,
        values=values,
        dimensions=_with_synonyms(placed.dimensions, text.shape.name if profile is None else profile.shape),
        results=_results(values, published, scope.style, axes),
        published=_beside(published, computed, profile, scope.style, axes),
        second_route=_second_route(name, computed, placed, published, profile),
        note=line.annotations.note,
        reference=line.annotations.reference,
        line=scope.report.source.line_number(block.head_span),
        span=block.head_span,
    )


def _values(p: SectionProperties) -> dict[str, float]:
    """Return the outline's properties by their keys."""
    return {key: float(getattr(p, key)) for key in (q.key for q in PROPERTIES) if hasattr(p, key)}


def _in_force(
    outline: Mapping[str, float], published: Mapping[str, float], computed: SectionProperties
) -> dict[str, float]:
    """Return published values before the outline's, and what follows from them by a division with them."""
    values = dict(outline) | {k: v for k, v in published.items() if k not in ("x_bar", "y_bar")}
    if "I_h" in published:
        values["W_el_h_top"] = values["I_h"] / computed.c_top
        values["W_el_h_bottom"] = values["I_h"] / computed.c_bottom
    for i, I in (("i_h", "I_h"), ("i_v", "I_v"), ("i_1", "I_1"), ("i_2", "I_2")):
        if i not in published and I in published:
            values[i] = math.sqrt(values[I] / values["A"])
    return values


def _profile(text: ShapeText, scope: Scope, catalogue: Catalogue) -> Profile | None:
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


def _rolled(profile: Profile, text: ShapeText, scope: Scope) -> Shape | None:
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


def _shape(text: ShapeText, scope: Scope) -> Shape | None:
    """Build a shape of the language from its arguments."""
    word = text.shape.name
    if word not in SHAPES:
        scope.report.error("not-available-yet", text.shape.span, f"the shape '{word}' is not available yet")
        return None
    if word == "polygon":
        return _polygon(text, scope)
    form = form_for(word, frozenset(a.name.name for a in text.arguments))
    given = _arguments(text, form, scope)
    if given is None:
        return None
    spans = {canonical(form, a.name.name): a.value.span for a in text.arguments}
    try:
        return form.build(**given)
    except ShapeError as fault:
        scope.report.error(
            "shape-does-not-fit",
            spans.get(fault.parameter, text.span),
            f"'{fault.parameter}' of the {word} {fault.reason}",
            label=_size(fault.parameter, fault.value, form, scope.style),
        )
    except OutlineError as fault:
        scope.report.error("outline", text.span, f"the outline {fault.reason}")
    return None


def _arguments(text: ShapeText, form: ShapeForm, scope: Scope) -> dict[str, float] | None:
    word = text.shape.name
    complete = True
    given: dict[str, float] = {}
    kinds = {p.name: p.kind for p in form.parameters}
    for node in text.positional:
        complete = False
        scope.report.error(
            "argument-without-name",
            node.span,
            "arguments of a shape are always named",
            hint=f"write {word}({', '.join(f'{n} = …' for n in (p.name for p in form.parameters if not p.optional))})",
        )
    for argument in text.arguments:
        name = canonical(form, argument.name.name)
        if name not in kinds:
            complete = False
            found = nearest(argument.name.name, form.names)
            scope.report.error(
                "unknown-argument",
                argument.name.span,
                f"'{word}' has no '{argument.name.name}'",
                hint=f"the nearest is '{found}'" if found else f"it takes {', '.join(kinds)}",
            )
            continue
        if name in given:
            complete = False
            scope.report.error("argument-given-twice", argument.name.span, f"'{name}' is given twice")
            continue
        value = si(argument.value, "length" if kinds[name] == "length" else "number", scope)
        if value is None:
            complete = False
            given[name] = math.nan
        else:
            given[name] = value
    missing = [p.name for p in form.parameters if not p.optional and p.name not in given]
    if missing:
        complete = False
        scope.report.error(
            "argument-missing",
            text.shape.span,
            f"'{word}' needs {' and '.join(missing)}",
            hint=f"{form.note}: {', '.join(f'{p.name} ({p.note})' for p in form.parameters)}",
        )
    return given if complete else None


def _polygon(text: ShapeText, scope: Scope) -> Shape | None:
    pairs = [(si(p.x, "length", scope), si(p.y, "length", scope)) for p in text.points]
    corners = [(x, y) for x, y in pairs if x is not None and y is not None]
    if len(corners) < len(pairs):
        return None
    try:
        return SHAPES["polygon"][0].build(points=corners)
    except OutlineError as fault:
        places = [text.points[i].span for i in fault.vertices if i < len(text.points)]
        scope.report.error(
            "outline",
            places[0] if places else text.span,
            f"the outline {fault.reason}",
            hint="corners follow one another around the section, in either sense",
        )
        return None


def _placed(shape: Shape, text: ShapeText, scope: Scope) -> Shape | None:
    turned = 0.0
    x: float | None = 0.0
    y: float | None = 0.0
    angle = None
    if text.turned is not None:
        angle = quantity_of(text.turned, "number", scope)
        if angle is None:
            return None
        turned = angle.si
    if text.at is not None:
        x, y = si(text.at.x, "length", scope), si(text.at.y, "length", scope)
    if x is None or y is None:
        return None
    return shape.placed(x, y, mirrored=text.mirrored, turned=turned)


_TURNED = {"I_h": "I_v", "W_el_h": "W_el_v", "W_pl_h": "W_pl_v", "i_h": "i_v"}


def _oriented(profile: Profile, text: ShapeText, scope: Scope) -> dict[str, float]:
    """Return a profile's published values as the section lies: those about the axes change places in a quarter turn.

    Turned by another angle, only what has no axis keeps its published value.
    """
    published = dict(profile.published)
    published.pop("mass", None)
    angle = quantity_of(text.turned, "number", scope) if text.turned is not None else None
    if angle is None:
        return published if not text.mirrored else {k: v for k, v in published.items() if k != "x_bar"}
    quarters = angle.si / (0.5 * math.pi)
    swap = _TURNED | {v: k for k, v in _TURNED.items()}
    free = {k: v for k, v in published.items() if k not in swap and k not in ("x_bar", "y_bar")}
    if abs(quarters - round(quarters)) > 1e-9:
        return free
    exchanged = round(quarters) % 2 == 1
    return free | {(swap[k] if exchanged else k): v for k, v in published.items() if k in swap}


def _with_synonyms(dimensions: Mapping[str, float], shape: str) -> dict[str, float]:
    """Return a shape's dimensions with `d` beside `h` and `b_f` beside `b`, and `h` and `b` of what is round."""
    known = {k: v for k, v in dimensions.items() if k in DIMENSIONS}
    if "h" in known:
        known.setdefault("d", known["h"])
    if "b" in known and shape in ("i_shape", "channel", "tee"):
        known.setdefault("b_f", known["b"])
    return known


def _results(
    values: Mapping[str, float], published: Mapping[str, float], style: Style, axes: Axes
) -> tuple[Result, ...]:
    results = []
    for p in PROPERTIES:
        if p.key not in values:
            continue
        unit = p.units[1 if style.system == "US" else 0]
        si_unit = KINDS.get(p.kind)
        value = from_si(values[p.key], si_unit).shown_in(unit) if si_unit else measure(values[p.key], unit)
        results.append(
            Result(
                p.name(axes),
                p.meaning,
                value,
                show(value, style),
                provenance="published" if p.key in published else "outline",
            )
        )
    return tuple(results)


def _beside(
    published: Mapping[str, float],
    computed: SectionProperties,
    profile: Profile | None,
    style: Style,
    axes: Axes,
) -> tuple[Published, ...]:
    """Return each published value beside the outline's own."""
    rows = []
    for p in PROPERTIES:
        if profile is None or p.key not in published or p.key not in PUBLISHED:
            continue
        unit, si_unit = p.units[1 if style.system == "US" else 0], KINDS[p.kind]
        own = float(getattr(computed, PUBLISHED[p.key][0]))
        rows.append(
            Published(
                p.name(axes),
                show(from_si(published[p.key], si_unit).shown_in(unit), style),
                show(from_si(own, si_unit).shown_in(unit), style),
                (own - published[p.key]) / abs(published[p.key]),
                profile.tolerances.get(p.key, math.inf),
            )
        )
    return tuple(rows)


def _second_route(
    name: str,
    computed: SectionProperties,
    placed: Shape,
    published: Mapping[str, float],
    profile: Profile | None,
) -> tuple[SecondRoute, ...]:
    found = [*section_residuals(computed, placed.outline)]
    if profile is not None:
        found += published_residuals(published, computed, profile.tolerances)
    return tuple(SecondRoute(name, r.what, r.residual, r.tolerance, r.quantity) for r in found)


def _size(parameter: str, value: float, form: ShapeForm, style: Style) -> str:
    kind = next((p.kind for p in form.parameters if p.name == parameter), "number")
    shown = show(from_si(value, "m").shown_in(None) if kind == "length" else measure(value, None), style)
    return f"{parameter} = {shown.text}"


def section_named(node: Expression, scope: Scope) -> SectionThing | None:
    """Return the section that an expression names; report anything else."""
    if not isinstance(node, Name) or len(node.parts) > 1 or node.arguments is not None:
        scope.report.error("not-a-section", node.span, "the name of a section is needed here")
        return None
    head = node.parts[0]
    if head in scope.failed:
        return None
    thing = scope.things.get(head)
    if isinstance(thing, SectionThing):
        return thing
    sections = [n for n, t in scope.things.items() if isinstance(t, SectionThing)]
    found = nearest(head, sections)
    if head in scope.later:
        hint = "a section is defined above the block that uses it"
    elif found:
        hint = f"the nearest section is '{found}'"
    else:
        hint = f"sections defined above: {', '.join(sections)}" if sections else "no section is defined above"
    scope.report.error(
        "not-a-section", node.span, f"'{plain(head)}' is not a section defined above", hint=hint
    )
    return None
