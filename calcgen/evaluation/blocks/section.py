"""`section NAME`: a shape of the language or a catalogued profile, its properties, and both again."""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass

from calcgen.evaluation.blocks.shape import placed_shape, profile_named, rolled_shape, shape_of
from calcgen.evaluation.conventions import DIMENSIONS, LATER, PROPERTIES, Axes, names, other, translation
from calcgen.evaluation.quantity import quantity_of
from calcgen.evaluation.results import Plain, Published, Result, SecondRoute, SectionResult
from calcgen.evaluation.scope import Scope
from calcgen.language.blocks.section import SectionBlock, ShapeLine, ShapeText
from calcgen.language.calc import FailedBlock
from calcgen.language.nodes import Expression, Name
from calcgen.mechanics.second_route.section import PUBLISHED, published_residuals, section_residuals
from calcgen.mechanics.section import SectionProperties, section_properties
from calcgen.mechanics.shapes import Shape
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
        known = (*self.result.results, *self.result.further)
        found = next((r for r in known if r.name == wanted), None)
        if found is not None and arguments is None and len(name.parts) == 2:
            return found.value
        self._missing(wanted, span, report)
        return None

    def _missing(self, wanted: str, span: Span, report: Report) -> None:
        foreign = translation(wanted, self.axes)
        if foreign is not None:
            report.error(
                "other-convention",
                span,
                f"'{plain(wanted)}' is a name of the {other(self.axes)} axes, here they are {self.axes}",
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
        found = nearest(wanted, [*known, *(r.name for r in self.result.further)])
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
            "written-twice",
            lines[1].span,
            "a section has one shape",
            hint="several shapes are parts of a section",
        )
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
        profile = profile_named(text, scope, catalogue)
        shape = rolled_shape(profile, text, scope) if profile is not None else None
    else:
        shape = shape_of(text, scope)
    placed = placed_shape(shape, text, scope) if shape is not None else None
    if placed is None:
        return None
    computed = section_properties(placed.outline)
    published = _oriented(profile.published, text, scope) if profile is not None else {}
    tolerances = _oriented(profile.tolerances, text, scope) if profile is not None else {}
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
        results=_results(values, _values(computed), scope.style, axes),
        further=_dimensions(
            placed.dimensions, text.shape.name if profile is None else profile.shape, scope.style
        ),
        published=_beside(published, tolerances, computed, scope.style, axes),
        second_route=_second_route(name, computed, placed, published, tolerances, axes),
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
    for i, inertia in (("i_h", "I_h"), ("i_v", "I_v"), ("i_1", "I_1"), ("i_2", "I_2")):
        if i not in published and inertia in published:
            values[i] = math.sqrt(values[inertia] / values["A"])
    if computed.I_hv == 0.0:  # the reference axes are the principal ones
        values["I_2"], values["I_1"] = sorted((values["I_h"], values["I_v"]))
        values["i_2"], values["i_1"] = sorted((values["i_h"], values["i_v"]))
    return values


_TURNED = {"I_h": "I_v", "W_el_h": "W_el_v", "W_pl_h": "W_pl_v", "i_h": "i_v"}


def _oriented(table: Mapping[str, float], text: ShapeText, scope: Scope) -> dict[str, float]:
    """Return a profile's published values, or tolerances, as the section lies: a quarter turn exchanges axes.

    Turned by another angle, only what has no axis keeps its published value.
    """
    published = {k: v for k, v in table.items() if k != "mass"}
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


def _dimensions(dimensions: Mapping[str, float], shape: str, style: Style) -> tuple[Result, ...]:
    """Return a shape's dimensions by symbol, with `d` beside `h` and `b_f` beside `b`."""
    known = {k: v for k, v in dimensions.items() if k in DIMENSIONS}
    if "h" in known:
        known.setdefault("d", known["h"])
    if "b" in known and shape in ("i_shape", "channel", "tee"):
        known.setdefault("b_f", known["b"])
    unit = "in" if style.system == "US" else "mm"
    values = {k: from_si(v, "m").shown_in(unit) for k, v in known.items()}
    return tuple(Result(k, DIMENSIONS[k], v, show(v, style)) for k, v in values.items())


def _results(
    values: Mapping[str, float], outline: Mapping[str, float], style: Style, axes: Axes
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
                provenance="outline" if values[p.key] == outline.get(p.key) else "published",
            )
        )
    return tuple(results)


def _beside(
    published: Mapping[str, float],
    tolerances: Mapping[str, float],
    computed: SectionProperties,
    style: Style,
    axes: Axes,
) -> tuple[Published, ...]:
    """Return each published value beside the outline's own."""
    rows = []
    for p in PROPERTIES:
        if p.key not in published or p.key not in PUBLISHED:
            continue
        unit, si_unit = p.units[1 if style.system == "US" else 0], KINDS[p.kind]
        own = float(getattr(computed, PUBLISHED[p.key][0]))
        rows.append(
            Published(
                p.name(axes),
                show(from_si(published[p.key], si_unit).shown_in(unit), style),
                show(from_si(own, si_unit).shown_in(unit), style),
                (own - published[p.key]) / abs(published[p.key]),
                tolerances.get(p.key, math.inf),
            )
        )
    return tuple(rows)


def _second_route(
    name: str,
    computed: SectionProperties,
    placed: Shape,
    published: Mapping[str, float],
    tolerances: Mapping[str, float],
    axes: Axes,
) -> tuple[SecondRoute, ...]:
    found = (
        *section_residuals(computed, placed.outline),
        *published_residuals(published, computed, tolerances),
    )
    symbols = {p.key: p.name(axes) for p in PROPERTIES}
    return tuple(
        SecondRoute.found(name, symbols.get(r.what, r.what), r.residual, r.tolerance, r.quantity)
        for r in found
    )


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
